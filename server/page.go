package main

import (
	"bytes"
	"context"
	"errors"
	"net/http"
	"strconv"

	"github.com/a-h/templ"
	"github.com/go-chi/chi/v5"

	"lanternbook/store"
	"lanternbook/web"
)

// page makes a handler of a page. It alone writes error pages; a handler that
// returned an error has written nothing.
func (s *server) page(h routed) http.HandlerFunc {
	return func(w http.ResponseWriter, r *http.Request) {
		if err := h(w, r); err != nil {
			s.showProblem(w, r, err)
		}
	}
}

// showProblem writes the page that tells a person what went wrong. A request
// by script gets the same page, but only its words are put in, above what is
// there: nothing that was typed is swapped away.
func (s *server) showProblem(w http.ResponseWriter, r *http.Request, err error) {
	if gone(r, err) {
		return
	}
	p := s.explain(r, err)
	if fromScript(r) {
		w.Header().Set("HX-Retarget", "#main")
		w.Header().Set("HX-Reselect", ".problem")
		w.Header().Set("HX-Reswap", "afterbegin")
	}
	view := web.ProblemView{Title: p.Title, Text: p.text()}
	if err := render(w, r, p.Status, web.ProblemPage(view)); err != nil {
		s.log.ErrorContext(r.Context(), "error page not rendered", "err", err)
		http.Error(w, p.Title, p.Status)
	}
}

// render answers with a component. It renders into memory first, so that a
// component that fails leaves no half page behind; the error is then returned
// and nothing was written.
func render(w http.ResponseWriter, r *http.Request, status int, c templ.Component) error {
	var body bytes.Buffer
	if err := c.Render(r.Context(), &body); err != nil {
		return err
	}
	h := w.Header()
	h.Set("Content-Type", "text/html; charset=utf-8")
	h.Add("Vary", "HX-Request")
	w.WriteHeader(status)
	_, _ = w.Write(body.Bytes()) // the only failure is a browser that went away
	return nil
}

// fromScript tells whether htmx asks, for a part of the page it shows already.
// A history restore wants the whole page.
func fromScript(r *http.Request) bool {
	return r.Header.Get("HX-Request") == "true" && r.Header.Get("HX-History-Restore-Request") != "true"
}

// pathID reads the number {name} of the route. Whatever is not a number that a
// row could have names nothing: the error is store.ErrNotFound.
func pathID(r *http.Request, name string) (int64, error) { //nolint:unparam // builds are not the only rows with numbers
	id, err := strconv.ParseInt(chi.URLParam(r, name), 10, 64)
	if err != nil || id < 1 {
		return 0, store.ErrNotFound
	}
	return id, nil
}

// gone tells whether the error is only that the browser stopped waiting.
func gone(r *http.Request, err error) bool {
	return r.Context().Err() != nil && errors.Is(err, context.Canceled)
}
