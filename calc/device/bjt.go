package device

import "math"

// BJT holds Gummel–Poon DC parameters at NominalC. An infinite quantity (vaf,
// var, ikf, ikr, irb, bve) is written as 0.
type BJT struct {
	Is       float64 // [A] transport saturation current
	Bf, Br   float64 // [1] ideal forward and reverse gain
	Nf, Nr   float64 // [1] forward and reverse emission coefficient
	Vaf, Var float64 // [V] forward and reverse Early voltage
	Ikf, Ikr float64 // [A] corner for high-current roll-off
	Ise, Isc float64 // [A] leakage saturation currents
	Ne, Nc   float64 // [1] leakage emission coefficients
	Rb, Rbm  float64 // [Ω] base resistance at low and at high current
	Irb      float64 // [A] base current at which it is half way down
	Re, Rc   float64 // [Ω] emitter and collector resistance
	Xti, Xtb float64 // [1] temperature exponents of is and of the gains
	Eg       float64 // [eV] energy gap
	Bve      float64 // [V] reverse emitter-base breakdown
}

// BJTDefaults returns the usual default of every parameter.
//
// Source: antognetti, table of BJT DC parameters.
func BJTDefaults() BJT {
	return BJT{Is: 1e-16, Bf: 100, Br: 1, Nf: 1, Nr: 1, Ne: 1.5, Nc: 2, Xti: 3, Eg: 1.11}
}

// BJTAt is a transistor at one junction temperature: the parameters that move
// with it, ready for evaluation.
type BJTAt struct {
	celsius                  float64
	is, bf, br, ise, isc     float64
	nvf, nvr, nve, nvc       float64 // n·VT of each junction term
	slope                    float64 // d ln(is)/dT
	kelvin                   float64
	invVaf, invVar, invKf    float64
	invKr, ne, nc, xtb       float64
	critE, critC             float64
	hasIse, hasIsc, rollsOff bool
	bve, breaks              float64 // [V] breakdown, and VBE below which it is felt

	// Logarithms of the critical voltages' arguments at NominalC.
	lnE, lnC float64
}

// At returns the transistor at a junction temperature, by SPICE's laws
//
//	is(T)  = is·(T/T0)^xti·exp(eg·(q/k)·(1/T0 − 1/T))
//	b(T)   = b·(T/T0)^xtb
//	ise(T) = ise·(is(T)/is)^(1/ne)·(T/T0)^−xtb
//
// valid where silicon works, −60 °C to 250 °C.
//
// Source: antognetti, temperature dependence of the BJT model.
func (b *BJT) At(celsius float64) BJTAt {
	nominal := ThermalVoltage(NominalC)
	a := BJTAt{
		lnE: math.Log(b.Nf * nominal / (math.Sqrt2 * b.Is)), lnC: math.Log(b.Nr * nominal / (math.Sqrt2 * b.Is)),
		hasIse: b.Ise > 0, hasIsc: b.Isc > 0, ne: b.Ne, nc: b.Nc, xtb: b.Xtb,
		invVaf: inverse(b.Vaf), invVar: inverse(b.Var), invKf: inverse(b.Ikf), invKr: inverse(b.Ikr),
	}
	a.rollsOff = a.invKf != 0 || a.invKr != 0
	a.bve, a.breaks = b.Bve, math.Inf(-1)
	if b.Bve > 0 {
		a.breaks = felt - b.Bve
	}
	a.Move(b, celsius)
	return a
}

