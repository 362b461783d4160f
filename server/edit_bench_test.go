package main

import (
	"fmt"
	"net/http"
	"testing"
)

// BenchmarkEdit is one edit as a program sends it, end to end: over HTTP,
// through the strict reader and the whole check with worst cases, onto disk
// with a synced write, and back.
func BenchmarkEdit(b *testing.B) {
	p := openShop(b)
	address := p.importBuild(tide(b))
	revision := int64(1)
	b.ReportAllocs()
	for b.Loop() {
		volts := 2.2 + float64(revision%10)/100
		a := p.patch(address, entityTag(revision), fmt.Sprintf(`[{"op":"replace","path":"/strings/0/driver/control/volts","value":%.2f}]`, volts))
		if a.status != http.StatusOK {
			b.Fatalf("status %d: %s", a.status, a.body)
		}
		revision++
	}
}
