package driver

import "lanternbook/calc/circuit"

// OnRail is a sink whose base hangs on a rail that several strings share.
type OnRail struct {
	NPN          Transistor
	Sense        Resistance
	BaseResistor float64 // [Ω] from the rail to the base; 0 is none
}

// RailSink wires LEDs with a sink on a base rail: Rail is held, and what it
// gives is what the string takes from it.
func RailSink(leds []LED, r OnRail) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.Rail = c.Held("rail", 0)
	a.Base, a.Sense = a.Rail, c.Node("sense")
	if r.BaseResistor > 0 {
		a.Base = c.Node("base")
		a.resistor("base_resistor", a.Rail, a.Base, Resistance{Ohms: r.BaseResistor})
	}
	a.Holder = a.transistor("sink_transistor", a.Tail, a.Base, a.Sense, r.NPN, false)
	a.SenseAt = a.resistor("sense_resistor", a.Sense, circuit.Ground, r.Sense)
	a.Edge = a.atBase
	a.start = func(feed float64) {
		rail := c.Voltage(a.Rail)
		c.Guess(a.Base, rail)
		c.Guess(a.Sense, max(rail-0.65, 0))
		c.Guess(a.Tail, max(rail, feed/3))
	}
	return a
}

// Rail is a base rail as a circuit: Out is the rail itself.
type Rail struct {
	Board
	Out  circuit.Node
	line circuit.ResistorID
	// Control is a follower's base and Reference the node that a reference
	// holds, circuit.None where the rail has none.
	Control, Reference circuit.Node
}

// newRail makes a rail's feed and its node, with what stands for its strings.
func newRail() *Rail {
	r := &Rail{Board: newBoard(), Control: circuit.None, Reference: circuit.None}
	r.Out = r.Net.Node("rail")
	r.line = r.Net.Resistor(r.Out, circuit.Ground, 1)
	r.Net.Switch(r.line, false)
	return r
}

// Load draws from the rail a current in amperes at 0 V, and slope in siemens
// more for every volt.
func (r *Rail) Load(amperes, slope float64) {
	r.Net.Draw(r.Out, amperes)
	r.Net.Switch(r.line, slope > 0)
	if slope > 0 {
		r.Net.SetOhms(r.line, 1/slope)
	}
}

// FollowerRail wires a rail that is the emitter of a PNP follower, pulled up
// from its feed; it stands one VBE above the control voltage.
func FollowerRail(control Control, pnp Transistor, pullup Resistance) *Rail {
	r := newRail()
	c := r.Net
	base := r.control(control)
	r.Control = base
	r.transistor("follower_transistor", circuit.Ground, base, r.Out, pnp, true)
	r.resistor("pullup_resistor", r.Feed, r.Out, pullup)
	r.start = func(feed float64) {
		set := control.setting(feed)
		c.Guess(base, set)
		c.Guess(r.Out, min(set+0.65, feed))
	}
	return r
}

// ReferenceRail wires a rail that a reference holds, fed by a bias resistor.
func ReferenceRail(reference Reference, bias Resistance) *Rail {
	r := newRail()
	c := r.Net
	r.resistor("bias_resistor", r.Feed, r.Out, bias)
	r.reference(r.Out, reference)
	r.Reference = r.Out
	r.start = func(feed float64) { c.Guess(r.Out, min(reference.Volts.Typ, feed)) }
	return r
}

// BufferedRail wires a rail that is the emitter of an NPN follower whose base
// a reference holds; the pull-down takes what the strings do not.
func BufferedRail(reference Reference, bias Resistance, npn Transistor, pulldown Resistance) *Rail {
	r := newRail()
	c := r.Net
	held := c.Node("reference")
	r.resistor("bias_resistor", r.Feed, held, bias)
	r.reference(held, reference)
	r.Reference = held
	r.transistor("follower_transistor", r.Feed, held, r.Out, npn, false)
	r.resistor("pulldown_resistor", r.Out, circuit.Ground, pulldown)
	r.start = func(feed float64) {
		volts := min(reference.Volts.Typ, feed)
		c.Guess(held, volts)
		c.Guess(r.Out, max(volts-0.65, 0))
	}
	return r
}
