package quantity

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// longest is how many bytes of text a field may hold: far beyond any value,
// and short enough to be repeated in a sentence.
const longest = 80

// Parse reads text in a field of the given unit, one of this package's
// constants; a bare number is in that unit ("5" in a Percent field is 0.05).
//
// It takes prefixes ("4.7 kΩ", "20mA", "20 ma"), letters in the place of the
// decimal point ("4k7", "0R22", "3V3"), a decimal comma, fractions of a watt,
// a Unicode minus, any kind of blank before the unit. It refuses what can be
// read in two ways: "1,200", "4E7" and "10m" ohms, "20 MA".
//
// The result is finite. An error is a sentence for the person who typed.
//
// Source: IEC 60062 for the letter code; the rest is common practice, no source.
func Parse(text, unit string) (float64, error) { return ParseIn(text, unit, unit) }

// ParseIn is Parse for a field whose label names another unit than the one
// returned: a bare number is in the unit bare, such as "mA" in a field of amps.
func ParseIn(text, unit, bare string) (float64, error) {
	u, ok := lookup(unit)
	if !ok {
		return 0, fmt.Errorf("quantity: there is no unit %q", unit)
	}
	s, err := u.clean(text)
	if err != nil {
		return 0, err
	}
	if unit == Percent {
		s = strings.TrimSpace(strings.TrimPrefix(s, "±")) // a tolerance is usually written so
	}
	r, err := u.scan(s)
	if err != nil {
		return 0, err
	}
	if r.suffix == "" && !r.coded {
		r.suffix = bare
	}
	return u.value(r)
}

// plain turns what keyboards, datasheets and other programs write into one
// form: one kind of blank, minus, micro, ohm and degree.
var plain = strings.NewReplacer(
	"\u00a0", " ", "\u202f", " ", "\u2009", " ", "\u2007", " ", "\t", " ",
	"\u2212", "-", "\u2013", "-", // minus sign, en dash
	"\u00b5", "u", "\u03bc", "u", // micro sign, Greek mu
	"\u2126", "Ω", // ohm sign
	"\u2103", "°C", "\u2109", "°F", "\u00ba", "°", "\u02da", "°", // one-letter °C and °F; ordinal, ring
	"\u00bc", "1/4", "\u00bd", "1/2", "\u215b", "1/8",
	"\u2026", "..", "\u2032", "'", "\u2033", `"`,
	"+/-", "±", "+-", "±",
)

func (u unit) clean(text string) (string, error) {
	if len(text) > longest || !utf8.ValidString(text) {
		return "", fmt.Errorf("this is too long or not text: write %s, like %s", u.words, u.example)
	}
	s := strings.TrimSpace(plain.Replace(text))
	if s == "" {
		return "", fmt.Errorf("a value is missing: write %s, like %s", u.words, u.example)
	}
	return s, nil
}

// reading is a number as it was written, not yet scaled by its unit.
type reading struct {
	whole  string // the cleaned text, for sentences
	digits string // a decimal number, "-4.7"
	exp    int    // power of ten that it is to be multiplied by
	suffix string // what followed, without blanks round it
	coded  bool   // a letter stood for the decimal point: it says the scale
}

// value scales a reading whose suffix is complete. The power of ten goes into
// the text before it becomes a number, so that 20 mA is the same float64 as
// 0.02 A.
func (u unit) value(r reading) (float64, error) {
	s, known := u.resolve(r.suffix)
	if r.coded && r.suffix == "" {
		s, known = spelling{}, true
	}
	if !known {
		return 0, u.strange(r)
	}
	if r.coded && s.exp != 0 {
		if err := toleranceLetter(r.whole); err != nil {
			return 0, err
		}
		return 0, fmt.Errorf("%q says its scale twice: write it like %s", r.whole, u.example)
	}
	v, err := strconv.ParseFloat(r.digits+"e"+strconv.Itoa(r.exp+s.exp), 64)
	if err != nil { // digits is always a number: it can only be out of range
		return 0, fmt.Errorf("%q is too large", r.whole)
	}
	if v == 0 && strings.ContainsAny(r.digits, "123456789") {
		return 0, fmt.Errorf("%q is too small", r.whole)
	}
	v += s.zero // also turns a negative zero into zero
	if s.factor != 0 {
		v *= s.factor
	}
	if math.IsInf(v, 0) {
		return 0, fmt.Errorf("%q is too large", r.whole)
	}
	return v, nil
}

// strange says what is wrong with the unit of a reading.
func (u unit) strange(r reading) error {
	if u.name == Ohm {
		if err := toleranceLetter(r.whole); err != nil {
			return err
		}
		if r.suffix == "m" {
			return fmt.Errorf("%q can be read as thousandths or millions of an ohm: write mΩ or M", r.whole)
		}
	}
	if letter, rest, found := strings.Cut(r.suffix, "M"); found && letter == "" {
		if _, milli := u.resolve("m" + rest); milli {
			return fmt.Errorf("%q: M stands for a million; write m%s for thousandths", r.whole, u.name)
		}
	}
	for _, other := range units {
		other.alone = ""
		if _, ok := other.resolve(r.suffix); ok && other.name != u.name && r.suffix != "" {
			return fmt.Errorf("%q is in %s: write %s here, like %s", r.whole, other.words, u.words, u.example)
		}
	}
	return fmt.Errorf("%q has an unknown unit %q: write %s, like %s", r.whole, r.suffix, u.words, u.example)
}
