package calc

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"lanternbook/calc/driver"
	"lanternbook/calc/spread"
)

// sampler draws builds and judges them.
type sampler struct {
	build  *Build // with its quantities spelled out
	plant  *plant
	lots   []*lot
	cube   *spread.Hypercube
	judges []judge // of rails and supply
	result ScatterResult
	order  []Severity // of every check in the present sample

	// The present sample.
	volts, inside float64 // [V], [°C]
	railSize      []int   // knobs of each rail
}

// lot is one string of the build spelled out.
type lot struct {
	*line
	of         int // index in the build's strings
	first      int // dimension of its first knob
	gain       int // knob of the holding transistor's gain, −1 without
	fig        []float64
	pair       bool // the one before stands beside it with the same LEDs
	brightness float64
	judges     []judge
}

// The dimensions of the hypercube that all share.
const (
	drawSupply = iota
	drawAmbient
	drawParts
)

func newSampler(b *Build, of Sampling) (*sampler, error) {
	r, _, err := examine(b)
	if err != nil {
		return nil, err
	}
	s := &sampler{}
	spelled, from, err := spellOut(b)
	if err != nil {
		return nil, err
	}
	s.build = spelled
	if s.plant, err = compile(s.build); err != nil {
		return nil, err
	}
	dimensions := drawParts
	for _, rail := range s.plant.rails {
		s.railSize = append(s.railSize, len(rail.Knobs))
		dimensions += len(rail.Knobs)
	}
	for i, l := range s.plant.strings {
		l.turned = make([]float64, len(l.Knobs))
		at := &lot{line: l, of: from[i], first: dimensions, fig: make([]float64, l.figures())}
		at.gain = slices.IndexFunc(l.Knobs, func(k driver.Knob) bool { return k.Name == "sink transistor gain" })
		at.pair = i > 0 && slices.Equal(l.spec.LEDs, s.plant.strings[i-1].spec.LEDs)
		s.lots = append(s.lots, at)
		dimensions += len(l.Knobs)
	}
	s.cube = spread.NewHypercube(of.Samples, dimensions, of.Seed)
	s.begin(b, &r)
	return s, nil
}

// spellOut writes every string of a quantity out as so many, and returns which
// string each is of.
func spellOut(b *Build) (*Build, []int, error) {
	out := *b
	out.Strings = nil
	var from []int
	for i, one := range b.Strings {
		for range one.Quantity {
			if len(from) == mostSpelledOut {
				return nil, nil, Invalid{{"/strings", fmt.Sprintf("a scatter takes up to %d strings, quantities counted", mostSpelledOut)}}
			}
			each := one
			each.Quantity = 1
			out.Strings = append(out.Strings, each)
			from = append(from, i)
		}
	}
	return &out, from, nil
}

// begin makes the empty result with the report's corners and the judges.
func (s *sampler) begin(b *Build, r *Report) {
	s.result.tallies = make([]*spread.Tally, tallied*len(b.Strings))
	for i := range r.Strings {
		from := &r.Strings[i]
		to := ScatterString{Label: from.Label, Quantity: from.Quantity}
		t := s.result.tallies[tallied*i : tallied*(i+1)]
		to.Current.Corners, t[tallyCurrent] = from.Current, spread.NewTally(from.Current.Min, from.Current.Max)
		to.Headroom.Corners, t[tallyHeadroom] = from.Headroom, spread.NewTally(from.Headroom.Min, from.Headroom.Max)
		if f := from.LuminousFlux; f != nil {
			to.LuminousFlux = &Distribution{Corners: *f}
			t[tallyFlux] = spread.NewTally(f.Min, f.Max)
		}
		s.result.Strings = append(s.result.Strings, to)
	}
	pairs := 0
	for _, l := range s.lots {
		if l.pair {
			pairs++
		}
	}
	if pairs > 0 {
		s.result.Neighbours = &ScatterNeighbours{Pairs: pairs}
		s.result.each, s.result.far = spread.NewTally(0, farthest), spread.NewTally(0, farthest)
	}
	s.appoint(r)
}

// farthest is the difference in brightness up to which neighbours are tallied;
// beyond it nobody asks by how much. [1]
const farthest = 1.0

