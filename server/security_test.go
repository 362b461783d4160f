package main

import (
	"compress/gzip"
	"io"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"
)

func TestEveryAnswerCarriesTheSecurityHeaders(t *testing.T) {
	p := openShop(t)
	want := map[string]string{
		"Content-Security-Policy":      "default-src 'self'; base-uri 'none'; form-action 'self'; frame-ancestors 'none'; object-src 'none'",
		"X-Content-Type-Options":       "nosniff",
		"Referrer-Policy":              "same-origin",
		"Cross-Origin-Opener-Policy":   "same-origin",
		"Cross-Origin-Resource-Policy": "same-origin",
	}
	for _, target := range []string{"/healthz", "/api/builds", "/api/builds/77", "/nowhere", "/static/nothing"} {
		a := p.do(http.MethodGet, target, "")
		for name, value := range want {
			if got := a.header.Values(name); len(got) != 1 || got[0] != value {
				t.Errorf("%s: %s is %q, want %q", target, name, got, value)
			}
		}
	}
	if a := p.do(http.MethodGet, "/healthz", "", "Host", "elsewhere.example"); a.header.Get("Content-Security-Policy") == "" {
		t.Error("a refused host gets no policy")
	}
}

// hostCase is an address listened at and a Host that a request names.
type hostCase struct {
	listen, host string
	ours         bool
}

func TestOnlyOurHostNamesAreAnswered(t *testing.T) {
	for _, c := range []hostCase{
		{"127.0.0.1:8246", "127.0.0.1:8246", true},
		{"127.0.0.1:8246", "localhost:8246", true},
		{"127.0.0.1:8246", "LocalHost", true},
		{"127.0.0.1:8246", "[::1]:8246", true},
		{"127.0.0.1:8246", "[::1]", true},
		{"127.0.0.1:8246", "elsewhere.example", false},
		{"127.0.0.1:8246", "elsewhere.example:8246", false},
		{"127.0.0.1:8246", "localhost.elsewhere.example", false},
		{"127.0.0.1:8246", "127.0.0.1.elsewhere.example", false},
		{"127.0.0.1:8246", "192.0.2.7:8246", false},
		{"127.0.0.1:8246", "", false},
		{"192.0.2.7:80", "192.0.2.7", true},
		{"192.0.2.7:80", "192.0.2.8", false},
		{"Bench.example:80", "bench.example", true},
		{":8246", "192.0.2.7:8246", true},
		{"0.0.0.0:8246", "192.0.2.7:8246", true},
		{"[::]:8246", "[2001:db8::7]:8246", true},
		{":8246", "elsewhere.example:8246", false},
	} {
		if got := hostsFor(c.listen).has(c.host); got != c.ours {
			t.Errorf("listening at %q, host %q is ours: %v, want %v", c.listen, c.host, got, c.ours)
		}
	}
}

func TestForeignHostsReachNothing(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodPost, "/api/builds", shelfLight(t), "Content-Type", asJSON, "Host", "elsewhere.example")
	a.wantProblem(t, http.StatusMisdirectedRequest, "")
	p.do(http.MethodGet, "/nowhere", "", "Host", "elsewhere.example").wantStatus(t, http.StatusMisdirectedRequest)
	if list := p.do(http.MethodGet, "/api/builds", ""); list.body != `{"builds":[]}` {
		t.Errorf("it was imported: %s", list.body)
	}
}

// originCase is what a browser says about where a request came from.
type originCase struct {
	name    string
	headers []string
	status  int
}

func TestOtherSitesChangeNothing(t *testing.T) {
	p := openShop(t)
	for _, c := range []originCase{
		{"a program", nil, 201},
		{"our own page", []string{"Sec-Fetch-Site", "same-origin"}, 201},
		{"our own page, older browser", []string{"Origin", p.http.URL}, 201},
		{"another site", []string{"Sec-Fetch-Site", "cross-site"}, 403},
		{"another port of this machine", []string{"Sec-Fetch-Site", "same-site"}, 403},
		{"another site, older browser", []string{"Origin", "http://elsewhere.example"}, 403},
		{"another port, older browser", []string{"Origin", "http://127.0.0.1:9"}, 403},
		{"a sandboxed frame", []string{"Origin", "null"}, 403},
	} {
		a := p.do(http.MethodPost, "/api/builds", shelfLight(t), append([]string{"Content-Type", asJSON}, c.headers...)...)
		if a.status != c.status {
			t.Errorf("%s: status %d, want %d: %s", c.name, a.status, c.status, a.body)
		}
		if c.status == 403 {
			a.wantProblem(t, 403, "")
		}
	}
	p.do(http.MethodPost, "/nowhere", "", "Sec-Fetch-Site", "cross-site").wantStatus(t, http.StatusForbidden)
	p.do(http.MethodGet, "/healthz", "", "Sec-Fetch-Site", "cross-site").wantStatus(t, http.StatusOK)
}

