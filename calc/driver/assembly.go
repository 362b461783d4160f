package driver

import (
	"lanternbook/calc/circuit"
	"lanternbook/calc/device"
)

// Range is a value with its limits; Typ lies between Min and Max.
type Range struct {
	Min, Typ, Max float64 // in the unit of the field
}

// LED is Count LEDs of one part in series.
type LED struct {
	Part  string
	Count int
	Model device.LED
	Shift Range // [V] of one LED's forward voltage off its typical curve
}

// Transistor is a transistor with how far its kind may be off.
type Transistor struct {
	Part  string
	Model device.BJT
	Rth   float64 // [K/W] junction to air; 0 stays at the air's temperature
	Gain  Range   // [1] as a multiple of the model's
	VBE   Range   // [V] off the model's
}

// Resistance is a resistor's value and tolerance.
type Resistance struct {
	Ohms      float64 // [Ω]
	Tolerance float64 // [1] either way
}

// Reference is what holds a base; see circuit.Clamp.
type Reference struct {
	Volts  Range   // [V] at 25 °C
	Tempco float64 // [V/K]
	Ohms   float64 // [Ω]
}

// Board is a circuit on its feed with its parts and the values that may be
// off: what a string and a base rail have in common.
type Board struct {
	Net     *circuit.Circuit
	Feed    circuit.Node // the positive end, held
	Devices []Device
	Knobs   []Knob

	// Source is the node that the control voltage holds; circuit.None without.
	Source circuit.Node

	stack    circuit.LEDsID
	tail     circuit.Node
	start    func(feed float64)
	setPot   func(upper, lower float64)
	setVolts func(typ float64)
	upstream circuit.Node
	cable    circuit.ResistorID
	behind   bool
	extra    float64 // [A] drawn at the feed besides

	quiescent float64 // [A] that an op-amp takes from the feed
	switching float64 // [1] efficiency of a switching module; 0 is linear
}

// Assembly is one string as a circuit, ready to solve: hold Feed, set the air,
// turn the knobs, call Net.Solve.
type Assembly struct {
	Board
	Tail circuit.Node // lower end of the LEDs
	// Control, Base and Sense are circuit.None where the driver has none, and
	// so is Rail, the held node of a string on a base rail.
	Control, Base, Sense, Rail circuit.Node

	Stack circuit.LEDsID
	LEDs  []LED

	// Holder is the index in Devices of the part that holds the current, and
	// SenseAt that of the resistor which measures it.
	Holder, SenseAt int

	// Edge returns the voltage in volts at which the tail counts as fully held
	// at the last solution; nil for a resistor, which holds nothing.
	Edge func() float64
	// HighSide tells that the driver stands above the LEDs in the trade's
	// drawing: the circuit is the same in series either way.
	HighSide bool
	// Gate is a MOSFET's gate, circuit.None without, and High is how near in
	// volts what drives it comes to the feed.
	Gate circuit.Node
	High float64

	setOhms func(ohms float64)
}

// Knob is one value of a string that may be off.
type Knob struct {
	Name    string // "sense resistor", "white-2835 bin"
	Culprit Culprit
	Below   float64 // [1] share of its spread that lies below typical
	set     func(turn float64)
}

// Culprit names what kind of spread a knob is.
type Culprit string

// The culprits.
const (
	Bin       Culprit = "bin"       // an LED's forward voltage
	Gain      Culprit = "gain"      // a transistor's hFE
	Junction  Culprit = "VBE"       // a transistor's base-emitter voltage
	Tolerance Culprit = "tolerance" // a resistor
	Setting   Culprit = "setting"   // a control or reference voltage
)

// Turn sets a knob between its limits: −1 is the least, 0 typical, 1 the most.
func (k Knob) Turn(turn float64) { k.set(turn) }

// FeedAt holds the string's feed at a voltage in volts.
func (a *Board) FeedAt(volts float64) {
	if a.behind {
		a.Net.Switch(a.cable, false)
		a.behind, a.extra = false, 0
	}
	a.Net.Draw(a.Feed, a.quiescent)
	a.Net.Hold(a.Feed, volts)
}

// FeedBehind feeds the string through a resistance in ohms, above 0, from an
// ideal voltage in volts; extra in amperes is drawn at the feed besides.
func (a *Board) FeedBehind(volts, ohms, extra float64) {
	a.Net.Hold(a.upstream, volts)
	a.Net.SetOhms(a.cable, ohms)
	a.Net.Draw(a.Feed, extra+a.quiescent)
	a.extra = extra
	if !a.behind {
		a.Net.Switch(a.cable, true)
		a.Net.Release(a.Feed, a.Net.Voltage(a.Feed))
		a.behind = true
	}
}

