package main

import (
	"errors"
	"fmt"
	"net/url"
	"slices"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/store"
	"lanternbook/web"
)

// formText is what a build's form brought: texts by the names of its entries,
// which are JSON Pointers into the document.
type formText map[string]string

// readText takes the entries out of a posted form. Where a name came twice the
// last one counts.
func readText(posted url.Values) formText {
	texts := formText{}
	for name, values := range posted {
		if strings.HasPrefix(name, "/") && len(values) > 0 {
			texts[name] = strings.ReplaceAll(values[len(values)-1], "\r\n", "\n")
		}
	}
	return texts
}

// offered applies what a button below a field sets: "name=value".
func (f formText) offered(set string) {
	if name, value, found := strings.Cut(set, "="); found && strings.HasPrefix(name, "/") {
		f[name] = value
	}
}

// changed tells whether an entry's text is another one than the document has.
func (f formText) changed(e *web.Entry) bool {
	text, came := f[e.Name]
	return came && strings.TrimSpace(text) != strings.TrimSpace(strings.ReplaceAll(e.Kept, "\r\n", "\n"))
}

// write puts every entry that the form changed into the draft, and returns
// what is wrong with the others, by name. Entries in without are left alone.
// A text that stands for the value the document has already changes nothing.
func (f formText) write(d *draft, form web.BuildForm, b calc.Build, drawer []web.Stock, without map[string]string) map[string]string {
	faults := map[string]string{}
	for _, e := range form.Entries() {
		if _, skip := without[e.Name]; skip || !f.changed(e) {
			continue
		}
		if err := writeEntry(d, e, strings.TrimSpace(f[e.Name]), b, drawer); err != nil {
			faults[e.Name] = err.Error()
		}
	}
	return faults
}

// writeEntry puts one entry into the draft. The error is a sentence for the
// person who typed; the draft is then as it was.
func writeEntry(d *draft, e *web.Entry, text string, b calc.Build, drawer []web.Stock) error {
	if text == "" && e.Empty {
		return d.remove(e.Name)
	}
	switch e.Kind {
	case web.EntryText, web.EntryLines:
		return writeWords(d, e, text)
	case web.EntryTags:
		return d.set(e.Name, readTags(text))
	case web.EntryNumber:
		v, err := quantity.Parse(text, e.Unit)
		if err != nil {
			return err
		}
		return d.set(e.Name, v)
	case web.EntrySpread:
		return writeSpread(d, e, text)
	case web.EntryWhole:
		n, err := strconv.Atoi(text)
		if err != nil {
			return errors.New("write a whole number, like 6")
		}
		return d.set(e.Name, n)
	case web.EntryWanted:
		return writeWanted(d, e.Name, text)
	case web.EntryConductor:
		return writeConductor(d, e.Name, text)
	}
	if !offers(e, text) {
		return errors.New("choose one of the list")
	}
	switch e.Kind {
	case web.EntryRun:
		if text == "" {
			return d.remove(e.Name)
		}
	case web.EntryPart:
		return writePart(d, e.Name, text, drawer)
	case web.EntryDriver:
		return writeDriver(d, strings.TrimSuffix(e.Name, "/kind"), text, b, drawer)
	case web.EntryControl:
		return writeControl(d, e.Name, text, b.Supply.Voltage.Typ)
	case web.EntryRail:
		return writeRail(d, strings.TrimSuffix(e.Name, "/kind"), text, b, drawer)
	case web.EntryEnclosure:
		return writeEnclosure(d, text)
	}
	return d.set(e.Name, text)
}

// offers tells whether a list has this entry.
func offers(e *web.Entry, value string) bool {
	for _, g := range e.Groups {
		if slices.ContainsFunc(g.Options, func(o web.Option) bool { return o.Value == value }) {
			return true
		}
	}
	return false
}

// writeWords keeps a text. Only the title and labels, which name things, must
// not be empty.
func writeWords(d *draft, e *web.Entry, text string) error {
	if text == "" {
		if e.Name == "/title" || strings.HasPrefix(e.Name, "/strings/") {
			return errors.New("this needs a name")
		}
		if _, has := d.get(e.Name); !has {
			return nil
		}
	}
	return d.set(e.Name, text)
}

func readTags(text string) []string {
	tags := []string{}
	for tag := range strings.SplitSeq(text, ",") {
		if tag = strings.TrimSpace(tag); tag != "" && !slices.Contains(tags, tag) {
			tags = append(tags, tag)
		}
	}
	return tags
}

