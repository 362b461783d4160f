package driver

import "lanternbook/calc/circuit"

// Follower is a sink whose base a PNP emitter follower drives.
type Follower struct {
	Control Control
	PNP     Transistor
	NPN     Transistor
	Pullup  Resistance
	Sense   Resistance
}

// FollowerSink wires LEDs with a sink whose base stands one VBE above the
// control voltage, so that the sense resistor's top comes back to it.
func FollowerSink(leds []LED, f Follower) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.Base, a.Sense = c.Node("base"), c.Node("sense")
	a.Control = a.control(f.Control)
	a.Holder = a.transistor("sink_transistor", a.Tail, a.Base, a.Sense, f.NPN, false)
	a.transistor("follower_transistor", circuit.Ground, a.Control, a.Base, f.PNP, true)
	a.SenseAt = a.resistor("sense_resistor", a.Sense, circuit.Ground, f.Sense)
	a.resistor("pullup_resistor", a.Feed, a.Base, f.Pullup)
	a.Edge = a.atBase
	a.start = func(feed float64) {
		set := f.Control.setting(feed)
		base := min(set+0.65, max(feed-0.1, 0))
		c.Guess(a.Control, set)
		c.Guess(a.Base, base)
		c.Guess(a.Sense, max(base-0.65, 0))
		c.Guess(a.Tail, max(base, feed/3))
	}
	return a
}

// SenseResistance returns the sense resistor in ohms for a current in amperes
// at a sense voltage in volts, the transistor's gain as given (0 neglects the
// base current):
//
//	R = V/(I·(1 + 1/hFE))
//
// Source: malvino, ex. 7-10.
func SenseResistance(volts, current, gain float64) float64 {
	if gain > 0 {
		current *= 1 + 1/gain
	}
	return volts / current
}
