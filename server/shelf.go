package main

import (
	"fmt"
	"net/http"
	"net/url"
	"strconv"
	"strings"

	"github.com/go-chi/chi/v5"

	"lanternbook/store"
	"lanternbook/web"
)

// shelfRoutes are the pages of the library of builds.
func (s *server) shelfRoutes(r chi.Router) {
	r.Get("/", s.page(s.showShelf))                         // ?q= searches, ?all=1 shows all of a long shelf
	r.Post("/builds", s.page(s.newOnShelf))                 // New build
	r.Post("/builds/{id}/copy", s.page(s.copyBuild))        //
	r.Post("/builds/{id}/delete", s.page(s.deleteBuild))    // into the bin
	r.Post("/builds/{id}/restore", s.page(s.restoreBuild))  // out of it
	r.Get("/builds/{id}/document", s.page(s.downloadBuild)) // as a file
	r.Get("/bin", s.page(s.showBin))                        // builds and parts
	r.Get("/import", s.page(s.showImport))                  //
	r.Post("/import", s.page(s.importDocument))             // a file or its text
	r.Post("/backup", s.page(s.downloadBackup))             // the whole data file
}

// shownAtFirst is how many cards a shelf shows until it is asked for all; as
// many take a browser some 20 ms to lay out.
const shownAtFirst = 60

// showShelf: GET /. By script only the cards are answered.
func (s *server) showShelf(w http.ResponseWriter, r *http.Request) error {
	query := r.URL.Query().Get("q")
	found, err := s.store.Builds(r.Context(), query)
	if err != nil {
		return err
	}
	total := len(found)
	if query != "" {
		all, failed := s.store.Builds(r.Context(), "")
		if failed != nil {
			return failed
		}
		total = len(all)
	}
	cards := s.found(query, found, total, r.URL.Query().Get("all") != "")
	if fromScript(r) {
		w.Header().Set("HX-Replace-Url", shelfAddress(query)) // so that the address can be shared
		return render(w, r, http.StatusOK, web.Found(cards))
	}
	view := web.ShelfView{Query: query, Found: cards}
	if view.Notice, view.Bin, err = s.binned(r); err != nil {
		return err
	}
	return render(w, r, http.StatusOK, web.ShelfPage(view))
}

// found makes what a search shows.
func (s *server) found(query string, builds []store.Build, total int, all bool) web.FoundView {
	v := web.FoundView{Query: query, Bare: total == 0 && query == ""}
	v.Words = plural(total, "build", "builds")
	if query != "" {
		v.Words = fmt.Sprintf("%d of %s", len(builds), v.Words)
	}
	shown := builds
	if len(shown) > shownAtFirst && !all {
		shown = shown[:shownAtFirst]
		v.More, v.All = fmt.Sprintf("Show all %d", len(builds)), "/?all=1&q="+url.QueryEscape(query)
	}
	now := s.now()
	for _, b := range shown {
		v.Cards = append(v.Cards, cardView(b, now))
	}
	return v
}

// shelfAddress is where the shelf stands searched for a query.
func shelfAddress(query string) string {
	if query == "" {
		return "/"
	}
	return "/?q=" + url.QueryEscape(query)
}

// newOnShelf: POST /builds. The new build's page opens on its title.
func (s *server) newOnShelf(w http.ResponseWriter, r *http.Request) error {
	parts, err := s.store.Parts(r.Context(), "")
	if err != nil {
		return err
	}
	kept, _, _, err := s.create(r.Context(), newBuild(parts))
	if err != nil {
		return err
	}
	http.Redirect(w, r, onTitle(kept.ID), http.StatusSeeOther)
	return nil
}

// copyBuild: POST /builds/{id}/copy. The copy's page opens on its title.
func (s *server) copyBuild(w http.ResponseWriter, r *http.Request) error {
	b, err := s.buildOf(r)
	if err != nil {
		return err
	}
	title := copyTitle(b.Summary.Title)
	document, err := retitled(b.Document, title)
	if err != nil {
		return err
	}
	_, _, sum, err := examine(document)
	if err != nil {
		return err
	}
	made, err := s.store.CopyBuild(r.Context(), b.ID, title, document, sum)
	if err != nil {
		return err
	}
	http.Redirect(w, r, onTitle(made.ID), http.StatusSeeOther)
	return nil
}

// deleteBuild: POST /builds/{id}/delete. The shelf then offers the way back.
func (s *server) deleteBuild(w http.ResponseWriter, r *http.Request) error {
	id, err := pathID(r, "id")
	if err != nil {
		return err
	}
	if err := s.store.DeleteBuild(r.Context(), id); err != nil {
		return err
	}
	http.Redirect(w, r, "/?gone="+strconv.FormatInt(id, 10), http.StatusSeeOther)
	return nil
}

// restoreBuild: POST /builds/{id}/restore. A second press, from a page that was
// left open, just shows the build.
func (s *server) restoreBuild(w http.ResponseWriter, r *http.Request) error {
	id, err := pathID(r, "id")
	if err != nil {
		return err
	}
	if _, err := s.store.RestoreBuild(r.Context(), id); err != nil {
		return err
	}
	http.Redirect(w, r, "/#"+web.CardID(strconv.FormatInt(id, 10)), http.StatusSeeOther)
	return nil
}

// onTitle is a build's page with the caret in its title.
func onTitle(id int64) string {
	return "/builds/" + strconv.FormatInt(id, 10) + "#" + web.FieldID("/title")
}

// either returns the first text that says anything.
func either(text, otherwise string) string {
	if strings.TrimSpace(text) != "" {
		return text
	}
	return otherwise
}

// plural writes a count with its noun.
func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}
