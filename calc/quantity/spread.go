package quantity

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Spread is a value with its limits. Bare tells that it was written as one
// number, which stands for all three.
type Spread struct {
	Min  float64 // in the unit of the field
	Typ  float64 // in the unit of the field
	Max  float64 // in the unit of the field
	Bare bool
}

// ParseSpread reads a value with its limits in a field of the given unit:
// least, usual and most ("23.5 24 24.5", "23.5..24..24.5", "2.8/2.95/3.2 V"),
// the usual one and how far it may be off ("24 ±2 %", "24 V ± 0.5 V"), or one
// number alone. A unit at the end holds for all. Two numbers are refused: which
// value to expect on a usual day is the builder's to say.
//
// An error is a sentence for the person who typed.
func ParseSpread(text, unit string) (Spread, error) { return ParseSpreadIn(text, unit, unit) }

// ParseSpreadIn is ParseSpread with a meaning of its own for bare numbers, as
// ParseIn has.
func ParseSpreadIn(text, unit, bare string) (Spread, error) {
	u, ok := lookup(unit)
	if !ok {
		return Spread{}, fmt.Errorf("quantity: there is no unit %q", unit)
	}
	s, err := u.clean(text)
	if err != nil {
		return Spread{}, err
	}
	if centre, margin, found := strings.Cut(s, "±"); found {
		return u.around(strings.TrimSpace(centre), strings.TrimSpace(margin), bare)
	}
	pieces := u.split(s)
	values, err := u.values(pieces, bare)
	if err != nil {
		return Spread{}, err
	}
	switch len(values) {
	case 1:
		return Spread{values[0], values[0], values[0], true}, nil
	case 3:
		if values[0] <= values[1] && values[1] <= values[2] {
			return Spread{values[0], values[1], values[2], false}, nil
		}
		return Spread{}, fmt.Errorf("%q does not rise: write the least, the usual and the most", s)
	}
	return Spread{}, fmt.Errorf("%q has %d values: write one, or three: the least, the usual and the most", s, len(values))
}

// split cuts a cleaned text into the pieces that hold one value each. A slash
// parts two values only where a number follows it: mV/K keeps its own. A dash
// parts them where it is no sign: 2.8-3.2.
func (u unit) split(s string) []string {
	s = strings.NewReplacer("..", "|", ";", "|", ", ", "|").Replace(s)
	var b strings.Builder
	for i := range len(s) {
		slash := s[i] == '/' && i > 0 && startsNumber(strings.TrimLeft(s[i+1:], " "))
		if slash || s[i] == '-' && between(s[:i], s[i+1:]) {
			b.WriteByte('|')
			continue
		}
		b.WriteByte(s[i])
	}
	s = b.String()
	if strings.Contains(s, "|") {
		return strings.Split(s, "|")
	}
	var pieces []string
	for word := range strings.FieldsSeq(s) {
		if len(pieces) == 0 || startsNumber(word) && pieces[len(pieces)-1] != "-" && !u.own(word) {
			pieces = append(pieces, word)
		} else {
			pieces[len(pieces)-1] += " " + word
		}
	}
	return pieces
}

// between tells whether a dash with these texts on its sides parts two values.
func between(before, after string) bool {
	if strings.TrimSpace(before) == "" || after == "" {
		return false
	}
	if strings.HasSuffix(before, " ") {
		return strings.HasPrefix(after, " ")
	}
	return !strings.ContainsAny(before[len(before)-1:], "eE|/-+.,") && startsNumber(after)
}

func startsNumber(s string) bool {
	s = strings.TrimLeft(s, "+-")
	s = strings.TrimLeft(s, ".,")
	return s != "" && (digit(s[0]) || len(s) > 1 && s[0] == 'R' && digit(s[1]))
}