// writeSpread keeps a value with its limits, as one number where it was
// written so.
func writeSpread(d *draft, e *web.Entry, text string) error {
	s, err := quantity.ParseSpread(text, e.Unit)
	if err != nil {
		return err
	}
	if s.Bare {
		return d.set(e.Name, s.Typ)
	}
	return d.set(e.Name, map[string]float64{"min": s.Min, "typ": s.Typ, "max": s.Max})
}

// writeWanted reads a wish: its unit says whether it is a current or a light.
func writeWanted(d *draft, at, text string) error {
	if _, err := quantity.Parse(text, quantity.Number); err == nil {
		return errors.New("say which: 20 mA is a current, 55 lm a light")
	}
	current, err := quantity.Parse(text, quantity.Amp)
	if err == nil {
		return d.set(at, map[string]float64{"current": current})
	}
	flux, failed := quantity.Parse(text, quantity.Lumen)
	if failed == nil {
		return d.set(at, map[string]float64{"luminous_flux": flux})
	}
	return err
}

// writeConductor reads what a run is made of. Which of the two keys it is for
// follows from the text: only ohms per metre have a slash.
func writeConductor(d *draft, at, text string) error {
	parent, _ := pointerSplit(at)
	if strings.Contains(text, "/") {
		ohms, err := quantity.Parse(text, quantity.OhmPerMetre)
		if err != nil {
			return err
		}
		if err := d.remove(at); err != nil {
			return err
		}
		return d.set(parent+"/ohms_per_metre", ohms)
	}
	name := strings.NewReplacer("\u00a0", " ", "mm²", "mm2", "mm^2", "mm2", "sqmm", "mm2").Replace(text)
	if area, err := quantity.Parse(name, quantity.SquareMm); err == nil {
		name = strconv.FormatFloat(area, 'f', -1, 64) + " mm2"
	} else if gauge, found := strings.CutPrefix(strings.ToUpper(name), "AWG"); found {
		name = "AWG " + strings.TrimSpace(gauge)
	}
	if err := d.remove(parent + "/ohms_per_metre"); err != nil {
		return err
	}
	return d.set(at, name)
}

// writeEnclosure opens the can or closes it; a closed one starts with the
// surface of a small case and the heat that still air takes from it.
func writeEnclosure(d *draft, kind string) error {
	if kind == "sealed" {
		return d.set("/enclosure", map[string]any{"kind": "sealed", "surface_area": 0.1, "heat_transfer": 8})
	}
	return d.set("/enclosure", map[string]any{"kind": "open"})
}

// stockOf reads the drawer's parts for the pickers. One that no longer passes
// the reader is left out: it cannot be put into a build.
func stockOf(parts []store.Part) []web.Stock {
	var stock []web.Stock
	for _, p := range parts {
		read, err := calc.ReadPart(p.Document)
		if err != nil {
			continue
		}
		stock = append(stock, web.Stock{Key: p.Key, Part: read, Document: p.Document})
	}
	return stock
}

// writePart gives a place the key of a part. One from the drawer is copied
// whole into the build's own parts first.
func writePart(d *draft, at, value string, drawer []web.Stock) error {
	key, fromDrawer := strings.CutPrefix(value, web.FromDrawer)
	if !fromDrawer {
		return d.set(at, key)
	}
	key, err := copyPart(d, key, drawer)
	if err != nil {
		return err
	}
	return d.set(at, key)
}

// copyPart copies a part of the drawer into the build, and returns the key that
// it has there. A build that has the very part already keeps the one; another
// part under the same key stays as it is, and the copy gets the next free key.
func copyPart(d *draft, key string, drawer []web.Stock) (string, error) {
	i := slices.IndexFunc(drawer, func(s web.Stock) bool { return s.Key == key })
	if i < 0 {
		return "", fmt.Errorf("the drawer has no %q any more", key)
	}
	part, err := decodeTree(drawer[i].Document)
	if err != nil {
		return "", err
	}
	for n := 2; ; n++ {
		own, has := d.get("/parts/" + pointerEscape(key))
		if !has {
			return key, d.set("/parts/"+pointerEscape(key), part)
		}
		if sameJSON(own, part) {
			return key, nil
		}
		key = drawer[i].Key + "-" + strconv.Itoa(n)
	}
}
