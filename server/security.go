package main

import (
	"errors"
	"fmt"
	"net"
	"net/http"
	"net/netip"
	"os"
	"runtime/debug"
	"slices"
	"strings"

	"github.com/go-chi/chi/v5/middleware"
)

// contentPolicy lets a page load nothing but this program's own files, and
// nothing inline: text that a person typed can never become script or style.
const contentPolicy = "default-src 'self'; base-uri 'none'; form-action 'self'; frame-ancestors 'none'; object-src 'none'"

// secured sets the headers that every answer carries. Answers are not kept by
// browsers unless their handler says so: a build may change at any moment.
func secured(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		h := w.Header()
		h.Set("Content-Security-Policy", contentPolicy)
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("Referrer-Policy", "same-origin")
		h.Set("Cross-Origin-Opener-Policy", "same-origin")
		h.Set("Cross-Origin-Resource-Policy", "same-origin")
		h.Set("Permissions-Policy", "camera=(), geolocation=(), microphone=(), payment=(), usb=()")
		h.Set("Cache-Control", "no-cache")
		next.ServeHTTP(w, r)
	})
}

// hostList is which names in a request's Host are ours. Without it a page from
// elsewhere whose name is made to resolve to this machine could read and
// change everything: to the browser it would be one origin.
type hostList struct {
	names []string
	// anyAddress is set when listening on all interfaces: then a Host written
	// as an IP address is ours, since that is no name somebody could point here.
	anyAddress bool
}

// hostsFor returns the names to answer to when listening at an address such as
// "127.0.0.1:8246" or ":8246".
func hostsFor(listen string) hostList {
	list := hostList{names: []string{"localhost", "127.0.0.1", "::1"}}
	host, _, err := net.SplitHostPort(listen)
	if err != nil {
		return list
	}
	ip, err := netip.ParseAddr(host)
	if host == "" || err == nil && ip.IsUnspecified() {
		list.anyAddress = true
		if name, err := os.Hostname(); err == nil {
			list.names = append(list.names, strings.ToLower(name), strings.ToLower(name)+".local")
		}
		return list
	}
	list.names = append(list.names, strings.ToLower(host))
	return list
}

// has tells whether a request's Host, with or without a port, is ours.
func (l hostList) has(host string) bool {
	if h, _, err := net.SplitHostPort(host); err == nil {
		host = h
	}
	host = strings.ToLower(strings.Trim(host, "[]"))
	if slices.Contains(l.names, host) {
		return true
	}
	_, err := netip.ParseAddr(host)
	return l.anyAddress && err == nil
}

// knownHost refuses requests to a host name that is not ours.
func (s *server) knownHost(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if !s.hosts.has(r.Host) {
			s.fail(w, r, refuse(http.StatusMisdirectedRequest, "This is not the host you asked for",
				"Open the address that the program printed when it started."))
			return
		}
		next.ServeHTTP(w, r)
	})
}

// sameOrigin refuses whatever changes something when another site's page sent
// it. Programs that are no browsers send neither header and pass.
func (s *server) sameOrigin(next http.Handler) http.Handler {
	protection := http.NewCrossOriginProtection()
	protection.SetDenyHandler(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		s.fail(w, r, refuse(http.StatusForbidden, "Another site sent this",
			"Only this program's own pages may change anything here."))
	}))
	return protection.Handler(next)
}

// maxBody cuts a request's body off at n bytes; reading further is an
// http.MaxBytesError, which is answered with 413.
func maxBody(n int64) func(http.Handler) http.Handler {
	return func(next http.Handler) http.Handler {
		return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
			r.Body = http.MaxBytesReader(w, r.Body, n)
			next.ServeHTTP(w, r)
		})
	}
}

// compressed packs pages and their files. Documents for programs stay as they
// are: their ETag stands for the exact bytes.
func compressed() func(http.Handler) http.Handler {
	const level = 5
	return middleware.Compress(level, "text/html", "text/css", "text/javascript", "image/svg+xml")
}

// logged turns a panic into an answer and a log entry with its stack, and
// notes every request at the debug level.
func (s *server) logged(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		watched := middleware.NewWrapResponseWriter(w, r.ProtoMajor)
		start := s.now()
		defer func() {
			if cause := recover(); cause != nil {
				if err, is := cause.(error); is && errors.Is(err, http.ErrAbortHandler) {
					panic(cause) // net/http's own word for "drop the connection"
				}
				s.log.ErrorContext(r.Context(), "panic", "path", r.URL.Path, "cause", fmt.Sprint(cause), "stack", string(debug.Stack()))
				if watched.Status() == 0 {
					s.fail(watched, r, errPanicked)
				}
			}
			s.log.DebugContext(r.Context(), "request", "method", r.Method, "path", r.URL.Path,
				"status", watched.Status(), "took", s.now().Sub(start), "request", middleware.GetReqID(r.Context()))
		}()
		next.ServeHTTP(watched, r)
	})
}

// errPanicked is answered like any fault of our own.
var errPanicked = errors.New("a handler panicked")
