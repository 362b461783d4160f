package main

import (
	"context"
	"net/http"
	"net/url"
	"strconv"
	"time"

	"github.com/go-chi/chi/v5"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

// buildRoutes are the page of one build and its edits. Copy, delete and restore
// belong to the shelf.
func (s *server) buildRoutes(r chi.Router) {
	r.Get("/builds/{id}", s.page(s.showBuild))                   // ?corner= usual, cold, hot; ?string= whose fields stand open
	r.Post("/builds/{id}", s.page(s.editBuild))                  // the form: fields, and what its buttons ask for
	r.Post("/builds/{id}/undo", s.page(s.doOnBuild("undo")))     //
	r.Post("/builds/{id}/redo", s.page(s.doOnBuild("redo")))     //
	r.Post("/builds/{id}/remedy", s.page(s.doOnBuild("remedy"))) // remedy= which of which finding
}

// showBuild: GET /builds/{id}.
func (s *server) showBuild(w http.ResponseWriter, r *http.Request) error {
	kept, err := s.buildOf(r)
	if err != nil {
		return err
	}
	b, report, _, err := examine(kept.Document)
	if err != nil {
		return err
	}
	query := r.URL.Query()
	open, _ := strconv.Atoi(query.Get("string")) // anything else shows the first
	page := buildPage{kept: kept, b: b, report: report, corner: query.Get("corner"), open: open}
	if page.drawer, err = s.stock(r.Context()); err != nil {
		return err
	}
	return render(w, r, http.StatusOK, web.BuildPage(s.buildView(page)))
}

// buildPage is what one answer about a build shows.
type buildPage struct {
	kept     store.Build
	b        calc.Build
	report   calc.Report
	drawer   []web.Stock
	corner   string
	open     int               // which string's fields stand open
	texts    map[string]string // as typed, by entry
	faults   map[string]string // what of them was not taken, and why
	notice   string            // what was asked for and could not be done
	conflict *web.ConflictView
}

// buildView makes the page of a build: every figure on it is a string there.
func (s *server) buildView(p buildPage) web.BuildView {
	return web.NewBuildView(web.BuildInput{
		ID: p.kept.ID, Revision: p.kept.Revision, Kept: keptWords(p, s.now()),
		CanUndo: p.kept.CanUndo, CanRedo: p.kept.CanRedo,
		Build: p.b, Report: p.report, Drawer: p.drawer, Suggestions: suggestions(p),
		Corner: p.corner, Open: p.open, Typed: p.texts, Faults: p.faults, Notice: p.notice, Conflict: p.conflict,
	})
}

// keptWords says what of the page is on disk.
func keptWords(p buildPage, now time.Time) web.KeptView {
	switch {
	case p.conflict != nil:
		return web.KeptView{Words: "not kept: changed elsewhere", Wrong: true}
	case len(p.faults) > 0:
		return web.KeptView{Words: plural(len(p.faults), "field", "fields") + " not kept", Wrong: true}
	}
	at := p.kept.Updated.In(now.Location())
	if sameDay(at, now) {
		return web.KeptView{Words: "kept " + at.Format("15:04")}
	}
	return web.KeptView{Words: "kept " + at.Format("2 Jan 2006, 15:04")}
}

// mostSuggested is how many strings get the settings for their wish worked out
// with every edit: the first ones, and always the one that stands open.
const mostSuggested = 24

// suggestions works out which settings give the strings what they are wanted
// to. For a string without a wish, whose fields stand open, the neighbours of
// what it gives now are shown.
func suggestions(p buildPage) map[int]calc.Suggestion {
	found := map[int]calc.Suggestion{}
	if len(p.report.Strings) != len(p.b.Strings) {
		return found // not solved
	}
	for i, str := range p.b.Strings {
		b := p.b
		switch {
		case str.Wanted != nil && (i < mostSuggested || i == p.open):
		case i == p.open && p.report.Strings[i].Current.Typ > 0:
			b.Strings = append([]calc.String(nil), b.Strings...)
			b.Strings[i].Wanted = &calc.Wanted{Current: &p.report.Strings[i].Current.Typ}
		default:
			continue
		}
		if s, err := calc.Suggest(b, i); err == nil && len(s.Choices) > 0 || str.Wanted != nil {
			found[i] = s
		}
	}
	return found
}

// stock reads what the pickers of a build offer out of the drawer.
func (s *server) stock(ctx context.Context) ([]web.Stock, error) {
	var all []web.Stock
	for _, typ := range []string{calc.TypeLED, calc.TypeNPN, calc.TypePNP} {
		parts, err := s.store.Parts(ctx, typ)
		if err != nil {
			return nil, err
		}
		all = append(all, stockOf(parts)...)
	}
	return all, nil
}

// address is where the page of a build stands, with what the address keeps of
// how it is shown.
func (p buildPage) address() string {
	query := url.Values{}
	if p.corner == web.Cold || p.corner == web.Hot {
		query.Set("corner", p.corner)
	}
	if p.open > 0 {
		query.Set("string", strconv.Itoa(p.open))
	}
	at := "/builds/" + strconv.FormatInt(p.kept.ID, 10)
	if len(query) > 0 {
		at += "?" + query.Encode()
	}
	return at
}
