package circuit_test

import (
	"testing"

	"lanternbook/calc/circuit"
	"lanternbook/calc/device"
)

func near(t *testing.T, name string, got, want, tol float64) {
	t.Helper()
	d := got - want
	if !(d <= tol && d >= -tol) {
		t.Errorf("%s = %.9g, want %.9g (± %.3g)", name, got, want, tol)
	}
}

// whites is six small white LEDs, as in the sweep everybody waits for.
func whites() []device.LED {
	return []device.LED{{Is: 8e-21, N: 2.55, Rs: 4, Tempco: -0.0025}}
}

func npn() device.BJT {
	b := device.BJTDefaults()
	b.Is, b.Bf, b.Vaf, b.Ikf, b.Ise, b.Ne, b.Br, b.Rc, b.Rb, b.Xtb = 6.734e-15, 416.4, 74.03, 0.06678, 6.734e-15, 1.259, 0.7371, 1, 10, 1.5
	b.Rbm = b.Rb
	return b
}

func pnp() device.BJT {
	b := device.BJTDefaults()
	b.Is, b.Bf, b.Vaf, b.Ikf, b.Br, b.Rc, b.Rb, b.Xtb = 1.41e-15, 180.7, 18.7, 0.08, 4.977, 2.5, 10, 1.5
	b.Rbm = b.Rb
	return b
}

type sink struct {
	c                            *circuit.Circuit
	feed, tail, base, sense, ctl circuit.Node
	leds                         circuit.LEDsID
	q, p                         circuit.BJTID
	pull, rs                     circuit.ResistorID
}

func newSink(rth, rthLED float64) sink {
	c := circuit.New()
	s := sink{c: c, feed: c.Held("feed", 24), ctl: c.Held("control", 2.2), tail: c.Node("tail"), base: c.Node("base"), sense: c.Node("sense")}
	leds := whites()
	leds[0].Rth = rthLED
	s.leds = c.LEDs(s.feed, s.tail, leds, []int{6})
	s.q = c.BJT(s.tail, s.base, s.sense, npn(), false, rth)
	s.p = c.BJT(circuit.Ground, s.ctl, s.base, pnp(), true, rth)
	s.pull = c.Resistor(s.feed, s.base, 6800)
	s.rs = c.Resistor(s.sense, circuit.Ground, 110)
	c.Guess(s.base, 2.8)
	c.Guess(s.sense, 2.1)
	c.Guess(s.tail, 8)
	return s
}

func TestPowerInIsPowerOut(t *testing.T) {
	for _, rth := range []float64{0, 200} {
		s := newSink(rth, rth)
		c := s.c
		for _, volts := range []float64{24, 19, 14, 8, 3, 0.5} {
			c.Hold(s.feed, volts)
			if err := c.Solve(); err != nil {
				t.Fatalf("at %v V: %v", volts, err)
			}
			in := c.HeldCurrent(s.feed)*volts + c.HeldCurrent(s.ctl)*2.2
			led := 6 * c.LEDVoltage(s.leds, 0) * c.LEDCurrent(s.leds)
			out := led + c.BJTPower(s.q) + c.BJTPower(s.p) + c.ResistorPower(s.pull) + c.ResistorPower(s.rs)
			near(t, "power out", out, in, 1e-7*in+1e-10)
			if rth > 0 {
				near(t, "junction", c.BJTJunction(s.q), 25+rth*c.BJTPower(s.q), 1e-4)
				near(t, "LED junction", c.LEDJunction(s.leds, 0), 25+rth*c.LEDVoltage(s.leds, 0)*c.LEDCurrent(s.leds), 1e-4)
			}
		}
	}
}

func TestSlopeIsTheDifferenceQuotient(t *testing.T) {
	s := newSink(100, 50)
	c := s.c
	for _, volts := range []float64{24, 18, 12} {
		const h = 1e-3
		var current [3]float64
		var slope float64
		for i, d := range []float64{-h, h, 0} {
			c.Hold(s.feed, volts+d)
			if err := c.Solve(); err != nil {
				t.Fatal(err)
			}
			current[i] = c.HeldCurrent(s.feed)
			slope = c.HeldSlope(s.feed)
		}
		want := (current[1] - current[0]) / (2 * h)
		near(t, "slope", slope, want, 1e-4*want+1e-9)
	}
}

func TestNothingIsAllocatedAfterTheFirstSolve(t *testing.T) {
	s := newSink(200, 100)
	volts := 24.0
	run := func() {
		s.c.Hold(s.feed, volts)
		if err := s.c.Solve(); err != nil {
			t.Fatal(err)
		}
		volts -= 0.01
	}
	run()
	if n := testing.AllocsPerRun(100, run); n != 0 {
		t.Errorf("a warm solve allocates %v times, want 0", n)
	}
}

func BenchmarkWarmSweep(b *testing.B) {
	for _, rth := range []float64{0, 200} {
		name := "isothermal"
		if rth > 0 {
			name = "heat"
		}
		b.Run(name, func(b *testing.B) {
			s := newSink(rth, rth)
			points := 0
			for b.Loop() {
				for i := range 4001 {
					s.c.Hold(s.feed, 24-float64(i)*0.003)
					if err := s.c.Solve(); err != nil {
						b.Fatal(err)
					}
				}
				points += 4001
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(points), "ns/point")
		})
	}
}
