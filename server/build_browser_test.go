package main

import (
	"testing"

	"github.com/chromedp/chromedp"
)

// What these tests ask the page.
const (
	ledCount = `document.getElementById("f-strings-0-leds-0-quantity")`
	inHand   = `document.activeElement.id + "=" + document.activeElement.value + "@" + document.activeElement.selectionStart`
)

// slowly lets every answer come later than it does, the first one by far.
const slowly = `(() => {
	const real = window.fetch.bind(window);
	let asked = 0;
	window.fetch = (...args) => {
		const wait = asked++ === 0 ? 700 : 50;
		window.asked = asked;
		return real(...args).then((answer) => new Promise((done) => setTimeout(() => done(answer), wait)));
	};
})()`

// aBuild is the page of a build with one string, on a fresh shelf.
func aBuild(t *testing.T) *tab {
	t.Helper()
	b := openTab(t, serveFresh(t), "/")
	b.do("make a build", chromedp.Evaluate[chromedp.Void](`document.querySelector('form[action="/builds"] button').click()`))
	b.wait("its page", `document.getElementById("build") !== null && window.htmx !== undefined`)
	return b
}

// take puts the focus into a field and selects what is in it.
func (b *tab) take(id string) {
	b.t.Helper()
	b.do("take "+id, chromedp.Evaluate[chromedp.Void](`(f => { f.closest("details")?.setAttribute("open", ""); f.focus(); f.select?.(); })(document.getElementById(`+quote(id)+`))`))
}

// An answer that comes late overwrites nothing that was typed meanwhile, nor
// moves the caret; in the end the program has what the field shows.
func TestBuildLateAnswer(t *testing.T) {
	b := aBuild(t)
	b.do("slow the answers down", chromedp.Evaluate[chromedp.Void](slowly))
	b.take("f-strings-0-leds-0-quantity")
	b.press("1")
	b.wait("the first post to leave", `window.asked === 1`)
	b.press("5")
	b.wait("both to be kept", isKept+` && window.asked === 2`)
	if got := eval[string](b, inHand); got != "f-strings-0-leds-0-quantity=15@2" {
		t.Errorf("in hand: %s", got)
	}
	b.wait("the results of 15 LEDs", `document.getElementById("summary-0").textContent.includes("15 ×")`)
	if got := eval[float64](b, `fetch("/api"+location.pathname).then(r => r.json()).then(b => b.strings[0].leds[0].quantity)`); got != 15 {
		t.Errorf("kept %v LEDs", got)
	}
}

// A choice that changes which fields there are keeps what was just typed, and
// the focus where it was.
func TestBuildChoiceKeepsTyping(t *testing.T) {
	b := aBuild(t)
	b.do("slow the answers down", chromedp.Evaluate[chromedp.Void](slowly))
	b.take("f-strings-0-driver-sense-ohms")
	b.press("nonsense")
	b.take("f-strings-0-driver-kind")
	b.do("choose", chromedp.Evaluate[chromedp.Void](`(s => { s.value = "reference-sink"; s.dispatchEvent(new Event("input", {bubbles: true})); })(document.activeElement)`))
	b.wait("the fields of a reference", `document.getElementById("f-strings-0-driver-reference-volts")`)
	b.wait("the answer to be in", `document.getElementById("kept").textContent === "1 field not kept"`)
	b.wait("the focus to be back on the choice", `document.activeElement.id === "f-strings-0-driver-kind"`)
	got := eval[string](b, `(f => f.value + " " + f.getAttribute("aria-invalid"))(document.getElementById("f-strings-0-driver-sense-ohms"))`)
	if got != "nonsense true" {
		t.Errorf("the field that was wrong: %s", got)
	}
}

// What is folded open stays open, and what has the focus keeps it, while
// results come in.
func TestBuildResultsLeaveThePageAsItIs(t *testing.T) {
	b := aBuild(t)
	b.do("open a working", chromedp.Evaluate[chromedp.Void](`document.querySelector("#checks details").open = true`))
	b.take("f-supply-max-current")
	b.press("1.5")
	b.wait("it to be kept", isKept+` && document.getElementById("state").textContent.includes("revision 2")`)
	if !eval[bool](b, `document.querySelector("#checks details").open`) {
		t.Error("the working was folded away")
	}
	if got := eval[string](b, inHand); got != "f-supply-max-current=1.5@3" {
		t.Errorf("in hand: %s", got)
	}
}

