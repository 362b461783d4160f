package main

import (
	"errors"
	"io"
	"mime"
	"net/http"
	"strings"

	"lanternbook/calc"
)

const (
	jsonType  = "application/json"
	patchType = "application/json-patch+json" // RFC 6902 section 6
)

// checkDocument: POST /api/check. A build comes in, its report goes out, and
// nothing is kept.
func (s *server) checkDocument(w http.ResponseWriter, r *http.Request) error {
	document, err := readBody(r, jsonType)
	if err != nil {
		return err
	}
	return sendReportOn(w, document)
}

// sendReportOn reads and checks a document and answers with its report. A
// build that cannot be solved has no report: programs are told so as an error
// that points at the string.
func sendReportOn(w http.ResponseWriter, document []byte) error {
	b, err := calc.Read(document)
	if err != nil {
		return err
	}
	report, err := checked(b)
	if unsolved, is := errors.AsType[*calc.Unsolved](err); is {
		return &refusal{status: http.StatusUnprocessableEntity, title: unsolvable,
			detail: unsolved.Error(), faults: calc.Invalid{unsolvedFault(b, unsolved)}}
	}
	if err != nil {
		return err
	}
	return sendJSON(w, http.StatusOK, report)
}

// planBrief: POST /api/plan.
func (s *server) planBrief(http.ResponseWriter, *http.Request) error {
	return refuse(http.StatusNotImplemented, "This version does not plan",
		"It checks builds but makes no proposals from a brief yet.")
}

// health: GET /healthz, for whoever watches that the program runs. It asks the
// store something, so that it fails when the data cannot be reached.
func (s *server) health(w http.ResponseWriter, r *http.Request) error {
	if _, err := s.store.Empty(r.Context()); err != nil {
		s.log.ErrorContext(r.Context(), "the store does not answer", "err", err)
		return refuse(http.StatusServiceUnavailable, "The data cannot be read", "The program runs, but its data file does not answer.")
	}
	return sendJSON(w, http.StatusOK, map[string]string{"status": "ok", "version": version()})
}

// readBody returns a request's whole body when it says it is of this type.
func readBody(r *http.Request, contentType string) ([]byte, error) {
	got, params, err := mime.ParseMediaType(r.Header.Get("Content-Type"))
	if err != nil || got != contentType || !utf8Charset(params) {
		return nil, refuse(http.StatusUnsupportedMediaType, "The content type is not right",
			"Send it as %s, in UTF-8.", contentType)
	}
	body, err := io.ReadAll(r.Body)
	var tooLarge *http.MaxBytesError
	if err != nil && !errors.As(err, &tooLarge) && r.Context().Err() == nil {
		return nil, refuse(http.StatusBadRequest, "The request broke off", "Its body could not be read to the end.")
	}
	return body, err
}

// utf8Charset tells whether a media type's charset is absent or UTF-8, the
// only one JSON knows (RFC 8259 section 8.1).
func utf8Charset(params map[string]string) bool {
	charset, given := params["charset"]
	return !given || strings.EqualFold(charset, "utf-8")
}
