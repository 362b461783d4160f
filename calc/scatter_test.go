package calc_test

import (
	"encoding/json"
	"errors"
	"math"
	"slices"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/device"
)

func scatter(tb testing.TB, b calc.Build, n int, seed uint64) calc.ScatterResult {
	tb.Helper()
	r, err := calc.Scatter(b, n, seed, nil)
	if err != nil {
		tb.Fatal(err)
	}
	return r
}

func checkOf(tb testing.TB, r calc.ScatterResult, code, where string) calc.ScatterCheck {
	tb.Helper()
	for _, c := range r.Checks {
		if c.Code == code && c.Where == where {
			return c
		}
	}
	tb.Fatalf("no check %s of %s", code, where)
	return calc.ScatterCheck{}
}

// loose is a resistor string of six whites with nothing off but its supply,
// its LEDs' bin and its resistor.
func loose() calc.Build {
	b := exactSink()
	b.Strings[0].Driver = calc.Driver{Kind: calc.KindResistor, Resistor: &calc.ResistorDriver{Resistor: calc.Resistor{Ohms: 220, Tolerance: 0.05, Watts: ptr(0.5)}}}
	led := plainLED(3)
	led.LED.ForwardVoltage = calc.Spread{Min: 2.8, Typ: 3, Max: 3.2}
	b.Parts = map[string]calc.Part{"white": led}
	b.Supply.Voltage = calc.Spread{Min: 23, Typ: 24, Max: 25}
	b.Strings[0].Quantity = 1
	return b
}

// A string of LEDs on a resistor is I = (V − 6·Vf)/R, with V triangular on 23
// to 25 V, 6·Vf within 1.2 V either way and R even within 5 %: the share of
// currents up to a limit and their mean are worked out on a fine grid.
func TestScatterAgreesWithTheClosedForm(t *testing.T) {
	const most = 0.0305 // [A]
	b := loose()
	led := *b.Parts["white"].LED
	led.MaxCurrent = ptr(most)
	b.Parts = map[string]calc.Part{"white": {Type: calc.TypeLED, LED: &led}}
	share, mean := 0.0, 0.0
	const steps = 120
	slope := led.Model.N * device.ThermalVoltage(device.RatedC)
	triangle := func(k int) (turn, likely float64) {
		turn = (float64(k)+0.5)/steps*2 - 1
		return turn, (1 - math.Abs(turn)) * 2 / steps
	}
	for i := range steps {
		v, pv := triangle(i)
		for k := range steps {
			f, pf := triangle(k)
			for r := range steps {
				ohms := 220 * (1 + 0.05*((float64(r)+0.5)/steps*2-1))
				current := 0.0273
				for range 3 { // the LEDs' own slope
					current = (24 + v - 6*(slope*math.Log(current/1e-100)+0.2*f)) / ohms
				}
				mean += pv * pf * current / steps
				if current <= most {
					share += pv * pf / steps
				}
			}
		}
	}
	const n = 20000
	r := scatter(t, b, n, 5)
	c := checkOf(t, r, "led-current", "string A")
	if !(share > 0.6 && share < 0.98) {
		t.Fatalf("the share to be met is %v: the test tells little", share)
	}
	near(t, "share within the LED's rating", c.Holds.Value, share, 3*math.Sqrt(share*(1-share)/n))
	if !(c.Holds.Low < share && share < c.Holds.High) {
		t.Errorf("the interval %v to %v does not hold %v", c.Holds.Low, c.Holds.High, share)
	}
	near(t, "mean current", r.Strings[0].Current.Mean, mean, 1e-4*mean)
	if c.Passed+c.Tight+c.Failed != n || r.Samples != n || r.Unsolved != 0 {
		t.Errorf("%d + %d + %d of %d judged, %d unsolved", c.Passed, c.Tight, c.Failed, r.Samples, r.Unsolved)
	}
}

// exactly takes every spread out of a build.
func exactly(b calc.Build) calc.Build {
	raw, err := json.Marshal(b)
	if err != nil {
		panic(err)
	}
	var v any
	if err = json.Unmarshal(raw, &v); err != nil {
		panic(err)
	}
	raw, err = json.Marshal(typicalOnly(v))
	if err != nil {
		panic(err)
	}
	b, err = calc.Read(raw)
	if err != nil {
		panic(err)
	}
	return b
}

// typicalOnly puts the typical value for every spread but a module's windows,
// and takes tolerances out.
func typicalOnly(v any) any {
	switch x := v.(type) {
	case map[string]any:
		delete(x, "tolerance")
		if _, ok := x["offset_voltage"]; ok {
			x["offset_voltage"] = 0.0 // it goes either way
		}
		if typ, ok := x["typ"]; ok && len(x) == 3 {
			return typ
		}
		for key := range x {
			if key != "input_voltage" && key != "output_voltage" {
				x[key] = typicalOnly(x[key])
			}
		}
	case []any:
		for i := range x {
			x[i] = typicalOnly(x[i])
		}
	}
	return v
}

