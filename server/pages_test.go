package main

import (
	"context"
	"encoding/json"
	"html"
	"net/http"
	"net/url"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// What tests of pages share: a browser without scripts.

const formType = "application/x-www-form-urlencoded"

// get asks for a page and ends the test unless it is there.
func (p *shop) get(address string) string {
	p.t.Helper()
	a := p.do(http.MethodGet, address, "")
	if a.status != http.StatusOK {
		p.t.Fatalf("GET %s: status %d: %.300s", address, a.status, a.body)
	}
	return a.body
}

// post sends a form, as a browser does that saw the page it is on.
func (p *shop) post(address string, fields url.Values) answer {
	p.t.Helper()
	return p.do(http.MethodPost, address, fields.Encode(), "Content-Type", formType, "Sec-Fetch-Site", "same-origin")
}

// press sends a form that must be answered with another page's address, and
// returns it.
func (p *shop) press(address string, fields url.Values) string {
	p.t.Helper()
	a := p.post(address, fields)
	a.wantStatus(p.t, http.StatusSeeOther)
	return a.header.Get("Location")
}

// stockFromSeed fills the drawer with every part of a first start.
func (p *shop) stockFromSeed() {
	p.t.Helper()
	files, err := filepath.Glob("seed/parts/*.json")
	if err != nil || len(files) < 30 {
		p.t.Fatalf("%d parts, %v", len(files), err)
	}
	for _, file := range files {
		document, err := os.ReadFile(file)
		if err != nil {
			p.t.Fatal(err)
		}
		key := strings.TrimSuffix(filepath.Base(file), ".json")
		if _, err := p.s.store.CreatePart(context.Background(), key, document); err != nil {
			p.t.Fatal(err)
		}
	}
}

// wantWords fails for every text that a page lacks. Texts are as a person
// reads them: without entities, a no-break space as any other.
func wantWords(tb testing.TB, page string, words ...string) {
	tb.Helper()
	page = strings.ReplaceAll(html.UnescapeString(page), "\u00a0", " ")
	for _, w := range words {
		if !strings.Contains(page, w) {
			tb.Errorf("the page does not say %q", w)
		}
	}
}

// wantNot fails for every text that a page has, by its source.
func wantNot(tb testing.TB, page string, words ...string) {
	tb.Helper()
	for _, w := range words {
		if strings.Contains(page, w) {
			tb.Errorf("the page has %q", w)
		}
	}
}

// wantJSON fails unless two texts are the same JSON value.
func wantJSON(tb testing.TB, got, want string) {
	tb.Helper()
	var g, w any
	if err := json.Unmarshal([]byte(got), &g); err != nil {
		tb.Fatalf("%v in %.200s", err, got)
	}
	if err := json.Unmarshal([]byte(want), &w); err != nil {
		tb.Fatalf("%v in %.200s", err, want)
	}
	if diff := cmp.Diff(w, g); diff != "" {
		tb.Errorf("another JSON value (-want +got):\n%s", diff)
	}
}

func writeFile(tb testing.TB, path, content string) {
	tb.Helper()
	if err := os.WriteFile(path, []byte(content), 0o600); err != nil {
		tb.Fatal(err)
	}
}

var (
	inputs     = regexp.MustCompile(`<input([^>]*)>`)
	textareas  = regexp.MustCompile(`(?s)<textarea([^>]*)>(.*?)</textarea>`)
	selects    = regexp.MustCompile(`(?s)<select([^>]*)>(.*?)</select>`)
	selectedIn = regexp.MustCompile(`<option value="([^"]*)" selected`)
	nameOf     = regexp.MustCompile(`\bname="([^"]*)"`)
	valueOf    = regexp.MustCompile(`\bvalue="([^"]*)"`)
)

// fieldsOf is what a browser would send of a part's form.
func fieldsOf(tb testing.TB, page string) url.Values {
	tb.Helper()
	_, rest, found := strings.Cut(page, `<form id="part-form"`)
	if !found {
		tb.Fatal("the page has no form of a part")
	}
	form, _, _ := strings.Cut(rest, "</form>")
	fields := url.Values{}
	add := func(attributes, value string) {
		if name := nameOf.FindStringSubmatch(attributes); name != nil {
			fields.Add(html.UnescapeString(name[1]), html.UnescapeString(value))
		}
	}
	for _, m := range inputs.FindAllStringSubmatch(form, -1) {
		value := ""
		if v := valueOf.FindStringSubmatch(m[1]); v != nil {
			value = v[1]
		}
		add(m[1], value)
	}
	for _, m := range textareas.FindAllStringSubmatch(form, -1) {
		// A browser drops the first line's end and sends the others in full.
		add(m[1], strings.ReplaceAll(strings.TrimPrefix(m[2], "\n"), "\n", "\r\n"))
	}
	for _, m := range selects.FindAllStringSubmatch(form, -1) {
		value := ""
		if v := selectedIn.FindStringSubmatch(m[2]); v != nil {
			value = v[1]
		}
		add(m[1], value)
	}
	return fields
}
