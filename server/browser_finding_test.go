package main

import (
	"net/http"
	"strconv"
	"testing"

	"github.com/chromedp/chromedp/kb"
)

// at is what the focused card is called.
const at = `document.activeElement.textContent`

// A shelf is searched while somebody types, walked by the arrow keys, and the
// address always shows the same shelf again.
func TestFindingByKeyboard(t *testing.T) {
	home := serveFresh(t)
	for _, title := range []string{"Alley lamp", "Pier, two lamps"} {
		ask(t, home, http.MethodPost, "/api/builds", titled(t, title), "Content-Type", jsonType).wantStatus(t, http.StatusCreated)
	}
	b := openTab(t, home, "/")
	all := eval[int](b, `document.querySelectorAll(".card").length`)

	b.press("/")
	b.wait("the search field to have the focus", `document.activeElement.id === "find"`)
	b.fill("alley/")
	b.wait("no card to be left: in the field the slash is a letter", `document.querySelectorAll(".card").length === 0`)
	b.waitWords("No build has all of")
	b.press(kb.Backspace)
	b.wait("one card to be left", `document.querySelectorAll(".card").length === 1`)
	if got := eval[string](b, `location.pathname + location.search + " " + document.activeElement.id + " " + document.activeElement.selectionStart`); got != "/?q=alley find 5" {
		t.Errorf("address, focus and caret are %q", got)
	}
	if eval[int](b, `document.querySelectorAll("#found").length`) != 1 {
		t.Error("the answer was put in beside what it should replace")
	}

	b.press(kb.ArrowDown)
	b.wait("the card to have the focus", at+` === "Alley lamp"`)
	b.press(kb.ArrowUp)
	b.wait("the search field to have the focus again", `document.activeElement.id === "find"`)
	for range len("alley") {
		b.press(kb.Backspace)
	}
	b.wait("every card", `document.querySelectorAll(".card").length === `+strconv.Itoa(all))
	b.wait("the bare address", `location.pathname + location.search === "/"`)

	b.press(kb.ArrowDown)
	first := eval[string](b, at)
	b.press(kb.ArrowRight)
	b.wait("the next card", at+` !== `+quote(first))
	b.press(kb.ArrowLeft)
	b.wait("the first card", at+` === `+quote(first))
	b.press(kb.Enter)
	b.wait("the build's page", `location.pathname.startsWith("/builds/")`)
	b.wait("its scripts", `document.readyState === "complete"`)
	b.press("/")
	b.wait("the search field of the top bar to have the focus", `document.activeElement.name === "q"`)
}

// What is typed into a part's form shows at once what it amounts to, and never
// loses the caret.
func TestAPartIsLookedAtWhileItIsTyped(t *testing.T) {
	b := openTab(t, serveFresh(t), "/drawer/new?type=led")
	b.reach("textbox", "name")
	b.press("Shop white")
	b.wait("the key that this makes", `document.getElementById("f-key-hint").textContent.includes("shop-white")`)
	b.reach("textbox", "test current")
	b.press("20")
	b.wait("a word about the unit", `document.getElementById("f-test-current-error").textContent.includes("has no unit")`)
	b.press(" mA")
	b.wait("no word about the unit", `document.getElementById("f-test-current-error").textContent === ""`)
	if got := eval[string](b, `document.activeElement.name + " " + document.activeElement.value + " " + document.activeElement.selectionStart`); got != "test_current 20 mA 5" {
		t.Errorf("focus, text and caret are %q", got)
	}
	b.reach("textbox", "forward voltage")
	b.press("2,9/3,1/3,3")
	b.wait("the curve", `document.querySelector("#look .curve path.line") !== null`)
	b.press(kb.Enter)
	b.wait("the drawer", `location.pathname === "/drawer"`)
	b.waitWords("“Shop white” is kept.")
	b.wait("its row", `/2.9 . 3.1 . 3.3\sV/.test(document.getElementById("part-shop-white").textContent)`)
}
