package calc_test

import (
	"testing"

	"lanternbook/calc"
)

// Strings of one make share the search for their worst corners in a large
// build; each must come out as if it were searched for itself.
func TestManyStringsComeOutAsFew(t *testing.T) {
	const n = 30
	b := alongACable(n)
	// A thin cable, so that the far end of it stops regulating.
	for i := range b.Runs {
		ohms := 6.0 / n
		b.Runs[i].OhmsPerMetre = &ohms
	}
	many := check(t, b)
	for _, i := range []int{0, 7, 14, 22, 29} {
		// The same string behind the same cable and loads, but for one string in
		// the catalogue's place: each make once only.
		alone := b
		alone.Strings = append([]calc.String(nil), b.Strings...)
		for k := range alone.Strings {
			alone.Strings[k].LEDs = append([]calc.LEDStack(nil), alone.Strings[k].LEDs...)
			if k != i {
				continue
			}
			// Splitting the stack changes the key and nothing else.
			alone.Strings[k].LEDs = []calc.LEDStack{{Part: "white", Quantity: 2}, {Part: "white", Quantity: 4}}
		}
		s, want := many.Strings[i], check(t, alone).Strings[i]
		for _, r := range []struct {
			name      string
			got, want calc.Range
		}{{"current", s.Current, want.Current}, {"headroom", s.Headroom, want.Headroom}, {"LED voltage", s.LEDVoltage, want.LEDVoltage}, {"heat", s.Devices[1].Power, want.Devices[1].Power}} {
			// What the others draw at their worst moves the feed a little.
			near(t, s.Label+" least "+r.name, r.got.Min, r.want.Min, 5e-3*abs(r.want.Min)+1e-6)
			near(t, s.Label+" most "+r.name, r.got.Max, r.want.Max, 5e-3*abs(r.want.Max)+1e-6)
		}
	}
	if many.Strings[0].Regulates == many.Strings[n-1].Regulates {
		t.Error("both ends of the cable regulate alike: the test does not test what it should")
	}
}

func abs(v float64) float64 { return max(v, -v) }
