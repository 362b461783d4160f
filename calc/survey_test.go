package calc_test

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/fault"
)

// surveyed reads a build of testdata.
func surveyed(tb testing.TB, name string) calc.Build {
	tb.Helper()
	raw, err := os.ReadFile(filepath.Join("testdata", filepath.FromSlash(name)))
	if err != nil {
		tb.Fatal(err)
	}
	b, err := calc.Read(raw)
	if err != nil {
		tb.Fatal(err)
	}
	return b
}

// numbersOf visits every number of a value with the path to it.
func numbersOf(v reflect.Value, path string, see func(path string, x float64)) {
	switch v.Kind() {
	case reflect.Float64:
		see(path, v.Float())
	case reflect.Pointer, reflect.Interface:
		if !v.IsNil() {
			numbersOf(v.Elem(), path, see)
		}
	case reflect.Struct:
		for i := range v.NumField() {
			numbersOf(v.Field(i), path+"."+v.Type().Field(i).Name, see)
		}
	case reflect.Slice:
		for i := range v.Len() {
			numbersOf(v.Index(i), path+"[]", see)
		}
	}
}

// Every fault of every kind of driver has an answer or says why not, every
// figure of it is a number, and it points at a place in the document.
func TestEveryFaultHasAnAnswer(t *testing.T) {
	builds := map[string]calc.Build{
		"every driver":   surveyed(t, "documents/every-driver.json"),
		"a garden gate":  surveyed(t, "documents/garden-gate-letters.json"),
		"a display case": surveyed(t, "documents/tide-table-case.json"),
		"odd but legal":  surveyed(t, "documents/odd-but-legal.json"),
		"along a cable":  alongACable(24),
		"four rails":     onRails(24, 220),
		"three":          threeStrings(),
	}
	for name, b := range builds {
		t.Run(name, func(t *testing.T) {
			answered(t, b, survey(t, b), 0)
		})
	}
}

// answered fails where a survey leaves a fault open, shows what is no number or
// points at nothing; unsolved is the share that may have no operating point.
func answered(t *testing.T, b calc.Build, all calc.Failures, unsolved float64) {
	t.Helper()
	raw, err := json.Marshal(b)
	if err != nil {
		t.Fatal(err)
	}
	var tree any
	if err := json.Unmarshal(raw, &tree); err != nil {
		t.Fatal(err)
	}
	if all.Tried != all.Total || all.Total < 10 {
		t.Errorf("tried %d of %d", all.Tried, all.Total)
	}
	open := 0
	for _, f := range all.All {
		numbersOf(reflect.ValueOf(f), "", func(path string, x float64) {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				t.Errorf("%s: %s is %v", f.Text, path, x)
			}
		})
		if !pointsAtSomething(tree, f.At) {
			t.Errorf("%s: nothing stands at %s", f.Text, f.At)
		}
		if f.Text == "" || strings.Contains(f.Text, "NaN") || strings.Contains(f.Text, "_") {
			t.Errorf("reads %q", f.Text)
		}
		if f.Unsolved != "" {
			open++
			t.Log(f.Text)
		}
	}
	if float64(open) > unsolved*float64(len(all.All)) {
		t.Errorf("%d of %d have no operating point", open, len(all.All))
	}
}

