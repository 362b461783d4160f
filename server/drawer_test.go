package main

import (
	"context"
	"encoding/json"
	"net/http"
	"net/url"
	"strings"
	"testing"

	"lanternbook/store"
	"lanternbook/web"
)

// stocked is a shop with three parts in the drawer.
func stocked(tb testing.TB) *shop {
	tb.Helper()
	p := openShop(tb)
	for key, document := range map[string]string{
		"bc547b": `{"type": "npn", "name": "BC547B", "package": "TO-92", "pins": "C-B-E", "price": 0.05, "notes": "Datasheet of 2003", "max_collector_emitter_voltage": 45, "hfe": {"min": 200, "typ": 290, "max": 450}, "hfe_at": 0.002}`,
		"amber":  `{"type": "led", "name": "Ämber 5 mm", "wavelength": 590, "test_current": 0.02, "forward_voltage": {"min": 2.0, "typ": 2.1, "max": 2.2}, "luminous_intensity": 3, "max_current": 0.03}`,
		"brick":  `{"type": "supply", "name": "12 V brick", "voltage": 12, "max_current": 1}`,
	} {
		if _, err := p.s.store.CreatePart(context.Background(), key, []byte(document)); err != nil {
			tb.Fatal(err)
		}
	}
	return p
}

func (p *shop) part(key string) store.Part {
	p.t.Helper()
	part, err := p.s.store.Part(context.Background(), key)
	if err != nil {
		p.t.Fatal(err)
	}
	return part
}

func TestDrawerShowsPartsInTradeUnits(t *testing.T) {
	p := stocked(t)
	page := p.get("/drawer")
	wantWords(t, page, "3 parts", "LEDs", "NPN transistors", "Supplies",
		"Ämber 5 mm", "2 / 2.1 / 2.2 V", "at 20 mA", "3 cd", "30 mA", `class="swatch"`, "amber",
		"BC547B", "45 V", "200 / 290 / 450", "at 2 mA", "C-B-E", "TO-92", "12 V brick", "1 A")
	if n := strings.Count(page, `aria-hidden="true">○</span><span class="aside-voice">not known</span>`); n != 5 {
		t.Errorf("%d figures are shown as not known, want 5: the LED's junction to air, the transistor's IC, dissipation and junction to air, the supply's price", n)
	}
	if strings.Index(page, "Ämber") > strings.Index(page, "BC547B") || strings.Index(page, "BC547B") > strings.Index(page, "12 V brick") {
		t.Error("the types do not stand in the drawer's order")
	}
}

type drawerSearchCase struct {
	name    string
	address string
	found   []string
	lost    []string
}

func TestDrawerSearch(t *testing.T) {
	p := stocked(t)
	for _, c := range []drawerSearchCase{
		{"by name", "/drawer?q=bc5", []string{"BC547B", "1 of 3 parts"}, []string{"mber", "brick"}},
		{"by name without marks", "/drawer?q=AMBER", []string{"Ämber", "1 of 3 parts"}, []string{"BC547B"}},
		{"by package", "/drawer?q=to-92", []string{"BC547B"}, []string{"mber"}},
		{"by notes", "/drawer?q=2003", []string{"BC547B"}, []string{"mber"}},
		{"by the light it gives", "/drawer?q=5+mm+amber", []string{"Ämber"}, []string{"BC547B"}},
		{"by its type's word", "/drawer?q=transistor", []string{"BC547B"}, []string{"mber"}},
		{"one type", "/drawer?type=supply", []string{"12 V brick", "1 of 3 parts"}, []string{"BC547B", "mber"}},
		{"a type that does not exist is no type", "/drawer?type=valve", []string{"3 parts"}, nil},
		{"none", "/drawer?q=amber+bc547", []string{"No part has all of “amber bc547”", "Show the whole drawer"}, []string{`class="tray"`}},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, found, _ := strings.Cut(p.get(c.address), `id="found"`)
			wantWords(t, found, c.found...)
			wantNot(t, found, c.lost...)
			rows := p.do(http.MethodGet, c.address, "", "HX-Request", "true")
			rows.wantStatus(t, http.StatusOK)
			wantWords(t, rows.body, c.found...)
			wantNot(t, rows.body, append(c.lost, "<html")...)
		})
	}
	wantWords(t, openShop(t).get("/drawer"), "The drawer is empty")
}

