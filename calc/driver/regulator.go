package driver

// Regulated is a three-terminal regulator as a current source.
type Regulated struct {
	Part      string
	Reference Range        // [V] output to adjustment
	Adjust    Range        // [A]
	Dropout   [][2]float64 // [A, V] input to output, rising in current
	Rth       float64      // [K/W]
	Set       Resistance
}

// Regulator wires LEDs with an adjustable regulator whose set resistor makes
// it a current source. In the trade's drawing it stands above the LEDs; here
// it stands below, which in series is the same.
func Regulator(leds []LED, r Regulated) *Assembly {
	a := newAssembly(leds)
	c := a.Net
	a.HighSide = true
	out := c.Node("output")
	reference, adjust, ohms := r.Reference.Typ, r.Adjust.Typ, r.Set.Ohms
	id := c.Regulator(a.Tail, out, reference, adjust, ohms, r.Dropout, r.Rth)
	a.Devices = append(a.Devices,
		Device{Role: "regulator", Part: r.Part, kind: isRegulator, id: int(id)},
		Device{Role: "set_resistor", kind: isSetResistor, id: int(id)})
	a.Holder, a.SenseAt = len(a.Devices)-2, len(a.Devices)-1
	a.Sense = out
	set := func() { c.SetRegulator(id, reference, adjust, ohms) }
	a.setOhms = func(v float64) { ohms = v; set() }
	if r.Reference.Min != r.Reference.Max {
		a.knob("regulator reference", Setting, r.Reference, func(turn float64) { reference = at(r.Reference, turn); set() })
	}
	if r.Adjust.Min != r.Adjust.Max {
		a.knob("adjustment current", Setting, r.Adjust, func(turn float64) { adjust = at(r.Adjust, turn); set() })
	}
	if r.Set.Tolerance > 0 {
		a.knob("set resistor", Tolerance, evenly, func(turn float64) { ohms = r.Set.Ohms * (1 + r.Set.Tolerance*turn); set() })
	}
	a.Edge = func() float64 {
		current := reference/ohms + adjust
		return reference + c.RegulatorDropout(id, current) + openRegulator
	}
	a.start = func(feed float64) {
		c.Guess(out, reference)
		c.Guess(a.Tail, max(reference+2, feed/3))
	}
	return a
}

// openRegulator is how far in volts above its dropout a regulator counts as
// fully open.
const openRegulator = 0.5

// RegulatorCurrent returns the current in amperes of a regulator with a
// reference in volts, a set resistor in ohms and an adjustment current in
// amperes:
//
//	I = Vref/R + Iadj
//
// Source: franco, ex. 11.13.
func RegulatorCurrent(reference, ohms, adjust float64) float64 { return reference/ohms + adjust }
