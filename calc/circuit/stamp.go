package circuit

import (
	"math"

	"lanternbook/calc/device"
)

// step prepares the stack's linear stand-in at the present node voltages.
func (s *ledStack) step(air, vab float64) {
	if s.empty {
		s.vab, s.miss, s.dvdx = vab, 0, 1
		s.ge = 1 / s.instead
		s.ieff = vab * s.ge
		s.current = s.ieff
		return
	}
	lead := &s.leds[s.lead]
	nvt := lead.Slope()
	e := math.Exp(min(s.x/nvt, hottest))
	current := lead.Is * (e - 1)
	didx := lead.Is * e / nvt
	total := current * s.instead
	s.dvdx = s.instead * didx
	for k := range s.leds {
		if current <= 0 && k == s.lead {
			// In the dark and in reverse the lead's logarithm is x itself.
			s.volts[k] = s.x + current*lead.Rs + lead.Tempco*(air-rated)
			s.junction[k] = air
			s.dvdx += s.count[k] * (1 + lead.Rs*didx)
		} else {
			var p device.LEDPoint
			if k == s.lead {
				p = lead.WorkingAt(s.x, current, air)
			} else {
				p = s.leds[k].Working(current, air)
			}
			s.volts[k], s.junction[k] = p.Voltage, p.Junction
			s.runaway = s.runaway || p.Runaway && s.count[k] > 0
			s.dvdx += s.count[k] * p.Slope * didx
		}
		total += s.count[k] * s.volts[k]
	}
	s.dvdx = max(s.dvdx, smallestTurn)
	s.vab, s.miss = vab, vab-total
	s.ge = didx / s.dvdx
	s.ieff = current + s.ge*s.miss
	s.current = current
}

const (
	rated   = 25.0 // °C at which LED curves are stated
	hottest = 650  // exponent that no LED current reaches

	// smallestTurn keeps dv/dx above 0 where a positive tempco would turn it.
	smallestTurn = 1e-3
)

// settle moves the stack's own unknown after the nodes have moved, and returns
// how far in volts.
func (s *ledStack) settle(vab float64) float64 {
	if s.empty {
		s.current, s.limited = vab*s.ge, false
		return 0
	}
	lead := &s.leds[s.lead]
	next := s.x + (s.miss+vab-s.vab)/s.dvdx
	s.current = s.ieff + s.ge*(vab-s.vab)
	limited := lead.Limit(next, s.x)
	s.limited = limited != next
	moved := math.Abs(limited - s.x)
	s.x = limited
	return moved
}

