package calc_test

import (
	"testing"

	"lanternbook/calc"
)

// threeStrings is a build as a small shop draws it: three strings of six
// whites on 24 V over 3.5 m of cable, each with its own kind of sink.
func threeStrings() calc.Build {
	ptr := func(v float64) *float64 { return &v }
	white := calc.LED{
		TestCurrent: 0.06, ForwardVoltage: calc.Spread{Min: 2.8, Typ: 2.95, Max: 3.2}, VoltageTempco: -0.0025,
		LuminousFlux: ptr(26), MaxCurrent: ptr(0.09), MaxJunction: ptr(110), RthJunctionAmbient: ptr(150),
		Model: &calc.LEDModel{Is: 5.2e-20, N: 2.55, Rs: 1.9},
	}
	npn := calc.Transistor{
		MaxCollectorEmitterVoltage: ptr(45), MaxCollectorCurrent: ptr(0.1), MaxPower: ptr(0.5), MaxJunction: ptr(150),
		RthJunctionAmbient: ptr(250), HFE: &calc.Spread{Min: 200, Typ: 290, Max: 450}, HFEAt: ptr(0.002),
		VBEOn: &calc.VBEOn{Volts: calc.Spread{Min: 0.58, Typ: 0.66, Max: 0.7}, At: 0.002},
	}
	pnp := npn
	strings := []calc.String{}
	quarter := func(ohms, tolerance float64) calc.Resistor {
		return calc.Resistor{Ohms: ohms, Tolerance: tolerance, Watts: ptr(0.25)}
	}
	stack := []calc.LEDStack{{Part: "white", Quantity: 6}}
	control := calc.Exactly(2.2)
	strings = append(strings,
		calc.String{Label: "A", Quantity: 4, LEDs: stack, FedBy: "r1", Driver: calc.Driver{Kind: calc.KindFollowerSink, FollowerSink: &calc.FollowerSink{
			Control: calc.Control{Volts: &control}, PNP: "pnp", NPN: "npn", Pullup: quarter(6800, 0.05), Sense: quarter(110, 0.01)}}},
		calc.String{Label: "B", Quantity: 4, LEDs: stack, FedBy: "r1", Driver: calc.Driver{Kind: calc.KindTwoTransistor, TwoTransistor: &calc.TwoTransistor{
			Pass: "npn", Sensor: "npn", Bias: quarter(22000, 0.05), Sense: quarter(33, 0.01)}}},
		calc.String{Label: "C", Quantity: 4, LEDs: stack, FedBy: "r1", Driver: calc.Driver{Kind: calc.KindReferenceSink, ReferenceSink: &calc.ReferenceSink{
			Reference: calc.Reference{Volts: calc.Spread{Min: 2.45, Typ: 2.495, Max: 2.54}, Ohms: 1}, NPN: "npn", Bias: quarter(4700, 0.05), Sense: quarter(91, 0.01)}}},
	)
	return calc.Build{
		Format: calc.BuildFormat, Title: "three", Ambient: calc.Spread{Min: 5, Typ: 25, Max: 40},
		Supply:  calc.Supply{Voltage: calc.Spread{Min: 23.5, Typ: 24, Max: 24.5}, MaxCurrent: ptr(2.5)},
		Strings: strings,
		Runs:    []calc.Run{{ID: "r1", From: "supply", Length: 3.5, Conductor: "0.75 mm2"}},
		Parts: map[string]calc.Part{
			"white": {Type: calc.TypeLED, LED: &white}, "npn": {Type: calc.TypeNPN, Transistor: &npn}, "pnp": {Type: calc.TypePNP, Transistor: &pnp},
		},
	}
}

func BenchmarkCheckThreeStrings(b *testing.B) {
	build := threeStrings()
	r, err := calc.Check(build)
	if err != nil {
		b.Fatal(err)
	}
	for _, f := range r.Findings {
		if f.Severity == calc.Fail {
			b.Fatalf("the build should pass: %+v", f)
		}
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := calc.Check(build); err != nil {
			b.Fatal(err)
		}
	}
}
