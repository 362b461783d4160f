package main

import (
	"net/http"
	"strings"
	"testing"

	"lanternbook/calc"
)

const asJSON = "application/json"

func TestCheckAnswersAReportAndKeepsNothing(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodPost, "/api/check", tide(t), "Content-Type", "application/json; charset=UTF-8")
	a.wantStatus(t, http.StatusOK)
	if got := a.header.Get("Content-Type"); got != asJSON {
		t.Errorf("Content-Type %q, want %q", got, asJSON)
	}
	report := decode[calc.Report](t, a)
	if report.Format != calc.ReportFormat || len(report.Strings) != 1 || len(report.Findings) == 0 {
		t.Errorf("report has format %q, %d strings, %d findings", report.Format, len(report.Strings), len(report.Findings))
	}
	if report.Strings[0].Label != "A" || report.Strings[0].Current.Typ <= 0 {
		t.Errorf("string %q carries %v A", report.Strings[0].Label, report.Strings[0].Current.Typ)
	}
	if list := p.do(http.MethodGet, "/api/builds", ""); list.body != `{"builds":[]}` {
		t.Errorf("after a check the shelf holds %s", list.body)
	}
}

// faultCase is a document with one thing wrong with it.
type faultCase struct {
	name     string
	old, new string // what to replace in the good document
	field    string
}

var faultCases = []faultCase{
	{"unknown key", `"notes": ""`, `"note": ""`, "/note"},
	{"text where a number belongs", `"max_current": 2.5`, `"max_current": "2.5 A"`, "/supply/max_current"},
	{"reference to a part that is not there", `"npn": "bc547b"`, `"npn": "bc999"`, "/strings/0/driver/npn"},
	{"reference to a run that is not there", `"fed_by": "r1"`, `"fed_by": "r9"`, "/strings/0/fed_by"},
	{"missing key", `"test_current": 0.06,`, ``, "/parts/white-2835/test_current"},
	{"other format", "lanternbook-build/1", "lanternbook-build/9", "/format"},
}

func TestDocumentsWithAFaultAreRefusedAtTheField(t *testing.T) {
	p := openShop(t)
	for _, c := range faultCases {
		t.Run(c.name, func(t *testing.T) {
			broken := strings.Replace(tide(t), c.old, c.new, 1)
			if broken == tide(t) {
				t.Fatal("the case changes nothing")
			}
			for _, address := range []string{"/api/check", "/api/builds"} {
				a := p.do(http.MethodPost, address, broken, "Content-Type", asJSON)
				a.wantProblem(t, http.StatusUnprocessableEntity, c.field)
			}
		})
	}
	if list := p.do(http.MethodGet, "/api/builds", ""); list.body != `{"builds":[]}` {
		t.Errorf("a refused document is on the shelf: %s", list.body)
	}
}

func TestAllFaultsAreToldAtOnce(t *testing.T) {
	p := openShop(t)
	broken := strings.NewReplacer(`"max_current": 2.5`, `"max_current": true`, `"npn": "bc547b"`, `"npn": "bc999"`).Replace(tide(t))
	a := p.do(http.MethodPost, "/api/check", broken, "Content-Type", asJSON)
	told := a.wantProblem(t, http.StatusUnprocessableEntity, "/supply/max_current")
	fields := map[string]bool{}
	for _, e := range told.Errors {
		fields[e.Field] = true
		if e.Detail == "" {
			t.Errorf("%s has no reason", e.Field)
		}
	}
	if !fields["/supply/max_current"] || !fields["/strings/0/driver/npn"] {
		t.Errorf("told of %v, want both faults", told.Errors)
	}
}

func TestBodiesThatAreNoDocument(t *testing.T) {
	p := openShop(t)
	for _, body := range []string{"", "{", "[]", "null", "7", `"text"`, "\x00\xff", tide(t) + "{}", strings.Repeat("[", 100_000)} {
		for _, address := range []string{"/api/check", "/api/builds"} {
			a := p.do(http.MethodPost, address, body, "Content-Type", asJSON)
			if a.status != http.StatusUnprocessableEntity || a.header.Get("Content-Type") != "application/problem+json" {
				t.Errorf("%s of %.20q: status %d, %s", address, body, a.status, a.header.Get("Content-Type"))
			}
		}
	}
}

func TestOnlyJSONIsTaken(t *testing.T) {
	p := openShop(t)
	for _, kind := range []string{"", "text/plain", "application/x-www-form-urlencoded", "application/json; charset=latin1", "application/jsonx", "json"} {
		for _, address := range []string{"/api/check", "/api/builds"} {
			a := p.do(http.MethodPost, address, tide(t), "Content-Type", kind)
			a.wantProblem(t, http.StatusUnsupportedMediaType, "")
		}
	}
}

func TestPlanSaysThatItIsNotThere(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodPost, "/api/plan", `{"format": "lanternbook-brief/1"}`, "Content-Type", asJSON)
	a.wantProblem(t, http.StatusNotImplemented, "")
}

func TestHealthFollowsTheStore(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodGet, "/healthz", "")
	a.wantStatus(t, http.StatusOK)
	if got := decode[map[string]string](t, a)["status"]; got != "ok" {
		t.Errorf("status %q, want ok", got)
	}
	broken := openShop(t)
	if err := broken.s.store.Close(); err != nil {
		t.Fatal(err)
	}
	broken.do(http.MethodGet, "/healthz", "").wantProblem(t, http.StatusServiceUnavailable, "")
}

func TestSchemasArePublished(t *testing.T) {
	p := openShop(t)
	for _, name := range []string{"build-1.json", "report-1.json"} {
		a := p.do(http.MethodGet, "/schema/"+name, "")
		a.wantStatus(t, http.StatusOK)
		if got := a.header.Get("Content-Type"); got != "application/schema+json" {
			t.Errorf("%s: Content-Type %q", name, got)
		}
		if schema := decode[map[string]any](t, a); schema["$schema"] != "https://json-schema.org/draft/2020-12/schema" {
			t.Errorf("%s says it is written in %v", name, schema["$schema"])
		}
	}
	p.do(http.MethodGet, "/schema/other-1.json", "").wantProblem(t, http.StatusNotFound, "")
}

func TestTheSchemaIsHeldAgainstEachImport(t *testing.T) {
	if err := matchesSchema([]byte(tide(t))); err != nil {
		t.Fatalf("a good document does not match the published schema: %v", err)
	}
	for _, c := range faultCases[:2] {
		err := matchesSchema([]byte(strings.Replace(tide(t), c.old, c.new, 1)))
		if err == nil {
			t.Errorf("%s: the schema lets it pass", c.name)
		}
	}
}
