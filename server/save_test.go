package main

import (
	"encoding/json"
	"errors"
	"math"
	"net/http"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"

	"lanternbook/calc"
	"lanternbook/store"
)

// cardOf reads what was kept for the shelf's picture.
func cardOf(t *testing.T, sum store.Summary) card {
	t.Helper()
	var c card
	if err := json.Unmarshal(sum.Card, &c); err != nil {
		t.Fatalf("the card is not JSON: %v; %s", err, sum.Card)
	}
	return c
}

func TestTheCardHasWhatTheShelfDraws(t *testing.T) {
	b, report, sum, err := examine([]byte(tide(t)))
	if err != nil {
		t.Fatal(err)
	}
	c := cardOf(t, sum)
	if c.SupplyLabel != "24 V adapter" || c.SupplyVolts != (calc.Range{Min: 23.5, Typ: 24, Max: 24.5}) || c.LEDs != 24 || c.More != 0 {
		t.Errorf("card %+v", c)
	}
	if len(c.Strings) != 1 || c.Strings[0].Label != "A" || c.Strings[0].Quantity != 4 || c.Strings[0].Kind != calc.KindFollowerSink {
		t.Fatalf("strings %+v", c.Strings)
	}
	if got := c.Strings[0].Stacks; len(got) != 1 || got[0] != (cardStack{"white-2835", 6}) {
		t.Errorf("stacks %+v", got)
	}
	column, want := c.Strings[0].Column, report.Strings[0].Columns.Usual
	if column == nil || column.Supply != want.Supply || column.LeftOver != want.LeftOver || len(column.LEDs) != len(want.LEDs) {
		t.Errorf("column %+v, want the report's %+v", column, want)
	}
	led := c.Parts["white-2835"]
	if led.Name != "White 2835" || led.CCT == nil || *led.CCT != 4000 || len(c.Parts) != 1 {
		t.Errorf("parts %+v", c.Parts)
	}
	if sum.Title != b.Title || sum.Verdict != string(report.Verdict) {
		t.Errorf("summary %q %q", sum.Title, sum.Verdict)
	}
}

func TestTheCardStopsAtFourStrings(t *testing.T) {
	b, err := calc.Read([]byte(shelfLight(t)))
	if err != nil {
		t.Fatal(err)
	}
	for len(b.Strings) < 6 {
		b.Strings = append(b.Strings, b.Strings[0])
	}
	c := cardOf(t, summary(b, calc.Report{}, nil))
	if len(c.Strings) != 4 || c.More != 2 || c.LEDs != 6*2*3 {
		t.Errorf("%d strings, %d more, %d LEDs", len(c.Strings), c.More, c.LEDs)
	}
}

func TestABuildWithoutAReportIsNeverAPass(t *testing.T) {
	b, err := calc.Read([]byte(shelfLight(t)))
	if err != nil {
		t.Fatal(err)
	}
	nan := calc.Report{Verdict: calc.Pass, Strings: []calc.StringReport{{Columns: calc.Columns{Usual: calc.Column{Sense: math.NaN()}}}}}
	for name, sum := range map[string]store.Summary{
		"not solved":    summary(b, calc.Report{Verdict: calc.Pass}, errors.New("no operating point")),
		"empty report":  summary(b, calc.Report{}, nil),
		"not a number":  summary(b, nan, nil),
		"worst of both": summary(b, nan, errors.New("no operating point")),
	} {
		if sum.Verdict != string(calc.Unknown) {
			t.Errorf("%s: verdict %q, want unknown", name, sum.Verdict)
		}
		if c := cardOf(t, sum); len(c.Strings) != 1 || c.Strings[0].Column != nil {
			t.Errorf("%s: draws %+v", name, c.Strings)
		}
	}
}

