package web

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// The corners in which a picture can be drawn, as an address names them.
const (
	Usual = "usual"
	Cold  = "cold"
	Hot   = "hot"
)

// Corners are the three with the words that choose them.
var Corners = []Option{{Usual, "usual day"}, {Cold, "cold, low supply"}, {Hot, "hot, high supply"}}

// PictureView is "where the volts go": the strings of a build as columns on
// one voltage axis.
type PictureView struct {
	Frame   Frame
	Scale   Scale
	Ticks   []Tick
	Band    Band
	Supply  Px     // the supply's line
	Feed    string // "23.5", at the axis
	Words   string // "supply 23.5 to 24.5 V, drawn at 23.5 V"
	Columns []ColumnView
	Crowded bool // too many to stand side by side: the picture scrolls
}

// Band is the supply's range on the axis.
type Band struct{ Y, Tall Px }

// ColumnView is one string as a column, and the words below it.
type ColumnView struct {
	Frame   Frame
	Scale   Scale
	Label   string       // "A"
	Times   string       // "× 4"
	Href    string       // the string's fields
	Parts   []ColumnPart // from the foot up
	Notes   []Note
	Over    *Over   // nil when the stack fits
	Worst   *Worst  // nil when there is none to show
	Current string  // "20.0 mA"
	Wanted  string  // "wanted 34 mA"; "" when nothing is asked for
	Met     string  // the outcome of that: a class
	Heat    string  // "0.25 W in BC547B"
	Left    string  // "3.05 V left over"
	Outcome string  // "pass", "tight" or "fail": the class of what is left over
	Voice   string  // the whole column in a sentence
	Top     float64 // [V] the top of the stack
}

// Worst is the bracket beside what is left over: how far the lower end of the
// LEDs moves over all corners, tolerances and spreads.
type Worst struct {
	Upper, Lower Px
	Words        string // "left over 0.8 V to 3.9 V in the worst case"
}

// NewPicture draws the strings of a build in one of the corners. The report
// must be the build's own.
func NewPicture(b calc.Build, r calc.Report, corner string, f Frame) PictureView {
	s := Scale{Top: highest(b, r), Foot: f.Foot, Margin: f.Margin}
	v := PictureView{Frame: f, Scale: s, Crowded: len(r.Strings) > mostAbreast}
	feed := b.Supply.Voltage.Typ
	for i, str := range r.Strings {
		c := atCorner(str.Columns, corner)
		feed = c.Supply
		view := column(b, i, str, c, s, f)
		view.Met = met(r, i)
		v.Columns = append(v.Columns, view)
	}
	v.Supply = s.Y(feed)
	v.Feed = strconv.FormatFloat(feed, 'g', 4, 64)
	v.Band = Band{Y: s.Y(b.Supply.Voltage.Max), Tall: s.Tall(b.Supply.Voltage.Max - b.Supply.Voltage.Min)}
	v.Words = supplyWords(b.Supply.Voltage, feed)
	for _, t := range s.Ticks(30) {
		if distance := t.Y - v.Supply; distance > 13 || distance < -13 {
			v.Ticks = append(v.Ticks, t)
		}
	}
	return v
}

// met is the outcome of the check whether string i gives what is wanted of it.
func met(r calc.Report, i int) string {
	for _, f := range r.Findings {
		if f.Code == "wanted" && strings.HasPrefix(f.At+"/", "/strings/"+strconv.Itoa(i)+"/") {
			return string(f.Severity)
		}
	}
	return ""
}

func atCorner(c calc.Columns, corner string) calc.Column {
	switch corner {
	case Cold:
		return c.Cold
	case Hot:
		return c.Hot
	}
	return c.Usual
}

// highest returns the voltage that the axis must reach: the supply's highest
// or, where LEDs are too many, the highest stack of any corner, so that the
// scale stays when the corner is changed.
func highest(b calc.Build, r calc.Report) float64 {
	top := b.Supply.Voltage.Max
	for _, s := range r.Strings {
		for _, c := range []calc.Column{s.Columns.Usual, s.Columns.Cold, s.Columns.Hot} {
			top = max(top, c.Supply, c.Supply-c.LeftOver)
		}
	}
	if !(top > 0) {
		return 1 // nothing to draw; the axis still needs a length
	}
	return top
}

