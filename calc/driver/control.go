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
		upper := a.resistor("upper_resistor", a.Feed, n, ctl.Upper)
		lower := a.resistor("lower_resistor", n, circuit.Ground, ctl.Lower)
		a.setPot = func(up, low float64) {
			c.SetOhms(circuit.ResistorID(a.Devices[upper].id), up)
			c.SetOhms(circuit.ResistorID(a.Devices[lower].id), low)
		}
		return n
	}
	source := c.Held("control", ctl.Volts.Typ)
	a.Source = source
	volts, turned := ctl.Volts, 0.0
	a.setVolts = func(typ float64) {
		share := 1.0
		if ctl.Volts.Typ != 0 {
			share = typ / ctl.Volts.Typ
		}
		volts = Range{Min: ctl.Volts.Min * share, Typ: typ, Max: ctl.Volts.Max * share}
		c.Hold(source, at(volts, turned))
	}
	if ctl.Volts.Min != ctl.Volts.Max {
		a.knob("control voltage", Setting, ctl.Volts, func(turn float64) {
			turned = turn
			c.Hold(source, at(volts, turn))
		})
	}
	if ctl.Ohms == 0 {
		return source
	}
	n := c.Node("control point")
	c.Resistor(source, n, ctl.Ohms)
	return n
}

// SetPot sets the two sides of a control that is a pot or a divider, in ohms
// above 0, their tolerances left out; it is for one without any, as a pot is.
func (a *Board) SetPot(upper, lower float64) { a.setPot(upper, lower) }

// SetControl sets a control voltage in volts; its spread keeps its share of it.
func (a *Board) SetControl(volts float64) { a.setVolts(volts) }

// setting returns the control voltage in volts without load, at a feed.
func (ctl Control) setting(feed float64) float64 {
	if ctl.Lower.Ohms > 0 {
		return feed * ctl.Lower.Ohms / (ctl.Lower.Ohms + ctl.Upper.Ohms)
	}
	return ctl.Volts.Typ
}
