package web

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// Draw is a draw of many builds as far as it has come.
type Draw struct {
	Revision int64 // of the build that is drawn
	Samples  int
	Seed     uint64
	Done     int
	Running  bool
	Words    string              // why there is no result; "" when there is one
	Result   *calc.ScatterResult // nil when there is none
	Of       calc.Build          // what Result is of
}

// SpreadView is the draw of many builds with parts of their own.
type SpreadView struct {
	More    MoreView
	Samples string
	Seed    string
	Fault   string // why what was asked for was not done
	Started bool
	Running bool
	Now     string // "2,500 of 10,000 builds"
	Filled  Px     // of the bar
	Words   string
	Old     string // the result is of another revision
	Lead    []string
	Checks  []SpreadCheck
	Sure    string // what of the rest passes always
	Strings []SpreadString
	Rest    string
}

// SpreadCheck is a check that does not pass always.
type SpreadCheck struct{ What, Where, Passes, Ample string }

// SpreadString is how a string's figures scatter.
type SpreadString struct {
	Name   string
	Charts []Histogram
}

// Histogram is a small chart of how often what came out.
type Histogram struct {
	Title     string
	Voice     string
	Bars      []HistogramBar
	Low, High string // the corners
	Mean      string
	MeanAt    Px
}

// HistogramBar is how often a figure came out within one bin.
type HistogramBar struct{ X, Y, Wide, Tall Px }

// Measures of the charts.
const (
	histogramWide Px = 260
	histogramTall Px = 70
	progressWide  Px = 300
	mostScattered    = 24 // strings with charts
)

// NewSpreadView shows a draw; nil is none yet.
func NewSpreadView(in MoreInput, d *Draw) SpreadView {
	v := SpreadView{More: newMore(topicSpread, in), Samples: "1000", Seed: "1"}
	if d == nil || v.More.Unsolved != "" {
		return v
	}
	v.Samples, v.Seed, v.Started = strconv.Itoa(d.Samples), strconv.FormatUint(d.Seed, 10), true
	if d.Revision != in.Revision {
		v.Old = fmt.Sprintf("This is of revision %d: the build has changed since. Draw again.", d.Revision)
	}
	if d.Running {
		v.Running = true
		v.Now = fmt.Sprintf("%d of %d builds", d.Done, d.Samples)
		v.Filled = progressWide * Px(d.Done) / Px(max(d.Samples, 1))
		return v
	}
	v.Words = d.Words
	if d.Result != nil {
		v.show(d)
	}
	return v
}

func (v *SpreadView) show(d *Draw) {
	r := d.Result
	v.Lead = append(v.Lead, fmt.Sprintf("Of %d builds, %s fail no check that can be judged.", r.Samples, shareWords(r.Builds)))
	if r.Unsolved > 0 {
		v.Lead = append(v.Lead, fmt.Sprintf("Of %d of them no operating point was found.", r.Unsolved))
	}
	if n := r.Neighbours; n != nil {
		v.Lead = append(v.Lead, fmt.Sprintf("In %s two strings side by side are seen to differ in brightness, by %s or more; the furthest apart differed by %s.",
			shareWords(n.Seen), quantity.Format(calc.SeenApart, quantity.Percent, 2), quantity.Format(n.Most, quantity.Percent, 2)))
	}
	v.check(r)
	for i, s := range r.Strings {
		if i == mostScattered {
			v.Rest = fmt.Sprintf("The first %d of %d strings are drawn.", mostScattered, len(r.Strings))
			break
		}
		one := SpreadString{Name: "String " + s.Label + " × " + strconv.Itoa(s.Quantity)}
		one.Charts = append(one.Charts, histogram("current", s.Current, quantity.Amp))
		if i < len(d.Of.Strings) && d.Of.Strings[i].Driver.Kind != calc.KindResistor {
			one.Charts = append(one.Charts, histogram("left over", s.Headroom, quantity.Volt))
		}
		if s.LuminousFlux != nil {
			one.Charts = append(one.Charts, histogram("light", *s.LuminousFlux, quantity.Lumen))
		}
		v.Strings = append(v.Strings, one)
	}
}

// check lists the checks that do not pass in every build, the worst first.
func (v *SpreadView) check(r *calc.ScatterResult) {
	checks := slices.Clone(r.Checks)
	slices.SortStableFunc(checks, func(a, b calc.ScatterCheck) int {
		return cmp.Or(-cmp.Compare(a.Failed, b.Failed), -cmp.Compare(a.Tight, b.Tight))
	})
	always, least := 0, 1.0
	for _, c := range checks {
		if c.Holds != nil && c.Failed == 0 && c.Tight == 0 {
			always, least = always+1, min(least, c.Holds.Low)
			continue
		}
		row := SpreadCheck{What: codeWords[c.Code], Where: c.Where, Passes: "not known", Ample: "not known"}
		if row.What == "" {
			row.What = c.Code
		}
		if c.Name != "" {
			row.What += ", " + c.Name
		}
		if c.Holds != nil {
			row.Passes = shareWords(*c.Holds)
		}
		if c.Ample != nil {
			row.Ample = shareWords(*c.Ample)
		}
		v.Checks = append(v.Checks, row)
	}
	if always > 0 {
		v.Sure = fmt.Sprintf("Checks that pass with room in every build that was drawn: %d. Each does so in %s of all builds or more.", always, percent(math.Floor(least*1000)/10))
	}
}

// shareWords writes a share with its interval, rounded away from a claim: what
// is not all never reads as all.
func shareWords(s calc.Share) string {
	low, high := math.Floor(s.Low*1000)/10, math.Ceil(s.High*1000)/10
	return percent(math.Floor(s.Value*1000+1e-9)/10) + " (" + strconv.FormatFloat(low, 'f', 1, 64) + " to " + percent(high) + ")"
}

func percent(v float64) string { return strconv.FormatFloat(v, 'f', 1, 64) + "\u00a0%" }

// histogram draws a distribution from corner to corner.
func histogram(title string, d calc.Distribution, unit string) Histogram {
	write := func(v float64) string { return quantity.Format(v, unit, 3) }
	h := Histogram{Title: title, Low: write(d.Corners.Min), High: write(d.Corners.Max), Mean: write(d.Mean)}
	h.Voice = fmt.Sprintf("%s: %s to %s, on average %s; corners %s and %s", title, write(d.Least), write(d.Most), h.Mean, h.Low, h.High)
	if len(d.Edges) != len(d.Counts)+1 || len(d.Counts) == 0 {
		return h
	}
	first, last := d.Edges[0], d.Edges[len(d.Edges)-1]
	if !(last > first) {
		return h
	}
	x := axis{from: first, to: last, a: 1, b: histogramWide - 1}
	most := max(slices.Max(d.Counts), 1)
	for k, n := range d.Counts {
		if n > 0 {
			tall := (histogramTall - 4) * Px(n) / Px(most)
			h.Bars = append(h.Bars, HistogramBar{X: x.at(d.Edges[k]), Y: histogramTall - tall, Wide: x.at(d.Edges[k+1]) - x.at(d.Edges[k]), Tall: tall})
		}
	}
	h.MeanAt = x.at(min(max(d.Mean, first), last))
	return h
}