// sample draws and judges one build.
func (s *sampler) sample(i int) {
	s.result.Samples++
	ambient := s.draw(i)
	err := s.solve(ambient)
	if err != nil {
		// A start from the sample before may lead nowhere.
		s.restart()
		err = s.solve(ambient)
	}
	if err != nil {
		s.refused(err)
		s.restart()
		return
	}
	for k := range s.order {
		s.order[k] = Pass
	}
	for _, l := range s.lots {
		for _, j := range l.judges {
			s.heard(j)
		}
	}
	for _, j := range s.judges {
		s.heard(j)
	}
	good := true
	for k, severity := range s.order {
		c := &s.result.Checks[k]
		switch {
		case c.Unknown:
		case severity == Pass:
			c.Passed++
		case severity == Tight:
			c.Tight++
		case severity == Fail:
			c.Failed++
			good = false
		}
	}
	if good {
		s.result.good++
	}
	s.tally()
}

// heard takes a judgement into its check: of several strings the worst.
func (s *sampler) heard(j judge) {
	if severity := j.severity(); rank(severity) < rank(s.order[j.check]) {
		s.order[j.check] = severity
	}
}

// draw turns every knob to where sample i has it and returns the ambient in °C.
func (s *sampler) draw(i int) (ambient float64) {
	shared := func(of Spread, d int) float64 {
		if !(of.Max > of.Min) {
			return of.Typ
		}
		return between(of, spread.Triangular(s.cube.At(i, d), (of.Typ-of.Min)/(of.Max-of.Min)))
	}
	own := func(k driver.Knob, d int) float64 {
		if k.Culprit == driver.Tolerance {
			return spread.Even(s.cube.At(i, d))
		}
		return spread.Triangular(s.cube.At(i, d), k.Below)
	}
	s.volts = shared(s.build.Supply.Voltage, drawSupply)
	ambient = shared(s.build.Ambient, drawAmbient)
	d := drawParts
	for _, r := range s.plant.rails {
		for k, knob := range r.Knobs {
			r.turned[k] = own(knob, d)
			knob.Turn(r.turned[k])
			d++
		}
	}
	for _, l := range s.lots {
		for k, knob := range l.Knobs {
			l.turned[k] = own(knob, l.first+k)
			knob.Turn(l.turned[k])
		}
	}
	return ambient
}

// solve finds the build's operating point and every string's figures.
func (s *sampler) solve(ambient float64) (err error) {
	if s.inside, err = s.plant.operate(s.volts, ambient); err != nil {
		return err
	}
	for _, l := range s.lots {
		l.collect(l.fig)
		left, err := l.headroom(l.Net.Voltage(l.Feed)+l.path*l.Draw(), l.path)
		if err != nil {
			return err
		}
		l.fig[figHeadroom] = left.headroom
	}
	return nil
}

// restart forgets where the last sample stood.
func (s *sampler) restart() {
	for _, r := range s.plant.rails {
		r.started = false
	}
	for _, l := range s.lots {
		l.Net.Restart()
		l.started = false
	}
}

// refused counts a build without a solution.
func (s *sampler) refused(err error) {
	if !isRunaway(err) {
		s.result.Unsolved++
		return
	}
	where := "build"
	if u, ok := errors.AsType[*Unsolved](err); ok {
		where = s.named(u.String)
	}
	for k := range s.result.Checks {
		if c := &s.result.Checks[k]; c.Code == runawayCode && c.Where == where {
			c.Failed++
			return
		}
	}
	s.result.Checks = append(s.result.Checks, ScatterCheck{Code: runawayCode, Where: where, Failed: 1})
}

// named is how checks call what has no stable temperature.
func (s *sampler) named(label string) string {
	for _, r := range s.plant.rails {
		if r.name() == label {
			return label
		}
	}
	for _, l := range s.lots {
		if l.spec.Label == label {
			return l.where()
		}
	}
	return "build"
}

// tally counts every string's figures.
func (s *sampler) tally() {
	furthest := 0.0
	for i, l := range s.lots {
		t := s.result.tallies[tallied*l.of : tallied*(l.of+1)]
		t[tallyCurrent].Add(l.fig[figCurrent])
		t[tallyHeadroom].Add(l.fig[figHeadroom])
		l.brightness = l.fig[figCurrent]
		if flux := l.fig[figFlux]; !math.IsNaN(flux) && t[tallyFlux] != nil {
			t[tallyFlux].Add(flux)
			l.brightness = flux
		}
		if l.pair {
			apart := differ(l.brightness, s.lots[i-1].brightness)
			s.result.each.Add(apart)
			furthest = math.Max(furthest, apart)
		}
	}
	if s.result.far != nil {
		s.result.far.Add(furthest)
		if furthest >= SeenApart {
			s.result.seen++
		}
	}
}

// differ is the difference of two lights over their mean; of two dark ones 0.
func differ(a, b float64) float64 {
	if sum := a + b; sum > 0 {
		return 2 * math.Abs(a-b) / sum
	}
	return 0
}
