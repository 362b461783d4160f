// Lanternbook's program: a local web server for pages and for other programs,
// and the commands beside it.
//
// This is the only package that knows HTTP. It reads a request, calls calc or
// store, chooses, and renders; it holds no formula, no SQL and no HTML.
package main

import (
	"log/slog"
	"net/http"
	"runtime/debug"
	"time"

	"lanternbook/store"
)

// server is what the handlers share. Everything that must last is in the store;
// of its own it has only the draws that run.
type server struct {
	store *store.Store
	now   func() time.Time
	log   *slog.Logger
	hosts hostList

	scatters *scatterJobs
}

// newServer returns a server on an open store. listen is the address it will
// be reached at, as given to -listen: its host joins the loopback names that
// the server answers to.
func newServer(st *store.Store, now func() time.Time, log *slog.Logger, listen string) *server {
	return &server{store: st, now: now, log: log, hosts: hostsFor(listen), scatters: newScatterJobs()}
}

// routed is a handler that may fail. What answers the failure is the wrapper
// it is registered through: page for people, api for programs.
type routed func(w http.ResponseWriter, r *http.Request) error

// version is the module version that the binary was built from, or the
// revision of its source, or "development".
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "development"
	}
	if v := info.Main.Version; v != "" && v != "(devel)" {
		return v
	}
	for _, setting := range info.Settings {
		if setting.Key == "vcs.revision" && len(setting.Value) >= 12 {
			return setting.Value[:12]
		}
	}
	return "development"
}
