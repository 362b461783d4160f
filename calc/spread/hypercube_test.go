package spread_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc/spread"
)

func near(t *testing.T, name string, got, want, tol float64) {
	t.Helper()
	if diff := math.Abs(got - want); !(diff <= tol) {
		t.Errorf("%s = %.9g, want %.9g within %.3g", name, got, want, tol)
	}
}

// That is what makes it a Latin hypercube.
func TestEveryStratumIsHitOnce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 3000).Draw(t, "points")
		dimensions := rapid.IntRange(1, 4).Draw(t, "dimensions")
		h := spread.NewHypercube(n, dimensions, rapid.Uint64().Draw(t, "seed"))
		for d := range dimensions {
			hit := make([]bool, n)
			for i := range n {
				u := h.At(i, d)
				if !(u >= 0 && u < 1) {
					t.Fatalf("point %d of %d stands at %v", i, n, u)
				}
				stratum := int(u * float64(n))
				if hit[stratum] {
					t.Fatalf("stratum %d of %d is hit twice in dimension %d", stratum, n, d)
				}
				hit[stratum] = true
			}
		}
	})
}

func TestHypercubeIsTheSameForASeed(t *testing.T) {
	a, b, c := spread.NewHypercube(500, 3, 7), spread.NewHypercube(500, 9, 7), spread.NewHypercube(500, 3, 8)
	same := 0
	for i := range 500 {
		if a.At(i, 2) != b.At(i, 2) {
			t.Fatalf("point %d: %v with three dimensions, %v with nine", i, a.At(i, 2), b.At(i, 2))
		}
		if a.At(i, 2) == c.At(i, 2) {
			same++
		}
	}
	if same > 5 {
		t.Errorf("%d of 500 points are the same for another seed", same)
	}
}

// Dimensions are independent and points within their strata too: the sum over
// a grid of cells of (hits − expected)²/expected has its mean at the number of
// cells that are free, (10−1)², and a deviation of sqrt(2·81).
func TestDimensionsAreIndependent(t *testing.T) {
	const n = 5000
	h := spread.NewHypercube(n, 12, 1)
	for d := range 11 {
		var cells [10][10]float64
		inside, order := 0.0, 0.0
		last := 0.0
		for i := range n {
			x, y := h.At(i, d), h.At(i, d+1)
			cells[int(10*x)][int(10*y)]++
			inside += math.Mod(x*n, 1) / n
			order += (x - 0.5) * (last - 0.5)
			last = x
		}
		chi := 0.0
		for i := range cells {
			for k := range cells[i] {
				chi += (cells[i][k] - n/100) * (cells[i][k] - n/100) / (n / 100)
			}
		}
		near(t, "scatter of the cells", chi, 81, 5*math.Sqrt(2*81))
		near(t, "mean place within a stratum", inside, 0.5, 5*math.Sqrt(1.0/12/n))
		near(t, "one point and the next", order/n*12, 0, 5/math.Sqrt(n))
	}
}

// The mean of a straight function of many dimensions comes out far better than
// by independent points, which is what the strata are for.
func TestStrataTakeTheScatterOut(t *testing.T) {
	const n, dimensions = 1000, 20
	h := spread.NewHypercube(n, dimensions, 3)
	random := rand.New(rand.NewPCG(3, 3))
	byStrata, byChance := 0.0, 0.0
	for i := range n {
		for d := range dimensions {
			byStrata += h.At(i, d) / n
			byChance += random.Float64() / n
		}
	}
	near(t, "by strata", byStrata, dimensions/2, 1e-3)
	if math.Abs(byChance-dimensions/2) < 1e-3 {
		t.Error("chance does as well: the test tells nothing")
	}
}

