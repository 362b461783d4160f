package main

import (
	"net/http"
	"strconv"
	"strings"
	"testing"
)

// The page has the sections folded away, each with a link for those who have
// no script; a script gets the section alone.
func TestMoreBreakdownAsSectionAndAsPage(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/breakdown"
	wantWords(t, b.get(b.page), `id="more-breakdown"`, `data-hx-get="`+address+`"`, `href="`+address+`"`)

	page := b.get(address)
	wantWords(t, page, "</html>", `href="`+b.page+`"`, "Of revision "+b.revision+".", "String A", "× 4", "costs most", "6 × white", "left over in the worst case", `href="`+b.page+`#f-supply-voltage"`, `id="hatch-left"`)
	if n := strings.Count(page, `class="stairs"`); n != 12 {
		t.Errorf("%d staircases of six strings, want 12", n)
	}
	a := b.do(http.MethodGet, address, "", "HX-Request", "true")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "String A", `href="#f-supply-voltage"`)
	wantNot(t, a.body, "<html", `id="hatch-left"`)
}

// What is shown is always of what is kept.
func TestMoreBreakdownFollowsTheBuild(t *testing.T) {
	b := openBuild(t, bench(t))
	before := b.get(b.page + "/more/breakdown")
	b.live("/strings/0/leds/0/quantity", "9")
	after := b.get(b.page + "/more/breakdown")
	wantWords(t, after, "Of revision "+b.revision+".", "9 × white", `class="crossed"`, "short")
	wantNot(t, before, `class="crossed"`, "9 × white")
}

func TestMoreOfABuildThatCannotBeSolved(t *testing.T) {
	b := openBuild(t, runaway(t))
	page := b.get(b.page + "/more/breakdown")
	wantWords(t, page, "No figures:")
	wantNot(t, page, `class="stairs"`)
}

func TestMoreOfNoBuild(t *testing.T) {
	p := openShop(t)
	for _, id := range []string{"7", "x", "-1"} {
		p.do(http.MethodGet, "/builds/"+id+"/more/breakdown", "").wantStatus(t, http.StatusNotFound)
	}
}

// Of many strings those are told of that have the least left over.
func TestMoreBreakdownOfManyStrings(t *testing.T) {
	b := openBuild(t, bench(t))
	for range 10 {
		b.live("do", "string-copy /strings/5")
	}
	b.live("/strings/14/leds/0/quantity", "7")
	page := b.get(b.page + "/more/breakdown")
	wantWords(t, page, "12 of 16 strings", "String "+b.kept().Strings[14].Label, "7 × red")
	if n := strings.Count(page, `class="stairs"`); n != 2*mostBroken {
		t.Errorf("%s staircases", strconv.Itoa(n))
	}
}
