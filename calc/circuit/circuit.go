package circuit

import (
	"math"

	"lanternbook/calc/device"
)

// Node is a point of the circuit. Ground is the return, at 0 V.
type Node int

// Ground is the return of every circuit; None stands for a node a circuit does
// not have.
const (
	Ground Node = 0
	None   Node = -1
)

// Circuit is a netlist and its last solution. It is made once and then solved
// again and again as values change: nothing is allocated after the first
// Solve. It is not safe for use by several goroutines at once.
type Circuit struct {
	air float64 // [°C]

	name []string
	held []bool    // node stands at a given voltage
	v    []float64 // [V] node voltages, the solution
	load []float64 // [A] given current drawn from a node to the return

	resistors []resistor
	stacks    []ledStack
	bjts      []bjt
	clamps    []clamp

	fets       []fet
	amps       []amp
	regulators []regulator
	sources    []source

	bridge ResistorID // the short of Bridge, −1 until the first
	loose  Node       // where a cut lead hangs, None until the first

	// Work space of a solve; see newton.go.
	row     []int // node of each unknown
	col     []int // unknown of each node, −1 for a held one
	g       []float64
	sum     []float64
	lu, rhs []float64
	probe   []float64
	perm    []int
	gmin    float64
	search  Unsolved
	last    []float64 // state of the solution before; see Advance
	ready   bool
}

type resistor struct {
	a, b Node
	ohms float64
	off  bool
}

// New returns a circuit that has only its return, in air of 25 °C.
func New() *Circuit {
	c := &Circuit{air: device.RatedC, bridge: -1, loose: None}
	c.addNode("return", true)
	return c
}

func (c *Circuit) addNode(name string, held bool) Node {
	c.name = append(c.name, name)
	c.held = append(c.held, held)
	c.v = append(c.v, 0)
	c.load = append(c.load, 0)
	c.ready = false
	return Node(len(c.name) - 1)
}

// Node adds a node whose voltage is to be found.
func (c *Circuit) Node(name string) Node { return c.addNode(name, false) }

// Held adds a node that stands at a voltage in volts.
func (c *Circuit) Held(name string, volts float64) Node {
	n := c.addNode(name, true)
	c.v[n] = volts
	return n
}

// Hold fixes a node at a voltage in volts from now on.
func (c *Circuit) Hold(n Node, volts float64) {
	if !c.held[n] {
		c.held[n] = true
		c.ready = false
	}
	c.v[n] = volts
}

// Release lets a node's voltage be found; guess in volts is where to start.
func (c *Circuit) Release(n Node, guess float64) {
	if c.held[n] {
		c.held[n] = false
		c.ready = false
	}
	c.v[n] = guess
}

// Guess sets where the search for a node's voltage starts, in volts.
func (c *Circuit) Guess(n Node, volts float64) {
	if !c.held[n] {
		c.v[n] = volts
	}
}

// Draw sets a given current in amperes that flows from the node to the return.
func (c *Circuit) Draw(n Node, amperes float64) { c.load[n] = amperes }

// SetAir sets the temperature in °C of the air round every part.
func (c *Circuit) SetAir(celsius float64) { c.air = celsius }

// Air returns the temperature in °C of the air round every part.
func (c *Circuit) Air() float64 { return c.air }

// Voltage returns a node's voltage in volts at the last solution.
func (c *Circuit) Voltage(n Node) float64 { return c.v[n] }

// ResistorID names a resistor of its circuit.
type ResistorID int

// Resistor adds a resistance in ohms, above 0, between two nodes.
func (c *Circuit) Resistor(a, b Node, ohms float64) ResistorID {
	c.resistors = append(c.resistors, resistor{a: a, b: b, ohms: ohms})
	return ResistorID(len(c.resistors) - 1)
}

// SetOhms changes a resistance, in ohms above 0.
func (c *Circuit) SetOhms(id ResistorID, ohms float64) { c.resistors[id].ohms = ohms }

// Switch puts a resistor into the circuit or takes it out.
func (c *Circuit) Switch(id ResistorID, on bool) { c.resistors[id].off = !on }

// Ohms returns a resistance in ohms.
func (c *Circuit) Ohms(id ResistorID) float64 { return c.resistors[id].ohms }

// ResistorCurrent returns the current in amperes from a resistor's first node
// to its second.
func (c *Circuit) ResistorCurrent(id ResistorID) float64 {
	r := &c.resistors[id]
	if r.off {
		return 0
	}
	return (c.v[r.a] - c.v[r.b]) / r.ohms
}

// ResistorPower returns a resistor's dissipation in watts.
func (c *Circuit) ResistorPower(id ResistorID) float64 {
	r := &c.resistors[id]
	if r.off {
		return 0
	}
	d := c.v[r.a] - c.v[r.b]
	return d * d / r.ohms
}

