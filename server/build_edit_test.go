package main

import (
	"fmt"
	"html"
	"net/http"
	"net/url"
	"strings"
	"testing"

	"lanternbook/calc"
)

// buildTab is a build's page as somebody has it open: it remembers the
// revision that it stands on, as the page's hidden field does.
type buildTab struct {
	*shop
	page     string // "/builds/1"
	revision string
}

// openBuild imports a document and opens its page.
func openBuild(tb testing.TB, document string) *buildTab {
	tb.Helper()
	p := openShop(tb)
	return p.openBuild(strings.Replace(p.importBuild(document), "/api", "", 1))
}

func (p *shop) openBuild(page string) *buildTab {
	p.t.Helper()
	b := &buildTab{shop: p, page: page}
	a := p.do(http.MethodGet, page, "")
	a.wantStatus(p.t, http.StatusOK)
	b.revision = between(p.t, a.body, `name="revision" value="`, `"`)
	return b
}

// post sends the form with these fields, as a plain browser does.
func (b *buildTab) post(fields ...string) answer {
	b.t.Helper()
	return b.send(b.page, nil, fields)
}

// live sends the form as the script does, and takes over the new revision.
func (b *buildTab) live(fields ...string) answer {
	b.t.Helper()
	a := b.send(b.page, []string{"HX-Request", "true"}, fields)
	if strings.Contains(a.body, `name="revision"`) {
		b.revision = between(b.t, a.body, `name="revision" value="`, `"`)
	}
	return a
}

func (b *buildTab) send(path string, headers, fields []string) answer {
	b.t.Helper()
	form := url.Values{"revision": {b.revision}, "shown": {"usual"}, "open": {"0"}}
	for i := 0; i+1 < len(fields); i += 2 {
		form.Set(fields[i], fields[i+1])
	}
	return b.do(http.MethodPost, path, form.Encode(), append(headers, "Content-Type", "application/x-www-form-urlencoded")...)
}

// kept is the build as the store has it.
func (b *buildTab) kept() calc.Build {
	b.t.Helper()
	a := b.do(http.MethodGet, "/api"+b.page, "")
	a.wantStatus(b.t, http.StatusOK)
	read, err := calc.Read([]byte(a.body))
	if err != nil {
		b.t.Fatal(err)
	}
	return read
}

// between returns what stands between two texts.
func between(tb testing.TB, s, before, after string) string {
	tb.Helper()
	_, rest, found := strings.Cut(s, before)
	middle, _, ends := strings.Cut(rest, after)
	if !found || !ends {
		tb.Fatalf("no %q with a %q after it in: %.400s", before, after, s)
	}
	return html.UnescapeString(middle)
}

// fault is the reason beside a field.
func fault(tb testing.TB, a answer, id string) string {
	tb.Helper()
	return between(tb, a.body, fmt.Sprintf(`<p class="error" id="%s-error">`, id), "</p>")
}

func TestBuildPageShowsTheBuild(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.do(http.MethodGet, b.page+"?corner=cold&string=1", "")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, `value="Bench of every kind"`, `value="23.5 / 24 / 24.5 V"`, `value="110 Ω"`, "Where the volts go",
		"kept 09:00", "revision 1", `id="corner-cold">`, `aria-pressed="true" id="corner-cold"`)
	if got := between(t, a.body, `id="string-1" data-string="1"`, ">"); !strings.Contains(got, "open") {
		t.Error("the second string's fields do not stand open")
	}
}

func TestBuildPageThatIsNotThere(t *testing.T) {
	p := openShop(t)
	for _, page := range []string{"/builds/1", "/builds/0", "/builds/x", "/builds/-3"} {
		p.do(http.MethodGet, page, "").wantStatus(t, http.StatusNotFound)
		p.do(http.MethodPost, page, "", "Content-Type", "application/x-www-form-urlencoded").wantStatus(t, http.StatusNotFound)
	}
}

func TestBuildPlainPost(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.post("/strings/0/driver/sense/ohms", "91", "shown", "hot", "open", "2")
	a.wantStatus(t, http.StatusSeeOther)
	if got := a.header.Get("Location"); got != b.page+"?corner=hot&string=2" {
		t.Errorf("goes on to %s", got)
	}
	if got := b.kept().Strings[0].Driver.FollowerSink.Sense.Ohms; got != 91 {
		t.Errorf("kept %v Ω", got)
	}
}