// Draw returns what the string takes from its feed in amperes, without what is
// drawn there besides.
func (a *Board) Draw() float64 {
	if a.switching > 0 {
		return a.ledPower() / (a.switching * max(a.Net.Voltage(a.Feed), leastFeed))
	}
	if a.behind {
		return a.Net.ResistorCurrent(a.cable) - a.extra
	}
	return a.Net.HeldCurrent(a.Feed)
}

// Switching says whether the string takes from its feed another current than
// its LEDs carry.
func (a *Board) Switching() bool { return a.switching > 0 }

// leastFeed keeps a switching module's current finite on a feed of nothing, in
// volts.
const leastFeed = 1e-3

// State is a solution of the string to come back to.
type State struct {
	net    circuit.State
	behind bool
	extra  float64
}

// Save keeps the string's solution and feed, Load puts it back.
func (a *Board) Save(s *State) {
	a.Net.Save(&s.net)
	s.behind, s.extra = a.behind, a.extra
}

// Load puts the string back to what Save kept.
func (a *Board) Load(s *State) {
	a.Net.Load(&s.net)
	a.behind, a.extra = s.behind, s.extra
	a.Net.Switch(a.cable, a.behind)
}

// Typical sets every knob to typical.
func (a *Board) Typical() {
	for _, k := range a.Knobs {
		k.set(0)
	}
}

// Start sets where a cold solve of the string at a feed voltage starts.
func (a *Board) Start(feed float64) {
	a.Net.Restart()
	a.start(feed)
}

// Device is one part of the string as the report lists it.
type Device struct {
	Role string
	Part string // empty for a resistor
	kind deviceKind
	id   int
}

type deviceKind int

const (
	isLED deviceKind = iota
	isBJT
	isResistor
	isReference
	isFET
	isAmp
	isRegulator
	isSetResistor
	isModule
)

// Power returns the dissipation in watts of one device at the last solution;
// of LEDs alike, that of a single one.
func (a *Board) Power(d Device) float64 {
	switch d.kind {
	case isLED:
		return a.Net.LEDCurrent(a.stack) * a.Net.LEDVoltage(a.stack, d.id)
	case isBJT:
		return a.Net.BJTPower(circuit.BJTID(d.id))
	case isResistor:
		return a.Net.ResistorPower(circuit.ResistorID(d.id))
	case isReference:
		return a.Net.ClampPower(circuit.ClampID(d.id))
	case isFET:
		return a.Net.FETPower(circuit.FETID(d.id))
	case isAmp:
		return a.quiescent * a.Net.Voltage(a.Feed)
	case isRegulator:
		return a.Net.RegulatorPower(circuit.RegulatorID(d.id))
	case isSetResistor:
		return a.Net.SetPower(circuit.RegulatorID(d.id))
	default:
		return a.modulePower(circuit.SourceID(d.id))
	}
}

// Junction returns the device's junction temperature in °C at the last
// solution; what has no junction is at the air's.
func (a *Board) Junction(d Device) float64 {
	switch d.kind {
	case isLED:
		return a.Net.LEDJunction(a.stack, d.id)
	case isBJT:
		return a.Net.BJTJunction(circuit.BJTID(d.id))
	case isFET:
		return a.Net.FETJunction(circuit.FETID(d.id))
	case isRegulator:
		return a.Net.RegulatorJunction(circuit.RegulatorID(d.id))
	default:
		return a.Net.Air()
	}
}

// IsTransistor and IsResistor say what a device is.
func (d Device) IsTransistor() bool { return d.kind == isBJT }

// IsResistor says whether a device is a resistor.
func (d Device) IsResistor() bool { return d.kind == isResistor || d.kind == isSetResistor }

// Family is what a device is in the codes of checks: "transistor" (bipolar or
// MOSFET), "regulator", "module", or empty for what has no rating of its own.
func (d Device) Family() string {
	switch d.kind {
	case isBJT, isFET:
		return "transistor"
	case isRegulator:
		return "regulator"
	case isModule:
		return "module"
	default:
		return ""
	}
}

// IsLED says whether a device is an LED.
func (d Device) IsLED() bool { return d.kind == isLED }

// CollectorCurrent and BaseCurrent return a transistor's currents in amperes.
func (a *Board) CollectorCurrent(d Device) float64 {
	return a.Net.CollectorCurrent(circuit.BJTID(d.id))
}

// BaseCurrent returns a transistor's base current in amperes.
func (a *Board) BaseCurrent(d Device) float64 { return a.Net.BaseCurrent(circuit.BJTID(d.id)) }

// Current returns the current through a resistor in amperes.
func (a *Board) Current(d Device) float64 {
	return a.Net.ResistorCurrent(circuit.ResistorID(d.id))
}

// SetSense changes the resistor that measures the current, in ohms.
func (a *Assembly) SetSense(ohms float64) {
	if a.setOhms != nil {
		a.setOhms(ohms)
		return
	}
	a.Net.SetOhms(circuit.ResistorID(a.Devices[a.SenseAt].id), ohms)
}

