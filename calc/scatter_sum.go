package calc

import "lanternbook/calc/spread"

// told are the quantiles of a distribution. [1]
var told = []float64{0.01, 0.05, 0.25, 0.5, 0.75, 0.95, 0.99}

// histograms are the numbers of bins, by how many values there must be at
// least.
var histograms = []struct{ values, bins int }{{1000, 40}, {200, 20}, {0, 10}}

// The figures that are tallied of each string.
const (
	tallyCurrent = iota
	tallyHeadroom
	tallyFlux
	tallied
)

// sum works out shares, quantiles and histograms from what was counted.
func (r *ScatterResult) sum() {
	r.Builds = shareOf(r.good, r.Samples)
	for k := range r.Checks {
		c := &r.Checks[k]
		c.Holds, c.Ample = nil, nil
		if c.Code == runawayCode {
			c.Passed = r.Samples - r.Unsolved - c.Failed
		}
		if judged := c.Passed + c.Tight + c.Failed; judged > 0 {
			holds, ample := shareOf(c.Passed+c.Tight, judged), shareOf(c.Passed, judged)
			c.Holds, c.Ample = &holds, &ample
		}
	}
	for i := range r.Strings {
		s := &r.Strings[i]
		at := r.tallies[i*tallied : (i+1)*tallied]
		s.Current = distribution(s.Current.Corners, at[tallyCurrent])
		s.Headroom = distribution(s.Headroom.Corners, at[tallyHeadroom])
		if at[tallyFlux] != nil {
			flux := distribution(s.LuminousFlux.Corners, at[tallyFlux])
			s.LuminousFlux = &flux
		}
	}
	if r.far != nil {
		n := *r.Neighbours
		n.Each, n.Furthest, n.Most = quantiles(r.each), quantiles(r.far), r.far.Most()
		n.Seen = shareOf(r.seen, r.far.Count())
		r.Neighbours = &n
	}
}

func shareOf(passed, tried int) Share {
	s := Share{}
	if tried > 0 {
		s.Value = float64(passed) / float64(tried)
	}
	s.Low, s.High = spread.Wilson(passed, tried)
	return s
}

func distribution(corners Range, t *spread.Tally) Distribution {
	d := Distribution{Corners: corners, Least: t.Least(), Mean: t.Mean(), Most: t.Most(), Quantiles: quantiles(t)}
	for _, h := range histograms {
		if t.Count() >= h.values {
			d.Edges, d.Counts = t.Bins(h.bins)
			break
		}
	}
	return d
}

func quantiles(t *spread.Tally) []Quantile {
	out := make([]Quantile, len(told))
	for k, share := range told {
		out[k] = Quantile{share, t.Quantile(share)}
	}
	return out
}
