package main

import (
	"testing"

	"github.com/chromedp/chromedp/kb"
)

// Two tabs on one build: the second to save is told what differs, and neither
// loses anything.
func TestTwoTabsOnOneBuild(t *testing.T) {
	home := serveFresh(t)
	first, second := openTab(t, home, "/builds/2"), openTab(t, home, "/builds/2")

	first.reach("textbox", "Title")
	first.fill("Named in the first tab")
	first.waitKept()

	second.reach("textbox", "rated current")
	second.fill("1,75")
	second.wait("the second tab to be told", `document.querySelector("#conflict h2")`)
	second.wantWords("This build was changed elsewhere", "Named in the first tab", "1,75")
	if eval[bool](second, isKept) {
		t.Error("the second tab says kept")
	}
	if got := eval[string](second, theField); got != "1,75" {
		t.Errorf("the field of the second tab holds %q, want what was typed", got)
	}
	second.axe("a build that was changed elsewhere")
	second.picture("changed elsewhere")

	second.reachBack("button", "Take mine on top of theirs")
	second.press(kb.Enter)
	second.wait("the notice to go", `!document.querySelector("#conflict h2")`)
	second.waitKept()
	kept := eval[struct {
		Title   string
		Current float64
	}](second, `fetch("/api/builds/2").then(r => r.json()).then(d => ({title: d.title, current: d.supply.max_current}))`)
	if kept.Title != "Named in the first tab" || kept.Current != 1.75 {
		t.Errorf("kept is %+v, want what both tabs typed", kept)
	}
	if got := eval[string](second, `document.querySelector("h1 input").value`); got != "Named in the first tab" {
		t.Errorf("the second tab's title is %q, want the first tab's", got)
	}
}
