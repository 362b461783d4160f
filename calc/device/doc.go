// Package device holds the equations of the parts: bipolar transistor, LED and
// the voltage reference, and derives their parameters from datasheet figures.
// It knows nothing of circuits; every function is of numbers alone.
package device

// Constants of the SI since 2019 (exact) and of the trade.
const (
	boltzmann        = 1.380649e-23    // [J/K] CODATA 2018
	elementaryCharge = 1.602176634e-19 // [C] CODATA 2018

	// VoltsPerKelvin is k/q: the thermal voltage per kelvin.
	VoltsPerKelvin = boltzmann / elementaryCharge

	// Zero is 0 °C in kelvin.
	Zero = 273.15

	// NominalC is the temperature at which Gummel–Poon parameters are stated.
	NominalC = 27.0
	// RatedC is the temperature at which LED figures are stated.
	RatedC = 25.0
)

// ThermalVoltage returns kT/q in volts at a junction of celsius °C, for
// temperatures above absolute zero.
//
// Source: definition.
func ThermalVoltage(celsius float64) float64 { return VoltsPerKelvin * (celsius + Zero) }
