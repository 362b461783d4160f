package circuit

import "math"

// The edits of this file make a circuit what a fault makes of it. Each names
// how it is undone; a solution that Save kept before an edit belongs back only
// after that.

const (
	// ShortOhms is the resistance in ohms of a part that is shorted: solder and
	// leads.
	ShortOhms = 0.01
	// MeterOhms is the input resistance in ohms of a usual voltmeter, the one
	// path by which a node that nothing else holds comes to its reading.
	// Common practice, no source.
	MeterOhms = 10e6
)

// Bridge puts ohms between two nodes, until Unbridge; a circuit has one bridge.
// Between two held nodes it has nothing to change.
func (c *Circuit) Bridge(a, b Node, ohms float64) {
	if c.bridge < 0 {
		c.bridge = c.Resistor(a, b, ohms)
	}
	c.resistors[c.bridge] = resistor{a: a, b: b, ohms: ohms}
}

// Unbridge takes the bridge out.
func (c *Circuit) Unbridge() {
	if c.bridge >= 0 {
		c.resistors[c.bridge].off = true
	}
}

// TakeLED takes one LED of a stack's type k out and puts ohms in its place,
// above 0, until PutLED.
func (c *Circuit) TakeLED(id LEDsID, k int, ohms float64) {
	s := &c.stacks[id]
	s.count[k]--
	s.instead = ohms
	s.empty = true
	for _, n := range s.count {
		s.empty = s.empty && n == 0
	}
}

// PutLED puts the LED of type k back that TakeLED took.
func (c *Circuit) PutLED(id LEDsID, k int) {
	s := &c.stacks[id]
	s.count[k]++
	s.instead, s.empty = 0, false
}

// InsteadVoltage returns the voltage in volts across what TakeLED put in an
// LED's place.
func (c *Circuit) InsteadVoltage(id LEDsID) float64 {
	return c.stacks[id].current * c.stacks[id].instead
}

// Lead is one of a transistor's three.
type Lead int

// The leads.
const (
	Collector Lead = iota
	Base
	Emitter
)

func (q *bjt) lead(l Lead) *Node {
	switch l {
	case Collector:
		return &q.c
	case Base:
		return &q.b
	}
	return &q.e
}

// CutLead leaves one of a transistor's leads hanging, until MendBJT. Without
// its base it takes no part at all: what then leaks through it is far below a
// microampere.
func (c *Circuit) CutLead(id BJTID, l Lead) {
	q := &c.bjts[id]
	if l == Base {
		q.off, q.ic, q.ib, q.t = true, 0, 0, c.air
		return
	}
	if c.loose == None {
		c.loose = c.Node("loose lead")
	}
	c.Release(c.loose, c.v[*q.lead(l)])
	*q.lead(l) = c.loose
}

// BridgeLeads shorts two leads of a transistor, until MendBJT. Where both stand
// at held nodes, so that no resistance moves them, ok is false.
func (c *Circuit) BridgeLeads(id BJTID, a, b Lead) (ok bool) {
	q := &c.bjts[id]
	from, to := *q.lead(a), *q.lead(b)
	if c.held[from] && c.held[to] {
		return false
	}
	c.Bridge(from, to, ShortOhms)
	return true
}

// SwapLeads fits a transistor with collector and emitter the wrong way round,
// until MendBJT.
func (c *Circuit) SwapLeads(id BJTID) {
	q := &c.bjts[id]
	q.c, q.e = q.e, q.c
}

// MendBJT undoes what CutLead, BridgeLeads and SwapLeads did.
func (c *Circuit) MendBJT(id BJTID) {
	q := &c.bjts[id]
	q.c, q.b, q.e = q.wired[0], q.wired[1], q.wired[2]
	if q.off {
		q.off = false
		q.start(c.air)
	}
	if c.loose != None {
		c.Hold(c.loose, 0)
	}
	c.Unbridge()
}

// BreaksDown gives a transistor's emitter-base junction a reverse breakdown in
// volts, above 0.
func (c *Circuit) BreaksDown(id BJTID, volts float64) {
	q := &c.bjts[id]
	q.typical.Bve, q.par.Bve, q.fresh = volts, volts, false
}

