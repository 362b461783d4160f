package main

import (
	"net/http"
	"strings"
	"testing"
)

// Two tabs on one build: the second to keep is told what differs, and keeps
// everything that was typed.
func TestBuildStale(t *testing.T) {
	first := openBuild(t, bench(t))
	second := first.openBuild(first.page)
	first.live("/strings/0/driver/sense/ohms", "91", "/client", "Harbour office")

	a := second.live("/strings/0/driver/sense/ohms", "120", "/strings/1/leds/0/quantity", "3")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "This build was changed elsewhere", "91 Ω", "120", "Harbour office", "sense resistor, ohms", "string A", `name="theirs" value="2"`, "not kept")
	if strings.Contains(a.body, `name="revision"`) {
		t.Error("the page was moved on to a revision that it does not show")
	}
	kept := second.kept()
	if kept.Strings[0].Driver.FollowerSink.Sense.Ohms != 91 || kept.Strings[1].LEDs[0].Quantity != 2 {
		t.Errorf("something was kept before the person chose: %+v", kept.Strings[1].LEDs)
	}

	a = second.live("/strings/0/driver/sense/ohms", "120", "/strings/1/leds/0/quantity", "3", "resolve", "mine", "theirs", "2")
	a.wantStatus(t, http.StatusOK)
	kept = second.kept()
	if kept.Strings[0].Driver.FollowerSink.Sense.Ohms != 120 || kept.Strings[1].LEDs[0].Quantity != 3 || kept.Client != "Harbour office" {
		t.Errorf("mine on top of theirs: %v Ω, %d LEDs, client %q", kept.Strings[0].Driver.FollowerSink.Sense.Ohms, kept.Strings[1].LEDs[0].Quantity, kept.Client)
	}
	wantWords(t, a.body, "revision 3", `data-hx-target="#editor"`, `value="Harbour office"`)
	if strings.Contains(a.body, "changed elsewhere") {
		t.Error("the notice is still there")
	}
}

// Without a script the page comes back as it was left, with the notice.
func TestBuildStalePlain(t *testing.T) {
	first := openBuild(t, bench(t))
	second := first.openBuild(first.page)
	first.live("/title", "First")
	a := second.post("/title", "Second", "/strings/0/driver/sense/ohms", "some")
	a.wantStatus(t, http.StatusConflict)
	wantWords(t, a.body, "changed elsewhere", `name="/title" type="text" value="Second"`, `value="some"`, `name="revision" value="1"`, `name="theirs" value="2"`)
	second.post("/title", "Second", "resolve", "mine", "theirs", "2").wantStatus(t, http.StatusSeeOther)
	if got := second.kept().Title; got != "Second" {
		t.Errorf("kept %q", got)
	}
}

// Theirs moved on again while the notice was read: it is asked again.
func TestBuildStaleTwice(t *testing.T) {
	first := openBuild(t, bench(t))
	second := first.openBuild(first.page)
	first.live("/title", "First")
	second.live("/title", "Second")
	first.live("/title", "First again")
	a := second.live("/title", "Second", "resolve", "mine", "theirs", "2")
	wantWords(t, a.body, "changed elsewhere", `name="theirs" value="3"`, "First again")
	if got := second.kept().Title; got != "First again" {
		t.Errorf("kept %q", got)
	}
}

// Where rows came or went, fields cannot be matched by their places: the page
// is kept as a whole, and theirs is one Undo away.
func TestBuildStaleOfAnotherShape(t *testing.T) {
	first := openBuild(t, bench(t))
	second := first.openBuild(first.page)
	first.live("do", "string-remove /strings/0")
	a := second.live("/strings/0/leds/0/quantity", "5")
	wantWords(t, a.body, "field by field", "gone")
	second.live("/strings/0/leds/0/quantity", "5", "resolve", "mine", "theirs", "2")
	kept := second.kept()
	if labelsOf(kept) != "A B C D E F" || stacksOf(kept, "A") != "5 white" {
		t.Errorf("kept %s with %s", labelsOf(kept), stacksOf(kept, "A"))
	}
	for range 2 { // the edit, then the page as a whole
		second.live("do", "undo")
	}
	if got := labelsOf(second.kept()); got != "B C D E F" {
		t.Errorf("two steps back: %s", got)
	}
}

// A button pressed on a page that is out of date does nothing to what it does
// not show.
func TestBuildStaleCommand(t *testing.T) {
	first := openBuild(t, bench(t))
	second := first.openBuild(first.page)
	first.live("/title", "First")
	for _, button := range []string{"string-remove /strings/0", "undo"} {
		wantWords(t, second.live("do", button).body, "changed elsewhere")
	}
	if kept := second.kept(); labelsOf(kept) != "A B C D E F" || kept.Title != "First" {
		t.Errorf("kept %q with %s", kept.Title, labelsOf(kept))
	}
	second.do(http.MethodGet, second.page, "").wantStatus(t, http.StatusOK)
}