func TestBodiesHaveALimit(t *testing.T) {
	p := openShop(t)
	padded := func(bytes int) string { return shelfLight(t) + strings.Repeat(" ", bytes-len(shelfLight(t))) }
	for _, target := range []string{"/api/check", "/api/builds"} {
		// The longest body is taken, though no build is as long as that.
		p.do(http.MethodPost, target, padded(apiBody), "Content-Type", asJSON).wantProblem(t, http.StatusUnprocessableEntity, "")
		p.do(http.MethodPost, target, padded(apiBody+1), "Content-Type", asJSON).wantProblem(t, http.StatusRequestEntityTooLarge, "")
		p.do(http.MethodPost, target, padded(pageBody+1), "Content-Type", asJSON).wantStatus(t, map[string]int{"/api/check": 200, "/api/builds": 201}[target])
	}
	address := p.importBuild(shelfLight(t))
	p.patch(address, `"1"`, "[]"+strings.Repeat(" ", apiBody)).wantProblem(t, http.StatusRequestEntityTooLarge, "")
}

func TestPageBodiesHaveALimit(t *testing.T) {
	p := openShop(t)
	form := maxBody(pageBody)(p.s.page(func(w http.ResponseWriter, r *http.Request) error {
		return r.ParseForm()
	}))
	for size, want := range map[int]int{pageBody: 200, pageBody + 1: 413} {
		r := httptest.NewRequest(http.MethodPost, "/", strings.NewReader("a="+strings.Repeat("x", size-2)))
		r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
		w := httptest.NewRecorder()
		form.ServeHTTP(w, r)
		if w.Code != want {
			t.Errorf("form of %d bytes: status %d, want %d", size, w.Code, want)
		}
	}
}

func TestOtherMethodsAreToldWhichOnesWork(t *testing.T) {
	p := openShop(t)
	for target, allowed := range map[string]string{
		"/api/builds":          "GET, HEAD, POST",
		"/api/builds/1":        "GET, HEAD, PATCH",
		"/api/builds/1/report": "GET, HEAD",
		"/api/check":           "POST",
		"/healthz":             "GET, HEAD",
	} {
		a := p.do(http.MethodDelete, target, "")
		a.wantProblem(t, http.StatusMethodNotAllowed, "")
		if got := a.header.Get("Allow"); got != allowed {
			t.Errorf("%s allows %q, want %q", target, got, allowed)
		}
	}
	p.do(http.MethodGet, "/api/check", "").wantProblem(t, http.StatusMethodNotAllowed, "")
	for _, target := range []string{"/api", "/api/", "/api/nothing"} {
		p.do(http.MethodGet, target, "").wantProblem(t, http.StatusNotFound, "")
	}
}

func TestPagesArePackedAndDocumentsAreNot(t *testing.T) {
	p := openShop(t)
	a := p.do(http.MethodGet, "/nowhere", "", "Accept-Encoding", "gzip")
	if a.header.Get("Content-Encoding") != "gzip" {
		t.Fatalf("a page is sent as %q", a.header.Get("Content-Encoding"))
	}
	unpacked, err := gzip.NewReader(strings.NewReader(a.body))
	if err != nil {
		t.Fatal(err)
	}
	if page, err := io.ReadAll(unpacked); err != nil || !strings.Contains(string(page), "</html>") {
		t.Errorf("unpacked %d bytes, %v", len(page), err)
	}
	a = p.do(http.MethodGet, p.importBuild(tide(t)), "", "Accept-Encoding", "gzip")
	if a.header.Get("Content-Encoding") != "" || a.body != tide(t) {
		t.Errorf("a document is sent as %q", a.header.Get("Content-Encoding"))
	}
}

func TestAPanicIsAnsweredAndLogged(t *testing.T) {
	p := openShop(t)
	for _, target := range []string{"/page", "/api/thing"} {
		w := httptest.NewRecorder()
		p.s.logged(http.HandlerFunc(func(http.ResponseWriter, *http.Request) {
			panic("the lamp fell over")
		})).ServeHTTP(w, httptest.NewRequest(http.MethodGet, target, nil))
		if w.Code != http.StatusInternalServerError || strings.Contains(w.Body.String(), "lamp") {
			t.Errorf("%s: status %d, %.300s", target, w.Code, w.Body)
		}
	}
	if log := p.log.String(); !strings.Contains(log, "the lamp fell over") || !strings.Contains(log, "security_test.go") {
		t.Errorf("the log has no cause or no stack:\n%s", log)
	}
}
