package device

import "math"

// LED holds the parameters of one light-emitting diode:
//
//	V = n·VT(25 °C)·ln(1 + I/is) + I·rs + tempco·(Tj − 25 °C)
type LED struct {
	Is     float64 // [A] saturation current at 25 °C
	N      float64 // [1] emission coefficient
	Rs     float64 // [Ω] series resistance
	Tempco float64 // [V/K]
	Rth    float64 // [K/W] junction to air; 0 stays at the air's temperature
}

// ratedVT is the thermal voltage at RatedC that the LED equation uses at every
// temperature, because its tempco is a measured one.
const ratedVT = VoltsPerKelvin * (RatedC + Zero)

// Slope returns n·VT in volts.
func (d *LED) Slope() float64 { return d.N * ratedVT }

// Voltage returns the forward voltage in volts at a current above −is in
// amperes and a junction temperature in °C.
func (d *LED) Voltage(current, celsius float64) float64 {
	return d.Slope()*math.Log1p(current/d.Is) + current*d.Rs + d.Tempco*(celsius-RatedC)
}

// Shifted returns the LED with its forward voltage moved by volts at every
// current, as another bin of the same type.
func (d LED) Shifted(volts float64) LED {
	d.Is *= math.Exp(-volts / d.Slope())
	return d
}

// LEDPoint is an LED at work.
type LEDPoint struct {
	Voltage  float64 // [V]
	Slope    float64 // [Ω] dV/dI with the heat following
	Junction float64 // [°C]
	Runaway  bool    // its heat has no stable temperature
}

// Working returns the LED at a current in amperes with its own heat, in air of
// celsius °C. The heat is solved outright, since voltage is linear in it:
//
//	Tj = (Tair + rth·I·(V0 − 25·tempco)) / (1 − rth·I·tempco)
//
// Source: derivation, from the equation of LED and Tj = Tair + rth·V·I.
func (d *LED) Working(current, celsius float64) LEDPoint {
	return d.WorkingAt(d.Slope()*math.Log1p(current/d.Is), current, celsius)
}

// WorkingAt is Working for a current whose inner voltage n·VT·ln(1 + I/is) is
// known in volts; its logarithm is half of what Working costs.
func (d *LED) WorkingAt(inner, current, celsius float64) LEDPoint {
	nvt := d.Slope()
	cold := inner + current*d.Rs
	slope := nvt/(current+d.Is) + d.Rs
	if d.Rth == 0 || current <= 0 {
		return LEDPoint{Voltage: cold + d.Tempco*(celsius-RatedC), Slope: slope, Junction: celsius}
	}
	denominator := 1 - d.Rth*current*d.Tempco
	runaway := denominator < runawayFloor
	if runaway {
		denominator = runawayFloor
	}
	w := cold - RatedC*d.Tempco
	top := celsius + d.Rth*current*w
	junction := top / denominator
	warming := d.Rth * ((w+current*slope)*denominator + d.Tempco*top) / (denominator * denominator)
	return LEDPoint{
		Voltage:  cold + d.Tempco*(junction-RatedC),
		Slope:    slope + d.Tempco*warming,
		Junction: junction,
		Runaway:  runaway,
	}
}

// runawayFloor is how near 1 the heat's own feedback may come.
const runawayFloor = 1e-3

// Limit returns a junction voltage that a Newton step may take.
func (d *LED) Limit(next, last float64) float64 {
	nvt := d.Slope()
	if math.Abs(next-last) <= 2*nvt {
		return next // as limit would, without the logarithm of the critical voltage
	}
	return limit(next, last, nvt, nvt*math.Log(nvt/(math.Sqrt2*d.Is)))
}
