package web

import "strings"

// FieldView is one field of a form: a text input, a list to choose from when
// Groups is set, or several lines of text when Lines is above 1.
type FieldView struct {
	Name        string        // form name, "strings.0.driver.sense.ohms"; the id follows from it
	Label       string        // "sense resistor"
	Value       string        // as typed, or as the document has it, unit included: "110 Ω"
	Hint        string        // what a neighbour would give, or what to write here
	Error       string        // what is wrong with Value, as a sentence; empty when nothing is
	Mode        string        // inputmode for a phone's keyboard: "decimal", "numeric"; empty is text
	Placeholder string        // an example, never the only place a rule is told
	Lines       int           // above 1: a field of several lines
	Groups      []OptionGroup // not nil: a list to choose from
	Offers      []Offer       // buttons that put a value into this field
	Layout      string        // "" beside its label, "tall" below it, "bare-label" with the label for screen readers alone
	Required    bool
	Rebuilds    bool // a list whose choice changes which other fields there are
}

// OptionGroup is a headed part of a list; without a Label it stands unheaded.
type OptionGroup struct {
	Label   string
	Options []Option
}

// Option is one entry of a list.
type Option struct {
	Value string
	Text  string
}

// Offer is a button below a field that sets it.
type Offer struct {
	Value string // what it writes into the field, "18 Ω"
	Gives string // what that would give, "34.1 mA"
}

// FieldID returns the id of the input with this form name; a slash at its
// start, as JSON Pointers have, is left out. Ids hold letters, digits and
// dashes alone, so that a style sheet or a script can name them.
func FieldID(name string) string {
	return "f-" + strings.Map(func(r rune) rune {
		if r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || r == '-' {
			return r
		}
		return '-'
	}, strings.TrimPrefix(name, "/"))
}

// ID is the id of the input.
func (v FieldView) ID() string { return FieldID(v.Name) }

// HintID is the id of the line that holds the hint.
func (v FieldView) HintID() string { return v.ID() + "-hint" }

// ErrorID is the id of the line that holds the error.
func (v FieldView) ErrorID() string { return v.ID() + "-error" }

// OffersID is the id of the box that holds the offers.
func (v FieldView) OffersID() string { return v.ID() + "-offers" }

// describedBy lists what a screen reader says after the label.
func (v FieldView) describedBy() string { return v.ErrorID() + " " + v.HintID() }

// invalid is the value of aria-invalid.
func (v FieldView) invalid() string {
	if v.Error != "" {
		return "true"
	}
	return "false"
}

// class places the field beside, below or without its label.
func (v FieldView) class() string {
	if v.Layout == "" {
		return "field"
	}
	return "field " + v.Layout
}

// set is the value of an offer's button: the field's name and what to put
// into it, for a browser without scripts.
func (v FieldView) set(o Offer) string { return v.Name + "=" + o.Value }
