package main

import (
	"fmt"
	"net/http"
	"strconv"
	"strings"
	"sync"
	"testing"

	"lanternbook/calc"
)

func TestImportIsServedByteForByte(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodPost, "/api/builds", tide(t), "Content-Type", asJSON)
	a.wantStatus(t, http.StatusCreated)
	address, tag := a.header.Get("Location"), a.header.Get("ETag")
	if !strings.HasPrefix(address, "/api/builds/") || tag == "" {
		t.Fatalf("Location %q, ETag %q", address, tag)
	}
	got := p.do(http.MethodGet, address, "")
	got.wantStatus(t, http.StatusOK)
	if got.body != tide(t) {
		t.Errorf("served\n%s\nwant\n%s", got.body, tide(t))
	}
	if got.header.Get("ETag") != tag || got.header.Get("Content-Type") != asJSON {
		t.Errorf("ETag %q, want %q; Content-Type %q", got.header.Get("ETag"), tag, got.header.Get("Content-Type"))
	}
	head := p.do(http.MethodHead, address, "")
	head.wantStatus(t, http.StatusOK)
	if head.body != "" || head.header.Get("ETag") != tag || head.header.Get("Content-Length") != strconv.Itoa(len(tide(t))) {
		t.Errorf("HEAD: body %q, headers %v", head.body, head.header)
	}
}

func TestAnUnchangedBuildIsNotSentTwice(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	for tag, want := range map[string]int{`"1"`: 304, `W/"1"`: 304, `"7", "1"`: 304, `*`: 304, `"2"`: 200, `1`: 200} {
		if a := p.do(http.MethodGet, address, "", "If-None-Match", tag); a.status != want {
			t.Errorf("If-None-Match %s: status %d, want %d", tag, a.status, want)
		}
	}
}

func TestListShowsAndFindsBuilds(t *testing.T) {
	p := openShop(t)
	p.importBuild(tide(t))
	p.importBuild(shelfLight(t))
	a := p.do(http.MethodGet, "/api/builds", "")
	a.wantStatus(t, http.StatusOK)
	all := decode[map[string][]listedBuild](t, a)["builds"]
	if len(all) != 2 || all[0].Title != "Shelf light" {
		t.Fatalf("listed %+v, want two, the newer first", all)
	}
	got := all[1]
	if got.Title != "Tide-table case, größe <Ω>" || got.Client != "Harbour office" || got.Site != "ferry waiting room" ||
		len(got.Tags) != 1 || got.Tags[0] != "display case" || got.Revision != 1 || got.ID < 1 ||
		!strings.HasPrefix(got.Updated, "2026-03-14T") || !strings.HasSuffix(got.Updated, "Z") {
		t.Errorf("listed %+v", got)
	}
	if !strings.Contains(a.body, `"tags":[]`) {
		t.Errorf("a build without tags must list none, not null: %s", a.body)
	}
	report := decode[calc.Report](t, p.do(http.MethodPost, "/api/check", tide(t), "Content-Type", asJSON))
	if got.Verdict != string(report.Verdict) {
		t.Errorf("verdict %q, its report says %q", got.Verdict, report.Verdict)
	}
}

// searchCase is a query and the title of the one build it finds.
type searchCase struct {
	query, title string
}

func TestBuildsAreFoundByEveryKindOfWord(t *testing.T) {
	p := openShop(t)
	p.importBuild(tide(t))
	p.importBuild(shelfLight(t))
	const tideTitle, shelfTitle = "Tide-table case, größe <Ω>", "Shelf light"
	for _, c := range []searchCase{
		{"tide", tideTitle},
		{"GRÖSSE", tideTitle},
		{"harbour", tideTitle},
		{"ferry", tideTitle},
		{"display case", tideTitle},
		{"white-2835", tideTitle},
		{"White 2835", tideTitle},
		{"bc557b", tideTitle},
		{"24 V adapter", tideTitle},
		{"amber", shelfTitle},
		{"12 brick", shelfTitle},
	} {
		a := p.do(http.MethodGet, "/api/builds?q="+strings.ReplaceAll(strings.ReplaceAll(c.query, " ", "+"), "Ö", "%C3%96"), "")
		found := decode[map[string][]listedBuild](t, a)["builds"]
		if len(found) != 1 || found[0].Title != c.title {
			t.Errorf("%q finds %+v, want %q alone", c.query, found, c.title)
		}
	}
	if a := p.do(http.MethodGet, "/api/builds?q=tide+amber", ""); a.body != `{"builds":[]}` {
		t.Errorf("two words of two builds find %s", a.body)
	}
}