// Move takes the transistor that At returned to another junction temperature,
// with the same parameters.
func (a *BJTAt) Move(b *BJT, celsius float64) {
	kelvin := celsius + Zero
	ratio := kelvin / (NominalC + Zero)
	logRatio := math.Log(ratio)
	vt := VoltsPerKelvin * kelvin
	logIs := (ratio-1)*b.Eg/vt + b.Xti*logRatio
	gain := 1.0
	if b.Xtb != 0 {
		gain = math.Exp(b.Xtb * logRatio)
	}
	a.celsius, a.kelvin = celsius, kelvin
	a.is = b.Is * math.Exp(logIs)
	a.bf, a.br = b.Bf*gain, b.Br*gain
	if a.hasIse {
		a.ise = b.Ise * math.Exp(logIs/b.Ne) / gain
	}
	if a.hasIsc {
		a.isc = b.Isc * math.Exp(logIs/b.Nc) / gain
	}
	a.nvf, a.nvr, a.nve, a.nvc = b.Nf*vt, b.Nr*vt, b.Ne*vt, b.Nc*vt
	a.slope = b.Eg/(vt*kelvin) + b.Xti/kelvin
	a.critE = a.nvf * (a.lnE + logRatio - logIs)
	a.critC = a.nvr * (a.lnC + logRatio - logIs)
}

// Celsius returns the junction temperature a was made for, in °C.
func (a *BJTAt) Celsius() float64 { return a.celsius }

// LimitBE and LimitBC return a junction voltage that a Newton step may take
// without running away up the exponential.
func (a *BJTAt) LimitBE(next, last float64) float64 { return limit(next, last, a.nvf, a.critE) }

// LimitBC is LimitBE for the base-collector junction.
func (a *BJTAt) LimitBC(next, last float64) float64 { return limit(next, last, a.nvr, a.critC) }

// BJTCurrents are a transistor's terminal currents at its inner junctions,
// with their slopes. Currents flow into the terminal (NPN).
type BJTCurrents struct {
	Ic, Ib           float64 // [A] into collector and base
	IcBE, IcBC, IcT  float64 // [S], [S], [A/K]
	IbBE, IbBC, IbT  float64 // [S], [S], [A/K]
	BaseChargeFactor float64 // [1] qb
}

// Currents evaluates the Gummel–Poon equations at the inner base-emitter and
// base-collector voltages:
//
//	Ic = (Ibe − Ibc)/qb − Ibc/br − Ibcn
//	Ib = Ibe/bf + Iben + Ibc/br + Ibcn
//	qb = q1·(1 + sqrt(1 + 4·q2))/2
//
// Where bve is given, a base-emitter junction that far in reverse conducts
// besides: a straight line with a soft knee, derivation.
//
// Source: gummel-poon (1970); antognetti for the form with leakage terms.
func (a *BJTAt) Currents(vbe, vbc float64) BJTCurrents {
	var ibe, gbe, iben, gben, ibc, gbc, ibcn, gbcn float64
	ibe, gbe = junction(a.is, a.nvf, vbe)
	if a.hasIse {
		iben, gben = junction(a.ise, a.nve, vbe)
	}
	ibc, gbc = junction(a.is, a.nvr, vbc)
	if a.hasIsc {
		ibcn, gbcn = junction(a.isc, a.nvc, vbc)
	}
	perKelvin := 1 / a.kelvin
	ibeT := a.slope*ibe - gbe*vbe*perKelvin
	ibcT := a.slope*ibc - gbc*vbc*perKelvin
	ibenT, ibcnT := 0.0, 0.0
	if a.hasIse {
		ibenT = (a.slope/a.ne-a.xtb*perKelvin)*iben - gben*vbe*perKelvin
	}
	if a.hasIsc {
		ibcnT = (a.slope/a.nc-a.xtb*perKelvin)*ibcn - gbcn*vbc*perKelvin
	}

	early := 1 - vbc*a.invVaf - vbe*a.invVar
	if early < earlyFloor {
		early = earlyFloor
	}
	q1 := 1 / early
	qb, root := q1, 1.0
	if a.rollsOff {
		root = math.Sqrt(math.Max(0, 1+4*(a.invKf*ibe+a.invKr*ibc)))
		root = math.Max(root, 1e-6)
		qb = q1 * (1 + root) / 2
	}
	qbBE := q1 * (qb*a.invVar + a.invKf*gbe/root)
	qbBC := q1 * (qb*a.invVaf + a.invKr*gbc/root)
	qbT := q1 * (a.invKf*ibeT + a.invKr*ibcT) / root

	inv := 1 / qb
	transport := (ibe - ibc) * inv
	invBf, invBr := 1/a.bf, 1/a.br
	broken, gBroken := 0.0, 0.0
	if vbe < a.breaks {
		broken, gBroken = breakdown(-vbe - a.bve)
	}
	return BJTCurrents{
		Ic:   transport - ibc*invBr - ibcn,
		Ib:   ibe*invBf + iben + ibc*invBr + ibcn - broken,
		IcBE: (gbe - transport*qbBE) * inv,
		IcBC: (-gbc-transport*qbBC)*inv - gbc*invBr - gbcn,
		IcT:  (ibeT-ibcT-transport*qbT)*inv - ibcT*invBr + ibc*invBr*a.xtb*perKelvin - ibcnT,
		IbBE: gbe*invBf + gben + gBroken,
		IbBC: gbc*invBr + gbcn,
		IbT: ibeT*invBf + ibcT*invBr - (ibe*invBf+ibc*invBr)*a.xtb*perKelvin +
			ibenT + ibcnT,
		BaseChargeFactor: qb,
	}
}

