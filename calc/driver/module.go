package driver

import "lanternbook/calc/circuit"

// Bought is a constant-current module.
type Bought struct {
	Part       string
	Current    Range   // [A]
	Dropout    float64 // [V] between its input and the LEDs
	Efficiency float64 // [1] of a switching module; 0 is a linear one
}

// Module wires LEDs with a bought constant-current module. A linear one burns
// what the LEDs leave; a switching one turns it into less current from the
// feed.
func Module(leds []LED, m Bought) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.HighSide = true
	a.switching = m.Efficiency
	id := c.Source(a.Tail, m.Current.Typ, m.Dropout)
	a.Devices = append(a.Devices, Device{Role: "module", Part: m.Part, kind: isModule, id: int(id)})
	a.Holder, a.SenseAt = len(a.Devices)-1, -1
	if m.Current.Min != m.Current.Max {
		a.knob("module current", Setting, m.Current, func(turn float64) { c.SetSource(id, at(m.Current, turn)) })
	}
	a.Edge = func() float64 { return m.Dropout + openModule }
	a.start = func(feed float64) { c.Guess(a.Tail, max(m.Dropout, feed/3)) }
	return a
}

// openModule is how far in volts above its dropout a module counts as fully
// open.
const openModule = 0.1

// modulePower is what a module turns into heat in watts.
func (a *Board) modulePower(id circuit.SourceID) float64 {
	if a.switching == 0 {
		return a.Net.SourcePower(id)
	}
	return a.ledPower() * (1/a.switching - 1)
}

func (a *Board) ledPower() float64 {
	return a.Net.LEDCurrent(a.stack) * (a.Net.Voltage(a.Feed) - a.Net.Voltage(a.tail))
}
