package main

import (
	"net/http"
	"net/url"
	"testing"
)

func TestMoreFailures(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/failures"
	wantWords(t, b.get(b.page), `data-hx-get="`+address+`"`)
	page := b.get(address)
	wantWords(t, page, "</html>", "Of revision "+b.revision, "single faults were tried", "sense resistor shorted", "each LED", "too much for", "string F", "of 30.0 mA")
	wantNot(t, page, "too long")

	a := b.do(http.MethodGet, address, "", "HX-Request", "true")
	a.wantStatus(t, http.StatusOK)
	wantWords(t, a.body, "sense resistor shorted")
	wantNot(t, a.body, "<html")

	b = openBuild(t, runaway(t))
	page = b.get(b.page + "/more/failures")
	wantWords(t, page, "No figures:")
	wantNot(t, page, "single faults were tried")
}

// A cure is applied to the revision that it was worked out for, or not at all.
func TestMoreFailuresCure(t *testing.T) {
	b := openBuild(t, bench(t))
	address := b.page + "/more/failures"
	cure := url.Values{"revision": {b.revision}, "patch": {`[{"op":"replace","path":"/strings/0/leds/0/quantity","value":5}]`}}
	if got := b.press(address, cure); got != b.page {
		t.Errorf("leads to %q", got)
	}
	if got := b.kept().Strings[0].LEDs[0].Quantity; got != 5 {
		t.Fatalf("%d LEDs", got)
	}
	cure.Set("patch", `[{"op":"replace","path":"/strings/0/leds/0/quantity","value":4}]`)
	b.shop.post(address, cure).wantStatus(t, http.StatusConflict)
	cure.Set("revision", "2")
	cure.Set("patch", `[{"op":"replace","path":"/strings/0/leds/0/quantity","value":-4}]`)
	b.shop.post(address, cure).wantStatus(t, http.StatusUnprocessableEntity)
	cure.Set("revision", "soon")
	b.shop.post(address, cure).wantStatus(t, http.StatusBadRequest)
	if got := b.kept().Strings[0].LEDs[0].Quantity; got != 5 {
		t.Errorf("%d LEDs after refusals", got)
	}
}
