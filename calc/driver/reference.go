package driver

import "lanternbook/calc/circuit"

// Fixed is a sink whose base a reference holds.
type Fixed struct {
	Reference Reference
	Bias      Resistance
	NPN       Transistor
	Sense     Resistance
}

// ReferenceSink wires LEDs with a sink whose base a reference holds; the bias
// resistor feeds the reference and the base from the string's feed.
func ReferenceSink(leds []LED, f Fixed) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.Base, a.Sense = c.Node("base"), c.Node("sense")
	a.Holder = a.transistor("sink_transistor", a.Tail, a.Base, a.Sense, f.NPN, false)
	a.SenseAt = a.resistor("sense_resistor", a.Sense, circuit.Ground, f.Sense)
	a.resistor("bias_resistor", a.Feed, a.Base, f.Bias)
	a.reference(a.Base, f.Reference)
	a.Edge = a.atBase
	a.start = func(feed float64) {
		base := min(f.Reference.Volts.Typ, feed)
		c.Guess(a.Base, base)
		c.Guess(a.Sense, max(base-0.65, 0))
		c.Guess(a.Tail, max(base, feed/3))
	}
	return a
}
