package main

import (
	"net/http"
	"net/url"
	"strings"
	"testing"
)

// Without a script: the form leads back to the page, which shows what became
// of it when it is loaded again.
func TestMoreSpreadByReloading(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/spread"
	wantWords(t, b.get(b.page), `data-hx-get="`+address+`"`)
	page := b.get(address)
	wantWords(t, page, "</html>", `name="samples"`, `value="1000"`)
	wantNot(t, page, "histogram", "every 500ms")

	if got := b.press(address, url.Values{"samples": {"1 200"}, "seed": {"7"}}); got != address {
		t.Errorf("leads to %q", got)
	}
	<-b.s.scatters.job(1).ended
	page = b.get(address)
	wantWords(t, page, "Of 1200 builds", `value="1200"`, `value="7"`, "String A × 4", "Checks that pass with room", "current", "left over", "on average", "95 % certainty")
	wantNot(t, page, "every 500ms", "the build has changed since")
	if n := strings.Count(page, `class="bin"`); n < 20 {
		t.Errorf("%d bars", n)
	}
	if again := b.get(address); again != page {
		t.Error("the same draw is shown otherwise the second time")
	}
	b.live("/title", "Changed")
	wantWords(t, b.get(address), "This is of revision 1: the build has changed since")
}

// With a script: the state asks again while it runs, and can be stopped.
func TestMoreSpreadIsStopped(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/spread"
	script := []string{"HX-Request", "true", "Content-Type", formType}
	a := b.do(http.MethodPost, address, "samples=100000&seed=1", script...)
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "of 100000 builds", `data-hx-get="`+address+`?state"`, "every 500ms", `value="stop"`)
	wantNot(t, a.body, "<html", `name="samples"`)
	a = b.do(http.MethodGet, address+"?state", "", "HX-Request", "true")
	wantWords(t, a.body, "every 500ms")
	wantNot(t, a.body, `name="samples"`)
	a = b.do(http.MethodPost, address, "do=stop", script...)
	wantWords(t, a.body, "Stopped after")
	wantNot(t, a.body, "every 500ms")
	if b.s.scatters.job(1).running() {
		t.Error("it still runs")
	}
}

func TestMoreSpreadRefuses(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/spread"
	for _, c := range []struct{ samples, seed, words string }{
		{"0", "1", "from 1 to 100,000"}, {"100001", "1", "from 1 to 100,000"}, {"many", "1", "from 1 to 100,000"}, {"", "", "from 1 to 100,000"},
		{"10", "-1", "Seed: a whole number"}, {"10", "x", "Seed: a whole number"},
	} {
		a := b.shop.post(address, url.Values{"samples": {c.samples}, "seed": {c.seed}})
		a.wantStatus(t, http.StatusUnprocessableEntity)
		wantWords(t, a.body, c.words, `name="samples" value="`+c.samples+`"`)
	}
	if b.s.scatters.job(1) != nil {
		t.Error("a draw was started")
	}
}

// Two run at once; a third is told to wait. Shutting down ends them all.
func TestMoreSpreadTwoAtOnce(t *testing.T) {
	p := openShop(t)
	long := url.Values{"samples": {"100000"}, "seed": {"1"}}
	for range 3 {
		p.importBuild(bench(t))
	}
	p.press("/builds/1/more/spread", long)
	p.press("/builds/2/more/spread", long)
	a := p.post("/builds/3/more/spread", long)
	a.wantStatus(t, http.StatusUnprocessableEntity)
	wantWords(t, a.body, "two draws are running already")
	p.press("/builds/2/more/spread", url.Values{"samples": {"90000"}, "seed": {"1"}}) // its own gives way
	p.s.scatters.close()
	if p.s.scatters.job(1).running() || p.s.scatters.job(2).running() {
		t.Error("a draw outlives the program")
	}
	wantWords(t, p.get("/builds/1/more/spread"), "Stopped after")
}

func TestMoreSpreadOfABuildThatCannotBeSolved(t *testing.T) {
	b := openBuild(t, runaway(t))
	page := b.get(b.page + "/more/spread")
	wantWords(t, page, "No figures:")
	wantNot(t, page, `name="samples"`)
}
