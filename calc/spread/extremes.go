// Package spread finds what tolerances do to a figure. It knows nothing of
// circuits: it turns knobs between −1 and 1 and looks at numbers.
package spread

import (
	"math"
	"slices"
)

// Extremes is the worst case of several figures over several knobs.
type Extremes struct {
	Min, Typ, Max []float64 // in the unit of each figure

	// Lowest and Highest are each figure's corner: for every knob −1, 1, or 0
	// where it does not matter.
	Lowest, Highest [][]int8

	distinct [][]int8

	effect [][]float64 // by figure and knob: most less least, that knob alone
	turn   []float64
	tried  map[string][]float64
	out    []float64
	eval   Eval
}

// Eval computes every figure into out with the knobs at turn.
type Eval func(turn, out []float64) error

// Find returns the worst case of figures over knobs by extreme value analysis:
// the sign of every figure's sensitivity to every knob is found one knob at a
// time, and the two extreme combinations of every figure are solved outright.
// Where a combination departs from the sum of the single effects, every knob
// whose effect is no larger than that departure may have changed its sign
// there: it is turned over and tried, until nothing is worse. Find stops at
// the first error of eval.
//
// Source: ecss-q-hb-30-01a, extreme value analysis.
func Find(knobs, figures int, eval Eval) (*Extremes, error) {
	x := &Extremes{
		Min: make([]float64, figures), Typ: make([]float64, figures), Max: make([]float64, figures),
		Lowest: make([][]int8, figures), Highest: make([][]int8, figures),
		turn: make([]float64, knobs), out: make([]float64, figures),
		tried: map[string][]float64{}, eval: eval, effect: make([][]float64, figures),
	}
	typical := make([]int8, knobs)
	if err := x.eval(x.turn, x.out); err != nil {
		return nil, err
	}
	copy(x.Min, x.out)
	copy(x.Typ, x.out)
	copy(x.Max, x.out)
	for f := range figures {
		x.Lowest[f], x.Highest[f] = typical, typical
		x.effect[f] = make([]float64, knobs)
	}
	low := make([]float64, figures)
	for k := range knobs {
		corner := make([]int8, knobs)
		corner[k] = -1
		if err := x.try(corner); err != nil {
			return nil, err
		}
		copy(low, x.out)
		corner = make([]int8, knobs)
		corner[k] = 1
		if err := x.try(corner); err != nil {
			return nil, err
		}
		for f := range figures {
			x.effect[f][k] = x.out[f] - low[f]
		}
	}
	// What one search comes by may start another anew; a second pass finds
	// nearly everything tried already.
	for range 2 {
		for f := range figures {
			for _, way := range []float64{1, -1} {
				if err := x.climb(f, way); err != nil {
					return nil, err
				}
			}
		}
	}
	return x, nil
}

// Replay returns the worst case of the same figures over the same knobs for a
// neighbour of what like was found for: only the typical point and the corners
// that mattered there are solved. The caller judges whether it is a neighbour.
func Replay(like *Extremes, eval Eval) (*Extremes, error) {
	knobs, figures := len(like.turn), len(like.Typ)
	x := &Extremes{
		Min: make([]float64, figures), Typ: make([]float64, figures), Max: make([]float64, figures),
		Lowest: make([][]int8, figures), Highest: make([][]int8, figures),
		turn: make([]float64, knobs), out: make([]float64, figures),
		tried: map[string][]float64{}, eval: eval,
	}
	if err := x.eval(x.turn, x.out); err != nil {
		return nil, err
	}
	copy(x.Min, x.out)
	copy(x.Typ, x.out)
	copy(x.Max, x.out)
	typical := make([]int8, knobs)
	for f := range figures {
		x.Lowest[f], x.Highest[f] = typical, typical
	}
	for _, corner := range like.corners() {
		if err := x.try(corner); err != nil {
			return nil, err
		}
	}
	return x, nil
}

// corners lists every corner that is the worst of some figure, once.
func (x *Extremes) corners() [][]int8 {
	if x.distinct != nil {
		return x.distinct
	}
	for f := range x.Typ {
		for _, corner := range [][]int8{x.Lowest[f], x.Highest[f]} {
			if !slices.ContainsFunc(x.distinct, func(other []int8) bool { return slices.Equal(other, corner) }) {
				x.distinct = append(x.distinct, corner)
			}
		}
	}
	return x.distinct
}

// climb tries a figure's corner, and then turns over the knobs whose sign is
// in doubt there.
func (x *Extremes) climb(f int, way float64) error {
	effect := x.effect[f]
	best := make([]int8, len(effect))
	sum := x.Typ[f]
	for k, e := range effect {
		best[k] = sign(e * way)
		sum += math.Abs(e) / 2 * way
	}
	if err := x.try(best); err != nil {
		return err
	}
	reached := x.out[f]
	departure := math.Abs(reached - sum)
	if departure <= rounding*math.Abs(sum-x.Typ[f]) {
		return nil
	}
	for range rounds {
		improved := false
		for k, e := range effect {
			if math.Abs(e) > doubtful*departure {
				continue
			}
			next := append([]int8(nil), best...)
			next[k] = -next[k]
			if next[k] == 0 {
				next[k] = 1
			}
			if err := x.try(next); err != nil {
				return err
			}
			if (x.out[f]-reached)*way > 0 {
				best, reached, improved = next, x.out[f], true
			}
		}
		if improved {
			continue
		}
		// Another figure's search may have come by a corner as bad or worse.
		other, value := x.Highest[f], x.Max[f]
		if way < 0 {
			other, value = x.Lowest[f], x.Min[f]
		}
		if slices.Equal(other, best) {
			break
		}
		best, reached = other, value
	}
	return nil
}

const (
	// rounds is how often a corner is improved; one round confirms.
	rounds = 6
	// doubtful is how many times the departure a knob's single effect may be
	// and its sign still be in doubt: a joint effect counts fourfold in it, and
	// others may take some of it away again.
	doubtful = 6
	// rounding is the share of a spread that no reading would show.
	rounding = 1e-4
)

// try leaves a corner's figures in x.out, solving it if it is new, and takes
// what is worse than anything before.
func (x *Extremes) try(corner []int8) error {
	key := make([]byte, len(corner))
	for k, s := range corner {
		key[k] = '0' + byte(s+1) //nolint:gosec // −1, 0 and 1 only
		x.turn[k] = float64(s)
	}
	if known, ok := x.tried[string(key)]; ok {
		copy(x.out, known)
		return nil
	}
	if err := x.eval(x.turn, x.out); err != nil {
		return err
	}
	x.tried[string(key)] = append([]float64(nil), x.out...)
	for f, v := range x.out {
		if v < x.Min[f] {
			x.Min[f], x.Lowest[f] = v, corner
		}
		if v > x.Max[f] {
			x.Max[f], x.Highest[f] = v, corner
		}
	}
	return nil
}

func sign(v float64) int8 {
	switch {
	case v > 0:
		return 1
	case v < 0:
		return -1
	}
	return 0
}
