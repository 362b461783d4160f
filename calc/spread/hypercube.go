package spread

import (
	"math"
	"math/bits"
	"math/rand/v2"
)

// Hypercube is a Latin hypercube: as many points as it has strata, spread over
// some dimensions so that in each of them every stratum holds exactly one
// point. It keeps no table, so that any number of points costs the same and
// several may read different points of one at once.
//
// Source: mckay-beckman-conover (1979).
type Hypercube struct {
	points uint64
	half   uint // bits of half an index
	keys   [][stirs + 1]uint64
}

// stirs is how often an index is stirred; four make a permutation that no
// test of its outputs tells from a random one.
//
// Source: luby-rackoff (1988).
const stirs = 4

// NewHypercube returns a hypercube of at least one point. The same seed gives
// the same points on any machine; a dimension's points do not depend on how
// many others there are.
func NewHypercube(points, dimensions int, seed uint64) *Hypercube {
	n := uint64(max(points, 1))
	h := &Hypercube{points: n, half: max(1, uint(bits.Len64(n-1)+1)/2), keys: make([][stirs + 1]uint64, dimensions)}
	for d := range h.keys {
		random := rand.NewPCG(seed, uint64(d))
		for k := range h.keys[d] {
			h.keys[d][k] = random.Uint64()
		}
	}
	return h
}

// At returns where point i stands in dimension d: from 0 to below 1, at random
// within its stratum.
func (h *Hypercube) At(i, d int) float64 {
	keys := &h.keys[d]
	within := float64(stir(uint64(i)^keys[stirs])>>11) / (1 << 53) //nolint:gosec // an index
	at := h.stratum(uint64(i), keys)                               //nolint:gosec // an index
	return min((float64(at)+within)/float64(h.points), below1)
}

// below1 is the greatest number below 1, where rounding would reach it.
const below1 = 1 - 1.0/(1<<53)

// stratum sends an index to its stratum: a Feistel network permutes the even
// number of bits that hold all indices, and is run again while it leads beyond
// the last one.
//
// Source: black-rogaway (2002), cycle walking.
func (h *Hypercube) stratum(i uint64, keys *[stirs + 1]uint64) uint64 {
	mask := uint64(1)<<h.half - 1
	for {
		left, right := i>>h.half, i&mask
		for k := range stirs {
			left, right = right, left^(stir(right^keys[k])&mask)
		}
		if i = left<<h.half | right; i < h.points {
			return i
		}
	}
}

// stir mixes the bits of a number.
//
// Source: steele-lea-flood (2014), the finaliser of SplitMix64.
func stir(x uint64) uint64 {
	x ^= x >> 30
	x *= 0xbf58476d1ce4e5b9
	x ^= x >> 27
	x *= 0x94d049bb133111eb
	return x ^ x>>31
}

// Even turns a number from 0 to 1 into a knob's turn that is as likely
// anywhere between its limits.
func Even(u float64) float64 { return 2*u - 1 }

// Triangular turns a number from 0 to 1 into a knob's turn with a triangular
// likelihood of its value: greatest at typical, nothing at either limit. below
// is the share of the spread that lies below typical.
//
// Source: derivation, the inverse of the triangular distribution.
func Triangular(u, below float64) float64 {
	if u < below {
		return math.Sqrt(u/below) - 1
	}
	if below >= 1 {
		return 0
	}
	return 1 - math.Sqrt((1-u)/(1-below))
}
