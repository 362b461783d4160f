package web_test

import (
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// turned is a pot from 0 to 100 % that gives 0 to 50 mA, holds up to 60 % on a
// usual day, and runs away at the end.
func turned() calc.DialTable {
	d := calc.DialTable{
		Where: "string A", At: "/strings/0/driver/control/pot/turn", By: "turn", Setting: 0.26,
		Usual: calc.DialLimit{Setting: 0.6, Control: 3}, Cold: calc.DialLimit{None: true}, Hot: calc.DialLimit{Whole: true},
		Strings: []calc.DialString{{Index: 0, Label: "A", Stands: 4}},
	}
	s := &d.Strings[0]
	for k := range 5 {
		turn, flux := float64(k)/4, 10*float64(k)
		amps := 0.05 * turn
		s.Points = append(s.Points, calc.DialPoint{Setting: turn, Control: 5 * turn, Current: calc.Range{Min: amps * 0.9, Typ: amps, Max: amps * 1.1}, LuminousFlux: &calc.Range{Typ: flux}, Headroom: calc.Range{Min: 3 - 5*turn}, Regulates: turn <= 0.6})
		s.Curve = append(s.Curve, calc.CurvePoint{Setting: turn, Current: amps, LuminousFlux: &flux})
	}
	s.Points[4] = calc.DialPoint{Setting: 1, Runaway: true}
	s.Curve[4] = calc.CurvePoint{Setting: 1, Runaway: true}
	return d
}

func TestADialIsTold(t *testing.T) {
	b, r := someBuild()
	v := web.NewDialsView(web.MoreInput{ID: 1, Revision: 2, Build: b, Report: r}, []calc.DialTable{turned()}, 2)
	if v.None != "" || v.Rest != "1 of 2 settings are shown." || len(v.Dials) != 1 {
		t.Fatalf("%+v", v)
	}
	d := v.Dials[0]
	if d.Name != "String A" || d.Set != "set to 26\u00a0%" {
		t.Errorf("%q, %q", d.Name, d.Set)
	}
	var limits []string
	for _, l := range d.Limits {
		limits = append(limits, l.Volts)
	}
	if got, want := strings.Join(limits, "; "), "up to 60\u00a0% (3.00\u00a0V); at no setting; all the way"; got != want {
		t.Errorf("limits %q, want %q", got, want)
	}
	s := d.Strings[0]
	var words []string
	for _, row := range s.Rows {
		words = append(words, row.Verdict.Word)
	}
	if got, want := strings.Join(words, "; "), "holds; holds; holds; short of volts; gets too hot"; got != want {
		t.Errorf("rows %q, want %q", got, want)
	}
	if !s.Light || s.Rows[1].Light != "10.0\u00a0lm" || !s.Rows[1].Here || s.Rows[0].Here || s.Rows[4].Usual != "" {
		t.Errorf("rows %+v", s.Rows)
	}
}

func TestADialsCurve(t *testing.T) {
	b, r := someBuild()
	chart := web.NewDialsView(web.MoreInput{Build: b, Report: r}, []calc.DialTable{turned()}, 1).Dials[0].Strings[0].Chart
	left, right := float64(chart.X[0].At), float64(chart.X[len(chart.X)-1].At)
	if chart.XName != "%" || chart.X[len(chart.X)-1].Text != "100" || chart.YName != "mA" || chart.Y[len(chart.Y)-1].Text != "40" {
		t.Errorf("axes %+v %+v", chart.X, chart.Y)
	}
	near(t, "the part that holds begins at 0", float64(chart.Band.Y), left, 1e-9)
	near(t, "and is 60 % wide", float64(chart.Band.Tall), 0.6*(right-left), 1e-9)
	near(t, "where it stands", float64(chart.Here), left+0.26*(right-left), 1e-9)
	// The end runs away: four points are drawn.
	if n := strings.Count(chart.Current, "L"); n != 3 || strings.Count(chart.Light, "L") != 3 {
		t.Errorf("paths %q %q", chart.Current, chart.Light)
	}
}
