package main

import (
	"encoding/json"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc"
	"lanternbook/web"
)

// bench is a build with every kind of entry in it.
func bench(tb testing.TB) string {
	tb.Helper()
	return testFile(tb, "bench.json")
}

// sampleDocuments are all the documents that the tests and a first start have.
func sampleDocuments(tb testing.TB) map[string]string {
	tb.Helper()
	samples := map[string]string{"bench": bench(tb), "tide": tide(tb), "shelf": shelfLight(tb)}
	files, err := filepath.Glob("seed/builds/*.json")
	if err != nil || len(files) == 0 {
		tb.Fatalf("no builds of a first start: %v", err)
	}
	for _, file := range files {
		content, err := os.ReadFile(file)
		if err != nil {
			tb.Fatal(err)
		}
		samples[file] = string(content)
	}
	return samples
}

// buildOn reads a document and makes its form.
func buildOn(tb testing.TB, document string, drawer ...web.Stock) (calc.Build, web.BuildForm, *draft) {
	tb.Helper()
	b, err := calc.Read([]byte(document))
	if err != nil {
		tb.Fatalf("sample does not read: %v", err)
	}
	d, err := newDraft([]byte(document))
	if err != nil {
		tb.Fatal(err)
	}
	return b, web.NewBuildForm(b, drawer), d
}

// A form that is sent back as it came changes nothing, whatever the document.
func TestFormUnchangedIsNoEdit(t *testing.T) {
	for name, document := range sampleDocuments(t) {
		b, form, d := buildOn(t, document)
		texts := formText{}
		for _, e := range form.Entries() {
			texts[e.Name] = e.Value
		}
		faults := texts.write(d, form, b, nil, nil)
		if len(faults) > 0 || len(d.ops) > 0 {
			t.Errorf("%s: faults %v, patch %+v", name, faults, d.ops)
		}
	}
}

// Even when every text is read anew, it means what the document has: what a
// field shows loses no digit.
func TestFormTextsMeanTheirValues(t *testing.T) {
	for name, document := range sampleDocuments(t) {
		b, form, d := buildOn(t, document)
		for _, e := range form.Entries() {
			if _, has := d.get(e.Name); !has || e.Rebuilds && e.Kind != web.EntryPart {
				continue // not given, or a choice that fills in anew
			}
			if err := writeEntry(d, e, strings.TrimSpace(e.Value), b, nil); err != nil {
				t.Errorf("%s: %s %q: %v", name, e.Name, e.Value, err)
			}
		}
		for _, op := range d.ops {
			if op.Path != "/runs/2/conductor" && !strings.HasPrefix(op.Path, "/title") {
				t.Errorf("%s: %s becomes %v", name, op.Path, op.Value)
			}
		}
	}
}

type fieldEdit struct {
	name  string
	field string
	text  string
	patch string // of the bench
	fault string // words of the reason; "" when the text is taken
}

