package main

import (
	"net/http"
	"strings"

	"github.com/go-chi/chi/v5"
	"github.com/go-chi/chi/v5/middleware"

	"lanternbook/static"
)

// Most bytes of a request's body. A build of a thousand strings is some 600 kB;
// a form carries one build's fields at most.
const (
	pageBody = 1 << 20
	apiBody  = 8 << 20
)

// routes is every address of the program. The pages' own are listed in their
// files, each by a method named after its page.
func (s *server) routes() http.Handler {
	r := chi.NewRouter()
	r.Use(middleware.RequestID, s.logged, secured, s.knownHost, s.sameOrigin, middleware.GetHead, compressed())
	r.NotFound(s.notFound)
	r.MethodNotAllowed(s.otherMethod(r))

	r.Handle("/static/*", static.Handler())

	r.Get("/healthz", s.api(s.health))
	r.Get("/schema/{name}", s.api(s.showSchema))
	r.Route("/api", func(r chi.Router) {
		r.Use(maxBody(apiBody))
		r.Post("/check", s.api(s.checkDocument))
		r.Post("/plan", s.api(s.planBrief))
		r.Get("/builds", s.api(s.listBuilds))
		r.Post("/builds", s.api(s.importBuild))
		r.Get("/builds/{id}", s.api(s.sendBuild))
		r.Patch("/builds/{id}", s.api(s.patchBuild))
		r.Get("/builds/{id}/report", s.api(s.sendReport))
	})

	r.Group(func(r chi.Router) {
		r.Use(maxBody(pageBody))
		s.shelfRoutes(r)
		s.buildRoutes(r)
		s.moreRoutes(r)
		s.drawerRoutes(r)
	})
	return r
}

// otherMethod answers an address that exists but not for this method, and says
// for which it does, which RFC 9110 section 15.5.6 demands.
func (s *server) otherMethod(router chi.Routes) http.HandlerFunc {
	methods := []string{http.MethodGet, http.MethodHead, http.MethodPost, http.MethodPut, http.MethodPatch, http.MethodDelete}
	return func(w http.ResponseWriter, r *http.Request) {
		var allowed []string
		for _, method := range methods {
			ask := method
			if method == http.MethodHead { // answered by whatever answers GET
				ask = http.MethodGet
			}
			if router.Match(chi.NewRouteContext(), ask, r.URL.Path) {
				allowed = append(allowed, method)
			}
		}
		w.Header().Set("Allow", strings.Join(allowed, ", "))
		s.fail(w, r, refuse(http.StatusMethodNotAllowed, "That cannot be done here",
			"This address takes %s only.", strings.Join(allowed, ", ")))
	}
}