// What is wrong stays beside its field as it was typed; what is right is kept.
func TestBuildPlainPostWithAFault(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.post("/strings/0/driver/sense/ohms", "9x1<", "/title", "Pier", "/strings/1/leds/0/quantity", "0")
	a.wantStatus(t, http.StatusUnprocessableEntity)
	wantWords(t, a.body, `value="9x1<"`, `value="Pier"`, `id="f-strings-1-leds-0-quantity" name="/strings/1/leds/0/quantity" type="text" value="0"`, "2 fields not kept")
	if got := fault(t, a, "f-strings-0-driver-sense-ohms"); !strings.Contains(got, "9x1") {
		t.Errorf("beside the resistor: %q", got)
	}
	if got := fault(t, a, "f-strings-1-leds-0-quantity"); got == "" {
		t.Error("nothing is said beside the quantity that the reader refuses")
	}
	if got := fault(t, a, "f-title"); got != "" {
		t.Errorf("beside the title: %q", got)
	}
	kept := b.kept()
	if kept.Title != "Pier" || kept.Strings[0].Driver.FollowerSink.Sense.Ohms != 110 || kept.Strings[1].LEDs[0].Quantity != 2 {
		t.Errorf("kept %q, %+v", kept.Title, kept.Strings[1].LEDs)
	}
}

// An edit by script is answered with results alone: no input that somebody may
// be typing in is among them.
func TestBuildLiveEdit(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.live("/strings/0/leds/0/quantity", "5")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "revision 2", `data-hx-target="#picture"`, `data-hx-target="#checks"`, `data-hx-target="#readings"`, "5 × white")
	if strings.Contains(a.body, `id="f-strings-0-leds-0-quantity"`) || strings.Contains(a.body, `id="f-title"`) {
		t.Error("the answer has fields in it")
	}
	if got := b.kept().Strings[0].LEDs[0].Quantity; got != 5 {
		t.Errorf("kept %d LEDs", got)
	}
	a = b.live("/strings/0/leds/0/quantity", "5", "/supply/voltage", "24 Vx")
	a.wantStatus(t, http.StatusOK)
	if got := between(t, a.body, `data-hx-target="#f-supply-voltage-error" data-hx-swap="textContent">`, "</hx-partial>"); !strings.Contains(got, "24 Vx") {
		t.Errorf("beside the voltage: %q", got)
	}
	wantWords(t, a.body, "revision 2", "1 field not kept")
}

// A button or picker that changes which fields there are brings the fields
// along, with what was typed and not taken still in them, wherever they went.
func TestBuildLiveCommand(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.live("do", "string-remove /strings/0", "/strings/1/driver/sense/ohms", "many", "/strings/2/driver/sense/ohms", "0k12")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, `data-hx-target="#editor"`, `name="/strings/0/driver/sense/ohms" type="text" value="many"`, `name="/strings/1/driver/sense/ohms" type="text" value="0k12"`)
	if got := fault(t, a, "f-strings-0-driver-sense-ohms"); !strings.Contains(got, "many") {
		t.Errorf("beside the field that moved: %q", got)
	}
	if got := labelsOf(b.kept()); got != "B C D E F" {
		t.Errorf("strings %s", got)
	}
	a = b.live("/strings/0/driver/kind", "resistor")
	wantWords(t, a.body, `data-hx-target="#editor"`, `name="/strings/0/driver/resistor/ohms"`)
	if b.kept().Strings[0].Driver.Resistor == nil {
		t.Error("the driver is not a resistor")
	}
}

func TestBuildCommandOnWhatIsGone(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.post("do", "string-remove /strings/77")
	a.wantStatus(t, http.StatusUnprocessableEntity)
	wantWords(t, a.body, "not there any more")
}

