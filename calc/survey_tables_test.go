package calc_test

import (
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/fault"
)

// The fault tables of the trade: what a meter reads with one thing wrong.
// Values as the trade writes them, rounded, "common practice, no source": the
// pattern counts, so that a reading may lie a tenth or 0.15 V off.

// skipped marks a reading that the table does not give.
const skipped = -1

type faultRow struct {
	name       string
	role       string
	how        fault.How
	tail       float64 // [V]
	base       float64 // [V]
	sense      float64 // [V]
	current    float64 // [mA] through the LEDs
	each       float64 // [V] across a sound LED
	rail       float64 // [V]
	others     float64 // [mA]
	mustMatter bool
}

func (r faultRow) compare(t *testing.T, f calc.Failure) {
	t.Helper()
	volts := func(name string, got *float64, want float64) {
		t.Helper()
		if want == skipped {
			return
		}
		if got == nil {
			t.Fatalf("no reading of the %s", name)
		}
		near(t, name, *got, want, 0.15+0.06*want)
	}
	if f.Unsolved != "" {
		t.Fatal(f.Text)
	}
	volts("tail", &f.Voltages.Tail, r.tail)
	volts("base", f.Voltages.Base, r.base)
	volts("sense", f.Voltages.Sense, r.sense)
	volts("LED", f.LEDs[0].Each, r.each)
	near(t, "current", f.Current*1e3, r.current, 0.3+0.15*r.current)
	if r.rail != skipped {
		volts("rail", &f.Rails[0].Volts, r.rail)
	}
	if r.others != skipped {
		was := f.Was * 1e3
		for _, o := range f.Others {
			near(t, "another string", o.Current*1e3, r.others, 0.05*was)
		}
		if len(f.Others) == 0 {
			near(t, "other strings stay at", was, r.others, 0.05*was)
		}
	}
	if f.Matters != r.mustMatter {
		t.Errorf("matters: %v, want %v: %s", f.Matters, r.mustMatter, f.Text)
	}
}

func compareRows(t *testing.T, all calc.Failures, rows []faultRow) {
	t.Helper()
	for _, r := range rows {
		t.Run(r.name, func(t *testing.T) { r.compare(t, failing(t, all, "string 1", r.role, r.how)) })
	}
}

func TestASeriesStringReadsAsItsFaultTable(t *testing.T) {
	const no = skipped
	led := "led_small white"
	compareRows(t, survey(t, seriesTable(12)), []faultRow{
		{"LED open", led, fault.Open, 0, no, no, 0, 2.1, no, no, false},
		{"LED shorted", led, fault.Shorted, 5.64, no, no, 37.6, 3.18, no, no, true},
		{"LED reversed", led, fault.Reversed, 0, no, no, 0, no, no, no, false},
		{"resistor ten times too big", "resistor", fault.TenTimes, 3.77, no, no, 2.5, 2.74, no, no, false},
		{"resistor ten times too small", "resistor", fault.Tenth, 1.25, no, no, 83, 3.58, no, no, true},
	})
}

// The meter across an open or reversed LED reads what the sound ones leave of
// the supply; across an open resistor it reads more than the sound 3 V.
func TestASeriesStringShowsItsOpenPart(t *testing.T) {
	all := survey(t, seriesTable(12))
	open := failing(t, all, "string 1", "led_small white", fault.Open)
	near(t, "open LED", *open.LEDs[0].Faulty, 8, 1)
	reversed := failing(t, all, "string 1", "led_small white", fault.Reversed)
	if v := *reversed.LEDs[0].Faulty; !(v < -7) {
		t.Errorf("the reversed LED reads %.1f V, want nearly the whole supply backwards", v)
	}
	resistor := failing(t, all, "string 1", "resistor", fault.Open)
	if v := resistor.Voltages.Tail; !(v > 4.5) || resistor.Current > 1e-5 {
		t.Errorf("across the open resistor %.1f V at %.2g A, want most of what is there and no current", v, resistor.Current)
	}
	short := failing(t, all, "string 1", "led_small white", fault.Shorted)
	near(t, "shorted LED", *short.LEDs[0].Faulty, 0, 0.01)
}

// A resistor string on 14.4 V instead of 12 V gains two thirds.
func TestASeriesStringFollowsItsSupply(t *testing.T) {
	up := failing(t, survey(t, seriesTable(11.52)), "supply", "supply", fault.QuarterUp).Others[0]
	near(t, "at 14.4 V", up.Current*1e3, 33, 1.5)
	near(t, "across the resistor", up.Voltages.Tail, 4.99, 0.2)
	down := failing(t, survey(t, seriesTable(10)), "supply", "supply", fault.Half).Others[0]
	near(t, "at 5 V", down.Current*1e3, 0, 0.01)
}