func TestPatchMakesARevision(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	a := p.patch(address, `"1"`, `[{"op": "replace", "path": "/supply/voltage/typ", "value": 24.10}]`)
	a.wantStatus(t, http.StatusOK)
	if a.header.Get("ETag") != `"2"` || a.header.Get("Content-Type") != asJSON {
		t.Errorf("ETag %q, Content-Type %q", a.header.Get("ETag"), a.header.Get("Content-Type"))
	}
	got := p.do(http.MethodGet, address, "")
	if got.body != a.body || got.header.Get("ETag") != `"2"` {
		t.Errorf("PATCH answered\n%s\nGET gives %s\n%s", a.body, got.header.Get("ETag"), got.body)
	}
	for _, spelling := range []string{"24.10", "23.50", "2.5e1", "-2e-3", "größe <Ω>"} {
		if !strings.Contains(got.body, spelling) {
			t.Errorf("the document has lost the spelling %s:\n%s", spelling, got.body)
		}
	}
	list := decode[map[string][]listedBuild](t, p.do(http.MethodGet, "/api/builds", ""))["builds"]
	if list[0].Revision != 2 {
		t.Errorf("listed at revision %d, want 2", list[0].Revision)
	}
}

func TestAPatchIsJudgedAnew(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(shelfLight(t))
	verdict := func() string {
		return decode[map[string][]listedBuild](t, p.do(http.MethodGet, "/api/builds", ""))["builds"][0].Verdict
	}
	if got := verdict(); got == "fail" {
		t.Fatalf("the build fails before the edit")
	}
	a := p.patch(address, `"1"`, `[{"op": "replace", "path": "/strings/0/driver/resistor/ohms", "value": 33}, {"op": "replace", "path": "/title", "value": "Too bright"}]`)
	a.wantStatus(t, http.StatusOK)
	if got := verdict(); got != "fail" {
		t.Errorf("with a tenth of the resistance the verdict is %q, want fail", got)
	}
	report := decode[calc.Report](t, p.do(http.MethodGet, address+"/report", ""))
	if report.Verdict != calc.Fail {
		t.Errorf("the report says %q", report.Verdict)
	}
	if a := p.do(http.MethodGet, "/api/builds?q=too+bright", ""); !strings.Contains(a.body, `"Too bright"`) {
		t.Errorf("the new title is not found: %s", a.body)
	}
}

func TestAPatchThatChangesNothingMakesNoRevision(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(shelfLight(t))
	p.patch(address, `"1"`, `[{"op": "replace", "path": "/title", "value": "Once"}]`).wantStatus(t, http.StatusOK)
	a := p.patch(address, `"2"`, `[{"op": "replace", "path": "/title", "value": "Once"}]`)
	a.wantStatus(t, http.StatusOK)
	if a.header.Get("ETag") != `"2"` {
		t.Errorf("ETag %s, want \"2\" still", a.header.Get("ETag"))
	}
	p.patch(address, `"2"`, `[]`).wantStatus(t, http.StatusOK)
}

// patchCase is a PATCH that is refused.
type patchCase struct {
	name      string
	tag, kind string
	body      string
	status    int
	field     string
}

