package main

import (
	"errors"
	"net/http"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/web"
)

// showSpread: GET /builds/{id}/more/spread; ?state for what becomes of the draw
// alone.
func (s *server) showSpread(w http.ResponseWriter, r *http.Request) error {
	in, err := s.moreInput(r)
	if err != nil {
		return err
	}
	view := s.spreadView(in)
	if r.URL.Query().Has("state") && !in.Own {
		return render(w, r, http.StatusOK, web.SpreadState(view))
	}
	if in.Own {
		return render(w, r, http.StatusOK, web.SpreadPage(view))
	}
	return render(w, r, http.StatusOK, web.Spread(view))
}

// drawSpread: POST /builds/{id}/more/spread. do=stop ends the draw; else samples
// builds are drawn by seed.
func (s *server) drawSpread(w http.ResponseWriter, r *http.Request) error {
	if err := r.ParseForm(); err != nil {
		return err
	}
	in, err := s.moreInput(r)
	if err != nil {
		return err
	}
	var fault string
	if r.PostForm.Get("do") == "stop" {
		s.scatters.stop(in.ID)
	} else {
		fault = s.startSpread(in, r.PostForm.Get("samples"), r.PostForm.Get("seed"))
	}
	if fault == "" && in.Own {
		http.Redirect(w, r, "/builds/"+strconv.FormatInt(in.ID, 10)+"/more/spread", http.StatusSeeOther)
		return nil
	}
	view := s.spreadView(in)
	view.Fault = fault
	if !in.Own {
		return render(w, r, http.StatusOK, web.SpreadState(view))
	}
	view.Samples, view.Seed = r.PostForm.Get("samples"), r.PostForm.Get("seed")
	return render(w, r, http.StatusUnprocessableEntity, web.SpreadPage(view))
}

// startSpread starts a draw, or says why it cannot.
func (s *server) startSpread(in web.MoreInput, samples, seed string) string {
	n, err := strconv.Atoi(strings.NewReplacer(" ", "", ",", "", "\u00a0", "").Replace(samples))
	if err != nil || n < 1 || n > calc.MostSamples {
		return "How many: a whole number from 1 to 100,000."
	}
	from, err := strconv.ParseUint(strings.TrimSpace(seed), 10, 64)
	if err != nil {
		return "Seed: a whole number, 0 or more."
	}
	if err := s.scatters.start(in.ID, &scatterJob{of: in.Build, revision: in.Revision, samples: n, seed: from}); err != nil {
		return "Not started: " + err.Error() + "."
	}
	return ""
}

// spreadView shows the last draw of a build.
func (s *server) spreadView(in web.MoreInput) web.SpreadView {
	job := s.scatters.job(in.ID)
	if job == nil {
		return web.NewSpreadView(in, nil)
	}
	draw := web.Draw{Revision: job.revision, Samples: job.samples, Seed: job.seed, Done: int(job.done.Load()), Running: job.running()}
	if draw.Running {
		return web.NewSpreadView(in, &draw)
	}
	var stopped *calc.Stopped
	switch {
	case errors.As(job.err, &stopped):
		draw.Words = "Stopped after " + strconv.Itoa(stopped.Done) + " builds."
	case job.err != nil:
		draw.Words = "Nothing came of it: " + job.err.Error()
	default:
		draw.Result, draw.Of = &job.result, job.of
	}
	return web.NewSpreadView(in, &draw)
}
