package spread

import "math"

// Tally counts values between two ends, finely enough to read quantiles and a
// histogram off it. Tallies over the same ends add up exactly.
type Tally struct {
	low, high   float64
	counts      []uint32
	n           int
	sum         float64
	least, most float64
}

// fineBins is how many bins a tally counts in: a quantile read off it is right
// to that share of the range between its ends.
const fineBins = 2000

// NewTally returns an empty tally between two ends. A value beyond them is
// counted at the end; Least and Most still tell it.
func NewTally(low, high float64) *Tally {
	return &Tally{low: low, high: high, counts: make([]uint32, fineBins), least: math.Inf(1), most: math.Inf(-1)}
}

// Add counts a value.
func (t *Tally) Add(v float64) {
	t.n++
	t.sum += v
	t.least, t.most = math.Min(t.least, v), math.Max(t.most, v)
	t.counts[t.bin(v)]++
}

func (t *Tally) bin(v float64) int {
	if !(t.high > t.low) {
		return 0
	}
	at := (v - t.low) / (t.high - t.low) * fineBins
	return int(math.Max(0, math.Min(fineBins-1, at)))
}

// Merge adds what another tally over the same ends has counted; it says
// whether the ends are the same, and changes nothing where they are not.
func (t *Tally) Merge(other *Tally) bool {
	if t.low != other.low || t.high != other.high {
		return false
	}
	t.n += other.n
	t.sum += other.sum
	t.least, t.most = math.Min(t.least, other.least), math.Max(t.most, other.most)
	for k, c := range other.counts {
		t.counts[k] += c
	}
	return true
}

// Clone returns a copy that counts on its own.
func (t *Tally) Clone() *Tally {
	own := *t
	own.counts = append([]uint32(nil), t.counts...)
	return &own
}

// Count returns how many values were counted, Least, Most and Mean what they
// were, in their unit; without any, the last three are 0.
func (t *Tally) Count() int { return t.n }

// Least returns the least value counted.
func (t *Tally) Least() float64 { return t.told(t.least) }

// Most returns the greatest value counted.
func (t *Tally) Most() float64 { return t.told(t.most) }

// Mean returns the mean of the values counted.
func (t *Tally) Mean() float64 { return t.told(t.sum / float64(t.n)) }

func (t *Tally) told(v float64) float64 {
	if t.n == 0 {
		return 0
	}
	return v
}

// Quantile returns the value below which a share from 0 to 1 of those counted
// lies, read off evenly within its bin; without any it is 0.
func (t *Tally) Quantile(share float64) float64 {
	if t.n == 0 {
		return 0
	}
	want := share * float64(t.n)
	before := 0.0
	for k, c := range t.counts {
		here := float64(c)
		if c > 0 && before+here >= want {
			v := t.edge(k) + (t.edge(k+1)-t.edge(k))*(want-before)/here
			return math.Max(t.least, math.Min(t.most, v))
		}
		before += here
	}
	return t.most
}

// edge is where a fine bin begins.
func (t *Tally) edge(k int) float64 { return t.low + (t.high-t.low)*float64(k)/fineBins }

// Bins returns the histogram in so many bins alike, which must go into
// fineBins without rest: the edges, one more than bins, and the counts.
func (t *Tally) Bins(bins int) (edges []float64, counts []int) {
	each := fineBins / bins
	for b := range bins {
		edges = append(edges, t.edge(b*each))
		total := 0
		for _, c := range t.counts[b*each : (b+1)*each] {
			total += int(c)
		}
		counts = append(counts, total)
	}
	return append(edges, t.high), counts
}