// ClampID names a clamp of its circuit.
type ClampID int

// clamp holds its node at volts behind ohms: a Zener, a shunt reference or
// diodes as a straight line.
type clamp struct {
	n, feed      Node
	volts, ohms  float64
	current      float64
	conductance  float64
	tempco, rest float64
	oneWay, off  bool
}

// Clamp adds a reference that holds a node at volts at 25 °C, with a slope
// resistance in ohms, moving by tempco in V/K with the air. It stands while
// the node feed, whence its bias comes, is above its voltage; below that it
// only keeps the node from rising. A negative ClampCurrent means that the node
// takes more than the bias brings: no real reference gives that, and the
// caller has to say so.
func (c *Circuit) Clamp(n, feed Node, volts, ohms, tempco float64) ClampID {
	c.clamps = append(c.clamps, clamp{n: n, feed: feed, volts: volts, ohms: math.Max(ohms, stiffest), tempco: tempco})
	return ClampID(len(c.clamps) - 1)
}

// stiffest is the slope in ohms that stands for an ideal reference: 10 mA move
// it by 1 µV.
const stiffest = 1e-4

// SetClamp changes a reference's voltage at 25 °C, in volts.
func (c *Circuit) SetClamp(id ClampID, volts float64) { c.clamps[id].volts = volts }

// ClampCurrent returns the current in amperes a reference takes.
func (c *Circuit) ClampCurrent(id ClampID) float64 { return c.clamps[id].current }

// ClampPower returns a reference's dissipation in watts.
func (c *Circuit) ClampPower(id ClampID) float64 {
	return c.clamps[id].current * c.v[c.clamps[id].n]
}

// LEDsID names a stack of LEDs in series.
type LEDsID int

// ledStack is LEDs in series between two nodes. Its own unknown is x, the
// inner voltage of the LED type with the least saturation current.
type ledStack struct {
	a, b     Node
	typical  []device.LED // as given
	leds     []device.LED // with the bins' shifts
	count    []float64
	volts    []float64 // [V] of one LED of each type, at the last solution
	junction []float64 // [°C]
	rth      []float64 // [K/W] as given
	lead     int
	x        float64
	current  float64
	off      bool
	limited  bool
	runaway  bool
	instead  float64 // [Ω] in the place of an LED that was taken out
	empty    bool    // it was the only one
	ieff, ge float64 // linearised current and conductance
	vab      float64
	dvdx     float64
	miss     float64
}

// LEDs adds LEDs in series from node a (anode) to node b, count[k] of leds[k].
func (c *Circuit) LEDs(a, b Node, leds []device.LED, count []int) LEDsID {
	s := ledStack{a: a, b: b, typical: append([]device.LED(nil), leds...), leds: append([]device.LED(nil), leds...)}
	for _, n := range count {
		s.count = append(s.count, float64(n))
	}
	s.volts = make([]float64, len(leds))
	s.junction = make([]float64, len(leds))
	for k := range leds {
		s.rth = append(s.rth, leds[k].Rth)
	}
	s.choose()
	s.start()
	c.stacks = append(c.stacks, s)
	return LEDsID(len(c.stacks) - 1)
}

func (s *ledStack) choose() {
	s.lead = 0
	for k := range s.leds {
		if s.leds[k].Is < s.leds[s.lead].Is {
			s.lead = k
		}
	}
}

func (s *ledStack) start() {
	lead := &s.leds[s.lead]
	s.x = lead.Slope() * math.Log1p(startCurrent/lead.Is)
}

// startCurrent is the LED current in amperes that a cold solve starts from.
const startCurrent = 5e-3

// ShiftLED moves the forward voltage of one type of a stack by volts from its
// typical curve, as another bin of it.
func (c *Circuit) ShiftLED(id LEDsID, k int, volts float64) {
	s := &c.stacks[id]
	current := s.leds[s.lead].Is * math.Expm1(s.x/s.leds[s.lead].Slope())
	s.leds[k] = s.typical[k].Shifted(volts)
	s.choose()
	lead := &s.leds[s.lead]
	if current > 0 {
		s.x = lead.Slope() * math.Log1p(current/lead.Is)
	}
}

// Detach takes a stack of LEDs out of the circuit, Attach puts it back.
func (c *Circuit) Detach(id LEDsID) { c.stacks[id].off = true }

// Attach puts a detached stack of LEDs back.
func (c *Circuit) Attach(id LEDsID) { c.stacks[id].off = false }

// LEDCurrent returns a stack's current in amperes.
func (c *Circuit) LEDCurrent(id LEDsID) float64 { return c.stacks[id].current }

// LEDVoltage returns the voltage across one LED of a stack's type k, in volts.
func (c *Circuit) LEDVoltage(id LEDsID, k int) float64 { return c.stacks[id].volts[k] }

