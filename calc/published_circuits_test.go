package calc_test

import (
	"math"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/circuit"
	"lanternbook/calc/device"
	"lanternbook/calc/driver"
	"lanternbook/calc/wiring"
)

// The books' circuits, solved by the program's own solver with parts that are
// idealised as the books idealise them.

// bookAir is the air in °C in which idealLED stands at its fixed voltage.
const bookAir = device.RatedC + 100

// idealLED is an LED of a fixed forward voltage at any current: a tempco that
// makes the volts and next to no exponential, within 0.1 mV up to 1 A.
func idealLED(volts float64) device.LED {
	return device.LED{Is: 1e-3, N: 5e-4, Tempco: volts / (bookAir - device.RatedC)}
}

// idealNPN is a transistor with a given base-emitter voltage at a collector
// current and a constant gain, without resistances or Early effect, in the
// 25 °C air of a new circuit.
func idealNPN(vbe, current, gain float64) device.BJT {
	q := device.BJTDefaults()
	q.Xti, q.Eg = 0, 1e-12 // is does not move from 27 °C to the air's 25 °C
	q.Is = current / math.Expm1(vbe/device.ThermalVoltage(device.RatedC))
	q.Bf = gain
	return q
}

func seriesNet(t *testing.T, supply, ohms float64, leds ...device.LED) *driver.Assembly {
	t.Helper()
	var stack []driver.LED
	for _, led := range leds {
		stack = append(stack, driver.LED{Part: "book", Count: 1, Model: led})
	}
	a := driver.Series(stack, driver.Resistance{Ohms: ohms})
	a.Start(supply)
	a.Net.Hold(a.Feed, supply)
	a.Net.SetAir(bookAir)
	solve(t, a.Net)
	return a
}

func seriesCurrent(t *testing.T, supply, forward, ohms float64) float64 {
	t.Helper()
	a := seriesNet(t, supply, ohms, idealLED(forward))
	return a.Net.LEDCurrent(a.Stack)
}

// seriesPower is the power of an LED in a string with other fixed drops.
func seriesPower(t *testing.T, supply, others, forward, ohms float64) float64 {
	t.Helper()
	a := seriesNet(t, supply, ohms, idealLED(others), idealLED(forward))
	return a.Power(a.Devices[1])
}

func solve(t *testing.T, c *circuit.Circuit) {
	t.Helper()
	if err := c.Solve(); err != nil {
		t.Fatal(err)
	}
}

// ledSpread is a forward voltage's window in volts.
type ledSpread struct{ min, max float64 }

// checkedSeries checks a whole build of one LED with a series resistor. The
// LED is steep: 1 mV for 4 % more current.
func checkedSeries(t *testing.T, supply float64, v ledSpread, ohms, tolerance float64) calc.StringReport {
	t.Helper()
	typ := (v.min + v.max) / 2
	current := (supply - typ) / ohms
	model := calc.LEDModel{N: 1}
	model.Is = current / math.Expm1(typ/(model.N*device.ThermalVoltage(device.RatedC)))
	if typ == 0 {
		model.Is = 1e6 * current // a piece of wire
	}
	led := calc.LED{TestCurrent: current, ForwardVoltage: calc.Spread{Min: v.min, Typ: typ, Max: v.max}, Model: &model}
	r, err := calc.Check(calc.Build{
		Ambient: calc.Exactly(device.RatedC), Supply: calc.Supply{Voltage: calc.Exactly(supply)},
		Strings: []calc.String{{
			Label: "A", Quantity: 1, LEDs: []calc.LEDStack{{Part: "book", Quantity: 1}},
			Driver: calc.Driver{Kind: calc.KindResistor, Resistor: &calc.ResistorDriver{
				Kind: calc.KindResistor, Resistor: calc.Resistor{Ohms: ohms, Tolerance: tolerance},
			}},
		}},
		Parts: map[string]calc.Part{"book": {Type: calc.TypeLED, LED: &led}},
	})
	if err != nil {
		t.Fatal(err)
	}
	return r.Strings[0]
}

// sunkPoint is a sink at work.
type sunkPoint struct{ current, across float64 } // [A], [V] collector to emitter

// solvedSink is malvino's ex. 7-9: 15 V, base at 5 V, 2 kΩ above the
// collector, 1 kΩ below the emitter, VBE 0.7 V. The collector resistor stands
// for the LEDs.
func solvedSink(t *testing.T) sunkPoint {
	t.Helper()
	above := device.LED{Is: 1, N: 1e-3, Rs: 2000}
	a := driver.ReferenceSink([]driver.LED{{Part: "book", Count: 1, Model: above}}, driver.Fixed{
		Reference: driver.Reference{Volts: driver.Range{Min: 5, Typ: 5, Max: 5}},
		Bias:      ohms(10e3), NPN: only(idealNPN(0.7, 4.3e-3, 1e9)), Sense: ohms(1000),
	})
	a.Start(15)
	a.Net.Hold(a.Feed, 15)
	solve(t, a.Net)
	return sunkPoint{a.Net.LEDCurrent(a.Stack), a.Net.Voltage(a.Tail) - a.Net.Voltage(a.Sense)}
}

