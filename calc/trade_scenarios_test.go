package calc_test

import (
	"testing"

	"lanternbook/calc"
)

// The invented scenarios that a first start puts on the shelf, with the
// figures that were worked out for them independently: rough sizes.

// strung returns the string of a report with a label.
func strung(t testing.TB, r calc.Report, label string) calc.StringReport {
	t.Helper()
	for _, s := range r.Strings {
		if s.Label == label {
			return s
		}
	}
	t.Fatalf("no string %s", label)
	return calc.StringReport{}
}

func TestFernhollowStringsSwingAsTheirResistorsLetThem(t *testing.T) {
	r := check(t, demo(t, "fernhollow-halt"))
	for _, c := range []struct {
		label string
		want  calc.Range // [A]
	}{
		{"Shop windows", calc.Range{Min: 2.9e-3, Typ: 4.35e-3, Max: 5.9e-3}},
		{"Window pair", calc.Range{Min: 3.45e-3, Typ: 4.26e-3, Max: 5.1e-3}},
		{"Platform lamps", calc.Range{Min: 1.4e-3, Typ: 2.1e-3, Max: 2.8e-3}},
		{"Signal reds", calc.Range{Min: 1.7e-3, Typ: 3.2e-3, Max: 4.6e-3}},
		{"Signal greens", calc.Range{Typ: 0.97e-3}},
	} {
		got := strung(t, r, c.label).Current
		roughly(t, c.label+" typically", got.Typ, c.want.Typ, 0.03)
		if c.want.Min != 0 {
			roughly(t, c.label+" at least", got.Min, c.want.Min, 0.08)
			roughly(t, c.label+" at most", got.Max, c.want.Max, 0.08)
		}
	}
	roughly(t, "whole load", r.Supply.Current.Typ, 32e-3, 0.05)
}

func TestFernhollowFourWhitesInOneStringHoldNothing(t *testing.T) {
	b := demo(t, "fernhollow-halt")
	b.Strings = b.Strings[:1]
	b.Strings[0].LEDs[0].Quantity = 4
	b.Strings[0].Driver.Resistor.Resistor.Ohms = 180
	got := check(t, b).Strings[0].Current
	roughly(t, "typically", got.Typ, 4.3e-3, 0.1)
	near(t, "at least", got.Min, 0, 0.5e-3)
	roughly(t, "at most", got.Max, 8.9e-3, 0.2)
}

func TestHarbourLimiterHoldsThirtyFourMilliamperes(t *testing.T) {
	b := demo(t, "harbour-letters")
	r := check(t, b)
	first := strung(t, r, "Letter H")
	roughly(t, "current", first.Current.Typ, 34e-3, 0.03)
	roughly(t, "sense", *first.Voltages.Sense, 0.61, 0.03)
	roughly(t, "supply current", r.Supply.Current.Typ, 0.77, 0.03)
	roughly(t, "supply power", r.Supply.Power.Typ, 18.5, 0.03)
	roughly(t, "feeder drop", r.Runs[0].Drop, 0.45, 0.1)
	sink := deviceIn(t, first, "sink_transistor")
	roughly(t, "transistor heat", sink.Power.Typ, 0.20, 0.1)
	roughly(t, "transistor heat in the hot corner", sink.Power.Max, 0.28, 0.12)

	bias := 0.0
	for _, s := range r.Strings {
		bias += float64(s.Quantity) * (s.Voltages.Feed - *s.Voltages.Base) / 22e3
	}
	roughly(t, "overhead in the base feeds", bias, 23e-3, 0.05)
}

func TestHarbourSetPointMovesWithTheBaseFeed(t *testing.T) {
	b := demo(t, "harbour-letters")
	overhead := 0.0
	for i := range b.Strings {
		b.Strings[i].Driver.TwoTransistor.Bias.Ohms = 4700
	}
	r := check(t, b)
	for _, s := range r.Strings {
		overhead += float64(s.Quantity) * (s.Voltages.Feed - *s.Voltages.Base) / 4700
	}
	first := strung(t, r, "Letter H")
	roughly(t, "current", first.Current.Typ, 36.5e-3, 0.03)
	roughly(t, "sense", *first.Voltages.Sense, 0.66, 0.03)
	roughly(t, "overhead in the base feeds", overhead, 106e-3, 0.05)
	roughly(t, "its share of the load", overhead/r.Supply.Current.Typ, 0.12, 0.1)
}