// LEDJunction returns the junction temperature of a stack's type k in °C.
func (c *Circuit) LEDJunction(id LEDsID, k int) float64 { return c.stacks[id].junction[k] }

// StackVoltage returns what a stack of LEDs would stand at, in volts, if it
// carried a current in amperes in the present air.
func (c *Circuit) StackVoltage(id LEDsID, current float64) float64 {
	s := &c.stacks[id]
	total := 0.0
	for k := range s.leds {
		total += s.count[k] * s.leds[k].Working(current, c.air).Voltage
	}
	return total
}

// LEDVoltageAt returns what one LED of a stack's type k would stand at, in
// volts, at a current in amperes in the present air.
func (c *Circuit) LEDVoltageAt(id LEDsID, k int, current float64) float64 {
	return c.stacks[id].leds[k].Working(current, c.air).Voltage
}

// Isothermal keeps every part at the air's temperature from now on, as if it
// gave off no heat.
func (c *Circuit) Isothermal() { c.heat(0) }

// Warm lets every part heat itself again.
func (c *Circuit) Warm() { c.heat(1) }

func (c *Circuit) heat(share float64) {
	for i := range c.bjts {
		c.bjts[i].rth = share * c.bjts[i].given
	}
	for i := range c.stacks {
		s := &c.stacks[i]
		for k := range s.leds {
			s.leds[k].Rth, s.typical[k].Rth = share*s.rth[k], share*s.rth[k]
		}
	}
}

// BJTID names a transistor of its circuit.
type BJTID int

// bjt is a transistor with its inner junction voltages and its temperature as
// unknowns of its own.
type bjt struct {
	c, b, e  Node
	sign     float64
	typical  device.BJT
	par      device.BJT
	at       device.BJTAt
	fresh    bool // at belongs to t and par
	rth      float64
	given    float64 // rth as given
	wired    [3]Node // c, b, e as given
	off      bool    // takes no part
	vbe, vbc float64
	t        float64
	limited  bool

	ic, ib float64 // terminal currents, NPN sense, at the last solution

	// The condensation of the last step: u = u0 + du0 + m·Δ(vbe, vbc).
	du0        [3]float64
	m          [3][2]float64
	i0         [2]float64 // ic, ib after du0
	gi         [2][2]float64
	tvbe, tvbc float64
}

// BJT adds a transistor with a thermal resistance to the air in K/W; 0 keeps it
// at the air's temperature. A PNP has the same parameters, all positive.
func (c *Circuit) BJT(collector, base, emitter Node, par device.BJT, pnp bool, rth float64) BJTID {
	sign := 1.0
	if pnp {
		sign = -1
	}
	q := bjt{c: collector, b: base, e: emitter, sign: sign, typical: par, par: par, rth: rth, given: rth, wired: [3]Node{collector, base, emitter}}
	q.start(c.air)
	c.bjts = append(c.bjts, q)
	return BJTID(len(c.bjts) - 1)
}

func (q *bjt) start(air float64) {
	q.vbe, q.vbc, q.t, q.fresh = 0.62, -1, air, false
}

// Spread sets a transistor off its typical: its gain times gain, its
// base-emitter voltage moved by vbe volts at every current.
func (c *Circuit) Spread(id BJTID, gain, vbe float64) {
	q := &c.bjts[id]
	q.par.Bf = q.typical.Bf * gain
	q.par.Ise = q.typical.Ise / gain
	q.par.Is = q.typical.Is
	if vbe != 0 {
		vt := device.ThermalVoltage(device.NominalC) * q.typical.Nf
		shift := math.Exp(-vbe / vt)
		q.par.Is *= shift
		// The leakage follows its own slope, so that the gain stays.
		q.par.Ise *= math.Exp(-vbe / (device.ThermalVoltage(device.NominalC) * q.typical.Ne))
	}
	q.fresh = false
}

// CollectorCurrent returns the current in amperes through a transistor's
// collector in its own sense, positive when it conducts forward.
func (c *Circuit) CollectorCurrent(id BJTID) float64 { return c.bjts[id].ic }

// BaseCurrent is CollectorCurrent for the base.
func (c *Circuit) BaseCurrent(id BJTID) float64 { return c.bjts[id].ib }

// BJTPower returns a transistor's dissipation in watts.
func (c *Circuit) BJTPower(id BJTID) float64 {
	q := &c.bjts[id]
	vbe := q.sign * (c.v[q.b] - c.v[q.e])
	vce := q.sign * (c.v[q.c] - c.v[q.e])
	return q.ib*vbe + q.ic*vce
}

// BJTJunction returns a transistor's junction temperature in °C.
func (c *Circuit) BJTJunction(id BJTID) float64 {
	if c.bjts[id].off {
		return c.air
	}
	return c.bjts[id].t
}
