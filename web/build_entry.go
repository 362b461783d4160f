package web

import (
	"encoding/json"

	"lanternbook/calc"
)

// Entry is one value of a build's document as its form shows it. Its Name is
// the JSON Pointer of the value, so that a fault found there finds its field.
type Entry struct {
	FieldView
	Kind  EntryKind
	Unit  string // one of package quantity's, for a value with a unit
	Where string // "string A", for a list that mixes entries
	Kept  string // what the document has, as the field shows it
	Empty bool   // may be left empty, which takes the value out of the document
	Live  bool   // its hint and offers follow every edit
}

// EntryKind says how the text of an entry becomes a value of the document.
type EntryKind int

// The kinds of entries.
const (
	EntryText      EntryKind = iota // as it is
	EntryLines                      // as it is, in several lines
	EntryTags                       // words with commas between them
	EntryNumber                     // one value with a unit
	EntrySpread                     // a value with its limits
	EntryWhole                      // a count
	EntryChoice                     // one of a list, as it is
	EntryRun                        // a run's id; empty is straight at the supply
	EntryPart                       // a key of the build's parts, or of the drawer behind FromDrawer
	EntryWanted                     // a current or a light, by its unit
	EntryConductor                  // "0.75 mm²", "AWG 18" or ohms per metre, by its unit
	EntryDriver                     // the kind of driver: changes the driver's other entries
	EntryControl                    // the kind of control voltage: likewise
	EntryEnclosure                  // open or sealed: likewise
	EntryRail                       // the kind of a base rail: likewise
)

// FromDrawer stands before the key of a part that the drawer has and the
// build not yet.
const FromDrawer = "drawer:"

// EntryRow is what stands under one label: one entry, or several side by side.
type EntryRow struct {
	Label   string
	Entries []*Entry
}

// Stock is one part of the drawer: what a picker offers.
type Stock struct {
	Key      string
	Part     calc.Part
	Document json.RawMessage // as it is copied into a build
}

// BuildForm is every entry of a build, in the places where the page has them.
type BuildForm struct {
	Title   *Entry
	About   []*Entry // client, site, tags, notes
	Supply  []EntryRow
	Place   []EntryRow // ambient and enclosure
	Limits  []EntryRow
	Strings []StringForm
	Rails   []RailForm
	Runs    []RunForm
}

// StringForm is the entries of one string.
type StringForm struct {
	At       string // "/strings/0"
	Label    *Entry
	Quantity *Entry
	Stacks   []StackForm
	Wanted   *Entry
	Driver   *Entry
	Rows     []EntryRow // of the driver
	Run      *Entry
}

// StackForm is one stack of LEDs.
type StackForm struct {
	At       string // "/strings/0/leds/1"
	Part     *Entry
	Quantity *Entry
}

// RailForm is the entries of one base rail.
type RailForm struct {
	At   string // "/rails/0"
	ID   string
	Kind *Entry
	Rows []EntryRow
	Run  *Entry
	On   string // the strings that hang on it, in words
}

// RunForm is the entries of one run.
type RunForm struct {
	At        string // "/runs/0"
	ID        string
	From      *Entry
	Length    *Entry
	Conductor *Entry
}

// Entries lists every entry in the order of the page.
func (f BuildForm) Entries() []*Entry {
	list := []*Entry{f.Title}
	list = append(list, f.About...)
	rows := func(rows []EntryRow) {
		for _, r := range rows {
			list = append(list, r.Entries...)
		}
	}
	rows(f.Supply)
	rows(f.Place)
	rows(f.Limits)
	for _, s := range f.Strings {
		list = append(list, s.Label, s.Quantity)
		for _, stack := range s.Stacks {
			list = append(list, stack.Part, stack.Quantity)
		}
		list = append(list, s.Wanted, s.Driver)
		rows(s.Rows)
		list = append(list, s.Run)
	}
	for _, r := range f.Rails {
		list = append(list, r.Kind)
		rows(r.Rows)
		list = append(list, r.Run)
	}
	for _, r := range f.Runs {
		list = append(list, r.From, r.Length, r.Conductor)
	}
	return list
}
