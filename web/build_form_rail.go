package web

import (
	"strconv"
	"strings"

	"lanternbook/calc"
)

// The kinds of base rail.
const (
	RailFollower  = "follower"
	RailReference = "reference"
	RailBuffered  = "buffered-reference"
)

// railKinds are the kinds of base rail in the trade's words.
var railKinds = []Option{
	{RailFollower, "follower, set by a voltage"},
	{RailReference, "reference (Zener, diodes)"},
	{RailBuffered, "reference behind a follower"},
}

// railForm is the entries of rail i.
func railForm(b calc.Build, i int, drawer []Stock) RailForm {
	r := b.Rails[i]
	at := "/rails/" + strconv.Itoa(i)
	f := RailForm{
		At: at, ID: r.ID,
		Kind: choiceEntry(at+"/kind", "made by", r.Kind, EntryRail, railKinds),
		Run:  choiceEntry(at+"/fed_by", "fed by", r.FedBy, EntryRun, runOptions(b, "")),
		On:   stringsOn(b, r.ID),
	}
	if r.Control != nil {
		f.Rows = append(f.Rows, controlRows(*r.Control, at+"/control")...)
	}
	if r.Reference != nil {
		f.Rows = append(f.Rows, referenceRows(*r.Reference, at+"/reference")...)
	}
	for _, fitted := range []struct {
		name, label string
		resistor    *calc.Resistor
	}{{"pullup", "pull-up", r.Pullup}, {"bias", "bias resistor", r.Bias}, {"pulldown", "pull-down", r.Pulldown}} {
		if fitted.resistor != nil {
			f.Rows = append(f.Rows, resistorRow(at+"/"+fitted.name, fitted.label, *fitted.resistor))
		}
	}
	switch r.Kind {
	case RailFollower:
		f.Rows = append(f.Rows, oneRow(partEntry(at+"/pnp", "follower transistor", r.PNP, calc.TypePNP, b, drawer)))
	case RailBuffered:
		f.Rows = append(f.Rows, oneRow(partEntry(at+"/npn", "follower transistor", r.NPN, calc.TypeNPN, b, drawer)))
	}
	where := "rail " + r.ID
	f.Kind.Where, f.Run.Where = where, where
	placedIn(f.Rows, where)
	return f
}

// railOptions lists the rails that a string's base may hang on.
func railOptions(b calc.Build) []Option {
	var options []Option
	for _, r := range b.Rails {
		options = append(options, Option{r.ID, "rail " + r.ID})
	}
	return options
}

// stringsOn names the strings whose bases hang on a rail.
func stringsOn(b calc.Build, rail string) string {
	var labels []string
	for _, s := range b.Strings {
		if d := s.Driver.RailSink; d != nil && d.Rail == rail {
			labels = append(labels, s.Label)
		}
	}
	switch len(labels) {
	case 0:
		return "no string hangs on it yet"
	case 1:
		return "string " + labels[0]
	}
	return "strings " + strings.Join(labels, ", ")
}
