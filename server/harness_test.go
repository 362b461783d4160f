package main

import (
	"context"
	"encoding/json"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"path/filepath"
	"strings"
	"sync/atomic"
	"testing"
	"time"

	"lanternbook/store"
)

// shop is the program under test: the real routes, over real HTTP, on a real
// store in a folder of the test's own.
type shop struct {
	t    testing.TB
	s    *server
	http *httptest.Server
	log  *lockedLog
}

// answer is a response that was read to its end.
type answer struct {
	status int
	header http.Header
	body   string
}

// openShop starts the program on an empty store. Its clock starts at a fixed
// day and goes on by one second with every reading.
func openShop(tb testing.TB) *shop {
	tb.Helper()
	return openShopOn(tb, filepath.Join(tb.TempDir(), "lanternbook.db"))
}

func openShopOn(tb testing.TB, path string) *shop {
	tb.Helper()
	var ticks atomic.Int64
	now := func() time.Time {
		return time.Date(2026, 3, 14, 9, 0, 0, 0, time.UTC).Add(time.Duration(ticks.Add(1)) * time.Second)
	}
	st, err := store.Open(context.Background(), path, now)
	if err != nil {
		tb.Fatal(err)
	}
	log := &lockedLog{}
	s := newServer(st, now, slog.New(slog.NewTextHandler(log, nil)), "127.0.0.1:0")
	p := &shop{t: tb, s: s, log: log, http: httptest.NewServer(s.routes())}
	tb.Cleanup(func() {
		p.http.Close()
		if err := st.Close(); err != nil {
			tb.Error(err)
		}
	})
	return p
}

// do sends a request and reads the answer. Headers are name, value, name,
// value; "Host" sets the host asked for. Redirects are not followed.
func (p *shop) do(method, target, body string, headers ...string) answer {
	p.t.Helper()
	return ask(p.t, p.http.URL, method, target, body, headers...)
}

func ask(tb testing.TB, base, method, target, body string, headers ...string) answer {
	tb.Helper()
	r, err := http.NewRequestWithContext(context.Background(), method, base+target, strings.NewReader(body))
	if err != nil {
		tb.Fatal(err)
	}
	for i := 0; i+1 < len(headers); i += 2 {
		if headers[i] == "Host" {
			r.Host = headers[i+1]
			continue
		}
		r.Header.Add(headers[i], headers[i+1])
	}
	response, err := plainTransport.RoundTrip(r)
	if err != nil {
		tb.Fatalf("%s %s: %v", method, target, err)
	}
	defer func() { _ = response.Body.Close() }()
	content, err := io.ReadAll(response.Body)
	if err != nil {
		tb.Fatalf("%s %s: %v", method, target, err)
	}
	return answer{response.StatusCode, response.Header, string(content)}
}

// plainTransport shows answers as they are on the wire: not unpacked.
var plainTransport = &http.Transport{DisableCompression: true, MaxIdleConnsPerHost: 32}

// importBuild puts a document on the shelf and returns its address.
func (p *shop) importBuild(document string) string {
	p.t.Helper()
	a := p.do(http.MethodPost, "/api/builds", document, "Content-Type", "application/json")
	if a.status != http.StatusCreated {
		p.t.Fatalf("import: status %d: %s", a.status, a.body)
	}
	return a.header.Get("Location")
}

// patch edits a build as it stands at a revision.
func (p *shop) patch(address, etag, operations string) answer {
	p.t.Helper()
	return p.do(http.MethodPatch, address, operations, "Content-Type", "application/json-patch+json", "If-Match", etag)
}

// wantStatus ends the test when the answer has another status.
func (a answer) wantStatus(tb testing.TB, want int) {
	tb.Helper()
	if a.status != want {
		tb.Fatalf("status %d, want %d; body: %.400s", a.status, want, a.body)
	}
}

// decode reads the body as JSON.
func decode[T any](tb testing.TB, a answer) T {
	tb.Helper()
	var v T
	if err := json.Unmarshal([]byte(a.body), &v); err != nil {
		tb.Fatalf("body is not the JSON expected: %v; %.400s", err, a.body)
	}
	return v
}

// wantProblem asserts a problem document with this status and this field.
func (a answer) wantProblem(tb testing.TB, status int, field string) problem {
	tb.Helper()
	a.wantStatus(tb, status)
	if got := a.header.Get("Content-Type"); got != "application/problem+json" {
		tb.Errorf("Content-Type %q, want application/problem+json", got)
	}
	p := decode[problem](tb, a)
	if p.Status != status || p.Title == "" || p.Detail == "" {
		tb.Errorf("problem %+v, want status %d, a title and a detail", p, status)
	}
	if p.Field != field {
		tb.Errorf("field %q, want %q; errors %v", p.Field, field, p.Errors)
	}
	return p
}