// step prepares the transistor's linear stand-in: its inner junction voltages
// and its temperature are eliminated here.
//
//	F1 = vbe − Vbe + (rb+re)·ib + re·ic
//	F2 = vbc − Vbc + rb·ib − rc·ic
//	F3 = T − Tair − rth·(ib·Vbe + ic·Vce)
func (q *bjt) step(air, tvbe, tvbc float64) {
	if !q.fresh {
		q.at = q.par.At(q.t)
		q.fresh = true
	} else if q.at.Celsius() != q.t {
		q.at.Move(&q.par, q.t)
	}
	n := q.at.Currents(q.vbe, q.vbc)
	rb, re, rc := q.par.Rb, q.par.Re, q.par.Rc
	if q.par.Rbm != 0 && q.par.Rbm != rb {
		rb = q.par.BaseResistance(n.Ib, n.BaseChargeFactor)
	}
	q.tvbe, q.tvbc = tvbe, tvbc
	f1 := q.vbe - tvbe + (rb+re)*n.Ib + re*n.Ic
	f2 := q.vbc - tvbc + rb*n.Ib - rc*n.Ic
	a11, a12 := 1+(rb+re)*n.IbBE+re*n.IcBE, (rb+re)*n.IbBC+re*n.IcBC
	a21, a22 := rb*n.IbBE-rc*n.IcBE, 1+rb*n.IbBC-rc*n.IcBC
	if q.rth == 0 {
		det := 1 / (a11*a22 - a12*a21)
		i11, i12, i21, i22 := a22*det, -a12*det, -a21*det, a11*det
		q.du0 = [3]float64{-(i11*f1 + i12*f2), -(i21*f1 + i22*f2), air - q.t}
		q.m = [3][2]float64{{i11, i12}, {i21, i22}, {}}
	} else {
		tvce := tvbe - tvbc
		f3 := q.t - air - q.rth*(n.Ib*tvbe+n.Ic*tvce)
		a13, a23 := (rb+re)*n.IbT+re*n.IcT, rb*n.IbT-rc*n.IcT
		a31 := -q.rth * (n.IbBE*tvbe + n.IcBE*tvce)
		a32 := -q.rth * (n.IbBC*tvbe + n.IcBC*tvce)
		a33 := 1 - q.rth*(n.IbT*tvbe+n.IcT*tvce)
		c11, c12, c13 := a22*a33-a23*a32, a13*a32-a12*a33, a12*a23-a13*a22
		c21, c22, c23 := a23*a31-a21*a33, a11*a33-a13*a31, a13*a21-a11*a23
		c31, c32, c33 := a21*a32-a22*a31, a12*a31-a11*a32, a11*a22-a12*a21
		det := a11*c11 + a12*c21 + a13*c31
		if math.Abs(det) < singular {
			det = math.Copysign(singular, det)
		}
		d := 1 / det
		// Right-hand sides: −F, and −dF/dVbe = (1, 0, rth·(ib+ic)),
		// −dF/dVbc = (0, 1, −rth·ic).
		h1, h2 := q.rth*(n.Ib+n.Ic), -q.rth*n.Ic
		q.du0 = [3]float64{
			-(c11*f1 + c12*f2 + c13*f3) * d,
			-(c21*f1 + c22*f2 + c23*f3) * d,
			-(c31*f1 + c32*f2 + c33*f3) * d,
		}
		q.m = [3][2]float64{
			{(c11 + c13*h1) * d, (c12 + c13*h2) * d},
			{(c21 + c23*h1) * d, (c22 + c23*h2) * d},
			{(c31 + c33*h1) * d, (c32 + c33*h2) * d},
		}
	}
	du, m := &q.du0, &q.m
	q.i0[0] = n.Ic + n.IcBE*du[0] + n.IcBC*du[1] + n.IcT*du[2]
	q.i0[1] = n.Ib + n.IbBE*du[0] + n.IbBC*du[1] + n.IbT*du[2]
	for k := range 2 {
		q.gi[0][k] = n.IcBE*m[0][k] + n.IcBC*m[1][k] + n.IcT*m[2][k]
		q.gi[1][k] = n.IbBE*m[0][k] + n.IbBC*m[1][k] + n.IbT*m[2][k]
	}
	q.ic, q.ib = n.Ic, n.Ib
}

// singular is the least determinant a part's own equations are trusted with.
const singular = 1e-12

// settle moves the transistor's own unknowns after the nodes have moved. It
// returns how far its junctions moved in volts and its temperature in kelvin.
func (q *bjt) settle(tvbe, tvbc float64) (volts, kelvin float64) {
	d0, d1 := tvbe-q.tvbe, tvbc-q.tvbc
	q.ic = q.i0[0] + q.gi[0][0]*d0 + q.gi[0][1]*d1
	q.ib = q.i0[1] + q.gi[1][0]*d0 + q.gi[1][1]*d1
	nextBE := q.vbe + q.du0[0] + q.m[0][0]*d0 + q.m[0][1]*d1
	nextBC := q.vbc + q.du0[1] + q.m[1][0]*d0 + q.m[1][1]*d1
	nextT := q.t + q.du0[2] + q.m[2][0]*d0 + q.m[2][1]*d1
	be, bc := q.at.LimitBE(nextBE, q.vbe), q.at.LimitBC(nextBC, q.vbc)
	t := max(q.t-warmest, min(q.t+warmest, nextT))
	t = max(coldest, min(melting, t))
	q.limited = be != nextBE || bc != nextBC || t != nextT
	volts = max(math.Abs(be-q.vbe), math.Abs(bc-q.vbc))
	kelvin = math.Abs(t - q.t)
	q.vbe, q.vbc, q.t = be, bc, t
	return volts, kelvin
}

const (
	warmest = 60.0  // K a junction may move in one step
	coldest = -150. // °C and
	melting = 900.  // °C between which a trial temperature stays
)

// step prepares a clamp's linear stand-in at the present voltages of its node
// and its feed.
func (k *clamp) step(air, v, feed float64) {
	hold := k.volts + k.tempco*(air-rated)
	k.conductance, k.rest = dark, 0
	if !k.off && (v > hold || feed > hold && !k.oneWay) {
		k.conductance, k.rest = 1/k.ohms, hold/k.ohms
	}
	k.current = k.conductance*v - k.rest
}

// dark is the conductance in siemens of a reference that does not conduct.
const dark = 1e-10
