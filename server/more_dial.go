package main

import (
	"errors"
	"net/http"
	"strconv"

	"lanternbook/calc"
	"lanternbook/web"
)

// mostDials is how many settings are turned at once.
const mostDials = 8

// showDials: GET /builds/{id}/more/dial.
func (s *server) showDials(w http.ResponseWriter, r *http.Request) error {
	in, err := s.moreInput(r)
	if err != nil {
		return err
	}
	var dials []calc.DialTable
	settings := turnable(in.Build)
	for _, where := range settings[:min(mostDials, len(settings))] {
		if err := r.Context().Err(); err != nil {
			return err
		}
		d, err := calc.Dial(in.Build, where)
		var unsolved *calc.Unsolved
		var invalid calc.Invalid
		if errors.As(err, &unsolved) || errors.As(err, &invalid) { // a rail without strings, a setting nobody can solve
			continue
		}
		if err != nil {
			return err
		}
		dials = append(dials, d)
	}
	view := web.NewDialsView(in, dials, len(settings))
	if in.Own {
		return render(w, r, http.StatusOK, web.DialsPage(view))
	}
	return render(w, r, http.StatusOK, web.Dials(view))
}

// turnable are the rails and strings that have a pot or a control voltage of
// their own, as calc.Dial names them.
func turnable(b calc.Build) []string {
	var list []string
	add := func(where string, i int, c *calc.Control) {
		if c != nil && (c.Pot != nil || c.Volts != nil) {
			list = append(list, where+strconv.Itoa(i))
		}
	}
	for i, rail := range b.Rails {
		add("/rails/", i, rail.Control)
	}
	for i, str := range b.Strings {
		switch d := str.Driver; {
		case d.FollowerSink != nil:
			add("/strings/", i, &d.FollowerSink.Control)
		case d.OpampSink != nil:
			add("/strings/", i, &d.OpampSink.Control)
		}
	}
	return list
}
