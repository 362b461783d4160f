package circuit_test

import (
	"math"
	"testing"

	"lanternbook/calc/circuit"
)

// edit is one thing wrong with the sink of these tests, how it is undone, and
// what the meter then reads.
type edit struct {
	name         string
	breaks, mend func(s sink)
	bridged      [2]func(s sink) circuit.Node // ends of the short; nil without
	current      [2]float64                   // [A] of the LEDs, at least and at most
}

func edits() []edit {
	tail := func(s sink) circuit.Node { return s.tail }
	base := func(s sink) circuit.Node { return s.base }
	sense := func(s sink) circuit.Node { return s.sense }
	mendQ := func(s sink) { s.c.MendBJT(s.q) }
	mendP := func(s sink) { s.c.MendBJT(s.p) }
	putLED := func(s sink) { s.c.PutLED(s.leds, 0) }
	cut := func(l circuit.Lead) func(s sink) { return func(s sink) { s.c.CutLead(s.q, l) } }
	bridge := func(a, b circuit.Lead) func(s sink) { return func(s sink) { s.c.BridgeLeads(s.q, a, b) } }
	return []edit{
		{name: "an LED open", breaks: func(s sink) { s.c.TakeLED(s.leds, 0, circuit.MeterOhms) }, mend: putLED, current: [2]float64{0, 3e-6}},
		{name: "an LED shorted", breaks: func(s sink) { s.c.TakeLED(s.leds, 0, circuit.ShortOhms) }, mend: putLED, current: [2]float64{0.0195, 0.0205}},
		{name: "collector lead open", breaks: cut(circuit.Collector), mend: mendQ, current: [2]float64{-1e-9, 1e-9}},
		{name: "base lead open", breaks: cut(circuit.Base), mend: mendQ, current: [2]float64{-1e-9, 1e-9}},
		{name: "emitter lead open", breaks: cut(circuit.Emitter), mend: mendQ, current: [2]float64{-0.004, 1e-9}},
		{name: "collector to emitter", breaks: bridge(circuit.Collector, circuit.Emitter), mend: mendQ, bridged: [2]func(sink) circuit.Node{tail, sense}, current: [2]float64{0.03, 0.09}},
		{name: "base to emitter", breaks: bridge(circuit.Base, circuit.Emitter), mend: mendQ, bridged: [2]func(sink) circuit.Node{base, sense}, current: [2]float64{-1e-9, 1e-9}},
		{name: "collector to base", breaks: bridge(circuit.Collector, circuit.Base), mend: mendQ, bridged: [2]func(sink) circuit.Node{tail, base}, current: [2]float64{0.02, 0.2}},
		{name: "swapped", breaks: func(s sink) { s.c.SwapLeads(s.q) }, mend: mendQ, current: [2]float64{0.0005, 0.012}},
		{name: "follower gone", breaks: func(s sink) { s.c.CutLead(s.p, circuit.Base) }, mend: mendP, current: [2]float64{0.03, 0.09}},
	}
}

// Whatever is wrong, the watts put in come out again, and the circuit is as it
// was once it is mended.
func TestEveryEditSolvesAndIsUndone(t *testing.T) {
	for _, e := range edits() {
		t.Run(e.name, func(t *testing.T) {
			s := newSink(0, 0)
			c := s.c
			c.BreaksDown(s.q, 6)
			if err := c.Solve(); err != nil {
				t.Fatal(err)
			}
			tail, base := c.Voltage(s.tail), c.Voltage(s.base)
			e.breaks(s)
			if err := c.Solve(); err != nil {
				t.Fatal(err)
			}
			current := c.LEDCurrent(s.leds)
			if !(current >= e.current[0] && current <= e.current[1]) {
				t.Errorf("LED current %.4g A, want %.4g to %.4g", current, e.current[0], e.current[1])
			}
			in := c.HeldCurrent(s.feed)*24 + c.HeldCurrent(s.ctl)*2.2
			n := 6.0
			if c.InsteadVoltage(s.leds) != 0 {
				n = 5
			}
			out := current*(n*c.LEDVoltage(s.leds, 0)+c.InsteadVoltage(s.leds)) +
				c.BJTPower(s.q) + c.BJTPower(s.p) + c.ResistorPower(s.pull) + c.ResistorPower(s.rs)
			if e.bridged[0] != nil {
				across := c.Voltage(e.bridged[0](s)) - c.Voltage(e.bridged[1](s))
				out += across * across / circuit.ShortOhms
			}
			near(t, "power out", out, in, 1e-6*math.Abs(in)+1e-9)
			e.mend(s)
			if err := c.Solve(); err != nil {
				t.Fatal(err)
			}
			near(t, "tail once mended", c.Voltage(s.tail), tail, 1e-6)
			near(t, "base once mended", c.Voltage(s.base), base, 1e-6)
		})
	}
}

