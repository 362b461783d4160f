package web

import (
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// DialsView is what turning the pots, or moving the control voltages, of a
// build gives.
type DialsView struct {
	More  MoreView
	Dials []DialView
	None  string // why there is nothing to turn; "" when there is
	Rest  string // what is not told of; "" for nothing
}

// DialView is one setting.
type DialView struct {
	Name    string // "String A"
	Href    string // its field
	Set     string // "turned to 40 %"
	Limits  []PointView
	Strings []DialStringView
}

// DialStringView is what the setting does to one kind of string.
type DialStringView struct {
	Name   string
	Turned string // head of the first column: "turn", "control"
	Chart  DialChart
	Rows   []DialRow
	Light  bool // it is known
}

// DialRow is a line of the table.
type DialRow struct {
	Setting, Control, Low, Usual, High, Light, Left string
	Verdict                                         VerdictView
	Here                                            bool // nearest to where it stands
}

// NewDialsView shows dials; most is how many there are in the build.
func NewDialsView(in MoreInput, dials []calc.DialTable, most int) DialsView {
	v := DialsView{More: newMore(topicDial, in)}
	if v.More.Unsolved != "" {
		return v
	}
	if most == 0 {
		v.None = "Nothing in this build can be turned: give a string or a rail a pot, or a control voltage."
	}
	if len(dials) < most {
		v.Rest = fmt.Sprintf("%d of %d settings are shown.", len(dials), most)
	}
	entries := NewBuildForm(in.Build, nil).Entries()
	for i := range dials {
		d := &dials[i]
		one := DialView{Name: strings.ToUpper(d.Where[:1]) + d.Where[1:], Href: v.More.link(fieldOf(d.At, entries)), Set: "set to " + dialSetting(d, d.Setting)}
		for _, l := range []struct {
			name, where string
			limit       calc.DialLimit
		}{
			{"usual day", "everything typical", d.Usual}, {"cold day, low supply", "every part at its worst", d.Cold}, {"hot day, high supply", "every part at its worst", d.Hot},
		} {
			one.Limits = append(one.Limits, PointView{l.name, l.where, dialLimit(d, l.limit)})
		}
		for k := range d.Strings {
			one.Strings = append(one.Strings, dialString(d, &d.Strings[k]))
		}
		v.Dials = append(v.Dials, one)
	}
	return v
}

// dialSetting writes a setting: a turn in percent, or volts.
func dialSetting(d *calc.DialTable, v float64) string {
	if d.By == "turn" {
		return quantity.Format(v, quantity.Percent, 2)
	}
	return quantity.Format(v, quantity.Volt, 3)
}

// dialLimit says up to where the strings hold their current.
func dialLimit(d *calc.DialTable, l calc.DialLimit) string {
	switch {
	case l.None:
		return "at no setting"
	case l.Whole:
		return "all the way"
	case d.By == "turn":
		return "up to " + dialSetting(d, l.Setting) + " (" + quantity.Format(l.Control, quantity.Volt, 3) + ")"
	}
	return "up to " + dialSetting(d, l.Setting)
}

// dialString is one kind of string on a dial.
func dialString(d *calc.DialTable, s *calc.DialString) DialStringView {
	v := DialStringView{Name: "string " + s.Label + " × " + strconv.Itoa(s.Stands), Turned: "turn", Chart: dialChart(d, s)}
	if d.By != "turn" {
		v.Turned = "set to"
	}
	nearest := 0
	for k := range s.Points {
		p := &s.Points[k]
		row := DialRow{Setting: dialSetting(d, p.Setting), Verdict: NewVerdict(string(calc.Pass))}
		row.Verdict.Word = "holds"
		if !p.Regulates {
			row.Verdict = NewVerdict(string(calc.Fail))
			row.Verdict.Word = "short of volts"
		}
		if p.Runaway {
			row.Verdict = NewVerdict(string(calc.Fail))
			row.Verdict.Word = "gets too hot"
		}
		if !p.Runaway || p.Current.Typ > 0 {
			amps := func(i float64) string { return quantity.Format(i, quantity.Amp, 3) }
			row.Control, row.Left = figureOf(p.Control), figureOf(p.Headroom.Min)
			row.Low, row.Usual, row.High = amps(p.Current.Min), amps(p.Current.Typ), amps(p.Current.Max)
		}
		if p.LuminousFlux != nil {
			row.Light, v.Light = quantity.Format(p.LuminousFlux.Typ, quantity.Lumen, 3), true
		}
		if distance(p.Setting, d.Setting) < distance(s.Points[nearest].Setting, d.Setting) {
			nearest = k
		}
		v.Rows = append(v.Rows, row)
	}
	if len(v.Rows) > 0 {
		v.Rows[nearest].Here = true
	}
	return v
}

func distance(a, b float64) float64 { return max(a-b, b-a) }
