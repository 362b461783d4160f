// Package quantity turns what the trade writes into numbers and back: "4k7",
// "20 mA", "2,2 V", "1/4 W", the preferred numbers that resistors are sold in,
// and a value with its spread, "23.5 / 24 / 24.5 V".
//
// Numbers are float64 in SI units without prefix; see the constants for the
// few fields whose customary unit is another. A text that could be read in two
// ways is refused with the two readings in the sentence, never guessed.
//
// It knows nothing of what a value is for: whether 4k7 makes sense as a sense
// resistor is for package calc to say.
package quantity