func TestPatchesThatAreRefusedChangeNothing(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	p.patch(address, `"1"`, `[{"op": "replace", "path": "/notes", "value": "ready"}]`).wantStatus(t, http.StatusOK)
	before := p.do(http.MethodGet, address, "")
	const patchJSON = "application/json-patch+json"
	rename := `[{"op": "replace", "path": "/title", "value": "x"}]`
	for _, c := range []patchCase{
		{name: "no If-Match", kind: patchJSON, body: rename, status: 428},
		{name: "earlier revision", tag: `"1"`, kind: patchJSON, body: rename, status: 412},
		{name: "revision that is yet to come", tag: `"3"`, kind: patchJSON, body: rename, status: 412},
		{name: "weak tag, which never matches", tag: `W/"2"`, kind: patchJSON, body: rename, status: 412},
		{name: "If-Match without quotes", tag: `2`, kind: patchJSON, body: rename, status: 400},
		{name: "plain JSON", tag: `"2"`, kind: asJSON, body: rename, status: 415},
		{name: "merge patch", tag: `"2"`, kind: "application/merge-patch+json", body: `{"title": "x"}`, status: 415},
		{name: "no JSON", tag: `"2"`, kind: patchJSON, body: `[{`, status: 400},
		{name: "no list", tag: `"2"`, kind: patchJSON, body: `{"op": "remove", "path": "/title"}`, status: 400},
		{name: "null", tag: `"2"`, kind: patchJSON, body: `null`, status: 400},
		{name: "unknown operation", tag: `"2"`, kind: patchJSON, body: `[{"op": "merge", "path": "/title"}]`, status: 400},
		{name: "path missing", tag: `"2"`, kind: patchJSON, body: `[{"op": "remove"}]`, status: 400},
		{name: "value missing", tag: `"2"`, kind: patchJSON, body: `[{"op": "add", "path": "/title"}]`, status: 400},
		{name: "nothing there to replace", tag: `"2"`, kind: patchJSON, body: `[{"op": "replace", "path": "/strings/4/label", "value": "B"}]`, status: 422, field: "/strings/4/label"},
		{name: "second operation does not fit", tag: `"2"`, kind: patchJSON, body: `[{"op": "replace", "path": "/title", "value": "x"}, {"op": "remove", "path": "/runs/7"}]`, status: 422, field: "/runs/7"},
		{name: "test does not hold", tag: `"2"`, kind: patchJSON, body: `[{"op": "test", "path": "/title", "value": "y"}]`, status: 409, field: "/title"},
		{name: "result has an unknown key", tag: `"2"`, kind: patchJSON, body: `[{"op": "add", "path": "/colour", "value": "red"}]`, status: 422, field: "/colour"},
		{name: "result refers to a run that is gone", tag: `"2"`, kind: patchJSON, body: `[{"op": "remove", "path": "/runs/0"}]`, status: 422, field: "/strings/0/fed_by"},
		{name: "result is no document", tag: `"2"`, kind: patchJSON, body: `[{"op": "replace", "path": "", "value": []}]`, status: 422},
	} {
		t.Run(c.name, func(t *testing.T) {
			headers := []string{"Content-Type", c.kind}
			if c.tag != "" {
				headers = append(headers, "If-Match", c.tag)
			}
			a := p.do(http.MethodPatch, address, c.body, headers...)
			a.wantProblem(t, c.status, c.field)
			after := p.do(http.MethodGet, address, "")
			if after.body != before.body || after.header.Get("ETag") != before.header.Get("ETag") {
				t.Errorf("the build changed: %s\n%s", after.header.Get("ETag"), after.body)
			}
		})
	}
	for _, tag := range []string{`*`, `"9", "2"`} {
		a := p.patch(address, tag, `[{"op": "replace", "path": "/notes", "value": "ready"}]`)
		if a.status != http.StatusOK {
			t.Errorf("If-Match %s: status %d, want 200: %s", tag, a.status, a.body)
		}
	}
}

func TestPatchTypeIsTold(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodPatch, p.importBuild(shelfLight(t)), "[]", "Content-Type", asJSON, "If-Match", `"1"`)
	a.wantStatus(t, http.StatusUnsupportedMediaType)
	if got := a.header.Get("Accept-Patch"); got != "application/json-patch+json" {
		t.Errorf("Accept-Patch %q", got)
	}
}

func TestOfManyPatchesAtOneRevisionExactlyOneWins(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(shelfLight(t))
	const rivals, rounds = 8, 6
	for round := 1; round <= rounds; round++ {
		answers := make([]answer, rivals)
		var group sync.WaitGroup
		for i := range rivals {
			group.Go(func() {
				edit := fmt.Sprintf(`[{"op": "add", "path": "/notes", "value": "round %d rival %d"}]`, round, i)
				answers[i] = p.patch(address, entityTag(int64(round)), edit)
			})
		}
		group.Wait()
		winners, winner := 0, answer{}
		for _, a := range answers {
			switch a.status {
			case http.StatusOK:
				winners, winner = winners+1, a
			case http.StatusPreconditionFailed:
			default:
				t.Errorf("round %d: status %d: %s", round, a.status, a.body)
			}
		}
		now := p.do(http.MethodGet, address, "")
		if winners != 1 || now.body != winner.body || now.header.Get("ETag") != entityTag(int64(round+1)) {
			t.Fatalf("round %d: %d winners, ETag %s", round, winners, now.header.Get("ETag"))
		}
	}
}

func TestBuildsThatAreNotThere(t *testing.T) {
	p := openShop(t)
	for _, id := range []string{"1", "0", "-1", "x", "99999999999999999999", "1.0", "%2e%2e"} {
		p.do(http.MethodGet, "/api/builds/"+id, "").wantProblem(t, http.StatusNotFound, "")
		p.do(http.MethodGet, "/api/builds/"+id+"/report", "").wantProblem(t, http.StatusNotFound, "")
		p.patch("/api/builds/"+id, `"1"`, `[]`).wantProblem(t, http.StatusNotFound, "")
	}
}

func TestReportOfABuildIsThatOfItsDocument(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	want := p.do(http.MethodPost, "/api/check", tide(t), "Content-Type", asJSON)
	got := p.do(http.MethodGet, address+"/report", "")
	got.wantStatus(t, http.StatusOK)
	if got.body != want.body {
		t.Errorf("report\n%s\nwant\n%s", got.body, want.body)
	}
}