func TestFormFields(t *testing.T) {
	cases := []fieldEdit{
		{name: "a title", field: "/title", text: "  Pier  ", patch: `[{"op":"replace","path":"/title","value":"Pier"}]`},
		{name: "no title", field: "/title", text: " ", fault: "needs a name"},
		{name: "a label", field: "/strings/0/label", text: "Left", patch: `[{"op":"replace","path":"/strings/0/label","value":"Left"}]`},
		{name: "no label", field: "/strings/0/label", text: "", fault: "needs a name"},
		{name: "a client where the key is empty", field: "/client", text: "Harbour office", patch: `[{"op":"replace","path":"/client","value":"Harbour office"}]`},
		{name: "a site where there is no key", field: "/site", text: "Quay", patch: `[{"op":"add","path":"/site","value":"Quay"}]`},
		{name: "still no site", field: "/site", text: "  ", patch: `[]`},
		{name: "notes as a browser sends lines", field: "/notes", text: "two\r\nlines", patch: `[]`},
		{name: "longer notes", field: "/notes", text: "two\r\nlines\r\nmore", patch: `[{"op":"replace","path":"/notes","value":"two\nlines\nmore"}]`},
		{name: "tags", field: "/tags", text: "red , bench,, red", patch: `[{"op":"replace","path":"/tags","value":["red","bench"]}]`},
		{name: "no tags", field: "/tags", text: "", patch: `[{"op":"replace","path":"/tags","value":[]}]`},

		{name: "ohms in the resistor code", field: "/strings/0/driver/sense/ohms", text: "4k7", patch: `[{"op":"replace","path":"/strings/0/driver/sense/ohms","value":4700}]`},
		{name: "ohms with a decimal comma", field: "/strings/0/driver/sense/ohms", text: "2,2 kΩ", patch: `[{"op":"replace","path":"/strings/0/driver/sense/ohms","value":2200}]`},
		{name: "the same ohms in other words", field: "/strings/0/driver/sense/ohms", text: "0.11k", patch: `[]`},
		{name: "ohms that are amps", field: "/strings/0/driver/sense/ohms", text: "20 mA", fault: "amps"},
		{name: "ohms that are none", field: "/strings/0/driver/sense/ohms", text: "", fault: "missing"},
		{name: "a tolerance", field: "/strings/0/driver/sense/tolerance", text: "±5 %", patch: `[{"op":"replace","path":"/strings/0/driver/sense/tolerance","value":0.05}]`},
		{name: "no tolerance", field: "/strings/0/driver/sense/tolerance", text: "", patch: `[{"op":"remove","path":"/strings/0/driver/sense/tolerance"}]`},
		{name: "a tolerance where there is no key", field: "/strings/1/driver/sense/tolerance", text: "1", patch: `[{"op":"add","path":"/strings/1/driver/sense/tolerance","value":0.01}]`},
		{name: "watts as a fraction", field: "/strings/0/driver/sense/watts", text: "1/2 W", patch: `[{"op":"replace","path":"/strings/0/driver/sense/watts","value":0.5}]`},
		{name: "watts not known any more", field: "/strings/0/driver/sense/watts", text: "", patch: `[{"op":"remove","path":"/strings/0/driver/sense/watts"}]`},

		{name: "a spread as three values", field: "/supply/voltage", text: "22/24/26", patch: `[{"op":"replace","path":"/supply/voltage","value":{"max":26,"min":22,"typ":24}}]`},
		{name: "a spread as a margin", field: "/supply/voltage", text: "12 V ±5 %", patch: `[{"op":"replace","path":"/supply/voltage","value":{"max":12.6,"min":11.4,"typ":12}}]`},
		{name: "a spread as one value", field: "/supply/voltage", text: "24 V", patch: `[{"op":"replace","path":"/supply/voltage","value":24}]`},
		{name: "a spread that falls", field: "/supply/voltage", text: "26 / 24 / 22", fault: "rise"},
		{name: "degrees below zero", field: "/ambient", text: "−10 / 20 / 45 °C", patch: `[{"op":"replace","path":"/ambient","value":{"max":45,"min":-10,"typ":20}}]`},
		{name: "a rated current not known any more", field: "/supply/max_current", text: "", patch: `[{"op":"remove","path":"/supply/max_current"}]`},
		{name: "a source resistance where there is no key", field: "/supply/source_resistance", text: "0R22", patch: `[{"op":"add","path":"/supply/source_resistance","value":0.22}]`},
		{name: "a limit beside another", field: "/limits/loading", text: "70 %", patch: `[{"op":"add","path":"/limits/loading","value":0.7}]`},
		{name: "a surface", field: "/enclosure/surface_area", text: "0,5", patch: `[{"op":"replace","path":"/enclosure/surface_area","value":0.5}]`},
		{name: "an open can", field: "/enclosure/kind", text: "open", patch: `[{"op":"replace","path":"/enclosure","value":{"kind":"open"}}]`},
		{name: "a kind of can that there is not", field: "/enclosure/kind", text: "wet", fault: "choose"},

		{name: "how many alike", field: "/strings/0/quantity", text: "18", patch: `[{"op":"replace","path":"/strings/0/quantity","value":18}]`},
		{name: "half a string", field: "/strings/0/quantity", text: "1.5", fault: "whole number"},
		{name: "how many LEDs", field: "/strings/1/leds/1/quantity", text: " 4 ", patch: `[{"op":"replace","path":"/strings/1/leds/1/quantity","value":4}]`},
		{name: "another LED of the build", field: "/strings/1/leds/1/part", text: "white", patch: `[{"op":"replace","path":"/strings/1/leds/1/part","value":"white"}]`},
		{name: "a transistor in the place of an LED", field: "/strings/1/leds/1/part", text: "npn", fault: "choose"},

		{name: "a wanted current", field: "/strings/0/wanted", text: "30 mA", patch: `[{"op":"replace","path":"/strings/0/wanted","value":{"current":0.03}}]`},
		{name: "a wanted light instead", field: "/strings/0/wanted", text: "120 lm", patch: `[{"op":"replace","path":"/strings/0/wanted","value":{"luminous_flux":120}}]`},
		{name: "nothing wanted any more", field: "/strings/0/wanted", text: "", patch: `[{"op":"remove","path":"/strings/0/wanted"}]`},
		{name: "wanted where nothing was", field: "/strings/2/wanted", text: "5mA", patch: `[{"op":"add","path":"/strings/2/wanted","value":{"current":0.005}}]`},
		{name: "wanted, but what", field: "/strings/0/wanted", text: "20", fault: "say which"},
		{name: "wanted in volts", field: "/strings/0/wanted", text: "20 V", fault: "volts"},

		{name: "fed by another run", field: "/strings/0/fed_by", text: "r3", patch: `[{"op":"replace","path":"/strings/0/fed_by","value":"r3"}]`},
		{name: "straight at the supply", field: "/strings/0/fed_by", text: "", patch: `[{"op":"remove","path":"/strings/0/fed_by"}]`},
		{name: "fed by a run that there is not", field: "/strings/0/fed_by", text: "r9", fault: "choose"},
		{name: "a run from another", field: "/runs/2/from", text: "r1", patch: `[{"op":"replace","path":"/runs/2/from","value":"r1"}]`},
		{name: "a run from itself", field: "/runs/2/from", text: "r3", fault: "choose"},
		{name: "a length in feet", field: "/runs/0/length", text: "10 ft", patch: `[{"op":"replace","path":"/runs/0/length","value":3.048}]`},
		{name: "a conductor in mm²", field: "/runs/0/conductor", text: "1,5", patch: `[{"op":"replace","path":"/runs/0/conductor","value":"1.5 mm2"}]`},
		{name: "a conductor by gauge", field: "/runs/0/conductor", text: "awg20", patch: `[{"op":"replace","path":"/runs/0/conductor","value":"AWG 20"}]`},
		{name: "a conductor by its ohms", field: "/runs/0/conductor", text: "25 mΩ/m", patch: `[{"op":"remove","path":"/runs/0/conductor"},{"op":"add","path":"/runs/0/ohms_per_metre","value":0.025}]`},
		{name: "ohms become a conductor", field: "/runs/2/conductor", text: "0.75 mm²", patch: `[{"op":"remove","path":"/runs/2/ohms_per_metre"},{"op":"add","path":"/runs/2/conductor","value":"0.75 mm2"}]`},
		{name: "ohms per metre that are none", field: "/runs/2/conductor", text: "many/m", fault: "many/m"},

		{name: "a control voltage", field: "/strings/0/driver/control/volts", text: "3V3", patch: `[{"op":"replace","path":"/strings/0/driver/control/volts","value":3.3}]`},
		{name: "a trimmer's turn", field: "/strings/1/driver/control/pot/turn", text: "12 %", patch: `[{"op":"replace","path":"/strings/1/driver/control/pot/turn","value":0.12}]`},
		{name: "a divider's resistor", field: "/strings/2/driver/control/divider/lower/ohms", text: "1k2", patch: `[{"op":"replace","path":"/strings/2/driver/control/divider/lower/ohms","value":1200}]`},
		{name: "a reference's drift", field: "/strings/3/driver/reference/tempco", text: "−2 mV/K", patch: `[{"op":"replace","path":"/strings/3/driver/reference/tempco","value":-0.002}]`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			b, form, d := buildOn(t, bench(t))
			texts := readText(url.Values{c.field: {c.text}})
			faults := texts.write(d, form, b, nil, nil)
			if c.fault != "" {
				if !strings.Contains(faults[c.field], c.fault) || len(d.ops) > 0 {
					t.Fatalf("faults %v, patch %+v, want one with %q and no patch", faults, d.ops, c.fault)
				}
				return
			}
			patch, err := d.patch()
			if err != nil || len(faults) > 0 || string(patch) != c.patch {
				t.Fatalf("patch %s, faults %v, %v\nwant %s", patch, faults, err, c.patch)
			}
			after, err := applyPatch([]byte(bench(t)), patch)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := calc.Read(after); err != nil {
				t.Errorf("the reader refuses what came of it: %v", err)
			}
		})
	}
}

