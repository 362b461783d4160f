package calc_test

import (
	"fmt"
	"maps"
	"testing"

	"lanternbook/calc"
)

//go:fix inline
func ptr(v float64) *float64 { return new(v) }

// plainLED is an LED of nearly constant forward voltage, as textbooks have it.
func plainLED(volts float64) calc.Part {
	return calc.Part{Type: calc.TypeLED, LED: &calc.LED{
		TestCurrent: 0.02, ForwardVoltage: calc.Exactly(volts), MaxCurrent: ptr(2), RthJunctionAmbient: ptr(0), MaxJunction: ptr(125),
		Model: &calc.LEDModel{Is: 1e-100, N: volts / 0.0257 / 226},
	}}
}

func onSupply(volts float64, d calc.Driver, led calc.Part, parts map[string]calc.Part) calc.Build {
	b := calc.Build{
		Format: calc.BuildFormat, Title: "one string", Ambient: calc.Exactly(25),
		Supply:  calc.Supply{Voltage: calc.Exactly(volts), MaxCurrent: ptr(5)},
		Strings: []calc.String{{Label: "A", Quantity: 1, LEDs: []calc.LEDStack{{Part: "led", Quantity: 1}}, Driver: d}},
		Parts:   map[string]calc.Part{"led": led},
	}
	maps.Copy(b.Parts, parts)
	return b
}

func finding(t *testing.T, r calc.Report, code string) calc.Finding {
	t.Helper()
	for _, f := range r.Findings {
		if f.Code == code {
			return f
		}
	}
	t.Fatalf("no finding %q", code)
	return calc.Finding{}
}

func lm317(adjust float64) calc.Part {
	return calc.Part{Type: calc.TypeRegulator, Regulator: &calc.Regulator{
		ReferenceVoltage: &calc.Spread{Min: 1.2, Typ: 1.25, Max: 1.3}, AdjustmentCurrent: &calc.Spread{Min: adjust, Typ: adjust, Max: adjust},
		Dropout: [][2]float64{{0, 2}}, LeastLoad: new(0.01), MaxInputOutput: ptr(40), MaxCurrent: new(1.5),
		MaxPower: ptr(2), MaxJunction: ptr(125), RthJunctionAmbient: ptr(50),
	}}
}

type regulatorCase struct {
	source  string
	ohms    float64
	current float64 // [A]
	tol     float64
	power   float64 // [W] in the set resistor; 0 is not asked
}

// Current sources of an adjustable regulator, its adjustment current neglected
// as the books do. Read in notebooks that work the books' examples.
func TestRegulatorSources(t *testing.T) {
	for _, c := range []regulatorCase{
		{"Franco, Design with Operational Amplifiers, 3rd ed., ex. 11.13: 1 A of 1.25 Ω, 1.25 W", 1.25, 1, 0.005, 1.25},
		{"Monk, Hacking Electronics (2013), p. 63: 266 mA of 4.7 Ω, 0.33 W", 4.7, 0.266, 0.0005, 0.33},
	} {
		b := onSupply(15, calc.Driver{Kind: calc.KindRegulator, Regulator: &calc.RegulatorDriver{Regulator: "reg", Set: calc.Resistor{Ohms: c.ohms, Watts: ptr(5)}}},
			plainLED(3), map[string]calc.Part{"reg": lm317(0)})
		s := check(t, b).Strings[0]
		near(t, c.source, s.Current.Typ, c.current, c.tol)
		near(t, c.source+", power", s.Devices[2].Power.Typ, c.power, 0.005)
		// What the regulator burns is what the LED and the set resistor leave.
		want := s.Current.Typ*(15-s.LEDVoltage.Typ) - s.Devices[2].Power.Typ
		near(t, "power in the regulator", s.Devices[1].Power.Typ, want, 1e-6)
		near(t, "its junction", s.Devices[1].Junction.Typ, 25+50*want, 1e-4)
		// Franco, the same example: 15 V less a dropout of 2 V and 1.25 V leave
		// 11.75 V for the load.
		near(t, "left over", s.Headroom.Typ, 15-s.LEDVoltage.Typ-3.25, 0.02)
	}
}

