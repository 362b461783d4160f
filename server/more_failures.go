package main

import (
	"context"
	"errors"
	"net/http"
	"strconv"
	"time"

	"lanternbook/calc"
	"lanternbook/web"
)

// surveyTime is how long a survey may take; a build of a thousand strings has
// tens of thousands of faults. What was found until then is shown.
const surveyTime = 20 * time.Second

// showFailures: GET /builds/{id}/more/failures.
func (s *server) showFailures(w http.ResponseWriter, r *http.Request) error {
	in, err := s.moreInput(r)
	if err != nil {
		return err
	}
	until, cancel := context.WithTimeout(r.Context(), surveyTime)
	defer cancel()
	found, err := calc.Survey(in.Build, func(_, _ int) bool { return until.Err() == nil })
	var unsolved *calc.Unsolved
	if err != nil && !errors.As(err, &unsolved) {
		return err
	}
	if err := r.Context().Err(); err != nil {
		return err
	}
	view := web.NewFailuresView(in, found)
	if in.Own {
		return render(w, r, http.StatusOK, web.FailuresPage(view))
	}
	return render(w, r, http.StatusOK, web.Failures(view))
}

// cureFailure: POST /builds/{id}/more/failures. The patch is what the section
// offers as a cure, for the revision that it was worked out for.
func (s *server) cureFailure(w http.ResponseWriter, r *http.Request) error {
	if err := r.ParseForm(); err != nil {
		return err
	}
	id, err := pathID(r, "id")
	if err != nil {
		return err
	}
	revision, err := strconv.ParseInt(r.PostForm.Get("revision"), 10, 64)
	if err != nil {
		return refuse(http.StatusBadRequest, "That cannot be done", "The form did not say which revision of the build it is for.")
	}
	if _, _, _, err := s.change(r.Context(), id, revision, []byte(r.PostForm.Get("patch"))); err != nil {
		return err
	}
	http.Redirect(w, r, "/builds/"+strconv.FormatInt(id, 10), http.StatusSeeOther)
	return nil
}