// One wrong field does not keep the others from being taken.
func TestFormTakesWhatIsRight(t *testing.T) {
	b, form, d := buildOn(t, bench(t))
	texts := formText{"/title": "Pier", "/strings/0/driver/sense/ohms": "many", "/strings/0/quantity": "2"}
	faults := texts.write(d, form, b, nil, nil)
	if len(faults) != 1 || faults["/strings/0/driver/sense/ohms"] == "" {
		t.Errorf("faults %v, want one at the sense resistor", faults)
	}
	title, _ := d.get("/title")
	quantity, _ := d.get("/strings/0/quantity")
	if title != "Pier" || quantity != json.Number("2") {
		t.Errorf("title %v, quantity %v", title, quantity)
	}
}

// Names that no entry has are not written anywhere.
func TestFormIgnoresOtherNames(t *testing.T) {
	b, form, d := buildOn(t, bench(t))
	texts := readText(url.Values{"/format": {"x"}, "/parts/npn/max_power": {"9"}, "revision": {"1"}, "/strings/99/label": {"Z"}})
	if faults := texts.write(d, form, b, nil, nil); len(faults) > 0 || len(d.ops) > 0 {
		t.Errorf("faults %v, patch %+v", faults, d.ops)
	}
}

func TestFormOffer(t *testing.T) {
	texts := readText(url.Values{"/strings/0/driver/sense/ohms": {"110 Ω"}})
	texts.offered("/strings/0/driver/sense/ohms=91 Ω")
	texts.offered("revision=7")
	if texts["/strings/0/driver/sense/ohms"] != "91 Ω" || texts["revision"] != "" {
		t.Errorf("texts %v", texts)
	}
}