func TestRegulatorBelowItsDropout(t *testing.T) {
	d := calc.Driver{Kind: calc.KindRegulator, Regulator: &calc.RegulatorDriver{Regulator: "reg", Set: calc.Resistor{Ohms: 12, Watts: ptr(1)}}}
	build := func(volts float64) calc.Build {
		return onSupply(volts, d, plainLED(9), map[string]calc.Part{"reg": lm317(50e-6)})
	}
	r := check(t, build(11.8))
	s := r.Strings[0]
	if s.Regulates || s.Headroom.Typ >= 0 {
		t.Errorf("11.8 V on 9 V of LEDs, 2 V of dropout and 1.25 V: headroom %v", s.Headroom)
	}
	// 11.8 − 9 − 2 V leave about 0.8 V across 12 Ω.
	near(t, "current", s.Current.Typ, (11.8-s.LEDVoltage.Typ-2)/12+50e-6, 1e-6)
	if f := finding(t, r, "headroom"); f.Severity != calc.Fail {
		t.Errorf("headroom is %s", f.Severity)
	}
	if s := check(t, build(1)).Strings[0]; !(s.Current.Typ >= 0 && s.Current.Typ < 1e-6) {
		t.Errorf("1 V drives %v A", s.Current.Typ)
	}
	small := d
	small.Regulator = &calc.RegulatorDriver{Regulator: "reg", Set: calc.Resistor{Ohms: 250, Watts: ptr(1)}}
	if f := finding(t, check(t, onSupply(24, small, plainLED(9), map[string]calc.Part{"reg": lm317(50e-6)})), "least-load"); f.Severity != calc.Fail {
		t.Errorf("5 mA through a regulator that needs 10 mA: %s", f.Severity)
	}
}

func opampBuild(volts, control, ohms float64) calc.Build {
	return onSupply(volts, calc.Driver{Kind: calc.KindOpampSink, OpampSink: &calc.OpampSink{
		Control: calc.Control{Volts: &calc.Spread{Min: control, Typ: control, Max: control}}, Opamp: "amp", FET: "fet",
		Sense: calc.Resistor{Ohms: ohms, Tolerance: 0.01, Watts: ptr(1)},
	}}, plainLED(3), map[string]calc.Part{
		"amp": {Type: calc.TypeOpamp, Opamp: &calc.Opamp{OffsetVoltage: new(0.003), InputLow: ptr(0), InputHigh: new(1.5), OutputLow: new(0.02), OutputHigh: new(1.5), SupplyCurrent: new(0.0007)}},
		"fet": {Type: calc.TypeNMOS, MOSFET: &calc.MOSFET{
			MaxDrainSourceVoltage: ptr(60), MaxDrainCurrent: new(0.2), MaxPower: new(0.35), MaxJunction: ptr(150), RthJunctionAmbient: ptr(357),
			GateThreshold: &calc.Spread{Min: 0.8, Typ: 2.1, Max: 3}, OnResistance: ptr(5), OnResistanceAt: ptr(10),
		}},
	})
}

// Franco, ex. 11.7 p. 517 (read in a notebook): a reference of 2.5 V on 25 Ω
// is 100 mA. Ex. 11.6 p. 515: 5.0 V on 500 Ω is 10 mA.
func TestOpampSources(t *testing.T) {
	s := check(t, opampBuild(15, 2.5, 25)).Strings[0]
	near(t, "current of 2.5 V on 25 Ω", s.Current.Typ, 0.1, 0.00005)
	near(t, "sense", *s.Voltages.Sense, 2.5, 1e-6)
	near(t, "highest by offset and tolerance", s.Current.Max, 2.503/(25*0.99), 1e-6)
	near(t, "current of 5 V on 500 Ω", check(t, opampBuild(15, 5, 500)).Strings[0].Current.Typ, 0.01, 0.000005)
	fet := s.Devices[1]
	near(t, "heat in the MOSFET", fet.Power.Typ, 0.1*(15-s.LEDVoltage.Typ-2.5), 1e-5)
}

