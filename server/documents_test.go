package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The documents that the tests import. Their figures are invented.

// tide has a run and a sink; its text is spelled oddly on purpose, with 23.50
// and 2.5e1 and keys out of order.
func tide(tb testing.TB) string {
	tb.Helper()
	return testFile(tb, "tide.json")
}

// shelfLight is two strings of three LEDs on a resistor, by far simpler.
func shelfLight(tb testing.TB) string {
	tb.Helper()
	return testFile(tb, "shelf.json")
}

// titled is shelfLight with another title.
func titled(tb testing.TB, title string) string {
	tb.Helper()
	return strings.Replace(shelfLight(tb), "Shelf light", title, 1)
}

// overstacked is shelfLight with more LEDs than its supply can light.
func overstacked(tb testing.TB) string {
	tb.Helper()
	return strings.Replace(shelfLight(tb), `"quantity": 3}`, `"quantity": 9}`, 1)
}

// runaway is tide with a sink that has no way to shed its heat: it can be read
// but not solved.
func runaway(tb testing.TB) string {
	tb.Helper()
	return strings.NewReplacer(`"rth_junction_ambient": 120`, `"rth_junction_ambient": 10000`, `"ohms": 110`, `"ohms": 30`).Replace(tide(tb))
}

func testFile(tb testing.TB, name string) string {
	tb.Helper()
	content, err := os.ReadFile(filepath.Join("testdata", name))
	if err != nil {
		tb.Fatal(err)
	}
	return string(content)
}
