package main

import (
	"encoding/json"
	"maps"
	"slices"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/store"
	"lanternbook/web"
)

// cardStrings is how many strings the small picture of a build shows; more of
// them could not be told apart at that size.
const cardStrings = 4

// card is what the shelf needs to draw a build small, kept beside it so that a
// shelf of hundreds is drawn without checking hundreds of builds.
type card struct {
	SupplyLabel string             `json:"supply_label"`
	SupplyVolts calc.Range         `json:"supply_volts"` // [V]
	LEDs        int                `json:"leds"`         // all of them, parallel strings counted
	Strings     []cardString       `json:"strings"`      // the first cardStrings
	More        int                `json:"more"`         // strings beyond those
	Parts       map[string]cardLED `json:"parts"`        // the LEDs in Strings by their key
}

// cardString is one string of a card.
type cardString struct {
	Label    string       `json:"label"`
	Quantity int          `json:"quantity"`
	Kind     string       `json:"kind"` // the driver's
	Stacks   []cardStack  `json:"stacks"`
	Column   *calc.Column `json:"column,omitempty"` // typical; nil when the build could not be solved
}

// cardStack is LEDs of one part in series.
type cardStack struct {
	Part     string `json:"part"`
	Quantity int    `json:"quantity"`
}

// cardLED is what decides in which colour an LED is drawn. At most one of the
// three is usually given.
type cardLED struct {
	Name       string   `json:"name,omitempty"`
	Colour     string   `json:"colour,omitempty"`
	Wavelength *float64 `json:"wavelength,omitempty"` // [nm]
	CCT        *float64 `json:"cct,omitempty"`        // [K]
}

// summary is what the store keeps beside a build's document for the shelf. err
// is what calc.Check returned: with one, the verdict is unknown and the picture
// has no columns.
func summary(b calc.Build, r calc.Report, err error) store.Summary {
	verdict := r.Verdict
	if err != nil || verdict == "" {
		r, verdict = calc.Report{}, calc.Unknown
	}
	picture, failed := json.Marshal(newCard(b, r))
	if failed != nil { // a figure that is no number: draw none, and vouch for none
		verdict = calc.Unknown
		picture, _ = json.Marshal(newCard(b, calc.Report{}))
	}
	return store.Summary{
		Title:   b.Title,
		Client:  b.Client,
		Site:    b.Site,
		Tags:    b.Tags,
		Search:  searchText(b),
		Verdict: string(verdict),
		Card:    picture,
	}
}

func newCard(b calc.Build, r calc.Report) card {
	v := b.Supply.Voltage
	c := card{
		SupplyLabel: b.Supply.Label,
		SupplyVolts: calc.Range{Min: v.Min, Typ: v.Typ, Max: v.Max},
		Strings:     []cardString{},
		More:        max(0, len(b.Strings)-cardStrings),
		Parts:       map[string]cardLED{},
	}
	for i, s := range b.Strings {
		each := 0
		small := cardString{Label: s.Label, Quantity: s.Quantity, Kind: s.Driver.Kind, Stacks: []cardStack{}}
		for _, stack := range s.LEDs {
			each += stack.Quantity
			small.Stacks = append(small.Stacks, cardStack{Part: stack.Part, Quantity: stack.Quantity})
		}
		c.LEDs += s.Quantity * each
		if i >= cardStrings {
			continue
		}
		if i < len(r.Strings) {
			small.Column = &r.Strings[i].Columns.Usual
		}
		c.Strings = append(c.Strings, small)
		for _, stack := range s.LEDs {
			if led := b.Parts[stack.Part].LED; led != nil {
				c.Parts[stack.Part] = cardLED{Name: led.Name, Colour: led.Colour, Wavelength: led.Wavelength, CCT: led.CCT}
			}
		}
	}
	return c
}

// searchText is every word that a build should be found by: what the job is
// called and for whom, what feeds it, the parts in it by key and by name, and
// the colours they shine in.
func searchText(b calc.Build) string {
	words := []string{b.Title, b.Client, b.Site}
	words = append(words, b.Tags...)
	words = append(words, b.Supply.Label, quantity.Format(b.Supply.Voltage.Typ, "V", 3))
	for _, key := range slices.Sorted(maps.Keys(b.Parts)) {
		words = append(words, key)
		part := b.Parts[key]
		is := web.PartCommon(part)
		words = append(words, is.Name, is.MakerCode)
		if part.LED != nil {
			words = append(words, part.LED.Colour, web.Emitted(*part.LED).Word)
		}
	}
	words = slices.DeleteFunc(words, func(w string) bool { return w == "" })
	return strings.Join(words, " ")
}
