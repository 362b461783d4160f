package device

import (
	"fmt"
	"math"
)

// BJTFigures are what a transistor's datasheet gives. A zero is not given.
type BJTFigures struct {
	VBE, VBEAt           float64 // [V] at a collector current in [A]
	HFE, HFEAt           float64 // [1] at a collector current in [A]
	VCESat, SatIc, SatIb float64 // [V] at [A] and [A]
}

// Figures that stand in for ones a datasheet does not give. All are common
// practice, no source.
const (
	assumedVBE   = 0.65 // [V] of a small silicon transistor
	assumedVBEAt = 2e-3 // [A]
	assumedHFE   = 100  // [1]
	assumedXtb   = 1.5  // [1] gain rises with heat
	assumedBr    = 5    // [1] reverse gain of small types, 4 to 6
)

// BJTFromFigures derives Gummel–Poon parameters from datasheet figures at
// 25 °C, without Early effect and roll-off:
//
//	is = Ic/exp(VBE/VT)    bf = hFE    rc = (VCEsat − inner saturation)/Ic
//
// and says in words what it had to assume.
//
// Source: derivation; antognetti for the saturation voltage of the
// Ebers–Moll transistor.
func BJTFromFigures(f BJTFigures) (par BJT, assumed []string) {
	par = BJTDefaults()
	par.Xtb = assumedXtb
	par.Br = assumedBr
	if !(f.VBE > 0 && f.VBEAt > 0) {
		f.VBE, f.VBEAt = assumedVBE, assumedVBEAt
		assumed = append(assumed, fmt.Sprintf("VBE %g V at %g mA", assumedVBE, assumedVBEAt*1e3))
	}
	if !(f.HFE > 0) {
		f.HFE = assumedHFE
		assumed = append(assumed, fmt.Sprintf("hFE %d", assumedHFE))
	}
	vt := ThermalVoltage(RatedC)
	unit := BJT{Is: 1, Bf: 1, Br: 1, Nf: 1, Nr: 1, Ne: 1.5, Nc: 2, Xti: par.Xti, Xtb: par.Xtb, Eg: par.Eg}
	rated := unit.At(RatedC)
	par.Is = f.VBEAt / math.Exp(f.VBE/vt) / rated.is
	par.Bf = f.HFE / rated.bf
	if f.VCESat > 0 && f.SatIc > 0 && f.SatIb > 0 {
		if forced := f.SatIc / f.SatIb; forced < f.HFE {
			inner := vt * math.Log((1+(forced+1)/par.Br)/(1-forced/f.HFE))
			par.Rc = math.Max(0, (f.VCESat-inner)/f.SatIc)
		}
	}
	return par, assumed
}

const (
	// assumedN and assumedRise make a curve of an LED's single datasheet
	// point: an emission coefficient, and how much its voltage would rise by
	// slope alone at the test current. Common practice, no source: slopes of
	// small LEDs are 0.15 V to 0.4 V over the test current.
	assumedN    = 2.0
	assumedRise = 0.2 // [V]
	oneDie      = 3.0 // [V] that a package of several dice shows for each
)

// LEDFromPoint makes an LED's curve from one point of its datasheet, a forward
// voltage in volts at a test current in amperes. A forward voltage of several
// dice in one package gives the slope of so many.
//
// Source: derivation, with assumptions of common practice, no source.
func LEDFromPoint(volts, current float64) LED {
	dice := math.Max(1, math.Round(volts/oneDie))
	d := LED{N: assumedN * dice}
	d.Rs = math.Max(0, assumedRise*dice-d.Slope()) / current
	d.Is = current / math.Expm1((volts-current*d.Rs)/d.Slope())
	return d
}

// LEDFromPoints fits is, n and rs to measured points [A, V] at 25 °C by least
// squares of the voltage, which is linear in n·VT·ln is, n·VT and rs. Fewer
// than four points, or points that would make rs negative or n absurd, fix
// what they cannot tell: n at 2, then rs at 0. It returns false without any
// usable point.
//
// Source: derivation.
func LEDFromPoints(points [][2]float64) (LED, bool) {
	var use [][2]float64
	for _, p := range points {
		if p[0] > 0 && p[1] > 0 {
			use = append(use, p)
		}
	}
	switch {
	case len(use) == 0:
		return LED{}, false
	case len(use) == 1:
		return LEDFromPoint(use[0][1], use[0][0]), true
	}
	nvt := assumedN * ratedVT
	offset, rs := 0.0, -1.0
	if len(use) >= 4 {
		var m [3][4]float64
		for _, p := range use {
			row := [3]float64{1, math.Log(p[0]), p[0]}
			for i := range 3 {
				for k := range 3 {
					m[i][k] += row[i] * row[k]
				}
				m[i][3] += row[i] * p[1]
			}
		}
		if x, ok := solve3(m); ok && x[1] > 0.5*ratedVT && x[1] < 10*ratedVT && x[2] >= 0 {
			offset, nvt, rs = x[0], x[1], x[2]
		}
	}
	if rs < 0 {
		offset, rs = line(use, nvt)
	}
	if rs < 0 {
		rs = 0
		offset = 0
		for _, p := range use {
			offset += (p[1] - nvt*math.Log(p[0])) / float64(len(use))
		}
	}
	return LED{Is: math.Exp(-offset / nvt), N: nvt / ratedVT, Rs: rs}, true
}

// line fits V − nvt·ln I = offset + rs·I.
func line(points [][2]float64, nvt float64) (offset, rs float64) {
	var n, sx, sy, sxx, sxy float64
	for _, p := range points {
		y := p[1] - nvt*math.Log(p[0])
		n++
		sx += p[0]
		sy += y
		sxx += p[0] * p[0]
		sxy += p[0] * y
	}
	det := n*sxx - sx*sx
	if !(det > 1e-12*n*sxx) {
		return sy / n, 0
	}
	rs = (n*sxy - sx*sy) / det
	return (sy - rs*sx) / n, rs
}

// solve3 solves three equations by elimination with pivoting.
func solve3(m [3][4]float64) (x [3]float64, ok bool) {
	for k := range 3 {
		p := k
		for i := k + 1; i < 3; i++ {
			if math.Abs(m[i][k]) > math.Abs(m[p][k]) {
				p = i
			}
		}
		m[k], m[p] = m[p], m[k]
		if !(math.Abs(m[k][k]) > 1e-14) {
			return x, false
		}
		for i := k + 1; i < 3; i++ {
			f := m[i][k] / m[k][k]
			for j := k; j < 4; j++ {
				m[i][j] -= f * m[k][j]
			}
		}
	}
	for i := 2; i >= 0; i-- {
		x[i] = m[i][3]
		for j := i + 1; j < 3; j++ {
			x[i] -= m[i][j] * x[j]
		}
		x[i] /= m[i][i]
	}
	return x, true
}
