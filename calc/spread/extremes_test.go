package spread_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc/spread"
)

func TestFindMeetsEveryCorner(t *testing.T) {
	// The product of two knobs changes the sign of a sensitivity from corner to
	// corner, which the single effects alone cannot tell.
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 6).Draw(t, "knobs")
		line := rapid.SliceOfN(rapid.Float64Range(-1, 1), n, n).Draw(t, "single effects")
		bend := rapid.Float64Range(-1, 1).Draw(t, "joint effect")
		pair := rapid.IntRange(0, n-1).Draw(t, "of this knob and the next")
		f := func(turn []float64) float64 {
			v := 10.0
			for k := range turn {
				v += line[k] * turn[k]
			}
			return v + bend*turn[pair]*turn[(pair+1)%n]
		}
		x, err := spread.Find(n, 1, func(turn, out []float64) error {
			out[0] = f(turn)
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
		if x.Typ[0] != f(make([]float64, n)) {
			t.Errorf("typical %v, want %v", x.Typ[0], f(make([]float64, n)))
		}
		// Turning any one knob over at the corner found makes it no worse, but
		// for what no reading would show.
		shown := 2e-4 * (x.Max[0] - x.Min[0])
		for _, side := range []struct {
			corner []int8
			value  float64
			way    float64
		}{{x.Highest[0], x.Max[0], 1}, {x.Lowest[0], x.Min[0], -1}} {
			turn := make([]float64, n)
			for k, s := range side.corner {
				turn[k] = float64(s)
			}
			if got := f(turn); math.Abs(got-side.value) > 1e-12 {
				t.Fatalf("corner %v gives %v, reported %v", side.corner, got, side.value)
			}
			for k := range turn {
				turn[k] = -turn[k]
				if worse := (f(turn) - side.value) * side.way; worse > shown+1e-9 {
					t.Errorf("corner %v: turning knob %d over is worse by %v", side.corner, k, worse)
				}
				turn[k] = -turn[k]
			}
		}
	})
}

func TestFindKeepsFiguresApart(t *testing.T) {
	x, err := spread.Find(2, 2, func(turn, out []float64) error {
		out[0] = 5 + turn[0] - 2*turn[1]
		out[1] = math.Exp(turn[0] + turn[1])
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	want := [2][2]float64{{2, 8}, {math.Exp(-2), math.Exp(2)}}
	for f := range want {
		if math.Abs(x.Min[f]-want[f][0]) > 1e-12 || math.Abs(x.Max[f]-want[f][1]) > 1e-12 {
			t.Errorf("figure %d goes from %v to %v, want %v", f, x.Min[f], x.Max[f], want[f])
		}
	}
	if x.Highest[0][0] != 1 || x.Highest[0][1] != -1 {
		t.Errorf("the highest corner of figure 0 is %v, want [1 -1]", x.Highest[0])
	}
}

func TestFindStopsAtAnError(t *testing.T) {
	broken := errors.New("broken")
	calls := 0
	_, err := spread.Find(3, 1, func(turn, out []float64) error {
		calls++
		if turn[1] > 0 {
			return broken
		}
		return nil
	})
	if !errors.Is(err, broken) {
		t.Fatalf("err = %v, want %v", err, broken)
	}
	if calls > 5 {
		t.Errorf("%d evaluations, want none after the error", calls)
	}
}