func supplyWords(v calc.Spread, feed float64) string {
	at := "drawn at " + quantity.Text(feed, quantity.Volt)
	if v.Min == v.Max {
		return "supply " + at
	}
	short := func(v float64) string { return strconv.FormatFloat(v, 'g', 4, 64) }
	return "supply " + short(v.Min) + " to " + short(v.Max) + " V, " + at
}

// column draws string i.
func column(b calc.Build, i int, r calc.StringReport, c calc.Column, s Scale, f Frame) ColumnView {
	at := "/strings/" + strconv.Itoa(i)
	v := ColumnView{
		Frame: f, Scale: s, Label: r.Label, Times: "×\u00a0" + strconv.Itoa(r.Quantity), Href: "#string-" + strconv.Itoa(i),
		Current: quantity.Format(c.Current, quantity.Amp, 3),
		Heat:    quantity.Format(c.Heat, quantity.Watt, 2) + " in " + holder(b, i),
	}
	v.Parts, v.Notes, v.Top = stack(pieces(b, i, c, at), s, f, s.Y(c.Supply))
	v.Outcome, v.Left = leftOver(b, r, c)
	if w := b.Strings[i].Wanted; w != nil && w.Current != nil {
		v.Wanted = "wanted " + quantity.Text(*w.Current, quantity.Amp)
	}
	if c.LeftOver < 0 {
		v.Over = over(c, s, f)
	}
	v.Worst = worst(r, c, s)
	v.Voice = fmt.Sprintf("String %s, %d alike: %s, %s", r.Label, r.Quantity, v.Current, v.Left)
	if v.Worst != nil {
		v.Voice += "; " + v.Worst.Words
	}
	return v
}

// pieces lists what shares out the supply, from the foot up.
func pieces(b calc.Build, i int, c calc.Column, at string) []piece {
	driver := b.Strings[i].Driver
	list := []piece{
		{kind: "sense", volts: c.Sense, count: 1, name: senseName(driver), href: fieldLink(at + senseField(driver)),
			voice: senseName(driver) + " resistor, " + quantity.Format(c.Sense, quantity.Volt, 3)},
		{kind: "driver", volts: c.Driver, count: 1, name: "driver", href: fieldLink(at + holderField(driver)),
			voice: "least the driver needs, " + quantity.Format(c.Driver, quantity.Volt, 3)},
		{kind: "left", volts: c.LeftOver, count: 1, name: "left over", href: "#string-" + strings.TrimPrefix(at, "/strings/"),
			voice: "left over, " + quantity.Format(c.LeftOver, quantity.Volt, 3)},
	}
	for j, led := range slices.Backward(c.LEDs) {
		total := led.Each * float64(led.Quantity)
		light, name := Light{Word: led.Part}, led.Part
		if part, ok := b.Parts[led.Part]; ok && part.LED != nil {
			light, name = Emitted(*part.LED), partName(led.Part, part)
		}
		list = append(list, piece{
			kind: "led", volts: total, count: max(led.Quantity, 1), name: light.Word, light: light,
			href: fieldLink(at + "/leds/" + strconv.Itoa(j) + "/quantity"),
			voice: fmt.Sprintf("%d × %s, %s each, %s together", led.Quantity, name,
				quantity.Format(led.Each, quantity.Volt, 3), quantity.Format(total, quantity.Volt, 3)),
		})
	}
	return append(list, piece{kind: "run", volts: c.Run, count: 1, name: "run", href: fieldLink(at + "/fed_by"),
		voice: "lost in the run and the supply's own resistance, " + quantity.Format(c.Run, quantity.Volt, 2)})
}

// fieldLink is the address of a field on this page.
func fieldLink(name string) string { return "#" + FieldID(name) }