// Builds of absurd but legal values are surveyed too, or their sound state has
// no operating point and says so.
func TestAbsurdBuildsAreSurveyed(t *testing.T) {
	solved := 0
	for seed := range uint64(60) {
		r := rand.New(rand.NewPCG(seed, 1))
		b := surveyed(t, "documents/every-driver.json")
		factor := func() float64 { return math.Pow(10, r.Float64()*4-2) }
		v := 0.5 * math.Pow(100, r.Float64())
		b.Supply.Voltage = calc.Exactly(v)
		b.Ambient = calc.Exactly(-40 + 165*r.Float64())
		b.Supply.SourceResistance = []float64{0, 0.1, 10}[r.IntN(3)]
		for i := range b.Strings {
			s := &b.Strings[i]
			s.LEDs[0].Quantity = 1 + r.IntN(60)
			switch d := &s.Driver; {
			case d.Resistor != nil:
				d.Resistor.Resistor.Ohms *= factor()
			case d.FollowerSink != nil:
				d.FollowerSink.Sense.Ohms *= factor()
				d.FollowerSink.Pullup.Ohms *= factor()
			case d.ReferenceSink != nil:
				d.ReferenceSink.Sense.Ohms *= factor()
				d.ReferenceSink.Bias.Ohms *= factor()
			case d.RailSink != nil:
				d.RailSink.Sense.Ohms *= factor()
			case d.TwoTransistor != nil:
				d.TwoTransistor.Sense.Ohms *= factor()
				d.TwoTransistor.Bias.Ohms *= factor()
			case d.OpampSink != nil:
				d.OpampSink.Sense.Ohms *= factor()
			case d.Regulator != nil:
				d.Regulator.Set.Ohms *= factor()
			}
		}
		all, err := calc.Survey(b, nil)
		if _, unsolved := errors.AsType[*calc.Unsolved](err); unsolved {
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		solved++
		t.Run(fmt.Sprint(seed), func(t *testing.T) { answered(t, b, all, 0.01) })
	}
	if solved < 40 {
		t.Errorf("only %d of 60 have a sound state", solved)
	}
}

// pointsAtSomething says whether a JSON Pointer leads to a value.
func pointsAtSomething(tree any, pointer string) bool {
	for _, token := range strings.Split(pointer, "/")[1:] {
		switch node := tree.(type) {
		case map[string]any:
			next, ok := node[token]
			if !ok {
				return false
			}
			tree = next
		case []any:
			i := 0
			for _, c := range token {
				i = 10*i + int(c-'0')
			}
			if i < 0 || i >= len(node) {
				return false
			}
			tree = node[i]
		default:
			return false
		}
	}
	return true
}

func TestASurveyLeavesTheBuildAsItWas(t *testing.T) {
	for _, b := range []calc.Build{threeStrings(), onRails(6, 0)} {
		before, err := json.Marshal(b)
		if err != nil {
			t.Fatal(err)
		}
		first := survey(t, b)
		after, err := json.Marshal(b)
		if err != nil {
			t.Fatal(err)
		}
		if string(before) != string(after) {
			t.Error("the build has changed")
		}
		if second := survey(t, b); !reflect.DeepEqual(first, second) {
			t.Error("a second survey finds something else")
		}
	}
}

func TestASurveyStopsWhenItIsTold(t *testing.T) {
	calls := 0
	all, err := calc.Survey(threeStrings(), func(done, total int) bool {
		calls++
		if done != calls || total < done {
			t.Errorf("call %d tells %d of %d", calls, done, total)
		}
		return done < 7
	})
	if err != nil {
		t.Fatal(err)
	}
	if calls != 7 || all.Tried != 7 || len(all.All) > 7 || all.Total <= 7 {
		t.Errorf("stopped after %d calls with %d of %d tried and %d told", calls, all.Tried, all.Total, len(all.All))
	}
}

func TestWhatMattersComesFirst(t *testing.T) {
	all := survey(t, onRails(6, 0))
	matter := all.Matter()
	if len(matter) == 0 || len(matter) == len(all.All) {
		t.Fatalf("%d of %d matter", len(matter), len(all.All))
	}
	for i, f := range all.All {
		if f.Matters != (i < len(matter)) {
			t.Fatalf("number %d: %s", i, f.Text)
		}
		if !f.Matters && (f.Beyond > 0 || math.Abs(f.Most) > 0.1 || f.Runaway) {
			t.Errorf("should matter: %s", f.Text)
		}
	}
}

// sameAs is a fault that can as well be drawn as another build.
type sameAs struct {
	name  string
	where string
	role  string
	how   fault.How
	edit  func(b *calc.Build)
}

// A wrong resistor, a shorted LED, a wrong control or supply are builds of
// their own: solved as such, from nothing, every string carries what the
// survey finds after all the faults before it.
func TestAFaultIsTheBuildItMakes(t *testing.T) {
	cable := alongACable(12)
	for i := range cable.Runs {
		ohms := 0.3
		cable.Runs[i].OhmsPerMetre = &ohms
	}
	cable.Supply.Voltage = calc.Exactly(26)
	sealed := cable
	area, transfer := 0.05, 8.0
	sealed.Enclosure = &calc.Enclosure{Kind: "sealed", SurfaceArea: &area, HeatTransfer: &transfer}
	rails := onRails(12, 100)
	rails.Supply.SourceResistance = 0.5
	control := calc.Exactly(4.4)
	for _, c := range []struct {
		build  calc.Build
		faults []sameAs
	}{
		{cable, []sameAs{
			{"sense ten times too small", "string 7", "sense_resistor", fault.Tenth, func(b *calc.Build) { b.Strings[7].Driver.TwoTransistor.Sense.Ohms /= 10 }},
			{"control doubled", "string 3", "control", fault.Doubled, func(b *calc.Build) { b.Strings[3].Driver.FollowerSink.Control.Volts = &control }},
			{"LED shorted", "string 11", "led_white", fault.Shorted, func(b *calc.Build) { b.Strings[11].LEDs[0].Quantity = 5 }},
			{"supply up", "supply", "supply", fault.QuarterUp, func(b *calc.Build) { b.Supply.Voltage = calc.Exactly(32.5) }},
		}},
		{sealed, []sameAs{
			{"supply up, and with it the air in the can", "supply", "supply", fault.QuarterUp, func(b *calc.Build) { b.Supply.Voltage = calc.Exactly(32.5) }},
			{"LED shorted in the can", "string 11", "led_white", fault.Shorted, func(b *calc.Build) { b.Strings[11].LEDs[0].Quantity = 5 }},
		}},
		{rails, []sameAs{
			{"sense ten times too small", "string 8", "sense_resistor", fault.Tenth, func(b *calc.Build) { b.Strings[7].Driver.RailSink.Sense.Ohms /= 10 }},
			{"sense ten times too big", "string 1", "sense_resistor", fault.TenTimes, func(b *calc.Build) { b.Strings[0].Driver.RailSink.Sense.Ohms *= 10 }},
			{"LED shorted", "string 12", "led_white", fault.Shorted, func(b *calc.Build) { b.Strings[11].LEDs[0].Quantity = 5 }},
			{"pull-down ten times too small", "rail rail 1", "pulldown_resistor", fault.Tenth, func(b *calc.Build) { b.Rails[1].Pulldown.Ohms /= 10 }},
			{"bias ten times too small", "rail rail 0", "bias_resistor", fault.Tenth, func(b *calc.Build) { b.Rails[0].Bias.Ohms /= 10 }},
			{"supply up", "supply", "supply", fault.QuarterUp, func(b *calc.Build) { b.Supply.Voltage = calc.Exactly(30) }},
		}},
	} {
		all := survey(t, c.build)
		for _, s := range c.faults {
			t.Run(s.name, func(t *testing.T) {
				f := failing(t, all, s.where, s.role, s.how)
				var b calc.Build
				raw, err := json.Marshal(c.build)
				if err != nil {
					t.Fatal(err)
				}
				if b, err = calc.Read(raw); err != nil {
					t.Fatal(err)
				}
				healthy, err := calc.Usual(b)
				if err != nil {
					t.Fatal(err)
				}
				s.edit(&b)
				want, err := calc.Usual(b)
				if err != nil {
					t.Fatal(err)
				}
				got := make([]float64, len(b.Strings))
				for i := range got {
					got[i] = healthy.Strings[i].Current.Typ
				}
				for _, o := range f.Others {
					got[o.String] = o.Current
				}
				if f.String >= 0 {
					got[f.String] = f.Current
				}
				for i := range got {
					// A string that changes by less than a hundredth is not told.
					tolerance := 2e-4
					if got[i] == healthy.Strings[i].Current.Typ {
						tolerance = 0.0101
					}
					w := want.Strings[i].Current.Typ
					near(t, "string "+b.Strings[i].Label, got[i], w, tolerance*w+1e-6)
				}
				near(t, "supply", f.Supply, want.Supply.Current.Typ, 2e-4*want.Supply.Current.Typ)
			})
		}
	}
}

// A short that asks more of the supply than it has is told first of all.
func TestAnOverloadedSupplyIsTold(t *testing.T) {
	f := failing(t, survey(t, fourOnARail(true, 0)), "rail main", "pulldown_resistor", fault.Shorted)
	for _, o := range f.Over {
		if o.Role == "supply" {
			near(t, "limit", o.Limit, 1, 0)
			if !(o.Value > 1) || !strings.Contains(f.Text, "the supply") {
				t.Errorf("%.3g A: %s", o.Value, f.Text)
			}
			return
		}
	}
	t.Errorf("the supply is not among what leaves its limits: %s", f.Text)
}

// The sentence says what the person sees, what takes the blow, and what
// becomes of the rest, each with its number.
func TestTheSentenceTellsTheWholeStory(t *testing.T) {
	all := survey(t, railTable(true, 0, 6))
	for _, c := range []struct {
		where, role string
		how         fault.How
		words       []string
	}{
		{"string 2", "led_white", fault.Open, []string{
			"string 2: one LED open: dark", "its transistor takes 39.1\u00a0mA from the rail", "the follower heats from 34.9\u00a0mW to 0.862\u00a0W",
			"too much for the follower of rail main (0.862\u00a0W of 0.590\u00a0W)", "the other strings lose 4\u00a0%",
		}},
		{"string 2", "led_white", fault.Shorted, []string{"its light stays", "its transistor heats from 0.196\u00a0W", "the other strings stay as they are"}},
		{"string 2", "sense_resistor", fault.TenTimes, []string{"sense resistor ten times too large", "dim, 4.30\u00a0mA instead of 41.6\u00a0mA"}},
		{"rail main", "reference", fault.Shorted, []string{"the rail falls to nothing", "the strings go dark"}},
		{"rail main", "pulldown_resistor", fault.Open, []string{"the strings keep their light"}},
	} {
		text := failing(t, all, c.where, c.role, c.how).Text
		for _, words := range c.words {
			if !strings.Contains(text, words) {
				t.Errorf("%q is not in: %s", words, text)
			}
		}
	}
}
