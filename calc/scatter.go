package calc

import (
	"fmt"

	"lanternbook/calc/spread"
)

// ScatterResult is what many builds of the same document, each with parts of
// its own, would come out as.
type ScatterResult struct {
	Samples  int `json:"samples"`  // builds tried
	Unsolved int `json:"unsolved"` // of them without an operating point that was found
	// Builds is the share in which no check fails that can be judged.
	Builds Share `json:"builds"`
	// Checks are those of the report, in its order before sorting; a string's
	// check holds in a build when it holds in all its quantity.
	Checks  []ScatterCheck  `json:"checks"`
	Strings []ScatterString `json:"strings"`
	// Neighbours is nil where no two strings of the same LEDs stand side by
	// side.
	Neighbours *ScatterNeighbours `json:"neighbours,omitempty"`

	good      int // builds without a failed check
	tallies   []*spread.Tally
	each, far *spread.Tally // of neighbours: any two, the furthest apart in a build
	seen      int           // builds with neighbours seen apart
}

// ScatterCheck is how often one check comes out how.
type ScatterCheck struct {
	Code    string `json:"code"`
	Where   string `json:"where"`
	At      string `json:"at"`   // JSON Pointer into the build
	Name    string `json:"name"` // the part it is about, where there are several
	Unknown bool   `json:"unknown"`
	// Passed, Tight and Failed count builds; a figure that is not known there
	// counts as none of them.
	Passed int `json:"passed"`
	Tight  int `json:"tight"`
	Failed int `json:"failed"`
	// Holds is the share that passes, tight or not; Ample that which is not
	// even tight. Nil where nothing could be judged.
	Holds *Share `json:"holds"`
	Ample *Share `json:"ample"`
}

// Share is a share of builds with the interval that holds the true one with
// 95 % certainty.
//
// Source: wilson (1927).
type Share struct {
	Value float64 `json:"value"` // [1]
	Low   float64 `json:"low"`   // [1]
	High  float64 `json:"high"`  // [1]
}

// ScatterString is how the figures of one string scatter, all its quantity
// taken together.
type ScatterString struct {
	Label        string        `json:"label"`
	Quantity     int           `json:"quantity"`
	Current      Distribution  `json:"current"`
	Headroom     Distribution  `json:"headroom"`
	LuminousFlux *Distribution `json:"luminous_flux,omitempty"` // nil when an LED's is not known
}

// Distribution is how a figure scatters beside its worst cases.
type Distribution struct {
	Corners   Range      `json:"corners"` // in the unit of the field: as the report has it
	Least     float64    `json:"least"`   // in the unit of the field: seen
	Mean      float64    `json:"mean"`    // in the unit of the field
	Most      float64    `json:"most"`    // in the unit of the field: seen
	Quantiles []Quantile `json:"quantiles"`
	// Edges bound the histogram's bins, one more than Counts; they go from
	// corner to corner.
	Edges  []float64 `json:"edges"` // in the unit of the field
	Counts []int     `json:"counts"`
}

// Quantile is the value that a share of all falls below.
type Quantile struct {
	Share float64 `json:"share"` // [1]
	Value float64 `json:"value"` // in the unit of the field
}

// ScatterNeighbours is how far strings of the same LEDs that stand side by
// side, copies of one string among them, differ in brightness: the difference
// of their light over its mean, or of their current where the light is not
// known. What one LED's light differs from another's at the same current is
// not in a build and not in these figures.
type ScatterNeighbours struct {
	Pairs    int        `json:"pairs"`
	Each     []Quantile `json:"each"`     // of any two neighbours
	Furthest []Quantile `json:"furthest"` // of the two furthest apart in a build
	Most     float64    `json:"most"`     // [1] of all
	Seen     Share      `json:"seen"`     // builds with two that are seen to differ, by SeenApart or more
}

// SeenApart is the difference in brightness that is seen side by side. Common
// practice, no source.
const SeenApart = seenApart // [1]

// Stopped says that the caller stopped a long computation.
type Stopped struct {
	Done int // how much was done by then, as progress counts it
}

// Error says so.
func (s *Stopped) Error() string { return fmt.Sprintf("stopped after %d samples", s.Done) }

const (
	// MostSamples is how many samples a scatter may have.
	MostSamples = 100_000
	// mostSpelledOut is how many strings it takes, quantities counted.
	mostSpelledOut = 10_000
	// reportEvery is after how many samples progress is told.
	reportEvery = 250
)

