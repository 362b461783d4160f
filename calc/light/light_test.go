package light_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc/light"
)

// tester is what tests and properties share.
type tester interface {
	Helper()
	Errorf(format string, args ...any)
}

func near(t tester, name string, got, want, tol float64) {
	t.Helper()
	d := got - want
	if !(d <= tol && d >= -tol) {
		t.Errorf("%s = %.9g, want %.9g (± %.3g)", name, got, want, tol)
	}
}

// A published power LED gives 190 lm at 1 A and 240 lm at 1.5 A.
//
// Source: LedEngin LZ1-00NW05 datasheet, tables 5 to 7.
func TestCurveOfAPublishedLED(t *testing.T) {
	s := light.Source{TestCurrent: 1, Flux: 190, Curve: [][2]float64{{0.35, 0.45}, {1, 1}, {1.5, 240.0 / 190}}}
	for _, p := range [][2]float64{{1, 190}, {1.5, 240}} {
		got, ok := s.At(p[0], 25)
		if !ok {
			t.Fatalf("nothing known at %v A", p[0])
		}
		near(t, "flux", got, p[1], 1e-9)
	}
	if _, ok := s.At(1.6, 25); ok {
		t.Error("flux known beyond the curve's last point")
	}
	near(t, "dark", first(s.At(0, 25)), 0, 0)
}

func first(v float64, _ bool) float64 { return v }

func TestHeatTakesLight(t *testing.T) {
	s := light.Source{TestCurrent: 0.06, Flux: 20, Tempco: -0.0022}
	near(t, "at 75 °C", first(s.At(0.06, 75)), 20*(1-0.0022*50), 1e-9)
	near(t, "half the current", first(s.At(0.03, 25)), 10, 1e-9)
	near(t, "beyond reason", first(s.At(0.06, 900)), 0, 0)
}

func TestMoreCurrentNeverGivesLessLight(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x, y := 0.0, 0.0
		var curve [][2]float64
		for range rapid.IntRange(2, 8).Draw(t, "points") {
			x += rapid.Float64Range(0.05, 1).Draw(t, "step")
			y += rapid.Float64Range(0, 1).Draw(t, "rise")
			curve = append(curve, [2]float64{x, y})
		}
		s := light.Source{TestCurrent: 1, Flux: 1, Curve: curve}
		last := 0.0
		for i := range 201 {
			v, ok := s.At(x*float64(i)/200, 25)
			if !ok {
				t.Fatalf("nothing known at %d/200 of the curve", i)
			}
			if v < last-1e-12 {
				t.Fatalf("flux falls from %v to %v at %d/200", last, v, i)
			}
			last = v
		}
		for _, p := range curve {
			v, _ := s.At(p[0], 25)
			near(t, "knot", v, p[1], 1e-9*(1+p[1]))
		}
	})
}

// 1 cd on the axis with a full angle of 120° at half intensity is a Lambertian
// source, π lm; 60° gives 1.0798 lm, 30° 0.2993 lm (computed from the standard
// formula, which is from memory).
func TestFluxOfIntensity(t *testing.T) {
	near(t, "120°", light.FluxOfIntensity(1, 120), math.Pi, 1e-9)
	near(t, "60°", light.FluxOfIntensity(1, 60), 1.0798, 5e-5)
	near(t, "30°", light.FluxOfIntensity(1, 30), 0.2993, 5e-5)
}