// senseName is what the resistor at the foot is called.
func senseName(d calc.Driver) string {
	if d.Kind == calc.KindResistor {
		return "series"
	}
	return "sense"
}

// senseField is the field of the resistor at the foot, below its string.
func senseField(d calc.Driver) string {
	switch d.Kind {
	case calc.KindResistor:
		return "/driver/resistor/ohms"
	case calc.KindRegulator:
		return "/driver/set/ohms"
	}
	return "/driver/sense/ohms"
}

// holderField is the field of the part that holds the current, below its
// string.
func holderField(d calc.Driver) string {
	switch d.Kind {
	case calc.KindResistor:
		return "/driver/resistor/ohms"
	case calc.KindTwoTransistor:
		return "/driver/pass"
	case calc.KindOpampSink:
		return "/driver/fet"
	case calc.KindRegulator:
		return "/driver/regulator"
	case calc.KindModule:
		return "/driver/module"
	}
	return "/driver/npn"
}

// holder names the part in which a string's driver gets hot.
func holder(b calc.Build, i int) string {
	key, d := "", b.Strings[i].Driver
	switch {
	case d.FollowerSink != nil:
		key = d.FollowerSink.NPN
	case d.ReferenceSink != nil:
		key = d.ReferenceSink.NPN
	case d.TwoTransistor != nil:
		key = d.TwoTransistor.Pass
	case d.RailSink != nil:
		key = d.RailSink.NPN
	case d.OpampSink != nil:
		key = d.OpampSink.FET
	case d.Regulator != nil:
		key = d.Regulator.Regulator
	case d.ModuleInstance != nil:
		key = d.ModuleInstance.Module
	default:
		return "the resistor"
	}
	return partName(key, b.Parts[key])
}

// leftOver says what is left over in this corner, and how that is to be seen:
// "pass", "tight" when it is less than the shop asks for, "fail" below 0.
func leftOver(b calc.Build, r calc.StringReport, c calc.Column) (outcome, words string) {
	if r.Kind == calc.KindResistor {
		return string(calc.Pass), quantity.Format(c.LeftOver+c.Sense, quantity.Volt, 3) + " on the resistor"
	}
	limit := calc.DefaultHeadroom
	if b.Limits != nil && b.Limits.Headroom != nil {
		limit = *b.Limits.Headroom
	}
	switch {
	case c.LeftOver < 0:
		return string(calc.Fail), quantity.Format(-c.LeftOver, quantity.Volt, 2) + " short"
	case c.LeftOver < limit:
		return string(calc.Tight), quantity.Format(c.LeftOver, quantity.Volt, 2) + " left over"
	}
	return string(calc.Pass), quantity.Format(c.LeftOver, quantity.Volt, 3) + " left over"
}

// over marks what of the stack stands higher than the supply.
func over(c calc.Column, s Scale, f Frame) *Over {
	text := quantity.Format(-c.LeftOver, quantity.Volt, 2) + " short"
	if figureWide(text) > f.Width-8 {
		text = quantity.Format(c.LeftOver, quantity.Volt, 2)
	}
	top := s.Y(c.Supply - c.LeftOver)
	return &Over{Volts: -c.LeftOver, Y: top, Tall: s.Y(c.Supply) - top, Line: s.Y(c.Supply), Text: text}
}

// worst places the bracket; none for a resistor, which holds nothing, nor
// where nothing is spread.
func worst(r calc.StringReport, c calc.Column, s Scale) *Worst {
	if r.Kind == calc.KindResistor || !(r.Headroom.Max > r.Headroom.Min) {
		return nil
	}
	foot := c.Sense + c.Driver
	return &Worst{
		Upper: s.Y(min(foot+r.Headroom.Max, s.Top)),
		Lower: s.Y(max(foot+r.Headroom.Min, 0)),
		Words: "left over " + quantity.Format(r.Headroom.Min, quantity.Volt, 2) + " to " + quantity.Format(r.Headroom.Max, quantity.Volt, 2) + " in the worst case",
	}
}