// The form of another shape belongs to other fields: an answer that is still
// under way has changed them.
func TestBuildPostOfAnotherShape(t *testing.T) {
	b := openBuild(t, bench(t))
	page := b.do(http.MethodGet, b.page, "")
	shape := between(t, page.body, `name="shape" value="`, `"`)
	b.live("shape", shape, "do", "string-remove /strings/0")
	a := b.live("shape", shape, "/strings/0/leds/0/quantity", "9")
	wantWords(t, a.body, `data-hx-target="#editor"`)
	if got := stacksOf(b.kept(), "B"); got != "2 white, 3 red" {
		t.Errorf("an edit of string A came to string B: %s", got)
	}
}

func TestBuildUndoRedo(t *testing.T) {
	b := openBuild(t, bench(t))
	wantWords(t, b.do(http.MethodGet, b.page, "").body, `value="undo" id="undo" disabled`, `value="redo" id="redo" disabled`)
	b.live("/title", "Second")
	a := b.live("do", "undo")
	wantWords(t, a.body, "revision 3", `id="redo"`, `value="Bench of every kind"`)
	if got := b.kept().Title; got != "Bench of every kind" {
		t.Errorf("undone to %q", got)
	}
	b.live("do", "redo")
	if got := b.kept().Title; got != "Second" {
		t.Errorf("redone to %q", got)
	}
	b.send(b.page+"/undo", nil, nil).wantStatus(t, http.StatusSeeOther)
	if got := b.kept().Title; got != "Bench of every kind" {
		t.Errorf("undone by its address to %q", got)
	}
}

// What was typed and not yet kept is a step of its own: Undo takes that back,
// and Redo brings it again.
func TestBuildUndoKeepsWhatWasTyped(t *testing.T) {
	b := openBuild(t, bench(t))
	b.live("/title", "Second")
	b.live("/title", "Third", "do", "undo")
	if got := b.kept().Title; got != "Second" {
		t.Errorf("undone to %q", got)
	}
	b.live("do", "redo")
	if got := b.kept().Title; got != "Third" {
		t.Errorf("redone to %q", got)
	}
}

func TestBuildNothingToUndo(t *testing.T) {
	b := openBuild(t, bench(t))
	a := b.send(b.page+"/undo", nil, nil)
	a.wantStatus(t, http.StatusUnprocessableEntity)
	wantWords(t, a.body, "nothing to undo")
}

// A remedy's button does what it says, and its finding is better afterwards.
func TestBuildRemedy(t *testing.T) {
	document := strings.Replace(tide(t), `"part": "white-2835", "quantity": 6`, `"part": "white-2835", "quantity": 8`, 1)
	b := openBuild(t, document)
	page := b.do(http.MethodGet, b.page, "")
	row := between(t, page.body, `<li class="check fail"`, "</li>")
	if !strings.Contains(row, "Headroom") {
		t.Fatalf("eight LEDs on 24 V do not fail by headroom: %s", row)
	}
	value := between(t, row, `name="remedy" value="`, `"`)
	a := b.live("remedy", value)
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "revision 2", `data-hx-target="#editor"`)
	report, err := calc.Check(b.kept())
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range report.Findings {
		if f.Code == "headroom" && f.Severity == calc.Fail {
			t.Errorf("headroom still fails: %s", f.Message)
		}
	}
	for _, nonsense := range []string{"", "x", "0", "0.99", "99.0", "-1.0"} {
		a := b.live("remedy", nonsense)
		a.wantStatus(t, http.StatusOK)
		wantWords(t, a.body, "look at them again")
	}
}

// A build that cannot be solved says why in the place of the picture; its
// fields are all there, and edits are kept.
func TestBuildUnsolved(t *testing.T) {
	b := openBuild(t, runaway(t))
	a := b.do(http.MethodGet, b.page, "")
	a.wantStatus(t, http.StatusOK)
	report := b.do(http.MethodGet, "/api"+b.page+"/report", "")
	if report.status == http.StatusOK {
		t.Fatal("this build is solved: the test needs another one")
	}
	wantWords(t, a.body, "Nothing can be drawn", `name="/strings/0/driver/sense/ohms"`)
	b.live("/strings/0/driver/sense/ohms", "220")
	if got := b.kept().Strings[0].Driver.FollowerSink.Sense.Ohms; got != 220 {
		t.Errorf("kept %v Ω", got)
	}
}
