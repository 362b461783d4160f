package calc_test

import (
	"testing"

	"lanternbook/calc"
)

// sweepBuild is six white LEDs on a sink whose base a follower drives.
func sweepBuild(rth float64) calc.Build {
	b := threeStrings()
	b.Strings = b.Strings[:1]
	b.Strings[0].Quantity = 1
	b.Strings[0].FedBy = ""
	b.Runs = nil
	for key, part := range b.Parts {
		if part.Transistor != nil {
			q := *part.Transistor
			q.RthJunctionAmbient = &rth
			part.Transistor = &q
		} else {
			led := *part.LED
			led.RthJunctionAmbient = &rth
			part.LED = &led
		}
		b.Parts[key] = part
	}
	return b
}

func TestSweepAgreesWithCheck(t *testing.T) {
	b := sweepBuild(150)
	out := make([]calc.SweepPoint, 201)
	if err := calc.Sweep(b, 0, 12, 28, out); err != nil {
		t.Fatal(err)
	}
	for _, k := range []int{0, 37, 100, 150, 200} {
		b.Supply.Voltage = calc.Exactly(out[k].Supply)
		r, err := calc.Check(b)
		if err != nil {
			t.Fatal(err)
		}
		s := r.Strings[0]
		near(t, "current", out[k].Current, s.Current.Typ, 1e-7)
		near(t, "tail", out[k].Tail, s.Voltages.Tail, 1e-5)
		near(t, "heat", out[k].Heat, s.Devices[1].Power.Typ, 1e-6)
	}
	for k := 1; k < len(out); k++ {
		if out[k].Current < out[k-1].Current {
			t.Errorf("%.3f V gives %.6g A, less than the %.6g A of a lower supply", out[k].Supply, out[k].Current, out[k-1].Current)
		}
	}
}

func BenchmarkSweep(b *testing.B) {
	for _, c := range []struct {
		name string
		rth  float64
	}{{"isothermal", 0}, {"heat", 150}} {
		b.Run(c.name, func(b *testing.B) {
			build := sweepBuild(c.rth)
			out := make([]calc.SweepPoint, 4001)
			points := 0
			for b.Loop() {
				if err := calc.Sweep(build, 0, 12, 28, out); err != nil {
					b.Fatal(err)
				}
				points += len(out)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(points), "ns/point")
		})
	}
}

func BenchmarkOperatingPointCold(b *testing.B) {
	build := sweepBuild(150)
	out := make([]calc.SweepPoint, 1)
	b.ReportAllocs()
	for b.Loop() {
		if err := calc.Sweep(build, 0, 24, 24, out); err != nil {
			b.Fatal(err)
		}
	}
}
