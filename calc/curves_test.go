package calc_test

import (
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/device"
)

// collectorAt is the simulator's collector voltage [V] by card: that of the
// datasheet's own gain figures.
var collectorAt = map[string]float64{"Q3904F": 1, "Q3906F": 1, "Q337P": 1, "Q327P": 1, "Q139F": 2, "Q547P": 5, "Q557P": 5, "Q2222F": 10}

func TestVBECurveAgreesWithTheSimulator(t *testing.T) {
	published := cards(t)
	tried := 0
	for _, point := range sinkPoints(t, "vbe") {
		if point.celsius != device.RatedC {
			continue
		}
		name := strings.Split(point.name, "_")[1]
		card := published[name]
		part := calc.Transistor{Model: &calc.GummelPoon{
			Is: &card.Is, Bf: &card.Bf, Nf: &card.Nf, Vaf: &card.Vaf, Ikf: &card.Ikf, Ise: &card.Ise, Ne: &card.Ne,
			Br: &card.Br, Nr: &card.Nr, Var: &card.Var, Ikr: &card.Ikr, Isc: &card.Isc, Nc: &card.Nc,
			Rb: &card.Rb, Rbm: &card.Rbm, Irb: &card.Irb, Re: &card.Re, Rc: &card.Rc, Xti: &card.Xti, Xtb: &card.Xtb, Eg: &card.Eg,
		}}
		got, assumed := calc.VBECurve(part, []float64{point.values["IC"] * 1e-3}, collectorAt[name])
		near(t, point.name, got[0], point.values["VBE"], 1e-5)
		if len(assumed) > 0 {
			t.Errorf("%s: assumed %v with a model", point.name, assumed)
		}
		tried++
	}
	if tried < 10 {
		t.Errorf("only %d transistors tried", tried)
	}
}

func TestVBECurveOfWorkingFigures(t *testing.T) {
	at := 2e-3
	part := calc.Transistor{
		VBEOn: &calc.VBEOn{Volts: calc.Spread{Min: 0.58, Typ: 0.66, Max: 0.7}, At: at},
		HFE:   &calc.Spread{Min: 200, Typ: 290, Max: 450},
	}
	got, assumed := calc.VBECurve(part, []float64{at}, 5)
	near(t, "VBE where the datasheet gives it", got[0], 0.66, 1e-6)
	if len(assumed) > 0 {
		t.Errorf("assumed %v", assumed)
	}
	if _, assumed = calc.VBECurve(calc.Transistor{}, []float64{at}, 5); len(assumed) != 2 || !strings.HasPrefix(assumed[0], "VBE") {
		t.Errorf("of nothing at all it assumed %q, want VBE and hFE", assumed)
	}
}

func TestLEDCurve(t *testing.T) {
	part := calc.LED{TestCurrent: 0.06, ForwardVoltage: calc.Spread{Min: 2.8, Typ: 2.95, Max: 3.2}}
	got, assumed := calc.LEDCurve(part, []float64{0.06})
	near(t, "the voltage that the datasheet gives", got[0], 2.95, 1e-9)
	if assumed == "" {
		t.Error("a single figure has no slope, but nothing was assumed")
	}

	// V = n·VT·ln(1 + I/is) + I·rs by hand: 2·25.6926 mV·ln(0.06/8.525e-26) + 0.06·2.14.
	// Source: definition; VT(25 °C) = 25.692579 mV, testdata/published/constants.csv.
	part.Model = &calc.LEDModel{Is: 8.525e-26, N: 2, Rs: 2.14}
	got, assumed = calc.LEDCurve(part, []float64{0, 0.06})
	near(t, "the model without current", got[0], 0, 1e-12)
	near(t, "the model at the test current", got[1], 2.95000, 1e-5)
	if assumed != "" {
		t.Errorf("assumed %q with a model", assumed)
	}
}
