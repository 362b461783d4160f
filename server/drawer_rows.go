package main

import (
	"encoding/json"
	"net/url"
	"strings"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

// column is one figure of the drawer's table of a type. A column with several
// paths shows the first that the part has.
type column struct {
	head  string
	paths []string
	at    string // path of a figure that belongs to it: "… at 20 mA"
}

// columnsOf are the figures that one chooses a part of a type by.
func columnsOf(typ string) []column {
	switch typ {
	case calc.TypeLED:
		return []column{
			{head: "forward voltage", paths: []string{"forward_voltage"}, at: "test_current"},
			{head: "light", paths: []string{"luminous_flux", "luminous_intensity"}},
			{head: "current, most", paths: []string{"max_current"}},
			{head: "junction to air", paths: []string{"rth_junction_ambient"}},
		}
	case calc.TypeNPN, calc.TypePNP:
		return []column{
			{head: "VCE, most", paths: []string{"max_collector_emitter_voltage"}},
			{head: "IC, most", paths: []string{"max_collector_current"}},
			{head: "dissipation", paths: []string{"max_power"}},
			{head: "gain", paths: []string{"hfe"}, at: "hfe_at"},
			{head: "junction to air", paths: []string{"rth_junction_ambient"}},
			{head: "pins", paths: []string{"pins"}},
		}
	case calc.TypeNMOS:
		return []column{
			{head: "VDS, most", paths: []string{"max_drain_source_voltage"}},
			{head: "ID, most", paths: []string{"max_drain_current"}},
			{head: "gate threshold", paths: []string{"gate_threshold"}},
			{head: "on-resistance", paths: []string{"on_resistance"}, at: "on_resistance_at"},
			{head: "pins", paths: []string{"pins"}},
		}
	case calc.TypeOpamp:
		return []column{
			{head: "offset, most", paths: []string{"offset_voltage"}},
			{head: "inputs from", paths: []string{"input_low"}},
			{head: "output from", paths: []string{"output_low"}},
			{head: "supply, most", paths: []string{"max_supply"}},
		}
	case calc.TypeRegulator:
		return []column{
			{head: "reference", paths: []string{"reference_voltage"}},
			{head: "current, most", paths: []string{"max_current"}},
			{head: "least load", paths: []string{"least_load"}},
			{head: "dissipation", paths: []string{"max_power"}},
			{head: "pins", paths: []string{"pins"}},
		}
	case calc.TypeModule:
		return []column{
			{head: "current", paths: []string{"current"}},
			{head: "input", paths: []string{"input_voltage"}},
			{head: "output", paths: []string{"output_voltage"}},
			{head: "power, most", paths: []string{"max_power"}},
		}
	}
	return []column{
		{head: "voltage", paths: []string{"voltage"}},
		{head: "rated current", paths: []string{"max_current"}},
		{head: "price of one", paths: []string{"price"}},
	}
}

// partGroup is the parts of one type as a table.
func partGroup(typ string, parts []store.Part) web.PartGroupView {
	v := web.PartGroupView{Type: typ, Title: capital(typeWords(typ)), Add: "/drawer/new?type=" + typ, New: "new " + typeWord(typ)}
	columns := columnsOf(typ)
	for _, c := range columns {
		v.Heads = append(v.Heads, c.head)
	}
	figures := figuresByPath(typ)
	for _, p := range parts {
		v.Rows = append(v.Rows, partRow(p, columns, figures))
	}
	return v
}

func partRow(p store.Part, columns []column, figures map[string]figure) web.PartRowView {
	v := web.PartRowView{
		ID: partID(p.Key), Key: p.Key, Name: either(p.Name, p.Key), Href: partAddress(p.Key),
		Swatch: lightOf(p.Document), Copy: "/drawer/new?from=" + url.QueryEscape(p.Key), Delete: partAddress(p.Key) + "/delete",
	}
	document, err := readMembers(p.Document)
	if err != nil {
		document = nil // every figure is then shown as unknown
	}
	shines := ""
	if v.Swatch != nil {
		shines = v.Swatch.Word
	}
	v.About = joined(" · ", shines, figure{}.text(document.get("package")))
	for _, c := range columns {
		cell := web.CellView{Head: c.head}
		for _, path := range c.paths {
			if cell.Text == "" {
				cell.Text = figures[path].text(document.get(path))
			}
		}
		if c.at != "" {
			cell.At = figures[c.at].text(document.get(c.at))
		}
		v.Cells = append(v.Cells, cell)
	}
	return v
}

// figuresByPath is a type's form by its members.
func figuresByPath(typ string) map[string]figure {
	all := map[string]figure{}
	for _, group := range figuresOf(typ) {
		for _, fig := range group.figures {
			all[fig.path] = fig
		}
	}
	return all
}

// lightOf is how a part shines; nil when it does not.
func lightOf(document []byte) *web.Light {
	var led struct {
		Type       string   `json:"type"`
		Colour     string   `json:"colour"`
		Wavelength *float64 `json:"wavelength"` // [nm]
		CCT        *float64 `json:"cct"`        // [K]
	}
	if err := json.Unmarshal(document, &led); err != nil || led.Type != calc.TypeLED {
		return nil
	}
	light := web.Emitted(calc.LED{Colour: led.Colour, Wavelength: led.Wavelength, CCT: led.CCT})
	return &light
}

// capital begins with a capital.
func capital(words string) string {
	if words == "" {
		return ""
	}
	return strings.ToUpper(words[:1]) + words[1:]
}
