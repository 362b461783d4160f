package main

import (
	"strings"
	"testing"

	"github.com/chromedp/chromedp/kb"
)

// What several browser tests ask a build's page.
const (
	isKept   = `/^kept /.test(document.getElementById("kept").textContent)`
	settled  = isKept + ` && !document.querySelector(".htmx-request")`
	theField = `document.activeElement.value`
)

// A build is made from nothing, proved, mended and found again by keys alone:
// nothing here touches a mouse.
func TestABuildIsMadeMendedAndFoundAgainByKeyboard(t *testing.T) {
	b := openTab(t, serveFresh(t), "/")

	b.reach("button", "New build")
	b.press(kb.Enter)
	b.wait("the new build's page", `document.getElementById("build") !== null`)
	b.wait("the title to have the focus", theField+` === "New build"`)
	b.fill("Tide board, ferry office")
	b.waitKept()

	b.reach("textbox", "how many of LED 1")
	before := b.leftOver()
	if !strings.HasPrefix(before, "2.") {
		t.Fatalf("three LEDs on 12 V leave %q, want some 2 V", before)
	}
	b.reach("button", "one more")
	b.press(kb.Enter)
	b.wait("the picture to say short", `/[0-9]\sV\sshort/.test(document.getElementById("picture").textContent)`)
	b.waitKept()
	b.wantWords("Headroom", "fail")
	if after := b.leftOver(); !strings.HasPrefix(after, "−") {
		t.Errorf("a fourth LED leaves %q, want less than nothing", after)
	}
	b.picture("one LED too many")

	b.reach("button", "one LED fewer")
	remedy := b.focused()
	b.press(kb.Enter)
	b.wait("the remedy "+remedy+" to cure it", `!/short/.test(document.getElementById("picture").textContent)`)
	b.waitKept()
	b.wantFocusSomewhere("after a remedy")
	mended := b.leftOver()
	b.picture("mended")

	b.do("reload", reload())
	if got := b.leftOver(); got != mended {
		t.Errorf("after a reload %q is left over, before it was %q", got, mended)
	}

	b.reach("link", "Shelf")
	b.press(kb.Enter)
	b.wait("the shelf", `document.getElementById("found") !== null`)
	b.reach("searchbox", "Find a build")
	b.press("ferry tide")
	b.wait("one card to be left", `document.querySelectorAll("#found .card").length === 1`)
	b.reach("link", "Tide board, ferry office")
	b.press(kb.Enter)
	b.wait("the build's page", `document.getElementById("build") !== null`)
	if got := eval[string](b, `document.querySelector("h1 input").value`); got != "Tide board, ferry office" {
		t.Errorf("the build found is %q", got)
	}
}

// waitKept waits until the page says that everything is on disk.
func (b *tab) waitKept() {
	b.t.Helper()
	b.wait("the page to say kept", settled)
}

// leftOver is what the first string leaves over on a usual day, as the
// readings have it.
func (b *tab) leftOver() string {
	b.t.Helper()
	return eval[string](b, `[...document.querySelectorAll("#readings tbody tr")].
		find(row => row.cells[0].innerText.trim() === "left over").cells[2].innerText.trim()`)
}

// wantWords fails for each of the words that the page does not show.
func (b *tab) wantWords(words ...string) {
	b.t.Helper()
	page := b.words()
	for _, w := range words {
		if !strings.Contains(page, w) {
			b.t.Errorf("the page does not say %q", w)
		}
	}
}

// wantFocusSomewhere fails when the focus has fallen off the page: the next
// Tab would then start from the top.
func (b *tab) wantFocusSomewhere(when string) {
	b.t.Helper()
	if eval[bool](b, `document.activeElement === document.body`) {
		b.t.Errorf("%s nothing has the focus", when)
	}
}