// dividerSink is malvino's ex. 8-1 and 8-3: 10 V, base on 10 kΩ and 2.2 kΩ,
// 3.6 kΩ above the collector, 1 kΩ below the emitter, VBE 0.7 V.
func dividerSink(t *testing.T, gain float64) sunkPoint {
	t.Helper()
	c := circuit.New()
	supply, base, collector, emitter := c.Held("supply", 10), c.Node("base"), c.Node("collector"), c.Node("emitter")
	c.Guess(base, 1.8)
	c.Guess(emitter, 1.1)
	c.Guess(collector, 6)
	c.Resistor(supply, base, 10e3)
	c.Resistor(base, circuit.Ground, 2.2e3)
	c.Resistor(supply, collector, 3.6e3)
	c.Resistor(emitter, circuit.Ground, 1e3)
	q := c.BJT(collector, base, emitter, idealNPN(0.7, 1.1033e-3, gain), false, 0)
	solve(t, c)
	near(t, "the resistor that gives this current", driver.SenseResistance(c.Voltage(emitter), c.CollectorCurrent(q), gain), 1e3, 0.1)
	return sunkPoint{c.CollectorCurrent(q), c.Voltage(collector) - c.Voltage(emitter)}
}

// limiterCurrent solves a two-transistor limiter whose sensing transistor has
// a given VBE at the 1 mA that its bias resistor brings.
func limiterCurrent(t *testing.T, vbe, senseOhms float64) float64 {
	t.Helper()
	const feed, passVBE, bias = 24, 0.7, 1e-3
	design := driver.LimitCurrent(vbe, senseOhms)
	a := driver.TwoTransistor([]driver.LED{{Part: "book", Count: 1, Model: device.LED{Is: 1, N: 1e-3}}}, driver.Limiter{
		Pass: only(idealNPN(passVBE, design, 1e6)), Sensor: only(idealNPN(vbe, bias, 1e6)),
		Bias: ohms((feed - vbe - passVBE) / bias), Sense: ohms(senseOhms),
	})
	a.Start(feed)
	a.Net.Hold(a.Feed, feed)
	solve(t, a.Net)
	near(t, "design current against the solved one", a.Net.LEDCurrent(a.Stack), design, 1e-4*design)
	return a.Net.LEDCurrent(a.Stack)
}

// mirrorResistance is tomar's ex. 1.2: the resistor that makes a mirror of two
// transistors with a gain of 100 give 1 mA from 30 V, found by halving.
func mirrorResistance(t *testing.T) float64 {
	t.Helper()
	q := idealNPN(0.7, 1e-3, 100)
	low, high := 10e3, 100e3
	for high-low > 1e-3 {
		c := circuit.New()
		supply, base := c.Held("supply", 30), c.Node("base")
		c.Guess(base, 0.7)
		c.Resistor(supply, base, (low+high)/2)
		c.BJT(base, base, circuit.Ground, q, false, 0)
		out := c.BJT(supply, base, circuit.Ground, q, false, 0)
		solve(t, c)
		if c.CollectorCurrent(out) > 1e-3 {
			low = (low + high) / 2
		} else {
			high = (low + high) / 2
		}
	}
	return low
}

// feeder is a cable with loads along it, fed at one end.
type feeder struct {
	metres   int
	perMetre float64         // [A/m] taken all along
	ohms     float64         // [Ω/m] as the book counts its wires
	taps     map[int]float64 // [A] at a distance in metres
}

// mixedFeeder is theraja's ex. 40.9.
var mixedFeeder = feeder{metres: 500, perMetre: 0.1, ohms: 0.0005, taps: map[int]float64{100: 40, 150: 20, 300: 60, 400: 30}}

// drop returns the volts lost from the feeding end to a distance in metres.
// The load all along is taken off in the middle of every metre.
func (f feeder) drop(at int) float64 {
	var tree wiring.Tree
	var loads []wiring.Load
	for m := range f.metres {
		tree.Parent = append(tree.Parent, 2*m-1, 2*m)
		tree.Ohms = append(tree.Ohms, f.ohms/2, f.ohms/2)
		loads = append(loads, wiring.Load{At: 2 * m, Current: f.perMetre}, wiring.Load{At: 2*m + 1, Current: f.taps[m+1]})
	}
	var r wiring.Result
	tree.Solve(0, loads, &r)
	return -r.Volts[2*at-1]
}

// batteryVolts is what is left at a battery's poles under a load.
func batteryVolts(volts, inner, current float64) float64 {
	tree := wiring.Tree{Source: inner}
	var r wiring.Result
	tree.Solve(volts, []wiring.Load{{At: -1, Current: current}}, &r)
	return r.Supply
}

// celsiusIn reads "thermal voltage at 27 C".
func celsiusIn(t *testing.T, name string) (float64, bool) {
	t.Helper()
	text, ok := strings.CutPrefix(name, "thermal voltage at ")
	if !ok {
		return 0, false
	}
	text, ok = strings.CutSuffix(text, " C")
	if !ok {
		return 0, false
	}
	return number(t, text), true
}
