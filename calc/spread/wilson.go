package spread

import "math"

// Confident is the share of intervals that hold the truth.
const Confident = 0.95

// normal is the normal distribution's quantile for Confident, two-sided.
const normal = 1.959963984540054

// Wilson returns the interval from 0 to 1 that holds a share with Confident
// certainty, from so many that passed of those tried. It keeps its meaning
// where none or all passed; with none tried it is everything. Points of a
// Latin hypercube scatter less than independent ones, so that for them it is
// if anything too wide.
//
//	(p + z²/2n ± z·sqrt(p(1−p)/n + z²/4n²)) / (1 + z²/n)
//
// Source: wilson (1927); stein (1987), for a hypercube's scatter.
func Wilson(passed, tried int) (low, high float64) {
	if tried <= 0 {
		return 0, 1
	}
	n := float64(tried)
	p := float64(passed) / n
	z2 := normal * normal
	middle := (p + z2/(2*n)) / (1 + z2/n)
	reach := normal * math.Sqrt(p*(1-p)/n+z2/(4*n*n)) / (1 + z2/n)
	low, high = math.Max(0, middle-reach), math.Min(1, middle+reach)
	if passed == 0 {
		low = 0
	}
	if passed == tried {
		high = 1
	}
	return low, high
}
