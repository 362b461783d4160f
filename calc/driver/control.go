package driver

import "lanternbook/calc/circuit"

// Control is the voltage that sets a sink's current: Volts behind Ohms, or two
// resistors across the string's own feed (a pot is such a pair).
type Control struct {
	Volts Range   // [V]
	Ohms  float64 // [Ω]
	// Upper and Lower, when Lower.Ohms is above 0, replace the voltage.
	Upper, Lower Resistance
}

// control adds the control and returns its node.
func (a *Board) control(ctl Control) circuit.Node {
	c := a.Net
	if ctl.Lower.Ohms > 0 {
		n := c.Node("control")
		a.resistor("upper_resistor", a.Feed, n, ctl.Upper)
		a.resistor("lower_resistor", n, circuit.Ground, ctl.Lower)
		return n
	}
	source := c.Held("control", ctl.Volts.Typ)
	a.Source = source
	if ctl.Volts.Min != ctl.Volts.Max {
		a.knob("control voltage", Setting, func(turn float64) { c.Hold(source, at(ctl.Volts, turn)) })
	}
	if ctl.Ohms == 0 {
		return source
	}
	n := c.Node("control point")
	c.Resistor(source, n, ctl.Ohms)
	return n
}

// setting returns the control voltage in volts without load, at a feed.
func (ctl Control) setting(feed float64) float64 {
	if ctl.Lower.Ohms > 0 {
		return feed * ctl.Lower.Ohms / (ctl.Lower.Ohms + ctl.Upper.Ohms)
	}
	return ctl.Volts.Typ
}
