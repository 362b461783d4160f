package quantity

import (
	"math"
	"slices"
	"strconv"
	"strings"
)

const (
	minus = "\u2212" // a hyphen is shorter than the digits and may end a line
	space = "\u00a0" // keeps the number and its unit on one line
)

// letters are the prefixes that Format and Text write, by power of ten.
var letters = map[int]string{-9: "n", -6: "µ", -3: "m", 3: "k", 6: "M", 9: "G"}

// Format writes v, a number in one of this package's units, with so many
// significant digits (1 to 15) and the customary prefix: "4.70 kΩ", "20.0 mA",
// "0.300 V". What is smaller than the last digit of the smallest prefix is
// zero, without a sign; what is not finite is "?".
//
// Parse reads the result as v to the digits shown.
func Format(v float64, unit string, digits int) string {
	u, ok := lookup(unit)
	if !ok {
		u = units[0] // a unit of the caller's own: no prefix, its name as it is
		u.name = unit
	}
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return u.label("?", u.base())
	}
	digits = min(max(digits, 1), 15)
	d, exp := significant(strconv.FormatFloat(math.Abs(v), 'e', digits-1, 64))
	power := u.power(exp)
	if exp < u.shown[0] && !u.free || v == 0 {
		return u.small(v, digits)
	}
	return u.label(sign(v)+layout(d, exp-power), power)
}

// Text writes v with the fewest digits from which Parse reads exactly v again:
// "4.7 kΩ", "19.6 mA". It is what a field shows.
func Text(v float64, unit string) string {
	u, ok := lookup(unit)
	if !ok {
		u = units[0]
		u.name = unit
	}
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return u.label("?", u.base())
	}
	d, exp := shortest(v)
	power := u.power(exp)
	if v == 0 {
		power = u.base()
		exp = power
	}
	return u.label(sign(v)+layout(d, exp-power), power)
}

// power chooses the power of ten to write a number in whose first digit stands
// at exp: the largest that leaves a digit before the point, but no prefix for
// numbers that are customarily written 0.25, or that need an exponent anyway.
func (u unit) power(exp int) int {
	if exp < u.base() && exp >= u.stay || exp < u.shown[0]-mostZeros || exp > u.shown[len(u.shown)-1]+mostDigits {
		return u.base()
	}
	best := u.shown[0]
	for _, p := range u.shown {
		if p <= exp {
			best = p
		}
	}
	return best
}

// base is the power of ten that needs no prefix: -2 for percent.
func (u unit) base() int {
	if slices.Contains(u.shown, 0) {
		return 0
	}
	return u.shown[0]
}

// small writes a number whose first digit lies below the smallest power of
// ten that the unit is written in.
func (u unit) small(v float64, digits int) string {
	power := u.shown[0]
	fixed := strconv.FormatFloat(math.Abs(v)*math.Pow10(-power), 'f', digits-1, 64)
	if !strings.ContainsAny(fixed, "123456789") {
		return u.label(fixed, u.base())
	}
	return u.label(sign(v)+fixed, power)
}

// A number is written with an exponent when it would need more zeros behind the
// point, or more digits before it, than these.
const (
	mostZeros  = 6
	mostDigits = 14
)

// layout places the decimal point after the digit number exp of d, counted
// from 0. An exponent has the sign that Parse wants there.
func layout(d string, exp int) string {
	switch {
	case exp < -mostZeros || exp > mostDigits:
		if len(d) > 1 {
			d = d[:1] + "." + d[1:]
		}
		if exp > 0 {
			return d + "e+" + strconv.Itoa(exp)
		}
		return d + "e" + strconv.Itoa(exp)
	case exp < 0:
		return "0." + strings.Repeat("0", -exp-1) + d
	case len(d) <= exp+1:
		return d + strings.Repeat("0", exp+1-len(d))
	}
	return d[:exp+1] + "." + d[exp+1:]
}

func (u unit) label(number string, power int) string {
	switch u.name {
	case Number:
		return number
	case Degree:
		return number + u.name // an angle's sign stands close
	}
	mark := u.mark
	if mark == "" {
		mark = u.name
	}
	return number + space + letters[power] + mark
}

func sign(v float64) string {
	if v < 0 {
		return minus
	}
	return ""
}
