package calc_test

import (
	"fmt"
	"testing"

	"lanternbook/calc"
)

// alongACable is n strings of six whites along one cable, each on its own run,
// a sink or a resistor in turn.
func alongACable(n int) calc.Build {
	b := threeStrings()
	kinds := b.Strings
	b.Strings, b.Runs = nil, nil
	for i := range n {
		from := "supply"
		if i > 0 {
			from = fmt.Sprintf("r%d", i-1)
		}
		id := fmt.Sprintf("r%d", i)
		ohms := 0.02 / float64(n)
		b.Runs = append(b.Runs, calc.Run{ID: id, From: from, Length: 1, OhmsPerMetre: &ohms})
		s := kinds[i%len(kinds)]
		s.Label, s.Quantity, s.FedBy = fmt.Sprint(i), 1, id
		b.Strings = append(b.Strings, s)
	}
	return b
}

func BenchmarkCheckAlongACable(b *testing.B) {
	for _, n := range []int{24, 1000, 10000} {
		b.Run(fmt.Sprintf("strings=%d", n), func(b *testing.B) {
			build := alongACable(n)
			b.ReportAllocs()
			for b.Loop() {
				if _, err := calc.Check(build); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N)/float64(n), "µs/string")
		})
	}
}

// The operating point alone: strings and cable solved together, everything
// typical, from nothing.
func BenchmarkUsualAlongACable(b *testing.B) {
	for _, n := range []int{24, 1000, 10000} {
		b.Run(fmt.Sprintf("strings=%d", n), func(b *testing.B) {
			build := alongACable(n)
			for b.Loop() {
				if _, err := calc.Usual(build); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N)/float64(n), "µs/string")
		})
	}
}
