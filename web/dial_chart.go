package web

import (
	"strings"

	"lanternbook/calc"
)

// DialChart is current and light against the setting, with the part marked in
// which the string holds its current.
type DialChart struct {
	Voice   string
	X, Y    []MarkView
	Lights  []MarkView // of the axis at the right
	XName   string     // "%", "V"
	YName   string     // "mA", "A"
	Current string     // path
	Light   string     // path; "" when it is not known
	Band    Band       // across: Y is its left end, Tall how wide
	Holds   string     // what the band is; "" for none
	Here    Px         // where the setting stands
}

// Measures of a dial's chart.
const (
	dialWide  Px = 420
	dialTall  Px = 222
	dialLeft  Px = 46
	dialRight Px = 372
	dialTop   Px = 24
	dialFoot  Px = 186
)

// dialChart draws the curve of one kind of string.
func dialChart(d *calc.DialTable, s *calc.DialString) DialChart {
	v := DialChart{XName: "V", YName: "mA", Voice: "Current against setting; it holds on a usual day: " + dialLimit(d, d.Usual)}
	byX, byY := 1.0, 1e3
	if d.By == "turn" {
		v.XName, byX = "%", 100
	}
	end, most, bright := 0.0, 0.0, 0.0
	for _, p := range s.Curve {
		end, most = max(end, p.Setting*byX), max(most, p.Current)
		if p.LuminousFlux != nil {
			bright = max(bright, *p.LuminousFlux)
		}
	}
	if most >= 1 {
		v.YName, byY = "A", 1
	}
	x := axis{from: 0, to: max(end, 1e-9), a: dialLeft, b: dialRight}
	y := rising(most * byY)
	light := rising(bright)
	v.X, v.Y = x.marks(), y.marks()
	if bright > 0 {
		v.Lights = light.marks()
	}
	var current, flux trace
	for _, p := range s.Curve {
		if p.Runaway {
			current.lift()
			flux.lift()
			continue
		}
		current.to(x.at(p.Setting*byX), y.at(p.Current*byY))
		if p.LuminousFlux != nil && bright > 0 {
			flux.to(x.at(p.Setting*byX), light.at(*p.LuminousFlux))
		}
	}
	v.Current, v.Light, v.Here = current.String(), flux.String(), x.at(d.Setting*byX)
	if l := d.Usual; !l.None {
		upTo := dialRight
		if !l.Whole {
			upTo = x.at(l.Setting * byX)
		}
		v.Band, v.Holds = Band{Y: dialLeft, Tall: upTo - dialLeft}, "holds its current"
	}
	return v
}

// rising is an upright axis from zero to a round figure above most.
func rising(most float64) axis {
	if !(most > 0) {
		most = 1
	}
	step := roundStep(most / 5)
	top := step
	for top < most {
		top += step
	}
	return axis{from: 0, to: top, a: dialFoot, b: dialTop}
}

// trace is a path that may be lifted off the paper.
type trace struct {
	strings.Builder
	down bool
}

func (t *trace) to(x, y Px) {
	letter := "M"
	if t.down {
		letter = "L"
	}
	t.down = true
	t.WriteString(letter + x.String() + " " + y.String())
}

func (t *trace) lift() { t.down = false }
