package main

import (
	"context"
	"errors"
	"net/http"
	"slices"

	"github.com/go-chi/chi/v5"

	"lanternbook/calc"
	"lanternbook/web"
)

// moreRoutes are the sections of a build's page that are worked out only when
// they are opened. A script gets the section, anybody else a page of its own.
func (s *server) moreRoutes(r chi.Router) {
	r.Get("/builds/{id}/more/breakdown", s.page(s.showBreakdown))
	r.Get("/builds/{id}/more/dial", s.page(s.showDials))
	r.Get("/builds/{id}/more/spread", s.page(s.showSpread))
	r.Post("/builds/{id}/more/spread", s.page(s.drawSpread)) // samples=, seed=; or do=stop
	r.Get("/builds/{id}/more/failures", s.page(s.showFailures))
	r.Post("/builds/{id}/more/failures", s.page(s.cureFailure)) // patch= a cure, revision= what it is for
}

// moreInput reads the kept build that a section is about.
func (s *server) moreInput(r *http.Request) (web.MoreInput, error) {
	kept, err := s.buildOf(r)
	if err != nil {
		return web.MoreInput{}, err
	}
	b, report, _, err := examine(kept.Document)
	return web.MoreInput{ID: kept.ID, Revision: kept.Revision, Build: b, Report: report, Own: !fromScript(r)}, err
}

// mostBroken is how many strings have their headroom broken down at once.
const mostBroken = 12

// showBreakdown: GET /builds/{id}/more/breakdown.
func (s *server) showBreakdown(w http.ResponseWriter, r *http.Request) error {
	in, err := s.moreInput(r)
	if err != nil {
		return err
	}
	of, err := breakdowns(r.Context(), in)
	if err != nil {
		return err
	}
	view := web.NewBreakdownView(in, of)
	if in.Own {
		return render(w, r, http.StatusOK, web.BreakdownPage(view))
	}
	return render(w, r, http.StatusOK, web.Breakdown(view))
}

// breakdowns breaks down the strings with the least left over, by index.
func breakdowns(ctx context.Context, in web.MoreInput) (map[int]calc.HeadroomBreakdown, error) {
	of := map[int]calc.HeadroomBreakdown{}
	for _, i := range tightest(in.Report, mostBroken) {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		d, err := calc.Breakdown(in.Build, i)
		if _, unsolved := errors.AsType[*calc.Unsolved](err); unsolved {
			continue
		}
		if err != nil {
			return nil, err
		}
		of[i] = d
	}
	return of, nil
}

// tightest are the indices of the n strings with the least left over.
func tightest(report calc.Report, n int) []int {
	var order []int
	for i := range report.Strings {
		order = append(order, i)
	}
	slices.SortStableFunc(order, func(a, b int) int {
		left := report.Strings[a].Headroom.Min - report.Strings[b].Headroom.Min
		switch {
		case left < 0:
			return -1
		case left > 0:
			return 1
		}
		return 0
	})
	return order[:min(n, len(order))]
}
