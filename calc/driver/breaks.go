package driver

import (
	"lanternbook/calc/circuit"
	"lanternbook/calc/fault"
)

// Kind says what kind of part a device is, as far as its faults go.
func (d Device) Kind() fault.Kind {
	switch d.kind {
	case isLED:
		return fault.LED
	case isBJT:
		return fault.Transistor
	case isReference:
		return fault.Reference
	case isFET:
		return fault.MOSFET
	case isAmp:
		return fault.Opamp
	case isRegulator:
		return fault.Regulator
	case isModule:
		return fault.Module
	default:
		return fault.Resistor
	}
}

// Break does to a device what a fault names: of LEDs alike, to one of them. It
// returns how to undo that; nil where the fault would change nothing, since it
// lies between two points that are held.
func (a *Board) Break(d Device, how fault.How) (mend func()) {
	switch d.kind {
	case isLED:
		return a.breakLED(d, how)
	case isBJT:
		return a.breakTransistor(circuit.BJTID(d.id), how)
	case isResistor:
		return a.breakResistor(circuit.ResistorID(d.id), how)
	case isSetResistor:
		return a.breakSetResistor(circuit.RegulatorID(d.id), how)
	case isReference:
		return a.breakReference(circuit.ClampID(d.id), how)
	}
	return a.breakBought(d, how)
}

// breakLED takes one LED out. An open one leaves the path of the meter that is
// put across it, and so does a reversed one: neither lets anything through that
// a small LED would show.
func (a *Board) breakLED(d Device, how fault.How) func() {
	c := a.Net
	switch how {
	case fault.Open, fault.Reversed:
		c.TakeLED(a.stack, d.id, circuit.MeterOhms)
	case fault.Shorted:
		c.TakeLED(a.stack, d.id, circuit.ShortOhms)
	default:
		return nil
	}
	return func() { c.PutLED(a.stack, d.id) }
}

func (a *Board) breakTransistor(id circuit.BJTID, how fault.How) func() {
	c := a.Net
	ok := true
	switch how {
	case fault.CollectorOpen:
		c.CutLead(id, circuit.Collector)
	case fault.BaseOpen:
		c.CutLead(id, circuit.Base)
	case fault.EmitterOpen:
		c.CutLead(id, circuit.Emitter)
	case fault.CollectorEmitterShort:
		ok = c.BridgeLeads(id, circuit.Collector, circuit.Emitter)
	case fault.BaseEmitterShort:
		ok = c.BridgeLeads(id, circuit.Base, circuit.Emitter)
	case fault.CollectorBaseShort:
		ok = c.BridgeLeads(id, circuit.Collector, circuit.Base)
	case fault.Swapped:
		c.SwapLeads(id)
	default:
		return nil
	}
	if !ok {
		return nil
	}
	return func() { c.MendBJT(id) }
}

// tenfold is by how much a resistor of the wrong value is off: one colour band.
const tenfold = 10

func (a *Board) breakResistor(id circuit.ResistorID, how fault.How) func() {
	c := a.Net
	ohms := c.Ohms(id)
	if how == fault.Open {
		c.Switch(id, false)
		return func() { c.Switch(id, true) }
	}
	wrong, ok := wrongOhms(ohms, how)
	if !ok {
		return nil
	}
	c.SetOhms(id, wrong)
	return func() { c.SetOhms(id, ohms) }
}

func wrongOhms(ohms float64, how fault.How) (wrong float64, ok bool) {
	switch how {
	case fault.Shorted:
		return min(ohms, circuit.ShortOhms), true
	case fault.TenTimes:
		return ohms * tenfold, true
	case fault.Tenth:
		return ohms / tenfold, true
	}
	return ohms, false
}

// breakSetResistor is breakResistor for the one that sets a regulator, which
// is part of it. An open one leaves the path of a meter across it.
func (a *Board) breakSetResistor(id circuit.RegulatorID, how fault.How) func() {
	c := a.Net
	reference, adjust, ohms := c.RegulatorValues(id)
	wrong, ok := wrongOhms(ohms, how)
	if how == fault.Open {
		wrong, ok = circuit.MeterOhms, true
	}
	if !ok {
		return nil
	}
	c.SetRegulator(id, reference, adjust, wrong)
	return func() { c.SetRegulator(id, reference, adjust, ohms) }
}

// reversedVolts is what a Zener or shunt reference holds the wrong way round,
// a forward junction. Common practice, no source.
const reversedVolts = 0.65

