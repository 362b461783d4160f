package calc_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"lanternbook/calc"
)

func breakdown(tb testing.TB, b calc.Build, i int) calc.HeadroomBreakdown {
	tb.Helper()
	d, err := calc.Breakdown(b, i)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// item finds the share of a value by its name; 0 V where it has none.
func item(d calc.HeadroomBreakdown, name string) calc.BreakdownItem {
	for _, it := range d.Items {
		if it.Name == name {
			return it
		}
	}
	return calc.BreakdownItem{}
}

// sink is a sink with everything exact on 24 V: six whites, 20 mA.
func exactSink() calc.Build {
	b := threeStrings()
	b.Strings, b.Runs = b.Strings[:1], nil
	b.Strings[0].FedBy = ""
	b.Ambient, b.Supply.Voltage = calc.Exactly(25), calc.Exactly(24)
	white, npn, pnp := *b.Parts["white"].LED, *b.Parts["npn"].Transistor, *b.Parts["pnp"].Transistor
	white.ForwardVoltage = calc.Exactly(2.95)
	for _, q := range []*calc.Transistor{&npn, &pnp} {
		hfe := calc.Exactly(q.HFE.Typ)
		q.HFE = &hfe
		q.VBEOn = &calc.VBEOn{Volts: calc.Exactly(q.VBEOn.Volts.Typ), At: q.VBEOn.At}
	}
	b.Parts = map[string]calc.Part{
		"white": {Type: calc.TypeLED, LED: &white}, "npn": {Type: calc.TypeNPN, Transistor: &npn}, "pnp": {Type: calc.TypePNP, Transistor: &pnp},
	}
	f := *b.Strings[0].Driver.FollowerSink
	f.Pullup.Tolerance, f.Sense.Tolerance = 0, 0
	b.Strings[0].Driver.FollowerSink = &f
	return b
}

type culpritCase struct {
	name  string
	loose func(b *calc.Build)
	item  string
	at    string
	volts float64 // [V]
	tol   float64 // [V]
}

// With a single value off, all of the loss is its own. The volts are by hand.
func TestEachCulpritTakesItsVolts(t *testing.T) {
	for _, c := range []culpritCase{
		{"a supply half a volt low", func(b *calc.Build) { b.Supply.Voltage = calc.Spread{Min: 23.5, Typ: 24, Max: 24} },
			"supply", "/supply/voltage", -0.5, 0.005},
		// They warm a little more, which takes 2.5 mV/K back.
		{"six LEDs 0.25 V high each", func(b *calc.Build) {
			b.Parts["white"].LED.ForwardVoltage = calc.Spread{Min: 2.8, Typ: 2.95, Max: 3.2}
		}, "white bin", "/parts/white/forward_voltage", -1.5 + 6*0.25*0.02*150*0.0025, 0.001},
		// Cold raises each LED by 2.5 mV/K. (The transistors' junctions cool too;
		// the follower cancels most of that.)
		{"30 K colder", func(b *calc.Build) { b.Ambient = calc.Spread{Min: -5, Typ: 25, Max: 25} },
			"temperature", "/ambient", -6 * 0.0025 * 30, 0.02},
		// 5 % of 2.2 V at the sense resistor, and 5 % of 20 mA through six slopes
		// of 2.55·VT/I + 1.9 Ω less the LEDs' own warming.
		{"a control 5 % high", func(b *calc.Build) {
			v := calc.Spread{Min: 2.2, Typ: 2.2, Max: 2.31}
			b.Strings[0].Driver.FollowerSink.Control.Volts = &v
		}, "control voltage", "/strings/0/driver/control/volts", -0.11 - 6*(2.55*0.0257/0.02+1.9)*0.001, 0.01},
	} {
		b := exactSink()
		c.loose(&b)
		d := breakdown(t, b, 0)
		it := item(d, c.item)
		near(t, c.name, it.Volts, c.volts, c.tol)
		if it.At != c.at {
			t.Errorf("%s points to %s, want %s", c.name, it.At, c.at)
		}
		if len(d.Items) != 1 {
			t.Errorf("%s: %d items, want one: %v", c.name, len(d.Items), d.Items)
		}
		if !strings.Contains(d.Sentence, c.item) {
			t.Errorf("%s: %q does not name the %s", c.name, d.Sentence, c.item)
		}
	}
	if d := breakdown(t, exactSink(), 0); len(d.Items) != 0 || d.Worst != d.Typical || !strings.HasPrefix(d.Sentence, "Nothing") {
		t.Errorf("with everything exact: %+v", d)
	}
}

// Two amperes of other strings through shared cable are the wire's, not the
// supply's; a base rail is named as such.
func TestWireAndRailAreNamed(t *testing.T) {
	b := threeStrings()
	b.Runs[0].Length = 40
	d := breakdown(t, b, 0)
	if it := item(d, "wire"); !(it.Volts < -0.001 && it.At == "/runs" && it.Culprit == "wire") {
		t.Errorf("wire: %+v", it)
	}
	near(t, "supply", item(d, "supply").Volts, -0.5, 0.01)

	b = fourOnARail(true, 220)
	b.Rails[0].Reference.Volts = calc.Spread{Min: 3.2, Typ: 3.3, Max: 3.4}
	d = breakdown(t, b, 2)
	it := item(d, "rail main")
	// 0.1 V at the base is 0.1 V at the sense resistor and 2.1 mA more.
	near(t, "rail", it.Volts, -0.1-6*(2.5*0.0257/0.0425+2.2)*0.1/47, 0.02)
	if it.At != "/rails/0" || len(d.Items) != 1 {
		t.Errorf("rail: %+v", d.Items)
	}
}

func TestBreakdownAddsUp(t *testing.T) {
	builds := readable(t)
	builds["three strings"], builds["along a cable"] = threeStrings(), alongACable(4)
	builds["on a rail"] = fourOnARail(true, 220)
	strings := 0
	for name, b := range builds {
		r, err := calc.Check(b)
		if err != nil {
			continue // of another test
		}
		for i, s := range r.Strings {
			strings++
			d := breakdown(t, b, i)
			if !addsUp(t, d, s) {
				t.Errorf("in %s", name)
			}
			for _, it := range d.Items {
				if it.At == "" || it.Name == "" {
					t.Errorf("%s, string %s: %+v", name, s.Label, it)
				}
			}
		}
	}
	if strings < 100 {
		t.Errorf("only %d strings were broken down", strings)
	}
}

// readable reads every build of testdata by its name.
func readable(tb testing.TB) map[string]calc.Build {
	tb.Helper()
	all := map[string]calc.Build{}
	for _, from := range []map[string][]byte{documents(tb), referenceBuilds(tb)} {
		for name, raw := range from {
			if b, err := calc.Read(raw); err == nil {
				all[name] = b
			}
		}
	}
	return all
}

// addsUp holds a breakdown against the report's string.
func addsUp(t *testing.T, d calc.HeadroomBreakdown, s calc.StringReport) bool {
	t.Helper()
	ok := true
	wrong := func(format string, of ...any) {
		t.Helper()
		ok = false
		t.Errorf(d.String+": "+format, of...)
	}
	if d.Typical != s.Headroom.Typ || !(math.Abs(d.Worst-s.Headroom.Min) < 1e-6) || d.String != s.Label {
		wrong("%v to %v, the report says %v", d.Typical, d.Worst, s.Headroom)
	}
	sum, last := 0.0, math.Inf(1)
	for _, it := range d.Items {
		sum += it.Volts
		if a := math.Abs(it.Volts); !(a <= last) {
			wrong("items out of order: %v", d.Items)
		} else {
			last = a
		}
	}
	if diff := math.Abs(sum - (d.Worst - d.Typical)); !(diff < 1e-9) {
		wrong("items add up to %v, want %v", sum, s.Headroom.Min-s.Headroom.Typ)
	}
	for _, stairs := range []struct {
		calc.Staircase
		left float64
	}{{d.Usual, d.Typical}, {d.Least, d.Worst}} {
		level := stairs.Supply
		for _, step := range stairs.Steps {
			level -= step.Volts
			if diff := math.Abs(level - step.Level); !(diff < 1e-9) {
				wrong("%v V below %+v", level, step)
			}
		}
		if diff := math.Abs(level - stairs.left); !(diff < 1e-3) || stairs.Left != stairs.left {
			wrong("the stairs end at %v and say %v, want %v: %+v", level, stairs.Left, stairs.left, stairs)
		}
	}
	// A second solution of the same corner gives the driver the same share.
	if s.Kind != calc.KindResistor {
		got, want := d.Usual.Steps[len(d.Usual.Steps)-2], s.Columns.Usual.Driver
		if diff := math.Abs(got.Volts - want); !(diff < 1e-3) || got.Name != "driver" {
			wrong("driver %+v, want %v V", got, want)
		}
	}
	return ok
}

func TestBreakdownOfNoString(t *testing.T) {
	var faults calc.Invalid
	if _, err := calc.Breakdown(threeStrings(), 3); !errors.As(err, &faults) {
		t.Errorf("error %v, want Invalid", err)
	}
}
