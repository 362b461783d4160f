package calc_test

import (
	"fmt"
	"sync"
	"testing"

	"lanternbook/calc"
)

// sharedRail is a sign as shops build it: n strings of six whites on 24 V, all
// bases on one rail that a follower drives from a trimmed voltage, each string
// on its own stretch of cable.
func sharedRail() calc.Build {
	const n = 24
	v := calc.Spread{Min: 2.15, Typ: 2.2, Max: 2.25}
	b := followerRail(calc.Control{Volts: &v})
	b.Rails[0].FedBy = ""
	one := b.Strings[0]
	b.Strings, b.Runs = nil, nil
	from := "supply"
	for i := range n {
		id := fmt.Sprintf("r%d", i)
		b.Runs = append(b.Runs, calc.Run{ID: id, From: from, Length: 0.3, Conductor: "0.75 mm2"})
		s := one
		s.Label, s.Quantity, s.FedBy = fmt.Sprint(i+1), 1, id
		b.Strings = append(b.Strings, s)
		from = id
	}
	return b
}

// One sample of 24 strings on a rail: solved with rail and cable, every string
// with its headroom, every check judged.
func BenchmarkScatter(b *testing.B) {
	for _, samples := range []int{1000, 10000} {
		b.Run(fmt.Sprintf("samples=%d", samples), func(b *testing.B) {
			build := sharedRail()
			b.ReportAllocs()
			for b.Loop() {
				if _, err := calc.Scatter(build, samples, 1, nil); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N*samples), "µs/sample")
		})
	}
}

// The same in two halves at once, as a server on two cores does it.
func BenchmarkScatterInHalves(b *testing.B) {
	const samples = 10000
	build := sharedRail()
	for b.Loop() {
		var halves [2]calc.ScatterResult
		var errs [2]error
		var both sync.WaitGroup
		for k := range halves {
			both.Go(func() {
				halves[k], errs[k] = calc.ScatterPart(build, calc.Sampling{Samples: samples, Seed: 1, Part: k, Parts: 2}, nil)
			})
		}
		both.Wait()
		for _, err := range errs {
			if err != nil {
				b.Fatal(err)
			}
		}
		if _, err := halves[0].Merge(halves[1]); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N*samples), "µs/sample")
}

func BenchmarkBreakdown(b *testing.B) {
	build := sharedRail()
	for b.Loop() {
		if _, err := calc.Breakdown(build, 23); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkDial(b *testing.B) {
	for _, c := range []struct {
		name, where string
		build       calc.Build
	}{{"string", "/strings/0", withPot(0.4)}, {"rail of 24", "/rails/0", sharedRail()}} {
		b.Run(c.name, func(b *testing.B) {
			for b.Loop() {
				if _, err := calc.Dial(c.build, c.where); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