func TestALimiterReadsAsItsFaultTable(t *testing.T) {
	const no = skipped
	compareRows(t, survey(t, limiterTable()), []faultRow{
		{"LED open", "led_white", fault.Open, 0.06, 0.77, 0.05, 0, no, no, no, false},
		{"LED shorted", "led_white", fault.Shorted, 9.3, 1.39, 0.656, 59.6, 2.95, no, no, false},
		{"LED reversed", "led_white", fault.Reversed, 0.06, 0.77, 0.05, 0, no, no, no, false},
		{"pass swapped", "sink_transistor", fault.Swapped, 6.9, 1.09, 0.375, 31, 2.85, no, no, false},
		{"pass base open", "sink_transistor", fault.BaseOpen, no, 24, 0, 0, no, no, no, false},
		{"sensor base open", "sensor_transistor", fault.BaseOpen, 3.2, 3.9, 3.1, 281, 3.5, no, no, true},
		{"sensor shorted", "sensor_transistor", fault.CollectorEmitterShort, no, 0, 0, 0, no, no, no, false},
		{"base feed open", "bias_resistor", fault.Open, no, 0, 0, 0, no, no, no, false},
		{"sense ten times too small", "sense_resistor", fault.Tenth, 0.6, 1.31, 0.53, 480, 3.9, no, no, true},
		{"sense ten times too big", "sense_resistor", fault.TenTimes, no, 1.33, 0.657, 6, no, no, no, false},
		{"sense open", "sense_resistor", fault.Open, 9.8, 1.18, 0.66, 0, no, no, no, false},
	})
}

// A pass transistor shorted from collector to emitter overdrives the LEDs while
// the sensing one pulls the base down for nothing. (The table's 3 V and 270 mA
// stand on 220 ohms before the sensing transistor's base.)
func TestALimiterCannotHoldAShortedPassTransistor(t *testing.T) {
	f := failing(t, survey(t, limiterTable()), "string 1", "sink_transistor", fault.CollectorEmitterShort)
	if !(f.Current > 0.2) || !(*f.Voltages.Base < 0.1) || !(*f.Voltages.Sense > 0.75) || !f.Matters {
		t.Errorf("got %.3g A, base %.2f V, sense %.2f V: %s", f.Current, *f.Voltages.Base, *f.Voltages.Sense, f.Text)
	}
}

func TestALimiterOnTheWrongSupply(t *testing.T) {
	all := survey(t, limiterTable())
	half := failing(t, all, "supply", "supply", fault.Half).Others[0]
	near(t, "tail at 12 V", half.Voltages.Tail, 0.03, 0.02)
	near(t, "base at 12 V", *half.Voltages.Base, 0.72, 0.05)
	near(t, "sense at 12 V", *half.Voltages.Sense, 0.03, 0.01)
	more := failing(t, all, "supply", "supply", fault.QuarterUp)
	near(t, "tail at 30 V", more.Others[0].Voltages.Tail, 12.3, 0.3)
	near(t, "current at 30 V", more.Others[0].Current*1e3, 60.3, 1)
	if !more.Matters || more.Over[0].Role != "sink_transistor" {
		t.Fatalf("30 V: %s", more.Text)
	}
	near(t, "pass transistor at 30 V", more.Over[0].Value, 0.70, 0.02)
}

func TestARailReadsAsItsFaultTable(t *testing.T) {
	const no = skipped
	t.Run("with a follower", func(t *testing.T) {
		compareRows(t, survey(t, railTable(true, 0, 6)), []faultRow{
			{"LED open", "led_white", fault.Open, 1.86, no, 1.85, 0, no, 2.62, 40, true},
			{"LED shorted", "led_white", fault.Shorted, 9.6, no, 1.98, 41.9, no, 2.70, 41.9, false},
			{"swapped", "sink_transistor", fault.Swapped, 6.8, no, 1.95, 35.6, no, 2.67, 41.2, false},
			{"collector to emitter", "sink_transistor", fault.CollectorEmitterShort, 5.5, no, 5.4, 115, no, 2.71, 41.9, true},
			{"sense ten times too big", "sense_resistor", fault.TenTimes, 7.9, no, 2.05, 4.3, no, 2.71, 41.9, false},
			{"sense ten times too small", "sense_resistor", fault.Tenth, 1.9, no, 1.86, 378, no, 2.65, 40.6, true},
			{"base lead open", "sink_transistor", fault.BaseOpen, 11, no, 0, 0, no, 2.71, 41.9, false},
		})
	})
	t.Run("470 ohms in each base", func(t *testing.T) {
		compareRows(t, survey(t, railTable(true, 470, 6)), []faultRow{
			{"LED open", "led_white", fault.Open, 0.18, no, 0.18, 0, no, 2.68, 39, false},
			{"swapped", "sink_transistor", fault.Swapped, no, no, 0.82, 14.9, no, no, no, false},
		})
	})
	t.Run("no follower", func(t *testing.T) {
		compareRows(t, survey(t, railTable(false, 0, 6)), []faultRow{
			{"LED open", "led_white", fault.Open, 0.48, no, 0.48, 0, no, 1.21, 11, true},
		})
	})
}

