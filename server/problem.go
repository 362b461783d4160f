package main

import (
	"encoding/json"
	"net/http"
	"strconv"
	"strings"

	"lanternbook/calc"
)

// problem is an error as programs are told it (RFC 9457). Its type is left
// out, which means "about:blank": the status says what kind it is.
type problem struct {
	Title  string       `json:"title"`
	Status int          `json:"status"`
	Detail string       `json:"detail,omitempty"`
	Field  string       `json:"field,omitempty"`  // JSON Pointer to the first value at fault
	Errors []fieldFault `json:"errors,omitempty"` // everything at fault, in the document's order
}

// fieldFault is one value at fault.
type fieldFault struct {
	Field  string `json:"field"` // JSON Pointer; empty is the whole document
	Detail string `json:"detail"`
}

func newProblem(status int, title, detail string, faults calc.Invalid) problem {
	p := problem{Title: title, Status: status, Detail: detail}
	for _, f := range faults {
		p.Errors = append(p.Errors, fieldFault{Field: f.At, Detail: f.Reason})
	}
	if len(faults) > 0 {
		p.Field = faults[0].At
	}
	return p
}

// text is the problem for people: what is wrong, without pointers.
func (p problem) text() string {
	if len(p.Errors) == 0 {
		return p.Detail
	}
	reasons := make([]string, len(p.Errors))
	for i, e := range p.Errors {
		reasons[i] = e.Detail
	}
	return strings.Join(reasons, "; ")
}

// api makes a handler of a route for programs. It alone writes problem
// documents; a handler that returned an error has written nothing.
func (s *server) api(h routed) http.HandlerFunc {
	return func(w http.ResponseWriter, r *http.Request) {
		if err := h(w, r); err != nil {
			s.sendProblem(w, r, err)
		}
	}
}

// sendProblem answers an error as a problem document.
func (s *server) sendProblem(w http.ResponseWriter, r *http.Request, err error) {
	if gone(r, err) {
		return
	}
	p := s.explain(r, err)
	body, err := json.Marshal(p)
	if err != nil { // strings and numbers alone: cannot happen
		http.Error(w, p.Title, p.Status)
		return
	}
	send(w, p.Status, "application/problem+json", body)
}

// sendJSON answers with a value. The error is one of encoding it: nothing was
// written then.
func sendJSON(w http.ResponseWriter, status int, value any) error {
	body, err := json.Marshal(value)
	if err != nil {
		return err
	}
	send(w, status, "application/json", body)
	return nil
}

// send answers with bytes that are ready. The length is set by hand because an
// answer to HEAD has no body to measure.
func send(w http.ResponseWriter, status int, contentType string, body []byte) {
	h := w.Header()
	h.Set("Content-Type", contentType)
	h.Set("Content-Length", strconv.Itoa(len(body)))
	w.WriteHeader(status)
	_, _ = w.Write(body) //nolint:gosec // JSON with its own content type and nosniff: no browser takes it for a page
}

// forPrograms tells whether an address is one of those for programs.
func forPrograms(r *http.Request) bool {
	return r.URL.Path == "/api" || strings.HasPrefix(r.URL.Path, "/api/") ||
		r.URL.Path == "/healthz" || strings.HasPrefix(r.URL.Path, "/schema/")
}
