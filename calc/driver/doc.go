// Package driver wires one string: its LEDs, what holds its current, the
// points a meter reaches and the values that may be off. Each kind of driver
// has its file, with its circuit and its design equations.
//
// It does not say what is too hot or too little; see package calc.
package driver
