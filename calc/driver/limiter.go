package driver

import "lanternbook/calc/circuit"

// Limiter is a pass transistor whose base drive a second one steals.
type Limiter struct {
	Pass   Transistor
	Sensor Transistor
	Bias   Resistance
	Sense  Resistance
}

// TwoTransistor wires LEDs with a pass transistor whose base drive, fed by the
// bias resistor, the sensing transistor steals when the voltage across the
// sense resistor reaches its VBE.
func TwoTransistor(leds []LED, l Limiter) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.Base, a.Sense = c.Node("base"), c.Node("sense")
	a.Holder = a.transistor("sink_transistor", a.Tail, a.Base, a.Sense, l.Pass, false)
	a.transistor("sensor_transistor", a.Base, a.Sense, circuit.Ground, l.Sensor, false)
	a.SenseAt = a.resistor("sense_resistor", a.Sense, circuit.Ground, l.Sense)
	a.resistor("bias_resistor", a.Feed, a.Base, l.Bias)
	a.Edge = a.atBase
	a.start = func(feed float64) {
		c.Guess(a.Base, min(1.3, feed))
		c.Guess(a.Sense, min(0.65, feed/2))
		c.Guess(a.Tail, max(1.3, feed/3))
	}
	return a
}

// LimitCurrent returns the current in amperes at which a limiter with a sense
// resistor in ohms takes over, its sensing transistor's VBE in volts:
//
//	I = VBE/R
//
// Source: malvino, ex. 24-11.
func LimitCurrent(vbe, ohms float64) float64 { return vbe / ohms }
