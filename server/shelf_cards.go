package main

import (
	"encoding/json"
	"fmt"
	"net/url"
	"strconv"
	"strings"
	"time"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/store"
	"lanternbook/web"
)

// cardView is a build as the shelf shows it. A card that cannot be read, left
// by a version that wrote it otherwise, costs the picture alone.
func cardView(b store.Build, now time.Time) web.CardView {
	v := web.CardView{
		ID:        strconv.FormatInt(b.ID, 10),
		Title:     buildName(b.ID, b.Summary.Title),
		For:       joined(" · ", b.Summary.Client, b.Summary.Site),
		Verdict:   web.NewVerdict(b.Summary.Verdict),
		Touched:   when(b.Updated, now),
		TouchedAt: b.Updated.UTC().Format(time.RFC3339),
	}
	v.Href = "/builds/" + v.ID
	for _, tag := range b.Summary.Tags {
		v.Tags = append(v.Tags, web.LinkView{Text: tag, Href: "/?q=" + url.QueryEscape(tag)})
	}
	var c card
	if err := json.Unmarshal(b.Summary.Card, &c); err != nil {
		v.Stage = "no picture"
		return v
	}
	volts := c.SupplyVolts
	v.Supply = c.SupplyLabel
	v.Volts = quantity.FormatSpread(quantity.Spread{Min: volts.Min, Typ: volts.Typ, Max: volts.Max, Bare: volts.Min == volts.Max}, quantity.Volt)
	v.LEDs = ledWords(c)
	v.Picture, v.Stage = cardPicture(c)
	return v
}

// cardPicture draws the card's strings; the words say what is not drawn.
func cardPicture(c card) (web.SmallPicture, string) {
	var drawn []web.SmallString
	var said []string
	for _, s := range c.Strings {
		if s.Column == nil {
			continue
		}
		small := web.SmallString{Column: *s.Column}
		for _, led := range s.Column.LEDs {
			small.Lights = append(small.Lights, c.light(led.Part))
		}
		drawn = append(drawn, small)
		said = append(said, stringVoice(s))
	}
	missing := len(c.Strings) + c.More - len(drawn)
	words := ""
	switch {
	case len(c.Strings) == 0:
		return web.SmallPicture{}, "no strings yet"
	case len(drawn) == 0:
		return web.SmallPicture{}, "not solved"
	case missing > 0:
		words = fmt.Sprintf("+ %d more", missing)
	}
	return web.NewSmallPicture(c.SupplyVolts, drawn, strings.Join(said, "; ")), words
}

// stringVoice is what the picture shows of a string, in words.
func stringVoice(s cardString) string {
	over := s.Column.LeftOver
	switch {
	case s.Kind == calc.KindResistor:
		return "string " + s.Label + " on a resistor"
	case over < 0:
		return fmt.Sprintf("string %s is %s short", s.Label, quantity.Format(-over, quantity.Volt, 2))
	}
	return fmt.Sprintf("string %s has %s left over", s.Label, quantity.Format(over, quantity.Volt, 2))
}

// light is how a part of the card shines.
func (c card) light(key string) web.Light {
	led := c.Parts[key]
	return web.Emitted(calc.LED{Colour: led.Colour, Wavelength: led.Wavelength, CCT: led.CCT})
}

// ledWords is what lights in a build: "4 × 6 white", "3 × (4 amber + 3 red)".
// Strings alike are told once.
func ledWords(c card) string {
	var kinds []string
	alike := map[string]int{}
	for _, s := range c.Strings {
		var stacks []string
		for _, stack := range s.Stacks {
			stacks = append(stacks, strconv.Itoa(stack.Quantity)+" "+c.light(stack.Part).Word)
		}
		words := strings.Join(stacks, " + ")
		if words == "" {
			continue
		}
		if len(stacks) > 1 {
			words = "(" + words + ")"
		}
		if alike[words] == 0 {
			kinds = append(kinds, words)
		}
		alike[words] += s.Quantity
	}
	for i, words := range kinds {
		if n := alike[words]; n != 1 {
			kinds[i] = fmt.Sprintf("%d × %s", n, words)
		} else {
			kinds[i] = strings.Trim(words, "()")
		}
	}
	words := strings.Join(kinds, ", ")
	switch {
	case len(kinds) == 0:
		return "none"
	case c.More > 0:
		words += " and more, " + strconv.Itoa(c.LEDs) + " in all"
	}
	return words
}

// joined puts a separator between those texts that say anything.
func joined(separator string, texts ...string) string {
	var kept []string
	for _, t := range texts {
		if t = strings.TrimSpace(t); t != "" {
			kept = append(kept, t)
		}
	}
	return strings.Join(kept, separator)
}
