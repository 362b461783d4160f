package calc_test

import (
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/fault"
)

// The benches of the fault tables: their white LED, fitted to the table's
// voltages at 9, 60 and 270 mA, and its one kind of transistor, with the
// 0.656 V at 4.6 mA, the gain of 200 and the reverse gain of 6 that the tables
// show. Nothing warms up. Values: common practice, no source.
func tableParts() map[string]calc.Part {
	return map[string]calc.Part{
		"white": {Type: calc.TypeLED, LED: &calc.LED{
			TestCurrent: 0.06, ForwardVoltage: calc.Exactly(2.95), MaxCurrent: new(0.09),
			Model: &calc.LEDModel{Is: 5.6e-26, N: 1.98, Rs: 2.25},
		}},
		"small white": {Type: calc.TypeLED, LED: &calc.LED{
			TestCurrent: 0.02, ForwardVoltage: calc.Exactly(3), MaxCurrent: new(0.03),
			Model: &calc.LEDModel{Is: 1.85e-23, N: 2.285, Rs: 7.88},
		}},
		"npn": {Type: calc.TypeNPN, Transistor: &calc.Transistor{
			MaxCollectorEmitterVoltage: new(45.0), MaxCollectorCurrent: new(0.5), MaxPower: new(0.6), MaxJunction: new(150.0),
			HFE:   &calc.Spread{Min: 200, Typ: 200, Max: 200},
			Model: &calc.GummelPoon{Is: new(4.45e-14), Bf: new(200.0), Br: new(6.0)},
		}},
	}
}

func tableBuild(volts float64, strings ...calc.String) calc.Build {
	return calc.Build{
		Format: calc.BuildFormat, Title: "fault table", Ambient: calc.Exactly(27),
		Supply: calc.Supply{Voltage: calc.Exactly(volts)}, Strings: strings, Parts: tableParts(),
	}
}

func quarterWatt(ohms float64) calc.Resistor { return calc.Resistor{Ohms: ohms, Watts: new(0.25)} }

// seriesTable is three whites and a resistor on 12 V, 20 mA.
func seriesTable(volts float64) calc.Build {
	return tableBuild(volts, calc.String{
		Label: "1", Quantity: 1, LEDs: []calc.LEDStack{{Part: "small white", Quantity: 3}},
		Driver: calc.Driver{Kind: calc.KindResistor, Resistor: &calc.ResistorDriver{Resistor: quarterWatt(150)}},
	})
}

// limiterTable is six whites and a two-transistor sink on 24 V, 60 mA.
func limiterTable() calc.Build {
	return tableBuild(24, calc.String{
		Label: "1", Quantity: 1, LEDs: []calc.LEDStack{{Part: "white", Quantity: 6}},
		Driver: calc.Driver{Kind: calc.KindTwoTransistor, TwoTransistor: &calc.TwoTransistor{
			Pass: "npn", Sensor: "npn", Bias: quarterWatt(4700), Sense: quarterWatt(11),
		}},
	})
}

// railTable is four strings of six on a rail, 24 V, 42 mA: a 3.3 V reference,
// with or without a follower, and with or without a resistor in each base.
func railTable(buffered bool, baseOhms float64, leds int) calc.Build {
	b := tableBuild(24)
	b.Rails = []calc.Rail{{ID: "main", Kind: "reference", Reference: &calc.Reference{Volts: calc.Exactly(3.3), Ohms: 1}, Bias: &calc.Resistor{Ohms: 2200, Watts: new(0.5)}}}
	if buffered {
		r := &b.Rails[0]
		pulldown := quarterWatt(3300)
		r.Kind, r.NPN, r.Pulldown = "buffered-reference", "npn", &pulldown
	}
	for _, label := range []string{"1", "2", "3", "4"} {
		sink := &calc.RailSink{Rail: "main", NPN: "npn", Sense: quarterWatt(47)}
		if baseOhms > 0 {
			sink.BaseResistor = &baseOhms
		}
		b.Strings = append(b.Strings, calc.String{
			Label: label, Quantity: 1, LEDs: []calc.LEDStack{{Part: "white", Quantity: leds}},
			Driver: calc.Driver{Kind: calc.KindRailSink, RailSink: sink},
		})
	}
	return b
}

// survey fails the test where the build cannot be surveyed.
func survey(tb testing.TB, b calc.Build) calc.Failures {
	tb.Helper()
	f, err := calc.Survey(b, nil)
	if err != nil {
		tb.Fatal(err)
	}
	return f
}

// failing returns the failure of a part of a place.
func failing(tb testing.TB, all calc.Failures, where, role string, how fault.How) calc.Failure {
	tb.Helper()
	for _, f := range all.All {
		if f.Where == where && f.Role == role && f.How == how {
			return f
		}
	}
	tb.Fatalf("no failure of the %s of %s: %s", role, where, how)
	return calc.Failure{}
}