// On the coldest night, with the worst reel and the lowest supply, the sixth
// LED is safe and the seventh is not.
func TestHarbourTakesSixLEDsAndNotSeven(t *testing.T) {
	b := demo(t, "harbour-letters")
	six := strung(t, check(t, b), "Letter H")
	near(t, "headroom of six", six.Headroom.Min, 2.9, 0.2)
	if !six.Regulates {
		t.Error("six should regulate")
	}
	for i := range b.Strings {
		b.Strings[i].LEDs[0].Quantity = 7
	}
	seven := strung(t, check(t, b), "Letter H")
	near(t, "headroom of seven", seven.Headroom.Min, -0.3, 0.2)
	if seven.Regulates || !(seven.Headroom.Min < 0) {
		t.Errorf("seven should not regulate: headroom %.2f V", seven.Headroom.Min)
	}
	if !(seven.Headroom.Typ > 1.5) {
		t.Errorf("typically seven look fine, headroom %.2f V", seven.Headroom.Typ)
	}
}

func TestHarbourShortedLEDHeatsTheTransistor(t *testing.T) {
	b := demo(t, "harbour-letters")
	whole := deviceIn(t, check(t, b).Strings[0], "sink_transistor")
	roughly(t, "junction", whole.Junction.Max, 116, 0.07)
	b.Strings[0].LEDs[0].Quantity = 5
	short := deviceIn(t, check(t, b).Strings[0], "sink_transistor")
	roughly(t, "power with one shorted", short.Power.Max, 0.37, 0.12)
	roughly(t, "junction with one shorted", short.Junction.Max, 133, 0.07)
}

func TestWrenResistorSwingsWithTheBattery(t *testing.T) {
	for _, c := range []struct{ volts, want float64 }{ // [V], [A]
		{10.8, 74e-3}, {12.0, 102e-3}, {12.6, 116e-3}, {13.6, 139e-3}, {14.4, 157e-3}, {14.8, 166e-3},
	} {
		got := check(t, bench(t, c.volts, 3, "white-1w", ballast(36, 0))).Strings[0].Current.Typ
		roughly(t, "current", got, c.want, 0.06)
	}
}

func TestWrenSinkHoldsAcrossTheBattery(t *testing.T) {
	b := demo(t, "wren-cabin-lights")
	r := check(t, b)
	last := strung(t, r, "Fore cabin")
	roughly(t, "current", last.Current.Typ, 0.12, 0.03)
	roughly(t, "whole load", r.Supply.Current.Typ, 1.92, 0.05)
	drop := 0.0
	for _, run := range r.Runs {
		drop += run.Drop
	}
	roughly(t, "drop to the last fitting", drop, 0.36, 0.25)
	// Full light down to about 10.9 V: at 10.8 V next to nothing is left.
	near(t, "headroom on a flat battery", last.Headroom.Min, 0, 0.25)

	b.Ambient, b.Supply.Voltage = calc.Exactly(20), calc.Exactly(14.8)
	charging := deviceIn(t, strung(t, check(t, b), "Fore cabin"), "sink_transistor")
	roughly(t, "heat while charging", charging.Power.Typ, 0.63, 0.1)
	b.Strings[3].LEDs[0].Quantity = 2
	short := deviceIn(t, strung(t, check(t, b), "Fore cabin"), "sink_transistor")
	roughly(t, "heat while charging, one LED shorted", short.Power.Typ, 1.05, 0.1)
}

func TestWrenTakesThreeLEDsAndNotFour(t *testing.T) {
	b := demo(t, "wren-cabin-lights")
	for i := range b.Strings {
		b.Strings[i].LEDs[0].Quantity = 4
	}
	b.Supply.Voltage = calc.Exactly(12.0) // at rest, not charging
	if four := strung(t, check(t, b), "Fore cabin"); four.Regulates {
		t.Errorf("four should need the engine running: headroom %.2f V", four.Headroom.Min)
	}
}

func TestArcadeCaseDrawsWhatItsSupplyGives(t *testing.T) {
	r := check(t, demo(t, "arcade-jewellers"))
	roughly(t, "current", r.Supply.Current.Typ, 1.85, 0.03)
	roughly(t, "power", r.Supply.Power.Typ, 44, 0.03)
	roughly(t, "loading", r.Supply.Loading.Typ, 0.74, 0.03)
	roughly(t, "trunk drop", r.Runs[0].Drop, 0.27, 0.1)
	heat := 0.0
	for _, s := range r.Strings {
		heat += float64(s.Quantity) * deviceIn(t, s, "sink_transistor").Power.Typ
	}
	roughly(t, "heat of the transistors", heat, 10.2, 0.1)
}

