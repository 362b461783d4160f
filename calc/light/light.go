// Package light turns an LED's current and junction temperature into lumens.
package light

import "math"

// Source is what is known of an LED's light.
type Source struct {
	TestCurrent float64      // [A] at which Flux is stated
	Flux        float64      // [lm] at TestCurrent and 25 °C
	Curve       [][2]float64 // [1] pairs of I/Itest and flux over flux at test, rising; none means in proportion
	Tempco      float64      // [1/K] share lost or gained per kelvin above 25 °C
}

// At returns the flux in lumens at a current in amperes and a junction
// temperature in °C. It returns false above the last point of the curve, where
// nothing is known.
func (s Source) At(current, junctionC float64) (float64, bool) {
	share, ok := s.share(current / s.TestCurrent)
	if !ok {
		return 0, false
	}
	return math.Max(0, s.Flux*share*(1+s.Tempco*(junctionC-25))), true
}

// share reads the curve by monotone cubic interpolation from the origin.
//
// Source: fritsch-carlson (1980).
func (s Source) share(x float64) (float64, bool) {
	if x <= 0 {
		return 0, true
	}
	if len(s.Curve) == 0 {
		return x, true
	}
	points := s.Curve
	if points[0][0] > 0 {
		points = append([][2]float64{{0, 0}}, points...)
	}
	n := len(points)
	if last := points[n-1][0]; x > last {
		if x > last*(1+sameCurrent) {
			return 0, false
		}
		x = last
	}
	k := 0
	for k < n-2 && x > points[k+1][0] {
		k++
	}
	h := points[k+1][0] - points[k][0]
	t := (x - points[k][0]) / h
	d0, d1 := tangent(points, k), tangent(points, k+1)
	y0, y1 := points[k][1], points[k+1][1]
	t2, t3 := t*t, t*t*t
	return y0*(2*t3-3*t2+1) + d0*h*(t3-2*t2+t) + y1*(3*t2-2*t3) + d1*h*(t3-t2), true
}

// sameCurrent is the share by which a current may pass the curve's last point
// and still be at it.
const sameCurrent = 1e-9

// tangent is the slope at a knot that keeps the curve between its neighbours:
// the weighted harmonic mean of the slopes on either side.
func tangent(p [][2]float64, k int) float64 {
	slope := func(i int) float64 { return (p[i+1][1] - p[i][1]) / (p[i+1][0] - p[i][0]) }
	if k == 0 {
		return slope(0)
	}
	if k == len(p)-1 {
		return math.Max(0, slope(k-1))
	}
	a, b := slope(k-1), slope(k)
	if a*b <= 0 {
		return 0
	}
	ha, hb := p[k][0]-p[k-1][0], p[k+1][0]-p[k][0]
	w1, w2 := 2*hb+ha, hb+2*ha
	return (w1 + w2) / (w1/a + w2/b)
}

// FluxOfIntensity returns the lumens of an LED with an intensity in candela on
// its axis and a full angle in degrees at half intensity, above 0 and below
// 180, taken as a source whose intensity goes with a power of the cosine:
//
//	Φ = 2π·I0/(n+1)    n = ln 0.5/ln cos(θ/2)
//
// Source: photometry ph05, standard formula, from memory.
func FluxOfIntensity(candela, angle float64) float64 {
	n := math.Log(0.5) / math.Log(math.Cos(angle/2*math.Pi/180))
	return 2 * math.Pi * candela / (n + 1)
}