// BaseResistance returns the inner base resistance in ohms at a base current
// and base charge factor. With irb it falls half way to rbm at that current,
// otherwise with the base charge.
//
// Source: antognetti, base resistance of the modified Gummel–Poon model.
func (b *BJT) BaseResistance(ib, qb float64) float64 {
	if b.Rbm == b.Rb {
		return b.Rb
	}
	if b.Irb <= 0 {
		return b.Rbm + (b.Rb-b.Rbm)/qb
	}
	x := math.Max(ib/b.Irb, 1e-9)
	z := (-1 + math.Sqrt(1+14.59025*x)) / 2.4317 / math.Sqrt(x)
	t := math.Tan(z)
	return b.Rbm + 3*(b.Rb-b.Rbm)*(t-z)/(z*t*t)
}

const (
	// earlyFloor keeps the base charge finite where a trial voltage passes the
	// Early voltage; no working circuit comes near.
	earlyFloor = 0.02
	// steepest is the exponent above which a junction continues as a straight
	// line, so that a trial voltage never overflows.
	steepest = 120
	// darkest is the exponent below which exp is nothing beside 1.
	darkest = -38
)

const (
	// knee and brokenOhms are how softly in volts a reverse emitter-base
	// junction begins to conduct, and the slope resistance in ohms beyond.
	// Common practice, no source: small types measure 10 to 30 ohms.
	knee       = 0.05
	brokenOhms = 20.0
	// felt is how far in volts before its breakdown a junction is taken as
	// tight: there 5 pA flow.
	felt = 1.0
)

// breakdown returns the current in amperes from emitter to base and its slope
// in siemens at a reverse voltage of over volts beyond the breakdown: nothing
// before, a straight line after, and a soft knee between.
func breakdown(over float64) (current, slope float64) {
	x := over / knee
	if x > steepest {
		return over / brokenOhms, 1 / brokenOhms
	}
	e := math.Exp(x)
	return knee / brokenOhms * math.Log1p(e), e / (1 + e) / brokenOhms
}

// junction returns is·(exp(v/nvt) − 1) and its slope.
func junction(is, nvt, v float64) (current, slope float64) {
	x := v / nvt
	switch {
	case x < darkest:
		return -is, 0
	case x > steepest:
		e := math.Exp(steepest)
		return is * (e*(1+x-steepest) - 1), is * e / nvt
	}
	e := math.Exp(x)
	return is * (e - 1), is * e / nvt
}

// limit is the usual junction limiting of a Newton step: above the critical
// voltage a step up goes by the logarithm of what it asks for.
//
// Source: nagel (1975), junction limiting.
func limit(next, last, nvt, critical float64) float64 {
	if next <= critical || math.Abs(next-last) <= 2*nvt {
		return next
	}
	if last <= 0 {
		return nvt * math.Log(math.Max(next/nvt, 1e-3))
	}
	if arg := 1 + (next-last)/nvt; arg > 0 {
		return last + nvt*math.Log(arg)
	}
	return critical
}

func inverse(v float64) float64 {
	if v == 0 {
		return 0
	}
	return 1 / v
}