func TestNewPart(t *testing.T) {
	p := stocked(t)
	fields := fieldsOf(t, p.get("/drawer/new?type=npn"))
	fields.Set("name", "2N 3904")
	fields.Set("max_collector_current", "200 mA")
	at := p.press("/drawer", fields)
	if at != "/drawer?kept=2n-3904#part-2n-3904" {
		t.Errorf("the drawer opens at %q", at)
	}
	wantWords(t, p.get(at), "“2N 3904” is kept.", `id="part-2n-3904"`)
	if got, want := string(p.part("2n-3904").Document), `{"type":"npn","name":"2N 3904","max_collector_current":0.2}`; got != want {
		t.Errorf("kept %s, want %s", got, want)
	}
	// The same name again makes the next key.
	if at := p.press("/drawer", fields); at != "/drawer?kept=2n-3904-2#part-2n-3904-2" {
		t.Errorf("the second of that name is at %q", at)
	}
	fields.Set("key", "my-own")
	if at := p.press("/drawer", fields); at != "/drawer?kept=my-own#part-my-own" {
		t.Errorf("with a key typed it is at %q", at)
	}
	for typ, word := range map[string]string{"led": "forward voltage", "pnp": "VBE", "nmos": "gate threshold", "opamp": "offset", "regulator": "drop-out", "module": "efficiency", "supply": "derating", "": "forward voltage", "valve": "forward voltage"} {
		wantWords(t, p.get("/drawer/new?type="+typ), word)
	}
}

type keyCase struct{ key, words string }

func TestKeysOfNewParts(t *testing.T) {
	p := stocked(t)
	for _, c := range []keyCase{
		{"bc547b", "the drawer has a part of this key already"},
		{"new", "choose another"},
		{"BC 547", "like bc-547"},
		{"a/b", "like a-b"},
		{"..", "like bc547b"},
		{"x--y", "like x-y"},
	} {
		a := p.post("/drawer", url.Values{"type": {"npn"}, "name": {"Kept name"}, "key": {c.key}})
		a.wantStatus(t, http.StatusUnprocessableEntity)
		wantWords(t, a.body, c.words, `value="`+c.key+`"`, `value="Kept name"`)
	}
	parts, err := p.s.store.Parts(context.Background(), "")
	if err != nil || len(parts) != 3 {
		t.Errorf("%d parts, %v; want the three from before", len(parts), err)
	}
}

func TestRefusedPartKeepsWhatWasTyped(t *testing.T) {
	p := stocked(t)
	before := p.part("amber").Document
	fields := fieldsOf(t, p.get("/drawer/amber"))
	fields.Set("test_current", "20")
	fields.Set("max_junction", `"><script>alert(1)</script>`)
	fields.Set("notes", "</textarea><script>alert(2)</script>\r\nsecond line")
	fields.Set("model.n", "2")
	a := p.post("/drawer/amber", fields)
	a.wantStatus(t, http.StatusUnprocessableEntity)
	wantNot(t, a.body, "<script>alert")
	wantWords(t, a.body, `"20" has no unit: write it like 20 mA`, "is", `aria-invalid="true"`)
	again := fieldsOf(t, a.body)
	for name := range fields {
		if again.Get(name) != fields.Get(name) {
			t.Errorf("%s was typed %q and comes back as %q", name, fields.Get(name), again.Get(name))
		}
	}
	if !strings.Contains(a.body, `<details class="group" open>`) {
		t.Error("the folded group with a fault in it stays closed")
	}
	if string(p.part("amber").Document) != string(before) {
		t.Error("the refused part was kept")
	}
}

func TestEditPart(t *testing.T) {
	p := stocked(t)
	fields := fieldsOf(t, p.get("/drawer/bc547b"))
	fields.Set("max_collector_emitter_voltage", "50 V")
	at := p.press("/drawer/bc547b", fields)
	wantWords(t, p.get(at), "“BC547B” is kept.")
	wantJSON(t, string(p.part("bc547b").Document), `{"type": "npn", "name": "BC547B", "package": "TO-92", "pins": "C-B-E", "price": 0.05, "notes": "Datasheet of 2003", "max_collector_emitter_voltage": 50, "hfe": {"min": 200, "typ": 290, "max": 450}, "hfe_at": 0.002}`)
	p.do(http.MethodGet, "/drawer/nothing", "").wantStatus(t, http.StatusNotFound)
	p.post("/drawer/nothing", fields).wantStatus(t, http.StatusNotFound)
}

