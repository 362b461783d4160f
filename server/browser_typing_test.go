package main

import (
	"net/http"
	"net/http/httptest"
	"net/http/httputil"
	"net/url"
	"testing"

	"github.com/chromedp/chromedp/kb"
)

// gate stands between the browser and the program and can hold back edits, so
// that a test decides how late an answer is.
type gate struct {
	arrived chan struct{} // one for each edit that is held back
	open    chan struct{} // closed when edits may go on
}

// serveGated starts the program behind a gate that is shut for edits, and
// returns the address to visit.
func serveGated(t *testing.T) (string, *gate) {
	t.Helper()
	program, err := url.Parse(serveFresh(t))
	if err != nil {
		t.Fatal(err)
	}
	g := &gate{arrived: make(chan struct{}, 100), open: make(chan struct{})}
	proxy := &httputil.ReverseProxy{Rewrite: func(r *httputil.ProxyRequest) {
		r.SetURL(program)
		r.Out.Host = r.In.Host // the browser's own words for where it is
	}}
	front := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if r.Method == http.MethodPost && r.Header.Get("HX-Request") != "" {
			g.arrived <- struct{}{}
			<-g.open
		}
		proxy.ServeHTTP(w, r)
	}))
	t.Cleanup(front.Close)
	return front.URL, g
}

func TestALateAnswerTakesNothingFromWhatIsTyped(t *testing.T) {
	home, g := serveGated(t)
	b := openTab(t, home, "/builds/1")
	b.reach("textbox", "how many alike")
	b.fill("1")
	<-g.arrived // the program is asked about "1" and has not answered
	b.press("7")
	close(g.open)
	b.waitKept()
	b.wait("the second edit to be kept", `document.querySelector("#summary-0").textContent.includes("17")`)
	if got := eval[string](b, theField); got != "17" {
		t.Errorf("the field holds %q after a late answer, want what was typed, 17", got)
	}
	if got := b.focused(); got != "textbox how many alike" {
		t.Errorf("the focus went to %q", got)
	}
}

func TestCaretAndFocusStayWhileThePageFollows(t *testing.T) {
	b := openTab(t, serveFresh(t), "/builds/1")
	b.wait("the title's field", `document.querySelector("h1 input")`)
	b.reach("textbox", "Title")
	b.fill("Harbour wall")
	b.waitKept()
	b.press(kb.Home, kb.ArrowRight, kb.ArrowRight, kb.ArrowRight)
	b.press("xy")
	b.waitKept()
	b.press("z")
	b.waitKept()
	if got := eval[string](b, theField); got != "Harxyzbour wall" {
		t.Errorf("typed in the middle of a word, the field holds %q", got)
	}
	if at := eval[int](b, `document.activeElement.selectionStart`); at != 6 {
		t.Errorf("the caret stands at %d, want 6", at)
	}
	if title := eval[string](b, `fetch("/api/builds/1").then(r => r.json()).then(d => d.title)`); title != "Harxyzbour wall" {
		t.Errorf("kept is %q", title)
	}
}

func TestAWrongValueStaysBesideItsFieldAndTheRestIsKept(t *testing.T) {
	b := openTab(t, serveFresh(t), "/")
	b.reach("button", "New build")
	b.press(kb.Enter)
	b.wait("the build", `document.getElementById("build")`)
	b.reach("textbox", "voltage")
	b.fill("about twelve")
	b.wait("the field to be marked", `document.activeElement.getAttribute("aria-invalid") === "true"`)
	said := eval[string](b, `document.activeElement.getAttribute("aria-describedby").split(" ").
		map(id => document.getElementById(id)).find(e => e.matches(".error")).innerText`)
	if said == "" {
		t.Error("no reason stands beside the field")
	}
	if got := eval[string](b, theField); got != "about twelve" {
		t.Errorf("the field holds %q, want what was typed", got)
	}
	if eval[bool](b, isKept) {
		t.Error("the page says kept, although a field is not")
	}

	b.reach("textbox", "rated current")
	b.fill("2 A")
	b.wait("the right field to be kept", `fetch(location.pathname.replace("/builds", "/api/builds")).
		then(r => r.json()).then(d => d.supply.max_current === 2)`)
	if got := eval[string](b, `[...document.querySelectorAll("#build input")].find(e => e.computedName === "voltage").value`); got != "about twelve" {
		t.Errorf("another edit changed the wrong field to %q", got)
	}
	b.reachBack("textbox", "voltage")
	b.fill("12,5")
	b.wait("the mark to go", `document.activeElement.getAttribute("aria-invalid") !== "true"`)
	b.waitKept()
	if volts := eval[float64](b, `fetch(location.pathname.replace("/builds", "/api/builds")).
		then(r => r.json()).then(d => d.supply.voltage.typ ?? d.supply.voltage)`); volts != 12.5 {
		t.Errorf("a decimal comma kept %v V, want 12.5", volts)
	}
}

func TestEditsAreUndoneAndRedone(t *testing.T) {
	b := openTab(t, serveFresh(t), "/builds/2")
	title := `document.querySelector("h1 input").value`
	first := eval[string](b, title)
	b.reach("textbox", "Title")
	b.fill("Another name")
	b.waitKept()
	b.reach("button", "Undo")
	b.press(kb.Enter)
	b.wait("the first title", title+` === `+quote(first))
	b.wait("redo to be offered", `!document.getElementById("redo").disabled`)
	b.reach("button", "Redo")
	b.press(kb.Enter)
	b.wait("the second title", title+` === "Another name"`)
	b.waitKept()
	b.do("reload", reload())
	if got := eval[string](b, title); got != "Another name" {
		t.Errorf("after a reload the title is %q", got)
	}
}