// By hand: a triangle from 8 to 14 with its top at 10 has a third below the
// top; its quartile is 8 + sqrt(6·2/4), its median 14 − sqrt(6·4/2).
func TestTriangular(t *testing.T) {
	value := func(turn float64) float64 {
		if turn < 0 {
			return 10 + 2*turn
		}
		return 10 + 4*turn
	}
	const below = 2.0 / 6
	for _, c := range []struct{ u, want float64 }{
		{0, 8}, {0.25, 8 + math.Sqrt(3)}, {1.0 / 3, 10}, {0.5, 14 - math.Sqrt(12)}, {1, 14},
	} {
		near(t, "value", value(spread.Triangular(c.u, below)), c.want, 1e-12)
	}
	for _, c := range []struct{ u, below, want float64 }{{0, 0, 0}, {1, 0, 1}, {0, 1, -1}, {0.25, 1, -0.5}, {1, 1, 0}} {
		near(t, "turn", spread.Triangular(c.u, c.below), c.want, 1e-12)
	}
	near(t, "even", spread.Even(0.25), -0.5, 0)
}

type wilsonCase struct {
	passed, tried int
	low, high     float64
	source        string
}

// Source: newcombe (1998), table I, method 3.
func TestWilson(t *testing.T) {
	const newcombe = "newcombe (1998), table I, method 3, from memory"
	for _, c := range []wilsonCase{
		{81, 263, 0.2553, 0.3662, newcombe},
		{15, 148, 0.0624, 0.1605, newcombe},
		{0, 20, 0, 0.1611, newcombe},
		{1, 29, 0.0061, 0.1718, newcombe},
		{10, 10, 1 / (1 + 3.841459/10), 1, "by hand: 1/(1 + z²/n)"},
		{0, 0, 0, 1, "definition: nothing is known"},
	} {
		low, high := spread.Wilson(c.passed, c.tried)
		near(t, c.source+", low", low, c.low, 5e-5)
		near(t, c.source+", high", high, c.high, 5e-5)
	}
}

func TestTally(t *testing.T) {
	const n = 10000
	whole, first, second := spread.NewTally(-1, 3), spread.NewTally(-1, 3), spread.NewTally(-1, 3)
	var values []float64
	for i := range n {
		v := 2*math.Sqrt(float64(i)/n) - 0.5
		values = append(values, v)
		whole.Add(v)
		if i%3 == 0 {
			first.Add(v)
		} else {
			second.Add(v)
		}
	}
	slices.Sort(values)
	for _, share := range []float64{0, 0.01, 0.25, 0.5, 0.95, 1} {
		want := values[min(n-1, int(share*n))]
		near(t, "quantile", whole.Quantile(share), want, 4.0/2000+1e-9)
	}
	near(t, "mean", whole.Mean(), 2*2.0/3-0.5, 1e-3)
	edges, counts := whole.Bins(40)
	if len(edges) != 41 || len(counts) != 40 || edges[0] != -1 || edges[40] != 3 {
		t.Fatalf("%d edges from %v to %v, %d counts", len(edges), edges[0], edges[40], len(counts))
	}
	for k := range counts {
		want := 0
		for _, v := range values {
			if v >= edges[k] && v < edges[k+1] {
				want++
			}
		}
		near(t, "count", float64(counts[k]), float64(want), 1)
	}
	both := first.Clone()
	if !both.Merge(second) || both.Count() != n || first.Count() == n {
		t.Errorf("merged %d of %d, first still has %d", both.Count(), n, first.Count())
	}
	_, merged := both.Bins(40)
	if !slices.Equal(merged, counts) || both.Least() != whole.Least() || both.Most() != whole.Most() {
		t.Error("two halves do not add up to the whole")
	}
	if both.Merge(spread.NewTally(0, 3)) {
		t.Error("a tally over other ends was merged")
	}
}

func TestTallyOfNothingAndOfOneValue(t *testing.T) {
	none := spread.NewTally(0, 1)
	for name, v := range map[string]float64{"least": none.Least(), "most": none.Most(), "mean": none.Mean(), "median": none.Quantile(0.5)} {
		near(t, name+" of nothing", v, 0, 0)
	}
	same := spread.NewTally(2, 2)
	same.Add(2)
	near(t, "median of one", same.Quantile(0.5), 2, 0)
	beyond := spread.NewTally(0, 1)
	beyond.Add(1.5)
	near(t, "beyond the end", beyond.Most(), 1.5, 0)
	near(t, "its quantile", beyond.Quantile(1), 1.5, 0.5)
}