// OneWay makes a reference what a real one is: it takes current and gives
// none, so that a node from which more is drawn than its bias brings falls.
func (c *Circuit) OneWay(id ClampID) { c.clamps[id].oneWay = true }

// CutClamp takes a reference out or puts it back.
func (c *Circuit) CutClamp(id ClampID, out bool) { c.clamps[id].off = out }

// BridgeClamp shorts a reference, until Unbridge.
func (c *Circuit) BridgeClamp(id ClampID) { c.Bridge(c.clamps[id].n, Ground, ShortOhms) }

// ClampVolts returns a reference's voltage at 25 °C in volts.
func (c *Circuit) ClampVolts(id ClampID) float64 { return c.clamps[id].volts }

// CutFET takes a MOSFET out or puts it back.
func (c *Circuit) CutFET(id FETID, out bool) { c.fets[id].off = out }

// BridgeFET shorts a MOSFET from drain to source, until Unbridge.
func (c *Circuit) BridgeFET(id FETID) { c.Bridge(c.fets[id].d, c.fets[id].s, ShortOhms) }

// StickAmp leaves an op-amp's output at the high or the low end of its reach,
// until FreeAmp.
func (c *Circuit) StickAmp(id AmpID, high bool) {
	a := &c.amps[id]
	a.stuck, a.mode = true, shut
	if high {
		a.mode = starved
	}
}

// FreeAmp lets an op-amp work again.
func (c *Circuit) FreeAmp(id AmpID) { c.amps[id].stuck, c.amps[id].mode = false, holding }

// StickRegulator opens a regulator, or shorts it from input to output, until
// FreeRegulator. Its own limit of current and heat is not counted.
func (c *Circuit) StickRegulator(id RegulatorID, shorted bool) {
	r := &c.regulators[id]
	r.stuck, r.mode = true, shut
	if shorted {
		r.mode = bypassed
	}
}

// FreeRegulator lets a regulator work again.
func (c *Circuit) FreeRegulator(id RegulatorID) {
	c.regulators[id].stuck, c.regulators[id].mode = false, holding
}

// Regulator's and module's values, for an edit to come back to.

// RegulatorValues returns a regulator's reference in volts, adjustment current
// in amperes and set resistor in ohms.
func (c *Circuit) RegulatorValues(id RegulatorID) (reference, adjust, ohms float64) {
	r := &c.regulators[id]
	return r.reference, r.adjust, r.ohms
}

// SourceAmperes returns a module's current in amperes.
func (c *Circuit) SourceAmperes(id SourceID) float64 { return c.sources[id].amperes }

// BridgeSource shorts a module from input to output, until Unbridge.
func (c *Circuit) BridgeSource(id SourceID) { c.Bridge(c.sources[id].n, Ground, ShortOhms) }

// Burnt says whether a part that heats itself is beyond survival at the last
// solution.
func (c *Circuit) Burnt() bool {
	for i := range c.bjts {
		if c.bjts[i].t > runawayC && !c.bjts[i].off {
			return true
		}
	}
	for i := range c.stacks {
		s := &c.stacks[i]
		if s.off {
			continue
		}
		for k, t := range s.junction {
			if !(math.Abs(t) < runawayC) && s.count[k] > 0 {
				return true
			}
		}
	}
	return false
}

// BJTVolts returns a transistor's collector-emitter and base-emitter voltage
// in volts, in its own sense: positive when it conducts forward.
func (c *Circuit) BJTVolts(id BJTID) (vce, vbe float64) {
	q := &c.bjts[id]
	if q.off {
		return 0, 0
	}
	return q.sign * (c.v[q.c] - c.v[q.e]), q.sign * (c.v[q.b] - c.v[q.e])
}

// FETVolts returns a MOSFET's drain-source voltage in volts and FETCurrent its
// drain current in amperes.
func (c *Circuit) FETVolts(id FETID) float64 { return c.v[c.fets[id].d] - c.v[c.fets[id].s] }

// FETCurrent returns a MOSFET's drain current in amperes.
func (c *Circuit) FETCurrent(id FETID) float64 { return c.fets[id].current }

// RegulatorVolts returns the voltage in volts from a regulator's input to its
// output.
func (c *Circuit) RegulatorVolts(id RegulatorID) float64 {
	r := &c.regulators[id]
	return c.v[r.in] - c.v[r.out]
}
