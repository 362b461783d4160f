package main

import (
	"fmt"
	"net/http"
	"os"
	"path/filepath"
	"time"

	"lanternbook/store"
)

// downloadBuild: GET /builds/{id}/document, the document byte for byte, to be
// kept as a file.
func (s *server) downloadBuild(w http.ResponseWriter, r *http.Request) error {
	b, err := s.buildOf(r)
	if err != nil {
		return err
	}
	w.Header().Set("Content-Disposition", `attachment; filename="`+fileName(b)+`"`)
	send(w, http.StatusOK, jsonType, b.Document)
	return nil
}

// fileName is what a build's document is called on disk.
func fileName(b store.Build) string {
	name := slug(b.Summary.Title)
	if name == "" {
		name = fmt.Sprintf("build-%d", b.ID)
	}
	return name + ".json"
}

// downloadBackup: POST /backup, a consistent copy of the whole data file. It is
// made beside nothing of ours, in a folder that only this user can read, and
// is gone when the answer is sent.
func (s *server) downloadBackup(w http.ResponseWriter, r *http.Request) error {
	folder, err := os.MkdirTemp("", "lanternbook-backup-")
	if err != nil {
		return err
	}
	defer func() {
		if left := os.RemoveAll(folder); left != nil {
			s.log.WarnContext(r.Context(), "a backup's copy was left behind", "folder", folder, "err", left)
		}
	}()
	path := filepath.Join(folder, "copy.db")
	if err = s.store.Backup(r.Context(), path); err != nil {
		return err
	}
	file, err := os.Open(path) //nolint:gosec // a path of our own making
	if err != nil {
		return err
	}
	defer func() { _ = file.Close() }() // it was only read
	now := s.now()
	h := w.Header()
	h.Set("Content-Type", "application/vnd.sqlite3")
	h.Set("Content-Disposition", `attachment; filename="lanternbook-`+now.Format(time.DateOnly)+`.db"`)
	h.Set("Cache-Control", "no-store")
	http.ServeContent(w, r, "", now, file)
	return nil
}