// values reads the pieces. One without a unit takes that of the next with one,
// else of the last before it, else bare.
func (u unit) values(pieces []string, bare string) ([]float64, error) {
	readings := make([]reading, len(pieces))
	suffix := ""
	for i := range pieces {
		r, err := u.scan(strings.TrimSpace(pieces[i]))
		if err != nil {
			return nil, err
		}
		readings[i] = r
	}
	for i := len(readings) - 1; i >= 0; i-- {
		if readings[i].suffix != "" {
			suffix = readings[i].suffix
		} else if !readings[i].coded {
			readings[i].suffix = suffix
		}
	}
	values := make([]float64, len(readings))
	suffix = bare
	for i, r := range readings {
		if r.suffix == "" && !r.coded {
			r.suffix = suffix
		} else if !r.coded {
			suffix = r.suffix
		}
		v, err := u.value(r)
		if err != nil {
			return nil, err
		}
		values[i] = v
	}
	return values, nil
}

// around reads "24 V ± 2 %" and "24 ± 0.5 V".
func (u unit) around(centre, margin, bare string) (Spread, error) {
	if strings.Contains(margin, "±") {
		return Spread{}, errors.New("write ± once")
	}
	if percent, err := u.percent(margin); err == nil {
		typ, err := u.values([]string{centre}, bare)
		if err != nil {
			return Spread{}, err
		}
		if u.name == Celsius {
			return Spread{}, errors.New("a share of a temperature says nothing: write ± and degrees")
		}
		return u.within(typ[0], math.Abs(typ[0])*percent, math.Abs(percent))
	}
	difference := u // of temperatures: no zero to take off
	difference.special = nil
	for _, s := range u.special {
		s.zero = 0
		difference.special = append(difference.special, s)
	}
	r, err := u.scan(centre)
	if err != nil {
		return Spread{}, err
	}
	m, err := difference.scan(margin)
	if err != nil {
		return Spread{}, err
	}
	if r.suffix == "" && !r.coded {
		r.suffix = m.suffix
	}
	if r.suffix == "" && !r.coded {
		r.suffix = bare
	}
	if m.suffix == "" && !m.coded {
		m.suffix = r.suffix
	}
	if m.suffix == "" && !m.coded {
		m.suffix = bare
	}
	typ, err := u.value(r)
	if err != nil {
		return Spread{}, err
	}
	off, err := difference.value(m)
	if err != nil {
		return Spread{}, err
	}
	return u.within(typ, off, 0)
}

// percent reads a margin in percent. In a field of percents that is a plain
// difference: 85 ± 5 % is 80 to 90 %.
func (u unit) percent(margin string) (float64, error) {
	if u.name == Percent || !strings.HasSuffix(margin, "%") {
		return 0, errors.New("not in percent")
	}
	return Parse(margin, Percent)
}

// within builds the spread; share is the margin as a ratio, 0 when it was given
// in the unit. The ends are rounded to twelve digits: 24 - 2 % is 23.52.
func (u unit) within(typ, margin, share float64) (Spread, error) {
	if margin < 0 || share > 1 {
		return Spread{}, errors.New("what follows ± must be from 0 to 100 %")
	}
	s := Spread{Min: tidy(typ - margin), Typ: typ, Max: tidy(typ + margin)}
	if math.IsInf(s.Min, 0) || math.IsInf(s.Max, 0) {
		return Spread{}, errors.New("this is too large")
	}
	s.Min, s.Max = min(s.Min, typ), max(s.Max, typ) // rounding must not turn the order round
	return s, nil
}

func tidy(v float64) float64 {
	t, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 11, 64), 64)
	if err != nil {
		return v
	}
	return t
}

// FormatSpread writes a spread so that ParseSpread reads exactly it again:
// "24 V", "23.5 / 24 / 24.5 V", all three with the prefix of the usual value.
func FormatSpread(s Spread, unit string) string {
	u, ok := lookup(unit)
	if !ok {
		u = units[0]
		u.name = unit
	}
	for _, v := range []float64{s.Min, s.Typ, s.Max} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return u.label("?", u.base())
		}
	}
	if s.Bare {
		return Text(s.Typ, unit)
	}
	power := u.base()
	if s.Typ != 0 {
		_, exp := shortest(s.Typ)
		power = u.power(exp)
	}
	number := func(v float64) string {
		d, exp := shortest(v)
		if v == 0 {
			exp = power
		}
		return sign(v) + layout(d, exp-power)
	}
	return u.label(number(s.Min)+" / "+number(s.Typ)+" / "+number(s.Max), power)
}