func (a *Board) breakReference(id circuit.ClampID, how fault.How) func() {
	c := a.Net
	switch how {
	case fault.Open:
		c.CutClamp(id, true)
		return func() { c.CutClamp(id, false) }
	case fault.Shorted:
		c.BridgeClamp(id)
		return c.Unbridge
	case fault.Reversed:
		volts := c.ClampVolts(id)
		c.SetClamp(id, reversedVolts)
		return func() { c.SetClamp(id, volts) }
	}
	return nil
}

// breakBought is Break for MOSFETs, op-amps, regulators and modules.
func (a *Board) breakBought(d Device, how fault.How) func() {
	c := a.Net
	switch d.kind {
	case isFET:
		id := circuit.FETID(d.id)
		if how == fault.Shorted {
			c.BridgeFET(id)
			return c.Unbridge
		}
		c.CutFET(id, true)
		return func() { c.CutFET(id, false) }
	case isAmp:
		id := circuit.AmpID(d.id)
		c.StickAmp(id, how == fault.High)
		return func() { c.FreeAmp(id) }
	case isRegulator:
		id := circuit.RegulatorID(d.id)
		c.StickRegulator(id, how == fault.Shorted)
		return func() { c.FreeRegulator(id) }
	case isModule:
		id := circuit.SourceID(d.id)
		if how == fault.Shorted {
			c.BridgeSource(id)
			return c.Unbridge
		}
		amperes := c.SourceAmperes(id)
		c.SetSource(id, 0)
		return func() { c.SetSource(id, amperes) }
	}
	return nil
}

// BreakControl puts the voltage that sets the board's current wrong. It
// returns nil where the board has none of its own.
func (a *Board) BreakControl(how fault.How) (mend func()) {
	if a.Source == circuit.None {
		return nil
	}
	c, volts := a.Net, a.Net.Voltage(a.Source)
	switch how {
	case fault.Zero:
		c.Hold(a.Source, 0)
	case fault.Doubled:
		c.Hold(a.Source, 2*volts)
	default:
		return nil
	}
	return func() { c.Hold(a.Source, volts) }
}

// Usable makes the board ready for faults: a reference gives no current, and
// an emitter-base junction breaks down at what breakdown returns in volts for
// a part.
func (a *Board) Usable(breakdown func(part string) float64) {
	for _, d := range a.Devices {
		switch d.kind {
		case isReference:
			a.Net.OneWay(circuit.ClampID(d.id))
		case isBJT:
			a.Net.BreaksDown(circuit.BJTID(d.id), breakdown(d.Part))
		}
	}
}

// Meter puts a voltmeter on every point of the string that nothing may be left
// to hold, as it is when the point is read.
func (a *Assembly) Meter() {
	c := a.Net
	points := []circuit.Node{a.Tail}
	if !a.HighSide {
		points = append(points, a.Base, a.Sense, a.Control)
	}
	for _, n := range points {
		if n != circuit.None && n != a.Rail {
			c.Resistor(n, circuit.Ground, circuit.MeterOhms)
		}
	}
}

// Meter puts a voltmeter on the rail.
func (r *Rail) Meter() { r.Net.Resistor(r.Out, circuit.Ground, circuit.MeterOhms) }

// FaultyLED returns the voltage in volts that is read across the LED that Break
// took out, its anode first.
func (a *Assembly) FaultyLED() float64 { return a.Net.InsteadVoltage(a.Stack) }

// Volts returns the voltage in volts across a transistor, MOSFET or regulator,
// from its upper to its lower end; 0 for any other part.
func (a *Board) Volts(d Device) float64 {
	switch d.kind {
	case isBJT:
		vce, _ := a.Net.BJTVolts(circuit.BJTID(d.id))
		return vce
	case isFET:
		return a.Net.FETVolts(circuit.FETID(d.id))
	case isRegulator:
		return a.Net.RegulatorVolts(circuit.RegulatorID(d.id))
	}
	return 0
}

// EmitterBaseVolts returns how far in volts a transistor's emitter-base
// junction is in reverse.
func (a *Board) EmitterBaseVolts(d Device) float64 {
	_, vbe := a.Net.BJTVolts(circuit.BJTID(d.id))
	return -vbe
}

// Amperes returns the current in amperes through an LED, a transistor's
// collector, a MOSFET or a regulator; 0 for any other part.
func (a *Board) Amperes(d Device) float64 {
	switch d.kind {
	case isLED:
		return a.Net.LEDCurrent(a.stack)
	case isBJT:
		return a.CollectorCurrent(d)
	case isFET:
		return a.Net.FETCurrent(circuit.FETID(d.id))
	case isRegulator:
		return a.Net.LEDCurrent(a.stack)
	}
	return 0
}
