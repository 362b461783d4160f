package quantity

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Code is a resistor's marking, read.
type Code struct {
	Ohms       float64 // [Ω]
	Tolerance  float64 // [1] either way; 0 unless Toleranced
	Toleranced bool    // the marking ended in a tolerance letter
}

// tolerances maps the letter at the end of a marking to the tolerance in
// percent. W replaced A for 0.05 %.
//
// Source: IEC 60062, tolerance letters; all but F, G, J and K from memory.
var tolerances = map[byte]float64{
	'E': 0.005, 'L': 0.01, 'P': 0.02, 'W': 0.05, 'A': 0.05, 'B': 0.1, 'C': 0.25, 'D': 0.5,
	'F': 1, 'G': 2, 'H': 3, 'J': 5, 'K': 10, 'M': 20, 'N': 30,
}

// ParseCode reads the letter-and-digit code printed on resistors, with or
// without its tolerance letter: "4K7", "R47", "1R8J", "27KK" (27 kΩ, 10 %).
// The first letter is always the multiplier. An error is a sentence for the
// person who typed.
//
// Source: IEC 60062.
func ParseCode(text string) (Code, error) {
	s := strings.TrimSpace(text)
	fault := fmt.Errorf("%.20q is not a resistor code: write it like 4K7, R47 or 4K7J", s)
	whole, rest := leadingDigits(s)
	if rest == "" || len(s) > longest || strings.IndexByte("RrKkMGTL", rest[0]) < 0 {
		return Code{}, fault
	}
	letter := rest[0]
	part, rest := leadingDigits(rest[1:])
	if whole == "" && part == "" || len(rest) > 1 {
		return Code{}, fault
	}
	ohms, err := strconv.ParseFloat("0"+whole+"."+part+"0e"+strconv.Itoa(tens[letter]), 64)
	if err != nil {
		return Code{}, fault
	}
	if rest == "" {
		return Code{Ohms: ohms}, nil
	}
	percent, ok := tolerances[rest[0]]
	if !ok {
		return Code{}, fmt.Errorf("%.20q: %q is no tolerance letter", s, rest)
	}
	return Code{Ohms: ohms, Tolerance: percent / 100, Toleranced: true}, nil
}

// toleranceLetter returns what to tell someone who typed a whole marking into
// a field of ohms: the tolerance has its own field and must not be dropped
// unseen. It is nil when text is no such marking.
func toleranceLetter(text string) error {
	if code, err := ParseCode(text); err == nil && code.Toleranced {
		ohms, letter := text[:len(text)-1], text[len(text)-1:]
		return fmt.Errorf("%q ends in a tolerance letter: write %s here, and for the %s a tolerance of %s", text, ohms, letter, Text(code.Tolerance, Percent))
	}
	return nil
}

// FormatCode writes ohms as notes and drawings do: "4k7", "R47", "110R". It is
// IEC 60062's code with the k of the SI in the place of the capital that parts
// carry. A value that is negative or needs more than five digits is written
// out instead.
//
// Source: IEC 60062.
func FormatCode(ohms float64) string {
	d, exp := shortest(ohms)
	if !(ohms >= 0) || len(d) > 5 || exp >= 15 || ohms != 0 && exp < -5 {
		return Text(ohms, Ohm)
	}
	letter, shift := "R", 0
	for _, step := range []struct {
		letter string
		shift  int
	}{{"k", 3}, {"M", 6}, {"G", 9}, {"T", 12}} {
		if exp >= step.shift {
			letter, shift = step.letter, step.shift
		}
	}
	at := exp - shift + 1 // digits before the letter
	if at < 0 {
		return letter + strings.Repeat("0", -at) + d
	}
	if len(d) < 2 {
		d += "0" // the standard writes 1R0 and R10
	}
	if len(d) < at {
		d += strings.Repeat("0", at-len(d))
	}
	return d[:at] + letter + d[at:]
}

// shortest returns the fewest significant digits that are v again, without
// trailing zeros, and the power of ten of the first one. The sign is left out.
func shortest(v float64) (digits string, exp int) {
	return significant(strconv.FormatFloat(math.Abs(v), 'e', -1, 64))
}

// significant splits "1.25e-01" into "125" and -1.
func significant(scientific string) (digits string, exp int) {
	mantissa, power, _ := strings.Cut(scientific, "e")
	exp, _ = strconv.Atoi(power) // FormatFloat wrote it; NaN and Inf have none, and become 0
	return strings.Replace(mantissa, ".", "", 1), exp
}
