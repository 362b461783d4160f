package driver

import "lanternbook/calc/circuit"

// Opamp is a sink whose sense voltage an op-amp holds through a MOSFET.
type Opamp struct {
	Control Control
	Part    string
	// Offset is how far the op-amp's inputs may differ either way [V]; Low and
	// High are how near its output comes to the return and to its supply [V];
	// Quiescent is what it takes from the feed [A].
	Offset, Low, High, Quiescent float64
	FET                          FET
	Sense                        Resistance
}

// FET is a MOSFET with its spread.
type FET struct {
	Part         string
	Threshold    Range   // [V]
	OnResistance float64 // [Ω] at OnAt
	OnAt         float64 // [V] gate to source
	Rth          float64 // [K/W]
}

// Gain is the square law's transconductance factor in A/V²: the on-resistance
// at its gate voltage is 1/(gain·(Vgs − Vth)).
//
// Source: shichman-hodges (1968).
func (f FET) Gain() float64 {
	return 1 / (f.OnResistance * max(f.OnAt-f.Threshold.Typ, leastOverdrive))
}

const (
	// leastOverdrive keeps the square law defined for a datasheet whose
	// on-resistance is stated at or below the threshold, in volts.
	leastOverdrive = 0.1
	// openFET is how far in volts above the sense resistor a MOSFET's drain
	// counts as fully open.
	openFET = 1.0
)

// OpampSink wires LEDs with a sink whose sense voltage an op-amp, fed from the
// string's feed, holds at the control voltage through a MOSFET.
func OpampSink(leds []LED, o Opamp) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.quiescent = o.Quiescent
	gate := c.Node("gate")
	a.Sense = c.Node("sense")
	a.Control = a.control(o.Control)
	fet := c.FET(a.Tail, gate, a.Sense, o.FET.Threshold.Typ, o.FET.Gain(), o.FET.Rth)
	a.Devices = append(a.Devices, Device{Role: "fet", Part: o.FET.Part, kind: isFET, id: int(fet)})
	a.Holder = len(a.Devices) - 1
	if o.FET.Threshold.Min != o.FET.Threshold.Max {
		a.knob("MOSFET threshold", Junction, o.FET.Threshold, func(turn float64) { c.SetThreshold(fet, at(o.FET.Threshold, turn)) })
	}
	a.SenseAt = a.resistor("sense_resistor", a.Sense, circuit.Ground, o.Sense)
	amp := c.Amp(a.Control, a.Sense, gate, a.Feed, 0, o.Low, o.High)
	a.Devices = append(a.Devices, Device{Role: "opamp", Part: o.Part, kind: isAmp, id: int(amp)})
	if o.Offset > 0 {
		a.knob("op-amp offset", Setting, evenly, func(turn float64) { c.SetOffset(amp, o.Offset*turn) })
	}
	a.Gate, a.High = gate, o.High
	a.Edge = func() float64 { return c.Voltage(a.Sense) + openFET }
	a.start = func(feed float64) {
		set := o.Control.setting(feed)
		c.Guess(a.Control, set)
		c.Guess(a.Sense, min(set, feed/2))
		c.Guess(gate, set+o.FET.Threshold.Typ+0.3)
		c.Guess(a.Tail, max(set+openFET, feed/3))
	}
	return a
}
