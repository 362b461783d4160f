package calc_test

import (
	"fmt"
	"testing"

	"lanternbook/calc"
)

// onRails is n strings in six rails' worth, with a cable to each rail's place.
func onRails(n int, baseOhms float64) calc.Build {
	b := fourOnARail(true, baseOhms)
	sink, rail := b.Strings[0], b.Rails[0]
	b.Strings, b.Rails = nil, nil
	b.Supply.MaxCurrent = new(3.0)
	for i := range n {
		if i%6 == 0 {
			id := fmt.Sprintf("r%d", i/6)
			from := "supply"
			if i > 0 {
				from = fmt.Sprintf("r%d", i/6-1)
			}
			b.Runs = append(b.Runs, calc.Run{ID: id, From: from, Length: 2, Conductor: "0.75 mm2"})
			r := rail
			r.ID, r.FedBy = fmt.Sprintf("rail %d", i/6), id
			b.Rails = append(b.Rails, r)
		}
		s := sink
		d := *sink.Driver.RailSink
		d.Rail = fmt.Sprintf("rail %d", i/6)
		s.Label, s.FedBy, s.Driver.RailSink = fmt.Sprint(i+1), fmt.Sprintf("r%d", i/6), &d
		b.Strings = append(b.Strings, s)
	}
	return b
}

func BenchmarkSurvey24(b *testing.B) {
	oneRail := fourOnARail(true, 0)
	for i := range 20 {
		s := oneRail.Strings[0]
		s.Label = fmt.Sprint(i + 5)
		oneRail.Strings = append(oneRail.Strings, s)
	}
	oneRail.Supply.MaxCurrent = new(3.0)
	for _, c := range []struct {
		name  string
		build calc.Build
	}{{"sinks along a cable", alongACable(24)}, {"one rail", oneRail}, {"four rails along a cable", onRails(24, 0)}} {
		b.Run(c.name, func(b *testing.B) {
			faults := 0
			for b.Loop() {
				f, err := calc.Survey(c.build, nil)
				if err != nil {
					b.Fatal(err)
				}
				faults = f.Tried
			}
			b.ReportMetric(float64(faults), "faults")
		})
	}
}