// LEDVolts returns the voltage in volts across all LEDs of the string.
func (a *Assembly) LEDVolts() float64 {
	total := 0.0
	for k := range a.LEDs {
		total += float64(a.LEDs[k].Count) * a.Net.LEDVoltage(a.Stack, k)
	}
	return total
}

// newBoard makes the feed with its cable.
func newBoard() Board {
	c := circuit.New()
	a := Board{Net: c, Source: circuit.None}
	a.upstream = c.Held("upstream", 0)
	a.Feed = c.Held("feed", 0)
	a.cable = c.Resistor(a.upstream, a.Feed, 1)
	c.Switch(a.cable, false)
	return a
}

// newAssembly makes the feed, the tail and the LEDs between them.
func newAssembly(leds []LED) *Assembly {
	a := &Assembly{
		Board: newBoard(), LEDs: leds, Holder: -1, SenseAt: -1,
		Control: circuit.None, Base: circuit.None, Sense: circuit.None, Rail: circuit.None, Gate: circuit.None,
	}
	c := a.Net
	a.Tail = c.Node("tail")
	a.tail = a.Tail
	models := make([]device.LED, len(leds))
	counts := make([]int, len(leds))
	for k, led := range leds {
		models[k], counts[k] = led.Model, led.Count
	}
	a.Stack = c.LEDs(a.Feed, a.Tail, models, counts)
	a.stack = a.Stack
	for k, led := range leds {
		a.Devices = append(a.Devices, Device{Role: "led_" + led.Part, Part: led.Part, kind: isLED, id: k})
		if led.Shift.Min != 0 || led.Shift.Max != 0 {
			shift := led.Shift
			a.knob(led.Part+" bin", Bin, shift, func(turn float64) { c.ShiftLED(a.Stack, k, at(shift, turn)) })
		}
	}
	return a
}

// at returns a range's value at a turn from −1 to 1.
func at(r Range, turn float64) float64 {
	if turn < 0 {
		return r.Typ + (r.Typ-r.Min)*turn
	}
	return r.Typ + (r.Max-r.Typ)*turn
}

func (a *Board) knob(name string, culprit Culprit, of Range, set func(turn float64)) {
	below := (of.Typ - of.Min) / (of.Max - of.Min)
	a.Knobs = append(a.Knobs, Knob{Name: name, Culprit: culprit, Below: below, set: set})
}

// evenly is the range of what is off as far up as down.
var evenly = Range{Min: -1, Typ: 0, Max: 1}

// resistor adds a resistor and its tolerance.
func (a *Board) resistor(role string, from, to circuit.Node, r Resistance) int {
	id := a.Net.Resistor(from, to, r.Ohms)
	a.Devices = append(a.Devices, Device{Role: role, kind: isResistor, id: int(id)})
	if r.Tolerance > 0 {
		a.knob(roleName(role), Tolerance, evenly, func(turn float64) { a.Net.SetOhms(id, r.Ohms*(1+r.Tolerance*turn)) })
	}
	return len(a.Devices) - 1
}

// transistor adds a transistor and its spreads.
func (a *Board) transistor(role string, collector, base, emitter circuit.Node, q Transistor, pnp bool) int {
	id := a.Net.BJT(collector, base, emitter, q.Model, pnp, q.Rth)
	a.Devices = append(a.Devices, Device{Role: role, Part: q.Part, kind: isBJT, id: int(id)})
	gain, vbe := 1.0, 0.0
	if q.Gain.Min != q.Gain.Max {
		a.knob(roleName(role)+" gain", Gain, q.Gain, func(turn float64) {
			gain = at(q.Gain, turn)
			a.Net.Spread(id, gain, vbe)
		})
	}
	if q.VBE.Min != q.VBE.Max {
		a.knob(roleName(role)+" VBE", Junction, q.VBE, func(turn float64) {
			vbe = at(q.VBE, turn)
			a.Net.Spread(id, gain, vbe)
		})
	}
	return len(a.Devices) - 1
}

// reference adds a reference and its spread.
func (a *Board) reference(n circuit.Node, r Reference) {
	id := a.Net.Clamp(n, a.Feed, r.Volts.Typ, r.Ohms, r.Tempco)
	a.Devices = append(a.Devices, Device{Role: "reference", kind: isReference, id: int(id)})
	if r.Volts.Min != r.Volts.Max {
		a.knob("reference", Setting, r.Volts, func(turn float64) { a.Net.SetClamp(id, at(r.Volts, turn)) })
	}
}

// roleName returns a role in words: "sink_transistor" is "sink transistor".
func roleName(role string) string {
	b := []byte(role)
	for i := range b {
		if b[i] == '_' {
			b[i] = ' '
		}
	}
	return string(b)
}

// atBase is the edge of a transistor's active region: its collector at its
// base.
func (a *Assembly) atBase() float64 { return a.Net.Voltage(a.Base) }
