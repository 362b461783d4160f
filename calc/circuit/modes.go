package circuit

import "math"

// The parts of this file work in modes: within one they are straight or nearly
// so, and Solve goes from mode to mode until each is the one its own solution
// asks for.

// mode is how such a part works.
type mode int

const (
	holding  mode = iota // doing what it is for
	starved              // at the end of what its supply lets it
	shut                 // at the other end
	bypassed             // a regulator shorted from input to output
)

// FETID names a MOSFET of its circuit.
type FETID int

// fet is an n-channel MOSFET by the square law, its heat without effect on it.
//
// Source: shichman-hodges (1968).
type fet struct {
	d, g, s   Node
	threshold float64
	gain      float64 // [A/V²]
	rth       float64
	current   float64
	gm, gds   float64
	off       bool
}

// FET adds a MOSFET with a threshold in volts, a transconductance factor in
// A/V² and a thermal resistance to the air in K/W.
func (c *Circuit) FET(drain, gate, source Node, threshold, gain, rth float64) FETID {
	c.fets = append(c.fets, fet{d: drain, g: gate, s: source, threshold: threshold, gain: gain, rth: rth})
	return FETID(len(c.fets) - 1)
}

// SetThreshold changes a MOSFET's threshold in volts.
func (c *Circuit) SetThreshold(id FETID, volts float64) { c.fets[id].threshold = volts }

// FETPower returns a MOSFET's dissipation in watts.
func (c *Circuit) FETPower(id FETID) float64 {
	f := &c.fets[id]
	return f.current * (c.v[f.d] - c.v[f.s])
}

// FETJunction returns a MOSFET's channel temperature in °C.
func (c *Circuit) FETJunction(id FETID) float64 { return c.air + c.fets[id].rth*c.FETPower(id) }

// step prepares the MOSFET's linear stand-in.
func (f *fet) step(vgs, vds float64) {
	over := vgs - f.threshold
	switch {
	case over <= 0 || f.off:
		f.gm, f.gds = dark, dark
		f.current = dark * vds
	case vds < over:
		f.current = f.gain * (over*vds - vds*vds/2)
		f.gm = f.gain * vds
		f.gds = f.gain * (over - vds)
	default:
		f.current = f.gain / 2 * over * over
		f.gm = f.gain * over
		f.gds = 0
	}
	f.gds += dark
}

// AmpID names an op-amp of its circuit.
type AmpID int

// amp is an op-amp without input current that brings its inverting input to
// the other, moved by its offset, while its output stays within what its
// supply leaves it.
type amp struct {
	plus, minus, out, supply Node
	offset, low, high        float64
	mode                     mode
	stuck                    bool // in its mode
	failed                   int  // how often it could not hold in this search
}

// Amp adds an op-amp on a supply node; its output, which must drive nothing
// but a gate, reaches from low above the return to high below the supply, all
// in volts.
func (c *Circuit) Amp(plus, minus, out, supply Node, offset, low, high float64) AmpID {
	c.amps = append(c.amps, amp{plus: plus, minus: minus, out: out, supply: supply, offset: offset, low: low, high: high})
	return AmpID(len(c.amps) - 1)
}

// SetOffset changes an op-amp's offset voltage in volts.
func (c *Circuit) SetOffset(id AmpID, volts float64) { c.amps[id].offset = volts }

// AmpHolds says whether an op-amp is within its output's reach.
func (c *Circuit) AmpHolds(id AmpID) bool { return c.amps[id].mode == holding }

func (c *Circuit) stepAmp(a *amp) {
	out := int(a.out)
	c.clearRow(out)
	switch a.mode {
	case holding:
		c.sum[out] = c.v[a.minus] - c.v[a.plus] - a.offset
		c.addTo(out, a.minus, 1)
		c.addTo(out, a.plus, -1)
	case starved:
		c.sum[out] = c.v[a.out] - c.v[a.supply] + a.high
		c.addTo(out, a.out, 1)
		c.addTo(out, a.supply, -1)
	default:
		c.sum[out] = c.v[a.out] - a.low
		c.addTo(out, a.out, 1)
	}
}

// check returns the mode that the solution asks for.
func (a *amp) check(c *Circuit) mode {
	high := math.Max(c.v[a.supply]-a.high, a.low)
	miss := c.v[a.plus] + a.offset - c.v[a.minus]
	if a.stuck {
		return a.mode
	}
	switch a.mode {
	case holding:
		if c.v[a.out] > high+modeRest {
			return starved
		}
		if c.v[a.out] < a.low-modeRest {
			return shut
		}
	case starved:
		if miss < -modeRest && a.failed > 1 {
			return shut // nothing it does brings its inputs together
		}
		if miss < -modeRest {
			return holding
		}
	case shut:
		if miss > modeRest {
			return holding
		}
	}
	return a.mode
}

