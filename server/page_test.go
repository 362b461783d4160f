package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"github.com/a-h/templ"

	"lanternbook/calc"
	"lanternbook/store"
)

// errorCase is an error that a page's handler returns, and what is made of it.
type errorCase struct {
	name   string
	err    error
	status int
	words  string
}

func TestErrorsOfPagesBecomePages(t *testing.T) {
	p := openShop(t)
	for _, c := range []errorCase{
		{"nothing there", fmt.Errorf("store: build 7: %w", store.ErrNotFound), 404, "does not exist"},
		{"changed meanwhile", fmt.Errorf("store: %w", &store.Stale{Have: 12}), 409, "revision 12"},
		{"nothing to undo", store.ErrNothing, 409, "nothing to undo"},
		{"part there already", &store.KeyTaken{}, 409, "drawer"},
		{"too much", &http.MaxBytesError{Limit: pageBody}, 413, "1 MiB"},
		{"document with a fault", calc.Invalid{{At: "/title", Reason: "the title is missing"}}, 422, "the title is missing"},
		{"no operating point", &calc.Unsolved{String: "A", Cause: errors.New("it oscillates")}, 422, "it oscillates"},
		{"in words", refuse(http.StatusTeapot, "Short and stout", "Pour %d cups", 2), 418, "Pour 2 cups"},
		{"anything else", errors.New("disk on fire at sector 9"), 500, "its log tells more"},
	} {
		t.Run(c.name, func(t *testing.T) {
			w := httptest.NewRecorder()
			handler := p.s.page(func(http.ResponseWriter, *http.Request) error { return c.err })
			handler.ServeHTTP(w, httptest.NewRequest(http.MethodGet, "/builds/7", nil))
			body := w.Body.String()
			if w.Code != c.status || w.Header().Get("Content-Type") != "text/html; charset=utf-8" {
				t.Errorf("status %d, %s; want %d", w.Code, w.Header().Get("Content-Type"), c.status)
			}
			if !strings.Contains(body, c.words) || !strings.Contains(body, "</html>") {
				t.Errorf("page without %q:\n%s", c.words, body)
			}
			if strings.Contains(body, "sector 9") {
				t.Error("an inner error is on the page")
			}
		})
	}
	if log := p.log.String(); !strings.Contains(log, "sector 9") || strings.Contains(log, "oscillates") {
		t.Errorf("the log should hold the unknown error alone:\n%s", log)
	}
}

func TestAnErrorBehindAScriptLeavesThePageStanding(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodGet, "/nowhere", "", "HX-Request", "true")
	a.wantStatus(t, http.StatusNotFound)
	if a.header.Get("HX-Retarget") != "#main" || a.header.Get("HX-Reselect") != ".problem" || a.header.Get("HX-Reswap") != "afterbegin" {
		t.Errorf("headers %v", a.header)
	}
	if !strings.Contains(a.body, `class="problem"`) {
		t.Errorf("nothing to select in\n%s", a.body)
	}
	a = p.do(http.MethodGet, "/nowhere", "")
	if a.header.Get("HX-Retarget") != "" || a.header.Get("Vary") == "" {
		t.Errorf("a whole page has headers %v", a.header)
	}
}

func TestABrowserThatWentAwayIsNoFault(t *testing.T) {
	p := openShop(t)
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	for _, wrap := range []func(routed) http.HandlerFunc{p.s.page, p.s.api} {
		w := httptest.NewRecorder()
		wrap(func(_ http.ResponseWriter, r *http.Request) error {
			return fmt.Errorf("store: %w", r.Context().Err())
		}).ServeHTTP(w, httptest.NewRequest(http.MethodGet, "/", nil).WithContext(ctx))
		if w.Body.Len() > 0 {
			t.Errorf("answered %s", w.Body)
		}
	}
	if log := p.log.String(); log != "" {
		t.Errorf("logged %s", log)
	}
}

func TestAComponentThatFailsLeavesNoHalfPage(t *testing.T) {
	p := openShop(t)
	broken := templ.ComponentFunc(func(_ context.Context, w io.Writer) error {
		if _, err := io.WriteString(w, "<p>half"); err != nil {
			return err
		}
		return errors.New("no more paper")
	})
	w := httptest.NewRecorder()
	p.s.page(func(w http.ResponseWriter, r *http.Request) error {
		return render(w, r, http.StatusOK, broken)
	}).ServeHTTP(w, httptest.NewRequest(http.MethodGet, "/", nil))
	if w.Code != http.StatusInternalServerError || strings.Contains(w.Body.String(), "half") {
		t.Errorf("status %d:\n%s", w.Code, w.Body)
	}
}