// A part from the drawer is copied whole; the build's own part under the same
// key is never written over.
func TestFormCopiesParts(t *testing.T) {
	b, _, _ := buildOn(t, bench(t))
	amber := web.Stock{Key: "amber", Document: []byte(`{"type":"led","test_current":0.020,"forward_voltage":2.1}`)}
	other := web.Stock{Key: "red", Document: []byte(`{"type":"led","test_current":0.01,"forward_voltage":1.9}`)}
	same := web.Stock{Key: "white", Document: []byte(`{"luminous_flux":26,"type":"led","name":"white chip","cct":4e3,"test_current":0.060,"forward_voltage":{"min":2.8,"typ":2.95,"max":3.2},"max_current":0.09}`)}
	drawer := []web.Stock{amber, other, same}
	for i := range drawer {
		part, err := calc.ReadPart(drawer[i].Document)
		if err != nil {
			t.Fatal(err)
		}
		drawer[i].Part = part
	}
	for _, c := range []struct{ name, pick, patch string }{
		{"a new key", "drawer:amber", `[{"op":"add","path":"/parts/amber","value":{"forward_voltage":2.1,"test_current":0.020,"type":"led"}},{"op":"replace","path":"/strings/0/leds/0/part","value":"amber"}]`},
		{"a key that another part has", "drawer:red", `[{"op":"add","path":"/parts/red-2","value":{"forward_voltage":1.9,"test_current":0.01,"type":"led"}},{"op":"replace","path":"/strings/0/leds/0/part","value":"red-2"}]`},
	} {
		_, form, d := buildOn(t, bench(t), drawer...)
		faults := formText{"/strings/0/leds/0/part": c.pick}.write(d, form, b, drawer, nil)
		patch, err := d.patch()
		if err != nil || len(faults) > 0 || string(patch) != c.patch {
			t.Errorf("%s: patch %s, faults %v, %v\nwant %s", c.name, patch, faults, err, c.patch)
		}
	}
	_, form, d := buildOn(t, bench(t), drawer...)
	for _, g := range form.Strings[0].Stacks[0].Part.Groups {
		for _, o := range g.Options {
			if o.Value == "drawer:white" {
				t.Error("the picker offers from the drawer what the build has already")
			}
		}
	}
	if key, err := copyPart(d, "white", drawer); err != nil || key != "white" || len(d.ops) > 0 {
		t.Errorf("the very part that the build has: key %q, %v, patch %+v", key, err, d.ops)
	}
}

// Whatever is typed, the form never panics, and what it takes is a patch that
// applies.
func TestFormTakesAnything(t *testing.T) {
	document := bench(t)
	rapid.Check(t, func(r *rapid.T) {
		b, form, d := buildOn(t, document)
		entries := form.Entries()
		texts := formText{}
		for range rapid.IntRange(1, 4).Draw(r, "fields") {
			e := entries[rapid.IntRange(0, len(entries)-1).Draw(r, "entry")]
			texts[e.Name] = rapid.OneOf(
				rapid.String(),
				rapid.SampledFrom([]string{"", "0", "-1", "4k7", "20 mA", "NaN", "1e999", "open", "resistor", "pot", "divider", "r2", "white", "1/0", "AWG x"}),
			).Draw(r, "text")
		}
		texts.write(d, form, b, nil, nil)
		patch, err := d.patch()
		if err != nil {
			r.Fatal(err)
		}
		if _, err := applyPatch([]byte(document), patch); err != nil {
			r.Fatalf("%v makes a patch that does not apply: %s: %v", texts, patch, err)
		}
	})
}
