package static_test

import (
	"net/http"
	"net/http/httptest"
	"regexp"
	"strings"
	"testing"

	"lanternbook/static"
)

type servedCase struct {
	name     string
	method   string
	path     string
	status   int
	kind     string
	contains string
}

func TestHandler(t *testing.T) {
	cases := []servedCase{
		{name: "the joined style sheet", method: "GET", path: static.URL("app.css"), status: 200, kind: "text/css; charset=utf-8", contains: "--paper"},
		{name: "the script", method: "GET", path: static.URL("app.js"), status: 200, kind: "text/javascript; charset=utf-8", contains: "htmx:"},
		{name: "the vendored library with its licence line", method: "GET", path: static.URL("htmx.min.js"), status: 200, kind: "text/javascript; charset=utf-8", contains: "Zero-Clause BSD"},
		{name: "a font", method: "GET", path: static.URL("fonts/jetbrains-mono-latin-wght-normal.woff2"), status: 200, kind: "font/woff2", contains: "wOF2"},
		{name: "a font's licence", method: "GET", path: static.URL("fonts/sofia-sans-LICENSE.txt"), status: 200, kind: "text/plain; charset=utf-8", contains: "OPEN FONT LICENSE"},
		{name: "the head alone", method: "HEAD", path: static.URL("favicon.svg"), status: 200, kind: "image/svg+xml"},
		{name: "yesterday's hash", method: "GET", path: "/static/0123456789abcdef/app.css", status: 404, kind: "text/plain; charset=utf-8"},
		{name: "a folder is not listed", method: "GET", path: static.URL("fonts/"), status: 404, kind: "text/plain; charset=utf-8"},
		{name: "the sheet's pieces are not served", method: "GET", path: static.URL("css/10-tokens.css"), status: 404, kind: "text/plain; charset=utf-8"},
		{name: "posting is refused", method: "POST", path: static.URL("app.css"), status: 405, kind: "text/plain; charset=utf-8"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			rec := httptest.NewRecorder()
			static.Handler().ServeHTTP(rec, httptest.NewRequest(c.method, c.path, nil))
			if rec.Code != c.status {
				t.Fatalf("%s %s = %d, want %d", c.method, c.path, rec.Code, c.status)
			}
			if got := rec.Header().Get("Content-Type"); got != c.kind {
				t.Errorf("Content-Type = %q, want %q", got, c.kind)
			}
			if got := rec.Body.String(); !strings.Contains(got, c.contains) {
				t.Errorf("body of %d bytes does not contain %q", len(got), c.contains)
			}
			if kept := strings.Contains(rec.Header().Get("Cache-Control"), "immutable"); kept != (c.status == http.StatusOK) {
				t.Errorf("immutable = %v with status %d", kept, c.status)
			}
		})
	}
}

// Every address inside the style sheet must lead to a file of this package:
// a misspelt font shows nothing but the system's own letters.
func TestSheetAddresses(t *testing.T) {
	rec := httptest.NewRecorder()
	static.Handler().ServeHTTP(rec, httptest.NewRequest(http.MethodGet, static.URL("app.css"), nil))
	found := regexp.MustCompile(`url\("?([^")]+)"?\)`).FindAllStringSubmatch(rec.Body.String(), -1)
	if len(found) < 4 {
		t.Fatalf("found %d addresses in the style sheet, want the four fonts at least", len(found))
	}
	for _, m := range found {
		if strings.HasPrefix(m[1], "data:") || strings.HasPrefix(m[1], "#") {
			continue
		}
		rec := httptest.NewRecorder()
		static.Handler().ServeHTTP(rec, httptest.NewRequest(http.MethodGet, static.URL(m[1]), nil))
		if rec.Code != http.StatusOK {
			t.Errorf("style sheet names %q: %d", m[1], rec.Code)
		}
	}
}