// Scatter solves n builds of b, 1 to MostSamples, each with its parts, supply
// and ambient drawn at random within their limits, and tells how often each
// check comes out how and how currents, headrooms and light scatter.
//
// Every string, of a quantity too, has its own parts: each LED type's bin,
// each gain, VBE and resistor is drawn for itself, as are a rail's own parts.
// All LEDs of one type in one string are of one bin. Supply and ambient are
// shared by the whole build. A resistor is as likely anywhere within its
// tolerance; everything stated as min, typ and max, supply and ambient
// included, has a triangular likelihood with its top at typ. The points are
// those of a Latin hypercube. Strings, rails, cable and the air in a can are
// solved together, as Check solves the typical point.
//
// The same seed draws the same builds on any machine. progress, if not nil, is
// told every few hundred samples how many are done; when it returns false,
// Scatter returns *Stopped. Other errors are those of Check.
func Scatter(b Build, n int, seed uint64, progress func(done int) bool) (ScatterResult, error) {
	return ScatterPart(b, Sampling{Samples: n, Seed: seed, Parts: 1}, progress)
}

// Sampling says which samples to draw: part Part, from 0, of Parts of all
// Samples.
type Sampling struct {
	Samples     int
	Seed        uint64
	Part, Parts int
}

// ScatterPart is Scatter for a part of its samples, so that several can be
// drawn at once; Merge puts their results together to what Scatter would have
// found.
func ScatterPart(b Build, of Sampling, progress func(done int) bool) (ScatterResult, error) {
	if of.Samples < 1 || of.Samples > MostSamples || of.Parts < 1 || of.Part < 0 || of.Part >= of.Parts {
		return ScatterResult{}, Invalid{{"", fmt.Sprintf("a scatter has 1 to %d samples", MostSamples)}}
	}
	s, err := newSampler(&b, of)
	if err != nil {
		return ScatterResult{}, err
	}
	first, last := of.Samples*of.Part/of.Parts, of.Samples*(of.Part+1)/of.Parts
	for i := first; i < last; i++ {
		if done := i - first; progress != nil && done%reportEvery == 0 && done > 0 && !progress(done) {
			return ScatterResult{}, &Stopped{done}
		}
		s.sample(i)
	}
	s.result.sum()
	return s.result, nil
}

// Merge returns two parts of a scatter of the same build as one. It returns an
// error where they are not of the same build.
func (r ScatterResult) Merge(other ScatterResult) (ScatterResult, error) {
	mismatch := fmt.Errorf("calc: scatters of different builds do not merge")
	if len(r.tallies) != len(other.tallies) || len(r.Strings) != len(other.Strings) || (r.far == nil) != (other.far == nil) {
		return ScatterResult{}, mismatch
	}
	m := r
	m.Samples, m.Unsolved, m.good, m.seen = r.Samples+other.Samples, r.Unsolved+other.Unsolved, r.good+other.good, r.seen+other.seen
	m.tallies = make([]*spread.Tally, len(r.tallies))
	for k, t := range r.tallies {
		if t == nil && other.tallies[k] == nil {
			continue
		}
		if t == nil || other.tallies[k] == nil {
			return ScatterResult{}, mismatch
		}
		if m.tallies[k] = t.Clone(); !m.tallies[k].Merge(other.tallies[k]) {
			return ScatterResult{}, mismatch
		}
	}
	if r.far != nil {
		m.each, m.far = r.each.Clone(), r.far.Clone()
		m.each.Merge(other.each)
		m.far.Merge(other.far)
	}
	var ok bool
	if m.Checks, ok = mergeChecks(r.Checks, other.Checks); !ok {
		return ScatterResult{}, mismatch
	}
	m.Strings = append([]ScatterString(nil), r.Strings...)
	m.sum()
	return m, nil
}

// mergeChecks adds up what two parts counted; a runaway may have been met in
// one of them only.
func mergeChecks(a, b []ScatterCheck) ([]ScatterCheck, bool) {
	out := append([]ScatterCheck(nil), a...)
	for i := range b {
		c := &b[i]
		k := i
		if c.Code == runawayCode {
			for k = 0; k < len(out) && (out[k].Code != runawayCode || out[k].Where != c.Where); k++ {
			}
			if k == len(out) {
				out = append(out, *c)
				continue
			}
		}
		if k >= len(out) || out[k].Code != c.Code || out[k].Where != c.Where || out[k].At != c.At {
			return nil, false
		}
		out[k].Passed += c.Passed
		out[k].Tight += c.Tight
		out[k].Failed += c.Failed
	}
	return out, true
}
