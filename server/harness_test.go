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
func openShop(t testing.TB) *shop {
	t.Helper()
	return openShopOn(t, filepath.Join(t.TempDir(), "lanternbook.db"))
}

func openShopOn(t testing.TB, path string) *shop {
	t.Helper()
	var ticks atomic.Int64
	now := func() time.Time {
		return time.Date(2026, 3, 14, 9, 0, 0, 0, time.UTC).Add(time.Duration(ticks.Add(1)) * time.Second)
	}
	st, err := store.Open(context.Background(), path, now)
	if err != nil {
		t.Fatal(err)
	}
	log := &lockedLog{}
	s := newServer(st, now, slog.New(slog.NewTextHandler(log, nil)), "127.0.0.1:0")
	p := &shop{t: t, s: s, log: log, http: httptest.NewServer(s.routes())}
	t.Cleanup(func() {
		p.http.Close()
		if err := st.Close(); err != nil {
			t.Error(err)
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

func ask(t testing.TB, base, method, target, body string, headers ...string) answer {
	t.Helper()
	r, err := http.NewRequestWithContext(context.Background(), method, base+target, strings.NewReader(body))
	if err != nil {
		t.Fatal(err)
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
		t.Fatalf("%s %s: %v", method, target, err)
	}
	defer response.Body.Close()
	content, err := io.ReadAll(response.Body)
	if err != nil {
		t.Fatalf("%s %s: %v", method, target, err)
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
func (a answer) wantStatus(t testing.TB, want int) {
	t.Helper()
	if a.status != want {
		t.Fatalf("status %d, want %d; body: %.400s", a.status, want, a.body)
	}
}

// decode reads the body as JSON.
func decode[T any](t testing.TB, a answer) T {
	t.Helper()
	var v T
	if err := json.Unmarshal([]byte(a.body), &v); err != nil {
		t.Fatalf("body is not the JSON expected: %v; %.400s", err, a.body)
	}
	return v
}

// wantProblem asserts a problem document with this status and this field.
func (a answer) wantProblem(t testing.TB, status int, field string) problem {
	t.Helper()
	a.wantStatus(t, status)
	if got := a.header.Get("Content-Type"); got != "application/problem+json" {
		t.Errorf("Content-Type %q, want application/problem+json", got)
	}
	p := decode[problem](t, a)
	if p.Status != status || p.Title == "" || p.Detail == "" {
		t.Errorf("problem %+v, want status %d, a title and a detail", p, status)
	}
	if p.Field != field {
		t.Errorf("field %q, want %q; errors %v", p.Field, field, p.Errors)
	}
	return p
}
