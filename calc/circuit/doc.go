// Package circuit finds the DC operating point of a small circuit of
// resistors, junctions, transistors and sources, with every part's own heat
// solved together with the electrical point.
//
// It is a nodal solver. What belongs to one part alone (the inner junction
// voltages of a transistor, its temperature, the current of a stack of LEDs)
// is eliminated inside that part before the nodes are solved, so a string is
// three or four unknowns however many LEDs it has; the Newton steps are those
// of the whole system and converge quadratically.
//
// It knows nothing of what a circuit is for. It does not do time, frequency
// or reverse breakdown.
package circuit