func TestOpampRunsOutOfGate(t *testing.T) {
	// 7 V less 1.5 V of output swing leave 5.5 V for a gate that needs the
	// sense voltage of 2.5 V and, at worst, 3 V of threshold besides.
	r := check(t, opampBuild(7, 2.5, 25))
	if f := finding(t, r, "gate-drive"); f.Severity != calc.Fail {
		t.Errorf("gate-drive is %s: %s", f.Severity, f.Message)
	}
	if f := finding(t, check(t, opampBuild(15, 2.5, 25)), "gate-drive"); f.Severity != calc.Pass {
		t.Errorf("gate-drive on 15 V is %s: %s", f.Severity, f.Message)
	}
	s := r.Strings[0]
	if !(s.Current.Min < 0.99*s.Current.Typ) {
		t.Errorf("current %v, want less than 99 %% of typical with the highest threshold", s.Current)
	}
	// 0.5 V cannot light anything, and must not be mistaken for anything else.
	if s := check(t, opampBuild(0.5, 2.5, 25)).Strings[0]; !(s.Current.Typ < 1e-6) {
		t.Errorf("0.5 V drives %v A", s.Current.Typ)
	}
}

func TestModules(t *testing.T) {
	linear := calc.Part{Type: calc.TypeModule, Module: &calc.Module{
		Current: &calc.Spread{Min: 0.019, Typ: 0.02, Max: 0.021}, Dropout: new(1.4),
		InputVoltage: &calc.Spread{Min: 5, Typ: 24, Max: 30}, OutputVoltage: &calc.Spread{Min: 2, Typ: 9, Max: 25}, MaxPower: new(0.3),
	}}
	switching := calc.Part{Type: calc.TypeModule, Module: &calc.Module{
		Current: &calc.Spread{Min: 0.33, Typ: 0.35, Max: 0.37}, Dropout: ptr(1), Switching: true, Efficiency: new(0.9),
		InputVoltage: &calc.Spread{Min: 5, Typ: 24, Max: 30}, OutputVoltage: &calc.Spread{Min: 2, Typ: 9, Max: 25}, MaxPower: ptr(2),
	}}
	d := calc.Driver{Kind: calc.KindModule, ModuleInstance: &calc.ModuleDriver{Module: "module"}}
	r := check(t, onSupply(12, d, plainLED(9), map[string]calc.Part{"module": linear}))
	s := r.Strings[0]
	near(t, "current", s.Current.Typ, 0.02, 1e-7)
	near(t, "least", s.Current.Min, 0.019, 1e-7)
	near(t, "heat", s.Devices[1].Power.Typ, 0.02*(12-s.LEDVoltage.Typ), 1e-7)
	near(t, "left over", s.Headroom.Typ, 12-s.LEDVoltage.Typ-1.4, 0.03)
	if short := check(t, onSupply(10, d, plainLED(9), map[string]calc.Part{"module": linear})).Strings[0]; short.Regulates {
		t.Errorf("10 V on 9 V and a dropout of 1.4 V regulates: %v", short.Headroom)
	}
	if f := finding(t, check(t, onSupply(34, d, plainLED(9), map[string]calc.Part{"module": linear})), "module-input"); f.Severity != calc.Fail {
		t.Errorf("34 V into a window up to 30 V: %s", f.Severity)
	}

	r = check(t, onSupply(24, d, plainLED(9), map[string]calc.Part{"module": switching}))
	s = r.Strings[0]
	led := 0.35 * s.LEDVoltage.Typ
	near(t, "input power", r.Supply.Power.Typ, led/0.9, 1e-4)
	near(t, "efficiency", r.Supply.Efficiency, 0.9, 1e-5)
	near(t, "heat", s.Devices[1].Power.Typ, led/0.9-led, 1e-4)
}

func TestPartsWithoutWhatTheyNeedAreNamed(t *testing.T) {
	b := opampBuild(15, 2.5, 25)
	b.Parts["fet"].MOSFET.GateThreshold = nil
	_, err := calc.Check(b)
	if want := "/parts/fet"; err == nil || fmt.Sprint(err)[:len(want)] != want {
		t.Errorf("error %v, want one at %s", err, want)
	}
	b = opampBuild(15, 2.5, 25)
	b.Parts["amp"].Opamp.OffsetVoltage = nil
	f := finding(t, check(t, b), "part-data")
	if f.Severity != calc.Unknown {
		t.Errorf("an assumed offset is %s", f.Severity)
	}
}