// With everything exact a sample is the report's worst case, and every check
// must come out the same.
func TestSamplesAreJudgedAsReportsAre(t *testing.T) {
	builds := readable(t)
	builds["three strings"], builds["rail"], builds["pot rail"] = threeStrings(), fourOnARail(true, 100), railWithPot(0.9)
	builds["weak rail"], builds["bought"] = fourOnARail(false, 0), opampBuild(7, 2.5, 25)
	seen := map[string]map[calc.Severity]bool{}
	for name, b := range builds {
		b = exactly(b)
		report, err := calc.Check(b)
		if err != nil {
			continue // of another test
		}
		r, err := calc.Scatter(b, 1, 1, nil)
		if errors.As(err, new(calc.Invalid)) {
			continue // too many strings to draw
		}
		if err != nil {
			t.Fatal(err)
		}
		var got, want []string
		for _, f := range report.Findings {
			want = append(want, f.Code+" of "+f.Where+" is "+string(f.Severity))
			if seen[f.Code] == nil {
				seen[f.Code] = map[calc.Severity]bool{}
			}
			seen[f.Code][f.Severity] = true
		}
		for _, c := range r.Checks {
			severity := calc.Unknown
			switch {
			case c.Passed == 1:
				severity = calc.Pass
			case c.Tight == 1:
				severity = calc.Tight
			case c.Failed == 1:
				severity = calc.Fail
			}
			got = append(got, c.Code+" of "+c.Where+" is "+string(severity))
		}
		slices.Sort(got)
		slices.Sort(want)
		for k := range max(len(got), len(want)) {
			if k >= len(got) || k >= len(want) || got[k] != want[k] {
				t.Errorf("%s: from %v on, the report has %v", name, got[min(k, len(got)):min(k+3, len(got))], want[min(k, len(want)):min(k+3, len(want))])
				break
			}
		}
	}
	for _, code := range []string{"headroom", "base-drive", "led-junction", "transistor-power", "resistor-power", "reference-current", "gate-drive", "supply-loading"} {
		if len(seen[code]) < 2 {
			t.Errorf("%s comes out only as %v: the test tells little of it", code, seen[code])
		}
	}
}

// No build drawn lies outside the worst case of the report.
func TestScatterStaysWithinTheCorners(t *testing.T) {
	for name, b := range map[string]calc.Build{"three strings": threeStrings(), "rail": railWithPot(0.35), "along a cable": alongACable(6)} {
		r := scatter(t, b, 2000, 11)
		for _, s := range r.Strings {
			for figure, d := range map[string]calc.Distribution{"current": s.Current, "headroom": s.Headroom, "flux": *s.LuminousFlux} {
				slack := 5e-3*(d.Corners.Max-d.Corners.Min) + 1e-9
				if !(d.Least >= d.Corners.Min-slack && d.Most <= d.Corners.Max+slack) {
					t.Errorf("%s, %s of %s: %v to %v outside %v", name, figure, s.Label, d.Least, d.Most, d.Corners)
				}
				if !(d.Least < d.Mean && d.Mean < d.Most) || !(d.Most-d.Least > 0.2*(d.Corners.Max-d.Corners.Min)) {
					t.Errorf("%s, %s of %s hardly scatters: %+v", name, figure, s.Label, d)
				}
				if len(d.Counts) > 40 || len(d.Edges) != len(d.Counts)+1 || !slices.IsSorted(d.Edges) {
					t.Errorf("%s, %s of %s: %d bins, %d edges", name, figure, s.Label, len(d.Counts), len(d.Edges))
				}
				total := 0
				for _, c := range d.Counts {
					total += c
				}
				if total != 2000*s.Quantity {
					t.Errorf("%s, %s of %s: %d counted, want %d", name, figure, s.Label, total, 2000*s.Quantity)
				}
			}
		}
	}
}

func TestScatterIsTheSameForASeed(t *testing.T) {
	text := func(r calc.ScatterResult) string {
		raw, err := json.Marshal(r)
		if err != nil {
			t.Fatal(err)
		}
		return string(raw)
	}
	a := text(scatter(t, threeStrings(), 300, 4))
	if b := text(scatter(t, threeStrings(), 300, 4)); a != b {
		t.Errorf("the same seed gives\n%s\nand\n%s", a, b)
	}
	if b := text(scatter(t, threeStrings(), 300, 5)); a == b {
		t.Error("another seed gives the same")
	}
}