func TestPartChangedMeanwhile(t *testing.T) {
	p := stocked(t)
	mine := fieldsOf(t, p.get("/drawer/bc547b"))
	theirs := fieldsOf(t, p.get("/drawer/bc547b"))
	theirs.Set("max_collector_emitter_voltage", "30 V")
	p.press("/drawer/bc547b", theirs)

	mine.Set("package", "SOT-23")
	a := p.post("/drawer/bc547b", mine)
	a.wantStatus(t, http.StatusConflict)
	wantWords(t, a.body, "Somebody changed this part meanwhile", "VCE, most: 30 V", "package: TO-92")
	if strings.Contains(string(p.part("bc547b").Document), "SOT-23") {
		t.Error("theirs was overwritten unseen")
	}
	again := fieldsOf(t, a.body)
	if again.Get("package") != "SOT-23" {
		t.Error("mine is lost")
	}
	p.press("/drawer/bc547b", again) // having seen it, mine counts
	if got := string(p.part("bc547b").Document); !strings.Contains(got, "SOT-23") || !strings.Contains(got, `"max_collector_emitter_voltage":45`) {
		t.Errorf("kept %s", got)
	}
}

func TestCopyPart(t *testing.T) {
	p := stocked(t)
	fields := fieldsOf(t, p.get("/drawer/new?from=bc547b"))
	if fields.Get("name") != "BC547B, copy" || fields.Get("from") != "bc547b" || fields.Get("max_collector_emitter_voltage") != "45\u00a0V" {
		t.Errorf("the form holds %v", fields)
	}
	parts, err := p.s.store.Parts(context.Background(), "")
	if err != nil || len(parts) != 3 {
		t.Errorf("looking made a part: %d, %v", len(parts), err)
	}
	p.press("/drawer", fields)
	wantJSON(t, string(p.part("bc547b-copy").Document), strings.Replace(string(p.part("bc547b").Document), `"BC547B"`, `"BC547B, copy"`, 1))
	p.do(http.MethodGet, "/drawer/new?from=nothing", "").wantStatus(t, http.StatusNotFound)
}

func TestDeletePartAndBringBack(t *testing.T) {
	p := stocked(t)
	document := p.part("bc547b").Document
	at := p.press("/drawer/bc547b/delete", nil)
	for range 2 { // it stands after a reload too
		page := p.get(at)
		wantWords(t, page, "“BC547B” is in the bin.", "Builds that use it have their own copies", "bring it back", `action="/drawer/bc547b/restore"`, "Bin: 1 part")
		wantNot(t, page, `id="part-bc547b"`)
	}
	wantWords(t, p.get("/bin"), "BC547B", "NPN transistor")
	p.post("/drawer/bc547b/delete", nil).wantStatus(t, http.StatusNotFound)
	if got := p.press("/drawer/bc547b/restore", nil); got != "/drawer#part-bc547b" {
		t.Errorf("the drawer opens at %q", got)
	}
	wantNot(t, p.get(at), "in the bin")
	if string(p.part("bc547b").Document) != string(document) {
		t.Error("what came back is not what went")
	}
}

func TestPartInUseStaysInItsBuild(t *testing.T) {
	p := stocked(t)
	address := p.importBuild(shelfLight(t)) // it uses a part "amber" of its own
	before := p.get(address)
	fields := fieldsOf(t, p.get("/drawer/amber"))
	fields.Set("forward_voltage", "5 V")
	p.press("/drawer/amber", fields)
	p.press("/drawer/amber/delete", nil)
	if p.get(address) != before {
		t.Error("the build changed with the drawer")
	}
}

func TestBringBackOverANamesake(t *testing.T) {
	p := stocked(t)
	p.press("/drawer/bc547b/delete", nil)
	p.press("/drawer", url.Values{"type": {"npn"}, "name": {"Another"}, "key": {"bc547b"}})
	p.post("/drawer/bc547b/restore", nil).wantStatus(t, http.StatusConflict)
	wantWords(t, p.get("/bin"), "BC547B") // still there, nothing lost
	if p.part("bc547b").Name != "Another" {
		t.Error("the namesake was overwritten")
	}
}