// The follower that feeds the base of a string with an open LED burns near a
// watt, with 470 ohms in each base a seventh of that.
func TestTheFollowerCarriesTheOpenString(t *testing.T) {
	bare := failing(t, survey(t, railTable(true, 0, 6)), "string 2", "led_white", fault.Open)
	if len(bare.Over) != 1 || bare.Over[0].Role != "follower_transistor" || bare.Over[0].Where != "rail main" {
		t.Fatalf("want the follower beyond its dissipation: %s", bare.Text)
	}
	near(t, "follower", bare.Over[0].Value, 0.9, 0.1)
	if f := failing(t, survey(t, railTable(true, 470, 6)), "string 2", "led_white", fault.Open); f.Matters {
		t.Errorf("with base resistors it should not matter: %s", f.Text)
	}
}

// A swapped transistor whose string leaves it 9.5 V breaks down from emitter to
// base and lifts the rail, and with it every string. The table's tail less its
// rail is 6.6 V, which a breakdown that begins at 6.4 V reaches with 8 mA.
func TestASwappedTransistorWithVoltsToSpareLiftsTheRail(t *testing.T) {
	b := railTable(true, 0, 5)
	q := *b.Parts["npn"].Transistor
	q.MaxEmitterBaseVoltage = new(6.4)
	b.Parts["npn"] = calc.Part{Type: calc.TypeNPN, Transistor: &q}
	all := survey(t, b)
	f := failing(t, all, "string 1", "sink_transistor", fault.Swapped)
	near(t, "rail", f.Rails[0].Volts, 2.87, 0.1)
	near(t, "tail", f.Voltages.Tail, 9.5, 0.2)
	near(t, "another string", f.Others[0].Current*1e3, 45, 2)
	near(t, "its own", f.Current*1e3, 47, 4)
	if len(all.Assumed) != 0 {
		t.Errorf("nothing was to be assumed: %v", all.Assumed)
	}
	// With six LEDs its collector stands too low for that.
	six := railTable(true, 0, 6)
	six.Parts = b.Parts
	if f := failing(t, survey(t, six), "string 1", "sink_transistor", fault.Swapped); !(f.Rails[0].Volts < f.Rails[0].Was) {
		t.Errorf("six LEDs: %s", f.Text)
	}
	// Without a rating the breakdown is assumed, and said to be.
	if got := survey(t, railTable(true, 0, 5)).Assumed; len(got) != 1 {
		t.Errorf("assumed %v, want the breakdown of the one transistor", got)
	}
}

func TestARailsOwnFaultsReachEveryString(t *testing.T) {
	all := survey(t, railTable(true, 0, 6))
	for _, r := range []struct {
		name      string
		role      string
		how       fault.How
		rail      float64 // [V]
		tolerance float64 // [V]
		sense     float64 // [V]
		dark      bool
	}{
		{"reference open", "reference", fault.Open, 10.8, 2, 10.0, true}, // no volts are left for the LEDs
		{"reference reversed", "reference", fault.Reversed, 0.07, 0.1, 0, true},
		{"reference shorted", "reference", fault.Shorted, 0, 0.01, 0, true},
		{"follower lost", "follower_transistor", fault.BaseOpen, 0, 0.01, 0, true},
		{"follower's emitter open", "follower_transistor", fault.EmitterOpen, 0, 0.01, 0, true},
	} {
		t.Run(r.name, func(t *testing.T) {
			f := failing(t, all, "rail main", r.role, r.how)
			near(t, "rail", f.Rails[0].Volts, r.rail, r.tolerance)
			if len(f.Others) != 4 || !f.Matters {
				t.Fatalf("want all four strings: %s", f.Text)
			}
			for _, o := range f.Others {
				near(t, "sense", *o.Voltages.Sense, r.sense, r.tolerance)
				if o.Current < 1e-4 != r.dark {
					t.Errorf("string %d carries %.3g A", o.String, o.Current)
				}
			}
		})
	}
	// The follower is gone, the reference is not: that is the tell-tale.
	near(t, "reference with the follower lost", *failing(t, all, "rail main", "follower_transistor", fault.BaseOpen).Rails[0].Reference, 3.3, 0.05)
}
