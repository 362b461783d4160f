package calc_test

import (
	"encoding/json"
	"math"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/fault"
)

// cured is the build with a remedy's patch, read again.
func cured(t *testing.T, b calc.Build, r calc.Remedy) calc.Build {
	t.Helper()
	document, err := json.Marshal(b)
	if err != nil {
		t.Fatal(err)
	}
	out, err := calc.Read(patched(t, document, r.Patch))
	if err != nil {
		t.Fatalf("%s: %v", r.Text, err)
	}
	return out
}

// badness is how far the worst part of a failure is beyond its limit, and how
// much other strings change.
func badness(f calc.Failure) (over, others float64) {
	over = 1
	if f.Runaway {
		over = math.Inf(1)
	}
	for _, o := range f.Over {
		if o.Unit != "°C" {
			over = max(over, o.Value/o.Limit)
		}
	}
	return over, math.Abs(f.Most)
}

// Every remedy that is offered, done to the document and surveyed as a build of
// its own, cures its failure or halves what is worst of it.
func TestEveryRemedyDoesWhatItSays(t *testing.T) {
	for name, b := range map[string]calc.Build{
		"a rail with a follower": railTable(true, 0, 6), "a rail without": railTable(false, 0, 6),
		"a limiter": limiterTable(), "a resistor": seriesTable(12), "three": threeStrings(), "two rails": onRails(8, 0),
	} {
		t.Run(name, func(t *testing.T) {
			offered := 0
			after := map[string]calc.Failures{} // by the patched document
			for _, f := range survey(t, b).Matter() {
				if f.String > 1 {
					continue // of the make of one before it
				}
				for _, r := range f.Remedies {
					offered++
					edited := cured(t, b, r)
					key, err := json.Marshal(edited)
					if err != nil {
						t.Fatal(err)
					}
					all, done := after[string(key)]
					if !done {
						all = survey(t, edited)
						after[string(key)] = all
					}
					g := failing(t, all, f.Where, f.Role, f.How)
					over, others := badness(f)
					left, change := badness(g)
					if g.Matters && !(left < 0.55*over) && !(change < 0.55*others) && !math.IsInf(over, 1) {
						t.Errorf("%s\n%s does not help: %s", f.Text, r.Text, g.Text)
					}
					if _, tells, _ := strings.Cut(g.Text, f.Fault+": "); !g.Matters && tells != r.Gives && b.Title != "three" {
						t.Errorf("%s gives %q, said %q", r.Text, tells, r.Gives)
					}
				}
			}
			if offered == 0 {
				t.Error("nothing was offered")
			}
		})
	}
}

// remedyFor returns the first remedy of a failure with words in its text.
func remedyFor(t *testing.T, f calc.Failure, words string) calc.Remedy {
	t.Helper()
	for _, r := range f.Remedies {
		if strings.Contains(r.Text, words) {
			return r
		}
	}
	t.Fatalf("no remedy with %q among %v", words, f.Remedies)
	return calc.Remedy{}
}

// The trade's own cure for an open LED on a rail is a resistor in each base.
func TestAResistorInEachBaseTamesAnOpenLED(t *testing.T) {
	b := railTable(true, 0, 6)
	f := failing(t, survey(t, b), "string 2", "led_white", fault.Open)
	r := remedyFor(t, f, "in each base")
	if len(r.Patch) != 4 {
		t.Errorf("the patch has %d steps, want one for each string", len(r.Patch))
	}
	if g := failing(t, survey(t, cured(t, b, r)), "string 2", "led_white", fault.Open); g.Matters {
		t.Errorf("still: %s", g.Text)
	}
	// With the resistors there, larger ones replace them.
	small := railTable(false, 100, 6)
	f = failing(t, survey(t, small), "string 1", "led_white", fault.Open)
	if r := remedyFor(t, f, "in each base"); r.Patch[0].Op != "replace" {
		t.Errorf("the patch would %s a resistor that is there", r.Patch[0].Op)
	}
}

func TestALargerResistorOutlivesAWrongOne(t *testing.T) {
	f := failing(t, survey(t, railTable(true, 0, 6)), "rail main", "bias_resistor", fault.Tenth)
	if r := remedyFor(t, f, "bias resistor"); r.Patch[0].Path != "/rails/0/bias/watts" || r.Patch[0].Value != 2.0 {
		t.Errorf("got %+v", r.Patch)
	}
}

// A remedy must leave the sound build sound: an LED more is not offered where
// the lowest supply with cold LEDs of the highest bin could not feed it.
func TestARemedyKeepsTheHeadroom(t *testing.T) {
	offersMore := func(b calc.Build) bool {
		f := failing(t, survey(t, b), "string 1", "sink_transistor", fault.CollectorEmitterShort)
		for _, r := range f.Remedies {
			if strings.Contains(r.Text, "one LED more") {
				return true
			}
		}
		return false
	}
	roomy := railTable(true, 0, 6)
	if !offersMore(roomy) {
		t.Fatal("with volts to spare an LED more should be offered")
	}
	tight := railTable(true, 0, 6)
	tight.Supply.Voltage = calc.Spread{Min: 21.5, Typ: 24, Max: 25}
	if offersMore(tight) {
		t.Error("on 21.5 V there is no room for an LED more")
	}
}
