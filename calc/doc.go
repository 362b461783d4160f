// Package calc answers one question about a build: what does each part of it
// carry, on a usual day and in the worst case, and is that within its limits?
//
// It holds the build document and the report, and composes the packages below
// it: circuit solves, device knows the parts' equations, driver wires a string,
// heat, light, spread and wiring do what their names say. Nothing here does
// I/O, keeps time or remembers anything between calls; where samples are drawn,
// the seed is an argument.
//
// All quantities are float64 in SI units without prefix; the exception, because
// datasheets use it, is temperature in degrees Celsius. Ratios are 0 to 1.
package calc