func TestAnUnsolvedBuildPointsAtItsString(t *testing.T) {
	b, err := calc.Read([]byte(shelfLight(t)))
	if err != nil {
		t.Fatal(err)
	}
	b.Strings = append(b.Strings, b.Strings[0])
	b.Strings[1].Label = "B"
	cause := errors.New("it oscillates")
	if got := unsolvedFault(b, &calc.Unsolved{String: "B", Cause: cause}); got.At != "/strings/1" || !strings.Contains(got.Reason, "it oscillates") {
		t.Errorf("fault %+v", got)
	}
	if got := unsolvedFault(b, &calc.Unsolved{String: "(all)", Cause: cause}); got.At != "" {
		t.Errorf("all strings: fault %+v", got)
	}
}

func TestAnEditThatMakesABuildUnsolvableIsKept(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	a := p.patch(address, `"1"`, `[{"op":"replace","path":"/parts/white-2835/rth_junction_ambient","value":10000},
		{"op":"replace","path":"/strings/0/driver/sense/ohms","value":30}]`)
	a.wantStatus(t, http.StatusOK)
	p.do(http.MethodGet, address+"/report", "").wantProblem(t, http.StatusUnprocessableEntity, "/strings/0")
	list := decode[map[string][]listedBuild](t, p.do(http.MethodGet, "/api/builds", ""))["builds"]
	if list[0].Revision != 2 || list[0].Verdict != string(calc.Unknown) {
		t.Errorf("listed %+v, want revision 2 with verdict unknown", list[0])
	}
	_, report, _, err := examine([]byte(a.body))
	if err != nil || len(report.Findings) != 1 || report.Findings[0].Severity != calc.Unknown ||
		report.Findings[0].At != "/strings/0" || !strings.Contains(report.Findings[0].Message, "runaway") {
		t.Errorf("the page is told %+v, %v", report.Findings, err)
	}
	p.do(http.MethodPost, "/api/check", runaway(t), "Content-Type", asJSON).wantProblem(t, http.StatusUnprocessableEntity, "/strings/0")
	if code, _, stderr := commandLine(t, runaway(t), "check", "-"); code != 2 || !strings.Contains(stderr, "string A") {
		t.Errorf("check: exit %d, %s", code, stderr)
	}
}

func TestAnEditOfAnEarlierRevisionIsStaleWhateverItSays(t *testing.T) {
	p := openShop(t)
	kept, _, _, err := p.s.create(t.Context(), []byte(shelfLight(t)))
	if err != nil {
		t.Fatal(err)
	}
	if _, _, _, err := p.s.change(t.Context(), kept.ID, kept.Revision, []byte(`[{"op":"add","path":"/notes","value":"once"}]`)); err != nil {
		t.Fatal(err)
	}
	for _, patch := range []string{
		`[{"op":"add","path":"/notes","value":"twice"}]`, // would be kept
		`[]`,                               // would change nothing
		`[{"op":"remove","path":"/runs"}]`, // would not fit
	} {
		_, _, _, err := p.s.change(t.Context(), kept.ID, kept.Revision, []byte(patch))
		var stale *store.Stale
		if !errors.As(err, &stale) || stale.Have != kept.Revision+1 {
			t.Errorf("%s: %v, want stale at revision %d", patch, err, kept.Revision+1)
		}
	}
}

func TestWhatTheSchemaRefusesIsNotKept(t *testing.T) {
	p := openShop(t)
	published := compiledBuildSchema
	defer func() { compiledBuildSchema = published }()
	compiledBuildSchema = func() *jsonschema.Schema { // one that knows no title, as a published one that lags behind would
		compiler := jsonschema.NewCompiler()
		if err := compiler.AddResource("strict.json", map[string]any{"properties": map[string]any{"title": false}}); err != nil {
			t.Fatal(err)
		}
		return compiler.MustCompile("strict.json")
	}
	a := p.do(http.MethodPost, "/api/builds", shelfLight(t), "Content-Type", asJSON)
	a.wantProblem(t, http.StatusUnprocessableEntity, "/title")
}