func TestAnEditedCircuitAllocatesNothingEither(t *testing.T) {
	for _, e := range edits() {
		s := newSink(200, 100)
		e.breaks(s)
		volts := 12.0
		run := func() {
			s.c.Hold(s.feed, volts)
			if err := s.c.Solve(); err != nil {
				t.Fatal(err)
			}
			volts += 0.001
		}
		run()
		if n := testing.AllocsPerRun(50, run); n != 0 {
			t.Errorf("%s: a warm solve allocates %v times, want 0", e.name, n)
		}
	}
}

// With the base at the return and an open emitter's worth of volts behind a
// kilohm, the emitter-base junction holds its breakdown and no more.
func TestAnEmitterBreaksDownInReverse(t *testing.T) {
	c := circuit.New()
	feed, emitter := c.Held("feed", 3), c.Node("emitter")
	r := c.Resistor(feed, emitter, 1000)
	q := c.BJT(circuit.Ground, circuit.Ground, emitter, npn(), false, 0)
	c.BreaksDown(q, 6)
	for _, row := range []struct{ volts, emitter, tolerance float64 }{
		{3, 3, 1e-3},     // below it nothing flows
		{12, 6.17, 0.03}, // 6 mA through 20 ohms and the 10 of the base
		{26, 6.58, 0.03}, // 20 mA
		{-5, -0.75, 0.1}, // forward it is a diode
	} {
		c.Hold(feed, row.volts)
		if err := c.Solve(); err != nil {
			t.Fatal(err)
		}
		near(t, "emitter", c.Voltage(emitter), row.emitter, row.tolerance)
		near(t, "emitter current", -c.BaseCurrent(q)-c.CollectorCurrent(q), c.ResistorCurrent(r), 1e-6)
	}
}

// A reference of one way lets its node fall when more is drawn than comes; the
// other kind would go on holding it.
func TestAReferenceOfOneWayGivesNothing(t *testing.T) {
	c := circuit.New()
	feed, n := c.Held("feed", 12), c.Node("reference")
	c.Resistor(feed, n, 1000)
	k := c.Clamp(n, feed, 3.3, 0, 0)
	c.OneWay(k)
	for _, row := range []struct{ load, volts float64 }{{0.001, 3.3}, {0.0087, 3.3}, {0.0095, 2.5}, {0.012, 0}, {0.0001, 3.3}} {
		c.Draw(n, row.load)
		if err := c.Solve(); err != nil {
			t.Fatal(err)
		}
		near(t, "node", c.Voltage(n), row.volts, 1e-3)
		if c.ClampCurrent(k) < -1e-12 {
			t.Errorf("at %v A the reference gives %v A", row.load, -c.ClampCurrent(k))
		}
	}
}

// A string of one LED that is shorted is its resistor alone, an open one the
// meter's path; either is undone.
func TestTheOnlyLEDIsTakenOut(t *testing.T) {
	c := circuit.New()
	feed, tail := c.Held("feed", 12), c.Node("tail")
	leds := c.LEDs(feed, tail, whites(), []int{1})
	c.Resistor(tail, circuit.Ground, 1000)
	current := func() float64 {
		t.Helper()
		if err := c.Solve(); err != nil {
			t.Fatal(err)
		}
		return c.LEDCurrent(leds)
	}
	sound := current()
	c.TakeLED(leds, 0, circuit.ShortOhms)
	near(t, "shorted", current(), 12/(1000+circuit.ShortOhms), 1e-9)
	c.PutLED(leds, 0)
	near(t, "back", current(), sound, 1e-9)
	c.TakeLED(leds, 0, circuit.MeterOhms)
	near(t, "open", current(), 12/(1000+circuit.MeterOhms), 1e-10)
	near(t, "across the open one", c.InsteadVoltage(leds), 12, 2e-3)
}
