package quantity

import (
	"fmt"
	"strconv"
	"strings"
)

// scan reads the number at the start of s and leaves the rest as the suffix.
func (u unit) scan(s string) (reading, error) {
	r := reading{whole: s}
	rest, sign := s, ""
	switch {
	case strings.HasPrefix(s, "-"):
		sign, rest = "-", strings.TrimLeft(s[1:], " ")
	case strings.HasPrefix(s, "+"):
		rest = strings.TrimLeft(s[1:], " ")
	}
	if value, after, ok := fraction(rest); ok && u.name == Watt {
		r.digits, r.suffix = sign+value, after
		return r, nil
	}

	whole, rest := leadingDigits(rest)
	part := ""
	switch {
	case strings.HasPrefix(rest, ".") && !strings.HasPrefix(rest, ".."), strings.HasPrefix(rest, ","):
		comma := rest[0] == ','
		part, rest = leadingDigits(rest[1:])
		if comma && len(part) == 3 && whole != "" && len(whole) <= 3 && whole[0] != '0' {
			return r, fmt.Errorf("%q can be read as %s.%s or as %s%s: write it without the comma", s, whole, part, whole, part)
		}
	case u.letterPoint(whole, rest):
		r.coded, r.exp = true, tens[rest[0]]
		part, rest = leadingDigits(rest[1:])
	case u.name == Ohm && whole != "" && twoReadings(rest):
		return r, fmt.Errorf("%q can be read in two ways: write it like 4R7, 4k7, 4M7 or 4.7 mΩ", s)
	}
	if whole == "" && part == "" {
		return r, fmt.Errorf("%q is not a number: write %s, like %s", s, u.words, u.example)
	}
	if !r.coded {
		r.exp, rest = exponent(rest)
	}
	r.digits = sign + "0" + whole + "." + part + "0"
	r.suffix = strings.TrimSpace(rest)
	if r.suffix != "" && strings.ContainsAny(r.suffix[:1], ".,'0123456789") && !u.own(r.suffix) {
		return r, fmt.Errorf("%q: write one number, without anything between the thousands", s)
	}
	return r, nil
}

// own tells whether a suffix that starts like a number is a unit all the same:
// the 1/K of a coefficient, the ' of feet.
func (u unit) own(suffix string) bool {
	_, ok := u.resolve(suffix)
	return ok
}

// letterPoint tells whether rest starts with a letter that stands for the
// decimal point. Only a resistance may start with it: "R47".
func (u unit) letterPoint(whole, rest string) bool {
	if len(rest) < 2 || strings.IndexByte(u.infix, rest[0]) < 0 || !digit(rest[1]) {
		return false
	}
	return whole != "" || u.name == Ohm
}

// twoReadings spots the E that some write for R, which is also an exponent,
// and the m that a hurried hand writes for M, which is also a thousandth.
func twoReadings(rest string) bool {
	return len(rest) > 1 && strings.IndexByte("Eem", rest[0]) >= 0 && digit(rest[1])
}

// exponent reads "e-3". Four digits of it are more than a float64 can hold.
func exponent(s string) (int, string) {
	if s == "" || s[0] != 'e' && s[0] != 'E' {
		return 0, s
	}
	sign, rest := 1, s[1:]
	switch {
	case strings.HasPrefix(rest, "-"):
		sign, rest = -1, rest[1:]
	case strings.HasPrefix(rest, "+"):
		rest = rest[1:]
	}
	number, rest := leadingDigits(rest)
	n, err := strconv.Atoi(number)
	if err != nil || len(number) > 4 {
		return 0, s
	}
	return sign * n, rest
}

// fraction reads a rating like "1/4".
func fraction(s string) (value, rest string, ok bool) {
	over, rest := leadingDigits(s)
	rest, found := strings.CutPrefix(rest, "/")
	under, rest := leadingDigits(rest)
	n, err1 := strconv.Atoi(over)
	d, err2 := strconv.Atoi(under)
	if !found || err1 != nil || err2 != nil || d == 0 {
		return "", "", false
	}
	return strconv.FormatFloat(float64(n)/float64(d), 'f', -1, 64), strings.TrimSpace(rest), true
}

func leadingDigits(s string) (digits, rest string) {
	n := 0
	for n < len(s) && digit(s[n]) {
		n++
	}
	return s[:n], s[n:]
}

func digit(c byte) bool { return c >= '0' && c <= '9' }
