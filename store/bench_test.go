package store_test

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"lanternbook/store"
)

// tenKilobytes is a document of the length that a build of some ten strings has.
func tenKilobytes(n int64) ([]byte, store.Summary) {
	_, sum := state(n)
	sum.Card = []byte(strings.Repeat("c", 600))
	return fmt.Appendf(nil, `{"n":%d,"pad":%q}`, n, strings.Repeat("0123456789", 1000)), sum
}

// BenchmarkSaveBuild is what stands between an edit and "kept", with a full
// history: each save writes one revision to disk and prunes one.
func BenchmarkSaveBuild(b *testing.B) {
	s := newStore(b)
	document, sum := tenKilobytes(1)
	build, err := s.CreateBuild(b.Context(), document, sum)
	if err != nil {
		b.Fatal(err)
	}
	next := func() {
		build, err = s.SaveBuild(b.Context(), build.ID, build.Revision, document, sum)
		if err != nil {
			b.Fatal(err)
		}
	}
	for range 120 {
		next()
	}
	b.ReportAllocs()
	for b.Loop() {
		next()
	}
}

func BenchmarkBuild(b *testing.B) {
	s := newStore(b)
	document, sum := tenKilobytes(1)
	build, err := s.CreateBuild(b.Context(), document, sum)
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := s.Build(b.Context(), build.ID); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkBuilds(b *testing.B) {
	const shelf = 20000
	words := strings.Fields(`harbour letters ferry waiting room display case tide shelf sign white red amber follower
		sink resistor adapter twelve volts bakery window church tower museum panel 2835 5050 bc547b bc557b lm317`)
	s := newStore(b)
	random := rand.New(rand.NewPCG(1, 2))
	draw := func(n int) string {
		drawn := make([]string, n)
		for i := range drawn {
			drawn[i] = words[random.IntN(len(words))]
		}
		return strings.Join(drawn, " ")
	}
	for n := range int64(shelf) {
		_, err := s.CreateBuild(b.Context(), []byte(`{}`), store.Summary{
			Title: fmt.Sprintf("%s no. %d", draw(3), n), Client: draw(2), Site: draw(3), Tags: []string{draw(1), draw(1)},
			Search: draw(15), Verdict: "pass", Card: []byte(strings.Repeat("c", 600)),
		})
		if err != nil {
			b.Fatal(err)
		}
	}
	for name, query := range map[string]string{
		"one word, few builds":   "12345",
		"three words":            "harb tower 199",
		"a word in no build":     "zebra",
		"a word in most of them": "white",
		"the whole shelf":        "",
	} {
		b.Run(fmt.Sprintf("builds=%d/%s", shelf, name), func(b *testing.B) {
			b.ReportAllocs()
			found := 0
			for b.Loop() {
				builds, err := s.Builds(b.Context(), query)
				if err != nil {
					b.Fatal(err)
				}
				found = len(builds)
			}
			b.ReportMetric(float64(found), "found")
		})
	}
}
