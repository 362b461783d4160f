package calc_test

import (
	"math"
	"os"
	"path/filepath"
	"testing"

	"lanternbook/calc"
)

// fourOnARail is four strings of six whites at some 42 mA, their bases on a
// rail that an NPN follower drives from a 3.3 V reference; without a follower
// the reference is the rail.
func fourOnARail(buffered bool, baseOhms float64) calc.Build {
	white := calc.Part{Type: calc.TypeLED, LED: &calc.LED{
		TestCurrent: 0.06, ForwardVoltage: calc.Exactly(2.95), Model: &calc.LEDModel{Is: 2e-20, N: 2.5, Rs: 2.2},
	}}
	npn := calc.Part{Type: calc.TypeNPN, Transistor: &calc.Transistor{
		MaxCollectorEmitterVoltage: ptr(45), MaxCollectorCurrent: new(0.5), MaxPower: new(0.6), MaxJunction: ptr(150),
		HFE: &calc.Spread{Min: 200, Typ: 200, Max: 200}, VBEOn: &calc.VBEOn{Volts: calc.Exactly(0.7), At: 0.04},
	}}
	b := calc.Build{
		Format: calc.BuildFormat, Title: "rail", Ambient: calc.Exactly(25),
		Supply: calc.Supply{Voltage: calc.Exactly(24), MaxCurrent: ptr(1)},
		Rails: []calc.Rail{{
			ID: "main", Kind: "reference", Reference: &calc.Reference{Volts: calc.Exactly(2.7), Ohms: 20}, Bias: &calc.Resistor{Ohms: 2200, Watts: new(0.5)},
		}},
		Parts: map[string]calc.Part{"white": white, "npn": npn},
	}
	if buffered {
		b.Rails[0] = calc.Rail{
			ID: "main", Kind: "buffered-reference", Reference: &calc.Reference{Volts: calc.Exactly(3.3), Ohms: 20}, Bias: &calc.Resistor{Ohms: 2200, Watts: new(0.5)},
			NPN: "npn", Pulldown: &calc.Resistor{Ohms: 3300, Watts: new(0.25)},
		}
	}
	for _, label := range []string{"1", "2", "3", "4"} {
		sink := &calc.RailSink{Rail: "main", NPN: "npn", Sense: calc.Resistor{Ohms: 47, Watts: new(0.25)}}
		if baseOhms > 0 {
			sink.BaseResistor = &baseOhms
		}
		b.Strings = append(b.Strings, calc.String{
			Label: label, Quantity: 1, LEDs: []calc.LEDStack{{Part: "white", Quantity: 6}},
			Driver: calc.Driver{Kind: calc.KindRailSink, RailSink: sink},
		})
	}
	return b
}

// A string far too long for the supply takes its whole emitter current from
// the rail, as one with an open LED does. Patterns: common practice, no source.
func TestAStringWithoutHeadroomLoadsTheRail(t *testing.T) {
	healthy := check(t, fourOnARail(true, 0))
	b := fourOnARail(true, 0)
	b.Strings[1].LEDs[0].Quantity = 12
	loaded := check(t, b)
	near(t, "healthy rail", healthy.Rails[0].Voltage.Typ, 2.7, 0.2)
	near(t, "healthy current", healthy.Strings[0].Current.Typ, 0.042, 0.005)
	drop := 1 - loaded.Strings[0].Current.Typ/healthy.Strings[0].Current.Typ
	if !(drop > 0.005 && drop < 0.1) {
		t.Errorf("the others lose %.2g of their current, want a few percent", drop)
	}
	if rise := followerHeat(t, loaded) / followerHeat(t, healthy); !(rise > 5) {
		t.Errorf("the follower's heat rises %.2g times, want more than five", rise)
	}
	// With a resistor in each base the follower hardly notices.
	b = fourOnARail(true, 470)
	b.Strings[1].LEDs[0].Quantity = 12
	tamed := check(t, b)
	if h := followerHeat(t, tamed); !(h < followerHeat(t, loaded)/3) {
		t.Errorf("with base resistors the follower still burns %.3g W of %.3g W", h, followerHeat(t, loaded))
	}
}

func followerHeat(t *testing.T, r calc.Report) float64 {
	t.Helper()
	for _, d := range r.Rails[0].Devices {
		if d.Role == "follower_transistor" {
			return d.Power.Typ
		}
	}
	t.Fatal("the rail has no follower")
	return 0
}

// A reference that would have to give current is said to, and not passed.
func TestAnOverloadedReferenceFails(t *testing.T) {
	b := fourOnARail(false, 0)
	if f := finding(t, check(t, b), "reference-current"); f.Severity == calc.Fail {
		t.Errorf("healthy: %s", f.Message)
	}
	b.Strings[1].LEDs[0].Quantity = 12
	if f := finding(t, check(t, b), "reference-current"); f.Severity != calc.Fail {
		t.Errorf("one string takes its whole current from the reference: %s", f.Severity)
	}
}

func TestPowerBalancesOnARail(t *testing.T) {
	for _, buffered := range []bool{true, false} {
		r := check(t, fourOnARail(buffered, 220))
		out := 0.0
		for _, s := range r.Strings {
			for _, d := range s.Devices {
				n := 1.0
				if d.Role == "led_white" {
					n = 6
				}
				out += n * d.Power.Typ
			}
		}
		for _, d := range r.Rails[0].Devices {
			out += d.Power.Typ
		}
		near(t, "power out", out, r.Supply.Power.Typ, 1e-6*r.Supply.Power.Typ)
	}
}

// Ten thousand strings of absurd drivers behind a kilohm: every figure finite.
func TestAbsurdBuildsHaveFiniteFigures(t *testing.T) {
	raw, err := os.ReadFile(filepath.Join("testdata", "absurd", "behind-a-kilohm.json"))
	if err != nil {
		t.Fatal(err)
	}
	b, err := calc.Read(raw)
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range check(t, b).Strings {
		for name, r := range map[string]calc.Range{"current": s.Current, "headroom": s.Headroom, "LED voltage": s.LEDVoltage} {
			for _, v := range []float64{r.Min, r.Typ, r.Max} {
				if math.IsNaN(v) || math.IsInf(v, 0) {
					t.Errorf("string %s: %s is %v", s.Label, name, r)
				}
			}
		}
	}
}

// A wish for a string on a rail is met by its sense resistor.
func TestSuggestOnARail(t *testing.T) {
	b := fourOnARail(true, 220)
	b.Strings[2].Wanted = &calc.Wanted{Current: new(0.06)}
	s, err := calc.Suggest(b, 2)
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Choices) == 0 {
		t.Fatal("no choices")
	}
	b.Strings[2].Driver.RailSink.Sense.Ohms = s.Exact
	near(t, "current", check(t, b).Strings[2].Current.Typ, 0.06, 0.0003)
}
