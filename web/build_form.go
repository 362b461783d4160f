package web

import (
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// NewBuildForm returns the entries of a build; drawer is what its pickers offer
// beside the build's own parts.
func NewBuildForm(b calc.Build, drawer []Stock) BuildForm {
	f := BuildForm{
		Title: textEntry("/title", "Title", b.Title, ""),
		About: []*Entry{
			textEntry("/client", "client", b.Client, ""), textEntry("/site", "site", b.Site, ""),
			tagsEntry("/tags", "tags", b.Tags), linesEntry("/notes", "notes", b.Notes),
		},
		Supply: []EntryRow{
			oneRow(textEntry("/supply/label", "supply", b.Supply.Label, "24 V adapter")),
			oneRow(withHint(spreadEntry("/supply/voltage", "voltage", b.Supply.Voltage, quantity.Volt), "least / usual / most, or 24 V ±2 %")),
			oneRow(optionalEntry("/supply/max_current", "rated current", b.Supply.MaxCurrent, quantity.Amp, "not known")),
			oneRow(numberEntry("/supply/source_resistance", "own resistance", b.Supply.SourceResistance, quantity.Ohm)),
		},
		Place:  placeRows(b),
		Limits: limitRows(b.Limits),
	}
	for _, row := range [][]EntryRow{f.Supply, f.Place, f.Limits} {
		placedIn(row, "build")
	}
	for i := range b.Strings {
		f.Strings = append(f.Strings, stringForm(b, i, drawer))
	}
	for i := range b.Rails {
		f.Rails = append(f.Rails, railForm(b, i, drawer))
	}
	for i := range b.Runs {
		f.Runs = append(f.Runs, runForm(b, i))
	}
	return f
}

func placeRows(b calc.Build) []EntryRow {
	kind := "open"
	if b.Enclosure != nil {
		kind = b.Enclosure.Kind
	}
	rows := []EntryRow{
		oneRow(withHint(spreadEntry("/ambient", "air outside", b.Ambient, quantity.Celsius), "coldest / usual / hottest")),
		oneRow(choiceEntry("/enclosure/kind", "parts are in", kind, EntryEnclosure, []Option{{"open", "open air"}, {"sealed", "a sealed can"}})),
	}
	if e := b.Enclosure; e != nil && e.Kind == "sealed" {
		rows = append(rows,
			oneRow(optionalEntry("/enclosure/surface_area", "its surface", e.SurfaceArea, quantity.SquareMetre, "0.4 m²")),
			oneRow(withHint(optionalEntry("/enclosure/heat_transfer", "heat through it", e.HeatTransfer, quantity.HeatTransfer, "8 W/(m²·K)"), "5 to 10 in still air")))
	}
	return rows
}

func limitRows(l *calc.Limits) []EntryRow {
	if l == nil {
		l = &calc.Limits{}
	}
	usual := func(v float64, unit string) string { return quantity.Text(v, unit) + " if left empty" }
	return []EntryRow{
		oneRow(optionalEntry("/limits/headroom", "least left over", l.Headroom, quantity.Volt, usual(calc.DefaultHeadroom, quantity.Volt))),
		oneRow(optionalEntry("/limits/junction_margin", "junctions below rating by", l.JunctionMargin, quantity.Kelvin, usual(calc.DefaultJunctionMargin, quantity.Kelvin))),
		oneRow(optionalEntry("/limits/loading", "most of the supply’s rating", l.Loading, quantity.Percent, usual(calc.DefaultLoading, quantity.Percent))),
	}
}

func stringForm(b calc.Build, i int, drawer []Stock) StringForm {
	s := b.Strings[i]
	at := "/strings/" + strconv.Itoa(i)
	f := StringForm{
		At:       at,
		Label:    textEntry(at+"/label", "label", s.Label, ""),
		Quantity: wholeEntry(at+"/quantity", "how many alike", s.Quantity),
		Wanted:   withHint(wantedEntry(at+"/wanted", s.Wanted), "a current or a light: 20 mA, 55 lm"),
		Driver:   choiceEntry(at+"/driver/kind", "driver", s.Driver.Kind, EntryDriver, kindWords),
		Rows:     driverRows(b, s.Driver, at+"/driver", drawer),
		Run:      choiceEntry(at+"/fed_by", "fed by", s.FedBy, EntryRun, runOptions(b, "")),
	}
	for j, stack := range s.LEDs {
		below := at + "/leds/" + strconv.Itoa(j)
		f.Stacks = append(f.Stacks, StackForm{
			At:       below,
			Part:     bareEntry(partEntry(below+"/part", "LED "+strconv.Itoa(j+1)+" from the plus end", stack.Part, calc.TypeLED, b, drawer)),
			Quantity: bareEntry(wholeEntry(below+"/quantity", "how many of LED "+strconv.Itoa(j+1), stack.Quantity)),
		})
	}
	where := "string " + s.Label
	for _, e := range []*Entry{f.Label, f.Quantity, f.Wanted, f.Driver, f.Run} {
		e.Where = where
	}
	for _, stack := range f.Stacks {
		stack.Part.Where, stack.Quantity.Where = where, where
	}
	placedIn(f.Rows, where)
	return f
}

func runForm(b calc.Build, i int) RunForm {
	r := b.Runs[i]
	at := "/runs/" + strconv.Itoa(i)
	f := RunForm{
		At: at, ID: r.ID,
		From:      bareEntry(choiceEntry(at+"/from", "run "+r.ID+" comes from", r.From, EntryChoice, runOptions(b, r.ID))),
		Length:    bareEntry(numberEntry(at+"/length", "length of run "+r.ID, r.Length, quantity.Metre)),
		Conductor: bareEntry(conductorEntry(at+"/conductor", "conductor of run "+r.ID, r)),
	}
	for _, e := range []*Entry{f.From, f.Length, f.Conductor} {
		e.Where = "run " + r.ID
	}
	return f
}

// runOptions lists where a string or a run may hang; a run may not hang on
// itself. An empty value is straight at the supply, but for a run it is
// written out.
func runOptions(b calc.Build, except string) []Option {
	options := []Option{{"", "straight at the supply"}}
	if except != "" {
		options[0].Value = "supply"
	}
	for _, r := range b.Runs {
		if r.ID == except {
			continue
		}
		options = append(options, Option{r.ID, fmt.Sprintf("%s: %s of %s", r.ID, quantity.Text(r.Length, quantity.Metre), ConductorText(r))})
	}
	return options
}

// ConductorText writes what a run is made of: "0.75 mm²", "AWG 18", "25 mΩ/m".
func ConductorText(r calc.Run) string {
	if r.OhmsPerMetre != nil {
		return quantity.Text(*r.OhmsPerMetre, quantity.OhmPerMetre)
	}
	if area, found := strings.CutSuffix(r.Conductor, "mm2"); found {
		return strings.TrimSpace(area) + "\u00a0mm²"
	}
	return r.Conductor
}

// WantedText writes what is asked of a string: "20 mA", "55 lm", or nothing.
func WantedText(w *calc.Wanted) string {
	switch {
	case w == nil:
		return ""
	case w.Current != nil:
		return quantity.Text(*w.Current, quantity.Amp)
	case w.LuminousFlux != nil:
		return quantity.Text(*w.LuminousFlux, quantity.Lumen)
	}
	return ""
}

// placedIn says where the entries of rows belong.
func placedIn(rows []EntryRow, where string) {
	for _, r := range rows {
		for _, e := range r.Entries {
			e.Where = where
		}
	}
}
