package main

import (
	"net/http"
	"strings"
	"testing"
)

// The bench has a control voltage on string A, a pot on B, and a divider, which
// nobody turns, on C.
func TestMoreDial(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/dial"
	wantWords(t, b.get(b.page), `data-hx-get="`+address+`"`)
	page := b.get(address)
	wantWords(t, page, "</html>", "Of revision "+b.revision, "String A", "set to 2.20 V", "String B", "set to 9.0 %", "on a usual day, it holds", "string A × 4", "holds its current", "short of volts", `href="`+b.page+`#f-strings-1-driver-control-pot-turn"`)
	wantNot(t, page, "String C", "String F")
	if n := strings.Count(page, `<figure class="dial"`); n != 2 {
		t.Errorf("%d charts, want 2", n)
	}
	if n := strings.Count(page, ` stands"`); n != 2 {
		t.Errorf("%d rows say where it stands, want 2", n)
	}
	a := b.do(http.MethodGet, address, "", "HX-Request", "true")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "String A")
	wantNot(t, a.body, "<html")
}

func TestMoreDialWithNothingToTurn(t *testing.T) {
	b := openBuild(t, shelfLight(t))
	wantWords(t, b.get(b.page+"/more/dial"), "Nothing in this build can be turned")
	b = openBuild(t, runaway(t))
	page := b.get(b.page + "/more/dial")
	wantWords(t, page, "No figures:")
	wantNot(t, page, "Nothing in this build can be turned", `class="dial"`)
}
