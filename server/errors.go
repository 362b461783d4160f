package main

import (
	"errors"
	"fmt"
	"net/http"

	"github.com/go-chi/chi/v5/middleware"

	"lanternbook/calc"
	"lanternbook/store"
)

// refusal is an error that a handler has already put into words.
type refusal struct {
	status int
	title  string // a few words, the same for each such refusal
	detail string // what is wrong this time, or what to do about it
	faults calc.Invalid
}

// Error returns the refusal's words.
func (e *refusal) Error() string { return e.title + ": " + e.detail }

// unsolvable is the title of a build that no operating point was found for.
const unsolvable = "The build cannot be solved"

// refuse returns an error that is answered with this status and these words.
func refuse(status int, title, format string, args ...any) error {
	return &refusal{status: status, title: title, detail: fmt.Sprintf(format, args...)}
}

// explain turns any error into what may be told about it. An error it does not
// know becomes fixed words, and is logged with its cause: nothing from inside
// reaches the answer.
func (s *server) explain(r *http.Request, err error) problem {
	var (
		told     *refusal
		stale    *store.Stale
		taken    *store.KeyTaken
		tooLarge *http.MaxBytesError
		invalid  calc.Invalid
		unsolved *calc.Unsolved
	)
	switch {
	case errors.As(err, &told):
		return newProblem(told.status, told.title, told.detail, told.faults)
	case errors.Is(err, store.ErrNotFound):
		return newProblem(http.StatusNotFound, "There is nothing here",
			"What you asked for does not exist. It may have been deleted, or the address may have a slip.", nil)
	case errors.Is(err, store.ErrNothing):
		return newProblem(http.StatusConflict, "There is nothing to undo or redo",
			"The build is already at that end of its changes.", nil)
	case errors.As(err, &stale):
		return newProblem(http.StatusConflict, "The build was changed meanwhile",
			fmt.Sprintf("It is at revision %d now. Load it again, then make your change on what is there.", stale.Have), nil)
	case errors.As(err, &taken):
		return newProblem(http.StatusConflict, "The drawer has such a part already",
			"Another part in the drawer has this key. Choose another one.", nil)
	case errors.As(err, &tooLarge):
		return newProblem(http.StatusRequestEntityTooLarge, "That is too much at once",
			fmt.Sprintf("At most %d MiB are taken in one request.", tooLarge.Limit>>20), nil)
	case errors.As(err, &invalid):
		return newProblem(http.StatusUnprocessableEntity, "The document cannot be used", invalid.Error(), invalid)
	case errors.As(err, &unsolved):
		return newProblem(http.StatusUnprocessableEntity, unsolvable, unsolved.Error(), nil)
	}
	s.log.ErrorContext(r.Context(), "request failed", "method", r.Method, "path", r.URL.Path,
		"request", middleware.GetReqID(r.Context()), "err", err)
	return newProblem(http.StatusInternalServerError, "Something went wrong here",
		"The program met a fault of its own; its log tells more. What it said was kept is kept.", nil)
}

// notFound answers an address that no route has.
func (s *server) notFound(w http.ResponseWriter, r *http.Request) {
	s.fail(w, r, store.ErrNotFound)
}

// fail answers in the form that the address calls for: a problem document for
// programs, a page for people.
func (s *server) fail(w http.ResponseWriter, r *http.Request, err error) {
	if forPrograms(r) {
		s.sendProblem(w, r, err)
		return
	}
	s.showProblem(w, r, err)
}