func TestLookKeepsNothing(t *testing.T) {
	p := stocked(t)
	before := p.part("amber").Document
	fields := fieldsOf(t, p.get("/drawer/amber"))
	fields.Set("max_current", "0,02")
	fields.Set("wavelength", "470")
	a := p.do(http.MethodPost, "/drawer/amber/look", fields.Encode(), "Content-Type", formType, "HX-Request", "true")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, `id="look"`, "blue", "Volts against current", `hx-target="#f-max-current-error"`, `"0,02" has no unit`)
	wantNot(t, a.body, "<input", "<html")
	if string(p.part("amber").Document) != string(before) {
		t.Error("a look kept something")
	}

	a = p.do(http.MethodPost, "/drawer/new", url.Values{"type": {"led"}, "name": {"Größe"}}.Encode(), "Content-Type", formType, "HX-Request", "true")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "With the test current and the forward voltage", "empty: grosse")
	wantNot(t, a.body, "is needed") // nobody came to that field yet
}

func TestLookAtLED(t *testing.T) {
	form := typedForm("led", url.Values{
		"name": {"x"}, "test_current": {"20 mA"}, "forward_voltage": {"2.8 / 3 / 3.2 V"}, "max_current": {"30 mA"}, "luminous_flux": {"6 lm"},
		"flux_curve": {"0.5 0.53\n1 1\n1.5 1.4"}, "points": {"1 mA 2.7 V\n5 mA 2.8 V\n10 mA 2.9 V\n20 mA 3 V"}, "colour": {"warm white"}, "pins": {"A, K"},
	})
	form.document(nil)
	v := lookAt(form, nil)
	if v.Swatch == nil || v.Swatch.Word != "warm white" || strings.Join(v.Pins, "|") != "A|K" || v.Nothing != "" {
		t.Errorf("swatch %v, pins %v, %q", v.Swatch, v.Pins, v.Nothing)
	}
	if len(v.Curves) != 2 {
		t.Fatalf("%d curves, want volts and light", len(v.Curves))
	}
	volts := v.Curves[0]
	if len(volts.Points) != 4 || len(volts.Dots) != 1 || volts.Band == "" || volts.Ends != "30\u00a0mA at most" {
		t.Errorf("%d points, %d dots, band %t, end %q", len(volts.Points), len(volts.Dots), volts.Band != "", volts.Ends)
	}
	facts, err := json.Marshal(v.Facts)
	if err != nil {
		t.Fatal(err)
	}
	wantWords(t, string(facts), "60.0 mW", "100 lm/W") // 3 V · 20 mA, and 6 lm of it
	wantNot(t, string(facts), "assumed")

	// One slip takes away what depends on it, and nothing else.
	form.typed["points"] = "1 mA 2.7 V\nrubbish"
	form.faults = map[string]string{}
	form.document(nil)
	if v = lookAt(form, nil); len(v.Curves) != 2 || len(v.Curves[0].Points) != 0 {
		t.Errorf("with a slip in the points: %d curves", len(v.Curves))
	}
	form.typed["forward_voltage"] = "three"
	form.faults = map[string]string{}
	form.document(nil)
	if v = lookAt(form, nil); len(v.Curves) != 0 || v.Nothing == "" || v.Swatch == nil {
		t.Errorf("without a voltage: %d curves, %q", len(v.Curves), v.Nothing)
	}
}

func TestLookAtTransistor(t *testing.T) {
	form := typedForm("pnp", url.Values{"name": {"x"}, "vbe_on.volts": {"0.6 / 0.65 / 0.7 V"}, "vbe_on.at": {"2 mA"}, "max_collector_current": {"100 mA"}})
	form.document(nil)
	v := lookAt(form, nil)
	if len(v.Curves) != 1 || len(v.Curves[0].Dots) != 1 || v.Curves[0].Band == "" {
		t.Fatalf("%+v", v)
	}
	if len(v.Facts) != 1 || v.Facts[0].Name != "assumed" || !strings.Contains(v.Facts[0].Text, "hFE") {
		t.Errorf("facts %v, want the gain that had to be assumed", v.Facts)
	}
	decades := ""
	for _, m := range v.Curves[0].X {
		decades += m.Text + " "
	}
	if decades != "0.01 0.1 1 10 100 " {
		t.Errorf("marks at %q", decades)
	}
	if v := lookAt(typedForm("opamp", url.Values{"name": {"x"}}), nil); v.Nothing == "" {
		t.Error("an op-amp has nothing to look at, and the look does not say so")
	}
}

func TestPartFormTellsWhatMissingFiguresCost(t *testing.T) {
	p := stocked(t)
	wantWords(t, p.get("/drawer/amber"), "empty: the junction check stays unknown", "empty: the current check stays unknown", web.FieldID("max_junction"))
}
