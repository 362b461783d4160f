package web

import (
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// newEntry returns an entry that shows what the document has.
func newEntry(at, label, kept string, kind EntryKind) *Entry {
	return &Entry{FieldView: FieldView{Name: at, Label: label, Value: kept}, Kind: kind, Where: "build", Kept: kept}
}

func textEntry(at, label, kept, example string) *Entry {
	e := newEntry(at, label, kept, EntryText)
	e.Placeholder = example
	return e
}

func linesEntry(at, label, kept string) *Entry {
	e := newEntry(at, label, kept, EntryLines)
	e.Lines = 4
	return e
}

func tagsEntry(at, label string, kept []string) *Entry {
	e := newEntry(at, label, strings.Join(kept, ", "), EntryTags)
	e.Placeholder = "with commas between"
	return e
}

func numberEntry(at, label string, kept float64, unit string) *Entry {
	e := newEntry(at, label, quantity.Text(kept, unit), EntryNumber)
	e.Unit = unit
	return e
}

func optionalEntry(at, label string, kept *float64, unit, example string) *Entry {
	e := newEntry(at, label, "", EntryNumber)
	if kept != nil {
		e = numberEntry(at, label, *kept, unit)
	}
	e.Unit, e.Empty, e.Placeholder = unit, true, example
	return e
}

func spreadEntry(at, label string, kept calc.Spread, unit string) *Entry {
	e := newEntry(at, label, quantity.FormatSpread(quantity.Spread(kept), unit), EntrySpread)
	e.Unit = unit
	return e
}

func wholeEntry(at, label string, kept int) *Entry {
	e := newEntry(at, label, strconv.Itoa(kept), EntryWhole)
	e.Mode = "numeric"
	return e
}

func choiceEntry(at, label, kept string, kind EntryKind, options []Option) *Entry {
	e := newEntry(at, label, kept, kind)
	e.Groups = []OptionGroup{{Options: options}}
	e.Rebuilds = kind == EntryDriver || kind == EntryControl || kind == EntryEnclosure || kind == EntryRail
	return e
}

func wantedEntry(at string, kept *calc.Wanted) *Entry {
	e := newEntry(at, "wanted", WantedText(kept), EntryWanted)
	e.Empty, e.Placeholder = true, "as it comes"
	return e
}

func conductorEntry(at, label string, r calc.Run) *Entry {
	e := newEntry(at, label, ConductorText(r), EntryConductor)
	e.Placeholder = "0.75 mm² or AWG 18"
	return e
}

// resistorRow is a row of three: what it has, how exact it is, what it bears.
func resistorRow(at, label string, r calc.Resistor) EntryRow {
	ohms := bareEntry(numberEntry(at+"/ohms", label+", ohms", r.Ohms, quantity.Ohm))
	tolerance := bareEntry(numberEntry(at+"/tolerance", label+", tolerance", r.Tolerance, quantity.Percent))
	tolerance.Empty = true
	watts := bareEntry(optionalEntry(at+"/watts", label+", rating", r.Watts, quantity.Watt, "rating?"))
	return EntryRow{Label: label, Entries: []*Entry{ohms, tolerance, watts}}
}

func oneRow(e *Entry) EntryRow { return EntryRow{Label: e.Label, Entries: []*Entry{e}} }

// bareEntry leaves the label to those who listen: what stands beside says it to
// those who look.
func bareEntry(e *Entry) *Entry {
	e.Layout = "bare-label"
	return e
}

func withHint(e *Entry, hint string) *Entry {
	e.Hint = hint
	return e
}
