package main

import (
	"errors"
	"fmt"
	"net/http"
	"time"

	"lanternbook/store"
)

// listedBuild is one build of GET /api/builds.
type listedBuild struct {
	ID       int64    `json:"id"`
	Title    string   `json:"title"`
	Client   string   `json:"client"`
	Site     string   `json:"site"`
	Tags     []string `json:"tags"`
	Verdict  string   `json:"verdict"`
	Revision int64    `json:"revision"`
	Updated  string   `json:"updated"` // RFC 3339, UTC
}

func listed(b store.Build) listedBuild {
	tags := b.Summary.Tags
	if tags == nil {
		tags = []string{}
	}
	return listedBuild{
		ID:       b.ID,
		Title:    b.Summary.Title,
		Client:   b.Summary.Client,
		Site:     b.Summary.Site,
		Tags:     tags,
		Verdict:  b.Summary.Verdict,
		Revision: b.Revision,
		Updated:  b.Updated.UTC().Format(time.RFC3339Nano),
	}
}

// listBuilds: GET /api/builds, newest first; ?q= keeps those that have all of
// its words.
func (s *server) listBuilds(w http.ResponseWriter, r *http.Request) error {
	found, err := s.store.Builds(r.Context(), r.URL.Query().Get("q"))
	if err != nil {
		return err
	}
	list := make([]listedBuild, len(found))
	for i, b := range found {
		list[i] = listed(b)
	}
	return sendJSON(w, http.StatusOK, map[string][]listedBuild{"builds": list})
}

// importBuild: POST /api/builds. The document is kept exactly as it came.
func (s *server) importBuild(w http.ResponseWriter, r *http.Request) error {
	document, err := readBody(r, jsonType)
	if err != nil {
		return err
	}
	kept, _, _, err := s.create(r.Context(), document)
	if err != nil {
		return err
	}
	w.Header().Set("Location", fmt.Sprintf("/api/builds/%d", kept.ID))
	w.Header().Set("ETag", entityTag(kept.Revision))
	return sendJSON(w, http.StatusCreated, listed(kept))
}

// sendBuild: GET /api/builds/{id}, the document byte for byte.
func (s *server) sendBuild(w http.ResponseWriter, r *http.Request) error {
	b, err := s.buildOf(r)
	if err != nil {
		return err
	}
	w.Header().Set("ETag", entityTag(b.Revision))
	w.Header().Set("Last-Modified", b.Updated.UTC().Format(http.TimeFormat))
	if known, err := tagsOf(r, "If-None-Match"); err == nil && known.weaklyHave(b.Revision) {
		w.WriteHeader(http.StatusNotModified)
		return nil
	}
	send(w, http.StatusOK, jsonType, b.Document)
	return nil
}

// sendReport: GET /api/builds/{id}/report.
func (s *server) sendReport(w http.ResponseWriter, r *http.Request) error {
	b, err := s.buildOf(r)
	if err != nil {
		return err
	}
	return sendReportOn(w, b.Document)
}

// patchBuild: PATCH /api/builds/{id}. The answer is the document as it is now.
func (s *server) patchBuild(w http.ResponseWriter, r *http.Request) error {
	before, err := s.buildOf(r)
	if err != nil {
		return err
	}
	patch, err := readBody(r, patchType)
	if err != nil {
		w.Header().Set("Accept-Patch", patchType) // RFC 5789 section 2.2
		return err
	}
	if r.Header.Get("If-Match") == "" {
		return refuse(http.StatusPreconditionRequired, "Which revision do you mean?",
			"Send the ETag that you got with the build as If-Match, so that nobody's edit is overwritten.")
	}
	expected, err := tagsOf(r, "If-Match")
	if err != nil {
		return err
	}
	if !expected.have(before.Revision) {
		return changedMeanwhile(before.Revision)
	}
	after, _, _, err := s.change(r.Context(), before.ID, before.Revision, patch)
	if stale, is := errors.AsType[*store.Stale](err); is {
		return changedMeanwhile(stale.Have)
	}
	if err != nil {
		return err
	}
	w.Header().Set("ETag", entityTag(after.Revision))
	w.Header().Set("Content-Location", r.URL.Path)
	send(w, http.StatusOK, jsonType, after.Document)
	return nil
}

// buildOf loads the build that the route names.
func (s *server) buildOf(r *http.Request) (store.Build, error) {
	id, err := pathID(r, "id")
	if err != nil {
		return store.Build{}, err
	}
	return s.store.Build(r.Context(), id)
}

// changedMeanwhile is the answer to an edit of a revision that is not the
// latest any more.
func changedMeanwhile(have int64) error {
	return refuse(http.StatusPreconditionFailed, "The build was changed meanwhile",
		"It is at revision %d now. Fetch it again, then make your change on what is there.", have)
}