// Parts drawn apart come to what is drawn at once.
func TestScatterMerges(t *testing.T) {
	b := railWithPot(0.4)
	whole := scatter(t, b, 900, 3)
	var parts []calc.ScatterResult
	for k := range 3 {
		part, err := calc.ScatterPart(b, calc.Sampling{Samples: 900, Seed: 3, Part: k, Parts: 3}, nil)
		if err != nil {
			t.Fatal(err)
		}
		parts = append(parts, part)
	}
	merged, err := parts[0].Merge(parts[1])
	if err == nil {
		merged, err = merged.Merge(parts[2])
	}
	if err != nil {
		t.Fatal(err)
	}
	if merged.Samples != 900 || parts[0].Samples != 300 || merged.Builds != whole.Builds {
		t.Errorf("merged %d samples, share %v, want %v", merged.Samples, merged.Builds, whole.Builds)
	}
	for k, c := range merged.Checks {
		if w := whole.Checks[k]; c.Passed != w.Passed || c.Tight != w.Tight || c.Failed != w.Failed {
			t.Errorf("%s of %s: %d %d %d, want %d %d %d", c.Code, c.Where, c.Passed, c.Tight, c.Failed, w.Passed, w.Tight, w.Failed)
		}
	}
	for i, s := range merged.Strings {
		w := whole.Strings[i]
		near(t, "mean current", s.Current.Mean, w.Current.Mean, 1e-9)
		for k, q := range s.Headroom.Quantiles {
			near(t, "quantile", q.Value, w.Headroom.Quantiles[k].Value, 1e-3)
		}
	}
	near(t, "neighbours", merged.Neighbours.Furthest[3].Value, whole.Neighbours.Furthest[3].Value, 1e-3)
	if _, err := whole.Merge(scatter(t, threeStrings(), 2, 1)); err == nil {
		t.Error("scatters of different builds merge")
	}
}

func TestScatterStops(t *testing.T) {
	var told []int
	_, err := calc.Scatter(threeStrings(), 5000, 1, func(done int) bool {
		told = append(told, done)
		return len(told) < 2
	})
	var stopped *calc.Stopped
	if !errors.As(err, &stopped) || len(told) != 2 || stopped.Done != told[1] || told[0] >= told[1] || told[1] >= 5000 {
		t.Errorf("error %v after being told %v", err, told)
	}
	for _, n := range []int{0, -1, calc.MostSamples + 1} {
		var faults calc.Invalid
		if _, err := calc.Scatter(threeStrings(), n, 1, nil); !errors.As(err, &faults) {
			t.Errorf("%d samples: error %v, want Invalid", n, err)
		}
	}
}

// Four copies of a string on sense resistors of 1 % that an exact op-amp holds
// differ by their resistors alone: the difference of two even spreads of ±1 %
// is a triangle of ±2 %, whose median size is 2 %·(1 − sqrt(1/2)).
func TestNeighboursDifferByTheirParts(t *testing.T) {
	b := exactly(opampBuild(15, 2.5, 125))
	b.Strings[0].Driver.OpampSink.Sense.Tolerance = 0.01
	b.Parts["amp"].Opamp.OffsetVoltage = ptr(0)
	b.Strings[0].Quantity = 4
	n := scatter(t, b, 4000, 9).Neighbours
	if n == nil || n.Pairs != 3 {
		t.Fatalf("neighbours: %+v", n)
	}
	near(t, "median difference", n.Each[3].Value, 0.02*(1-math.Sqrt(0.5)), 2e-4)
	if !(n.Most < 0.0201 && n.Furthest[3].Value > n.Each[3].Value) || n.Seen.Value != 0 {
		t.Errorf("neighbours: %+v", n)
	}
	b.Strings[0].Quantity = 1
	if n := scatter(t, b, 10, 9).Neighbours; n != nil {
		t.Errorf("one string has neighbours: %+v", n)
	}
}

// A build that burns is counted as one that fails, and named.
func TestRunawaysFail(t *testing.T) {
	b := exactSink()
	hot := *b.Parts["npn"].Transistor
	hot.RthJunctionAmbient = ptr(40000)
	b.Parts["npn"] = calc.Part{Type: calc.TypeNPN, Transistor: &hot}
	b.Strings[0].LEDs[0].Quantity = 1
	r := scatter(t, b, 5, 1)
	c := checkOf(t, r, "thermal-runaway", "string A")
	if c.Failed != 5 || c.Holds.Value != 0 || r.Builds.Value != 0 {
		t.Errorf("%+v, builds %+v", c, r.Builds)
	}
	other, err := r.Merge(scatter(t, b, 3, 1))
	if err != nil || checkOf(t, other, "thermal-runaway", "string A").Failed != 8 {
		t.Errorf("merged: %+v, %v", other.Checks, err)
	}
}