// RegulatorID names a regulator of its circuit.
type RegulatorID int

// regulator is an adjustable three-terminal regulator with its set resistor
// from output to adjustment, which stands on the return: a current source. A
// series circuit does not care which way round it is, so it serves above the
// LEDs as well.
type regulator struct {
	in, out           Node
	reference, adjust float64 // [V], [A]
	ohms              float64
	dropout           [][2]float64 // [A, V], rising in current
	rth               float64
	mode              mode
	stuck             bool // in its mode
}

// Regulator adds a regulator with its reference in volts, its adjustment
// current in amperes, its set resistor in ohms, its dropout against current as
// pairs [A, V] and its thermal resistance to the air in K/W.
func (c *Circuit) Regulator(in, out Node, reference, adjust, ohms float64, dropout [][2]float64, rth float64) RegulatorID {
	c.regulators = append(c.regulators, regulator{in: in, out: out, reference: reference, adjust: adjust, ohms: ohms, dropout: dropout, rth: rth})
	return RegulatorID(len(c.regulators) - 1)
}

// SetRegulator changes a regulator's reference in volts, adjustment current in
// amperes and set resistor in ohms.
func (c *Circuit) SetRegulator(id RegulatorID, reference, adjust, ohms float64) {
	r := &c.regulators[id]
	r.reference, r.adjust, r.ohms = reference, adjust, ohms
}

// RegulatorPower returns a regulator's own dissipation in watts, SetPower that
// of its set resistor.
func (c *Circuit) RegulatorPower(id RegulatorID) float64 {
	r := &c.regulators[id]
	given, _ := r.given(c.v[r.in])
	return c.v[r.out]/r.ohms*(c.v[r.in]-c.v[r.out]) + given*c.v[r.in]
}

// SetPower returns the dissipation of a regulator's set resistor in watts.
func (c *Circuit) SetPower(id RegulatorID) float64 {
	r := &c.regulators[id]
	return c.v[r.out] * c.v[r.out] / r.ohms
}

// RegulatorJunction returns a regulator's junction temperature in °C.
func (c *Circuit) RegulatorJunction(id RegulatorID) float64 {
	return c.air + c.regulators[id].rth*c.RegulatorPower(id)
}

// RegulatorDropout returns the least voltage across a regulator, input to
// output, at a current in amperes.
func (c *Circuit) RegulatorDropout(id RegulatorID, current float64) float64 {
	volts, _ := c.regulators[id].dropoutAt(current)
	return volts
}

// given returns the adjustment current in amperes and its slope in siemens: all
// of it once the input is above the dropout, in proportion below.
func (r *regulator) given(in float64) (current, slope float64) {
	switch {
	case r.mode != shut:
		return r.adjust, 0
	case r.stuck:
		return 0, 0
	}
	least, _ := r.dropoutAt(0)
	slope = r.adjust / math.Max(least, leastDropout)
	return slope * in, slope
}

func (r *regulator) dropoutAt(current float64) (volts, slope float64) {
	d := r.dropout
	if len(d) == 1 || current <= d[0][0] {
		return d[0][1], 0
	}
	k := 0
	for k < len(d)-2 && current > d[k+1][0] {
		k++
	}
	slope = (d[k+1][1] - d[k][1]) / (d[k+1][0] - d[k][0])
	return d[k][1] + slope*(current-d[k][0]), slope
}

func (c *Circuit) stepRegulator(r *regulator) {
	out := int(r.out)
	c.clearRow(out)
	through := c.v[r.out] / r.ohms
	given, slope := r.given(c.v[r.in])
	c.sum[r.in] += through + given
	c.addTo(int(r.in), r.out, 1/r.ohms)
	c.addTo(int(r.in), r.in, slope)
	switch r.mode {
	case holding:
		c.sum[out] = c.v[r.out] - r.reference
		c.addTo(out, r.out, 1)
	case starved:
		volts, slope := r.dropoutAt(through)
		c.sum[out] = c.v[r.out] + volts - c.v[r.in]
		c.addTo(out, r.out, 1+slope/r.ohms)
		c.addTo(out, r.in, -1)
	case bypassed:
		c.sum[out] = c.v[r.out] - c.v[r.in]
		c.addTo(out, r.out, 1)
		c.addTo(out, r.in, -1)
	default:
		c.sum[out] = c.v[r.out]
		c.addTo(out, r.out, 1)
	}
}