// A reel of unknown bin allows six LEDs to a string, a known one seven.
func TestArcadeKnownBinAllowsOneLEDMore(t *testing.T) {
	b := demo(t, "arcade-jewellers")
	for i := range b.Strings {
		b.Strings[i].LEDs[0].Quantity = 7
		b.Strings[i].Quantity = 4
	}
	r := check(t, b)
	open := strung(t, r, "Shelf 6")
	if open.Regulates {
		t.Errorf("seven of any bin should not regulate: headroom %.2f V", open.Headroom.Min)
	}
	heat := 0.0
	for _, s := range r.Strings {
		heat += float64(s.Quantity) * deviceIn(t, s, "sink_transistor").Power.Typ
	}
	roughly(t, "heat of the transistors", heat, 3.9, 0.15)
	part := b.Parts["white-2835-cri95"]
	reel := *part.LED
	reel.ForwardVoltage = calc.Spread{Min: 3.0, Typ: 3.05, Max: 3.1}
	reel.Model = nil
	b.Parts["white-2835-cri95"] = calc.Part{Type: part.Type, LED: &reel}
	known := strung(t, check(t, b), "Shelf 6")
	near(t, "headroom of the known reel", known.Headroom.Min, 0.5, 0.35)
}

func TestBakeryRailSetsElevenStrings(t *testing.T) {
	r := check(t, demo(t, "corner-bakery"))
	grid := strung(t, r, "Grid rows")
	roughly(t, "current", grid.Current.Typ, 60.6e-3, 0.03)
	near(t, "emitter", *grid.Voltages.Sense, 2.0, 0.05)
	roughly(t, "supply power", r.Supply.Power.Typ, 16, 0.03)
	near(t, "headroom on a cold day", grid.Headroom.Min, 1.5, 0.25)
	sink := deviceIn(t, grid, "sink_transistor")
	roughly(t, "transistor heat", sink.Power.Typ, 0.26, 0.05)
	roughly(t, "transistor heat in the hot corner", sink.Power.Max, 0.38, 0.05)
	roughly(t, "sense resistor", deviceIn(t, grid, "sense_resistor").Power.Typ, 0.121, 0.03)
}

func TestLanternTakesFourAmbersAndNotFive(t *testing.T) {
	b := demo(t, "lantern-no-4")
	r := check(t, b)
	amber := strung(t, r, "Amber flame")
	roughly(t, "current", amber.Current.Typ, 18e-3, 0.05)
	roughly(t, "whole load", r.Supply.Current.Typ, 0.114, 0.05)
	near(t, "emitter", *amber.Voltages.Sense, 1.22, 0.06)
	near(t, "headroom on a flat battery", amber.Headroom.Min, 12.0-11.6, 0.25)
	b.Strings[0].LEDs[0].Quantity = 5
	if five := strung(t, check(t, b), "Amber flame"); five.Regulates {
		t.Errorf("five should go out before the battery is flat: headroom %.2f V", five.Headroom.Min)
	}
}

// A reel that measures 2.02 V instead of 2.14 V gives half a volt.
func TestLanternMeasuredReelGivesHalfAVolt(t *testing.T) {
	b := demo(t, "lantern-no-4")
	part := b.Parts["amber-5mm"]
	before := 0.0
	for _, volts := range []float64{2.14, 2.02} {
		reel := *part.LED
		reel.ForwardVoltage, reel.Model = calc.Exactly(volts), nil
		b.Parts["amber-5mm"] = calc.Part{Type: part.Type, LED: &reel}
		amber := strung(t, check(t, b), "Amber flame")
		if before != 0 {
			near(t, "headroom gained", amber.Headroom.Typ-before, 0.5, 0.1)
		}
		before = amber.Headroom.Typ
	}
	b.Supply.Voltage = calc.Exactly(16.8)
	full := deviceIn(t, strung(t, check(t, b), "Amber flame"), "sink_transistor")
	roughly(t, "heat on a full battery", full.Power.Typ, 0.13, 0.1)
}
