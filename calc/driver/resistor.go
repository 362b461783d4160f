package driver

import "lanternbook/calc/circuit"

// Series wires LEDs with a series (ballast) resistor.
func Series(leds []LED, r Resistance) *Assembly {
	a := newAssembly(leds)
	a.Holder = a.resistor("resistor", a.Tail, circuit.Ground, r)
	a.SenseAt = a.Holder
	a.start = func(feed float64) { a.Net.Guess(a.Tail, feed/5) }
	return a
}

// SeriesResistance returns the resistor in ohms that lets a current in amperes
// through LEDs that take their forward voltage of a supply, both in volts:
//
//	R = (V − Vf)/I
//
// Source: boylestad, ex. 2.11.
func SeriesResistance(supply, forward, current float64) float64 { return (supply - forward) / current }