func (r *regulator) check(c *Circuit) mode {
	through := c.v[r.out] / r.ohms
	least, _ := r.dropoutAt(through)
	if r.stuck {
		return r.mode
	}
	switch r.mode {
	case holding:
		if c.v[r.in]-c.v[r.out] < least-modeRest {
			return starved
		}
	case starved:
		if c.v[r.out] > r.reference+modeRest {
			return holding
		}
		if c.v[r.out] < -modeRest {
			return shut
		}
	case shut:
		if c.v[r.in] > least+modeRest {
			return starved
		}
	}
	return r.mode
}

// SourceID names a bought current source of its circuit.
type SourceID int

// source is a bought constant-current module from a node to the return: its
// current while it has its dropout, a resistance below.
type source struct {
	n        Node
	amperes  float64
	dropout  float64
	mode     mode
	current  float64
	conducts float64
}

// Source adds a module with its current in amperes and its dropout in volts.
func (c *Circuit) Source(n Node, amperes, dropout float64) SourceID {
	c.sources = append(c.sources, source{n: n, amperes: amperes, dropout: math.Max(dropout, leastDropout)})
	return SourceID(len(c.sources) - 1)
}

// SetSource changes a module's current in amperes.
func (c *Circuit) SetSource(id SourceID, amperes float64) { c.sources[id].amperes = amperes }

// SourcePower returns what a module takes of the string's own volts in watts.
func (c *Circuit) SourcePower(id SourceID) float64 {
	s := &c.sources[id]
	return s.current * c.v[s.n]
}

func (c *Circuit) stepSource(s *source) {
	s.current, s.conducts = s.amperes, dark
	if s.mode != holding {
		s.conducts = s.amperes / s.dropout
		s.current = s.conducts * c.v[s.n]
	}
	c.sum[s.n] += s.current
	c.addTo(int(s.n), s.n, s.conducts)
}

func (s *source) check(c *Circuit) mode {
	switch {
	case s.mode == holding && c.v[s.n] < s.dropout-modeRest:
		return starved
	case s.mode == starved && c.v[s.n] > s.dropout+modeRest:
		return holding
	}
	return s.mode
}

const (
	// modeRest is by how many volts a solution must ask for another mode.
	modeRest = 1e-7
	// mostModes is how often modes are changed before the search is given up.
	mostModes = 24
	// leastDropout keeps a module's resistance below its dropout finite.
	leastDropout = 1e-3
)

// modal says whether the circuit has parts that work in modes.
func (c *Circuit) modal() bool {
	return len(c.amps)+len(c.regulators)+len(c.sources) > 0
}

// remode moves every such part to the mode its solution asks for and says
// whether any changed.
func (c *Circuit) remode() bool {
	changed := false
	for i := range c.amps {
		next := c.amps[i].check(c)
		changed = changed || next != c.amps[i].mode
		c.amps[i].mode = next
	}
	for i := range c.regulators {
		next := c.regulators[i].check(c)
		changed = changed || next != c.regulators[i].mode
		c.regulators[i].mode = next
	}
	for i := range c.sources {
		next := c.sources[i].check(c)
		changed = changed || next != c.sources[i].mode
		c.sources[i].mode = next
	}
	return changed
}

// starve puts every op-amp that holds to the end of its reach, after a search
// without a solution: there may be none in which it holds. It says whether
// there was any.
func (c *Circuit) starve() bool {
	any := false
	for i := range c.amps {
		if c.amps[i].mode == holding && !c.amps[i].stuck {
			c.amps[i].mode = starved
			c.amps[i].failed++
			any = true
		}
	}
	return any
}

// assembleModal adds the parts of this file; those that own a node's row come
// last, since they replace it.
func (c *Circuit) assembleModal() {
	for i := range c.fets {
		f := &c.fets[i]
		vgs, vds := c.v[f.g]-c.v[f.s], c.v[f.d]-c.v[f.s]
		f.step(vgs, vds)
		c.sum[f.d] += f.current
		c.sum[f.s] -= f.current
		for _, row := range []struct {
			n    Node
			sign float64
		}{{f.d, 1}, {f.s, -1}} {
			c.addTo(int(row.n), f.g, row.sign*f.gm)
			c.addTo(int(row.n), f.d, row.sign*f.gds)
			c.addTo(int(row.n), f.s, -row.sign*(f.gm+f.gds))
		}
	}
	for i := range c.sources {
		c.stepSource(&c.sources[i])
	}
	for i := range c.regulators {
		c.stepRegulator(&c.regulators[i])
	}
	for i := range c.amps {
		c.stepAmp(&c.amps[i])
	}
}

func (c *Circuit) clearRow(row int) {
	nodes := len(c.name)
	clear(c.g[row*nodes : (row+1)*nodes])
	c.sum[row] = 0
}

func (c *Circuit) addTo(row int, col Node, slope float64) {
	c.g[row*len(c.name)+int(col)] += slope
}