// Undo and redo by keys work outside fields, and leave fields to the browser.
func TestBuildUndoByKeys(t *testing.T) {
	b := aBuild(t)
	press := func(shift string) {
		b.do("press", chromedp.Evaluate[chromedp.Void](`document.activeElement.dispatchEvent(new KeyboardEvent("keydown", {key: "z", ctrlKey: true, shiftKey: `+shift+`, bubbles: true, cancelable: true}))`))
	}
	b.take("f-strings-0-leds-0-quantity")
	b.press("2")
	b.wait("it to be kept", isKept+` && document.getElementById("state").textContent.includes("revision 2")`)
	press("false")
	b.do("leave the field", chromedp.Evaluate[chromedp.Void](`document.querySelector("#string-0 > summary").focus()`))
	press("false")
	b.wait("it to be undone", ledCount+`.value === "3"`)
	press("true")
	b.wait("it to be redone", ledCount+`.value === "2"`)
	if got := eval[string](b, `document.getElementById("revision").value`); got != "4" {
		t.Errorf("revision %s: a key pressed in a field did something", got)
	}
}

// Two tabs on one build: the second is told, loses nothing, and its edit goes
// on top of the other's.
func TestBuildTwoTabs(t *testing.T) {
	b := aBuild(t)
	b.do("let another tab edit", chromedp.Evaluate[chromedp.Void](`fetch(location.pathname, {method: "POST", body: new URLSearchParams({revision: "1", "/client": "Harbour office"})})`, chromedp.EvalAwaitPromise))
	b.take("f-title")
	b.press("Mine")
	b.wait("to be told", `document.querySelector(".conflict")`)
	if got := eval[string](b, inHand); got != "f-title=Mine@4" {
		t.Errorf("in hand: %s", got)
	}
	b.do("go on top", chromedp.Evaluate[chromedp.Void](`document.querySelector("button[name=resolve]").click()`))
	b.wait("it to be kept", isKept+` && !document.querySelector(".conflict")`)
	got := eval[string](b, `fetch("/api"+location.pathname).then(r => r.json()).then(b => b.title + ", " + b.client)`)
	if got != "Mine, Harbour office" {
		t.Errorf("kept %q", got)
	}
	if got := eval[string](b, `document.getElementById("f-client").value`); got != "Harbour office" {
		t.Errorf("the client's field shows %q", got)
	}
}

// While the program does not answer the page says so, and sends again.
func TestBuildProgramAway(t *testing.T) {
	b := aBuild(t)
	b.allow("htmx:error")
	b.do("let nothing through", chromedp.Evaluate[chromedp.Void](`window.real = window.fetch; window.fetch = () => Promise.reject(new TypeError("away"))`))
	b.take("f-title")
	b.press("Typed while away")
	b.wait("the alarm", `!document.getElementById("offline").hidden && document.getElementById("kept").textContent.startsWith("not kept")`)
	b.do("let all through", chromedp.Evaluate[chromedp.Void](`window.fetch = window.real`))
	b.wait("it to be sent again", isKept+` && document.getElementById("offline").hidden`)
	if got := eval[string](b, `fetch("/api"+location.pathname).then(r => r.json()).then(b => b.title)`); got != "Typed while away" {
		t.Errorf("kept %q", got)
	}
}

// Pressing Enter in a field keeps the form; it presses no other button.
func TestBuildEnterKeeps(t *testing.T) {
	b := aBuild(t)
	b.take("f-strings-0-leds-0-quantity")
	b.press("2", "\r")
	b.wait("it to be kept", isKept+` && document.getElementById("state").textContent.includes("revision 2")`)
	if got := eval[string](b, ledCount+`.value`); got != "2" {
		t.Errorf("the field has %s", got)
	}
}
