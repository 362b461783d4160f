package calc

import (
	"errors"
	"math"

	"lanternbook/calc/circuit"
)

// Check solves a build and returns its whole report: every figure with its
// worst case, the findings worst first, and for those that are not a pass the
// edits that were tried and make them better.
//
// It returns Invalid where the build uses what cannot be solved, and *Unsolved
// where a string has no operating point that could be found. The build is
// taken as Read leaves it.
func Check(b Build) (Report, error) {
	r, p, err := examine(&b)
	if err != nil {
		return Report{}, err
	}
	p.remedy(&r)
	p.followSupply(&r)
	return r, nil
}

// examine is Check without the remedies.
func examine(b *Build) (Report, *plant, error) {
	p, err := compile(b)
	if err != nil {
		return Report{}, nil, err
	}
	r := Report{Format: ReportFormat, Strings: []StringReport{}, Rails: []RailReport{}, Runs: []RunReport{}}
	for _, l := range p.strings {
		l.turned = make([]float64, len(l.Knobs))
	}
	inside, err := p.operateOrCold()
	if err != nil {
		return Report{}, nil, err
	}
	p.typical(&r, inside)
	if err := p.worstCases(&r, inside); err != nil {
		return Report{}, nil, err
	}
	p.findings(&r)
	return r, p, nil
}

// operateOrCold solves the typical point. A string whose heat has no stable
// temperature is a finding; it is then solved as if it stayed cold, so that
// the rest of the report stands.
func (p *plant) operateOrCold() (inside float64, err error) {
	b := p.build
	for range len(p.strings) + 1 {
		inside, err = p.operate(b.Supply.Voltage.Typ, b.Ambient.Typ)
		if !isRunaway(err) {
			return inside, err
		}
		var u *Unsolved
		errors.As(err, &u)
		for _, l := range p.strings {
			if l.spec.Label == u.String {
				l.runaway = err
				l.Net.Isothermal()
				l.Net.Restart()
				l.started = false
			}
		}
	}
	return inside, err
}

func isRunaway(err error) bool {
	var u *circuit.Unsolved
	return errors.As(err, &u) && u.Runaway
}

// typical fills the report with the solution at everything typical.
func (p *plant) typical(r *Report, inside float64) {
	ledPower := 0.0
	for _, l := range p.strings {
		net := l.Net
		s := StringReport{Label: l.spec.Label, Quantity: l.spec.Quantity, Kind: l.spec.Driver.Kind}
		s.Voltages = Voltages{
			Feed: net.Voltage(l.Feed), Tail: net.Voltage(l.Tail),
			Control: l.point(l.Control), Base: l.point(l.Base), Sense: l.point(l.Sense), Gate: l.point(l.Gate),
		}
		if l.HighSide {
			top := net.Voltage(l.Feed) - net.Voltage(l.Tail)
			s.Voltages.Tail, s.Voltages.Sense, s.Voltages.Top = 0, nil, &top
		}
		ledPower += l.quantity * l.LEDVolts() * net.LEDCurrent(l.Stack)
		l.typ = make([]float64, l.figures())
		l.collect(l.typ)
		for k, d := range l.Devices {
			s.Devices = append(s.Devices, DeviceReport{
				Role: d.Role, Part: d.Part, Power: exactly(l.typ[figDevices+2*k]), Junction: exactly(l.typ[figDevices+2*k+1]),
				PowerLimit: p.powerLimit(l, k), JunctionLimit: p.junctionLimit(d.Part),
			})
		}
		r.Strings = append(r.Strings, s)
	}
	for _, rail := range p.rails {
		rail.typ = make([]float64, rail.figures())
		rail.collect(rail.typ)
		rr := RailReport{ID: rail.spec.ID, Voltage: exactly(rail.volts), Devices: []DeviceReport{}}
		for k, d := range rail.Devices {
			rr.Devices = append(rr.Devices, DeviceReport{
				Role: d.Role, Part: d.Part, Power: exactly(rail.typ[railDevices+2*k]), Junction: exactly(rail.typ[railDevices+2*k+1]),
				PowerLimit: p.railPowerLimit(rail, k), JunctionLimit: p.junctionLimit(d.Part),
			})
		}
		r.Rails = append(r.Rails, rr)
	}
	power := p.result.Total * p.build.Supply.Voltage.Typ
	r.Supply.Current, r.Supply.Power = exactly(p.result.Total), exactly(power)
	r.Supply.Inside = exactly(inside)
	if power > 0 {
		r.Supply.Efficiency = ledPower / power
	}
	for i := range p.build.Runs {
		k := p.runAt[p.build.Runs[i].ID]
		current := p.result.Current[k]
		drop := current * p.tree.Ohms[k]
		r.Runs = append(r.Runs, RunReport{ID: p.build.Runs[i].ID, Current: current, Drop: drop, Loss: drop * current})
	}
}

func exactly(v float64) Range { return Range{v, v, v} }

func (l *line) point(n circuit.Node) *float64 {
	if n == circuit.None {
		return nil
	}
	v := l.Net.Voltage(n)
	return &v
}

// worstCases fills in every figure's minimum and maximum. Where the can is
// sealed its air depends on the heat and the heat on its air, so that the
// second round starts from the heat of the first.
func (p *plant) worstCases(r *Report, inside float64) error {
	b := p.build
	air := b.Ambient
	rise := inside - b.Ambient.Typ
	air = Spread{Min: air.Min + rise, Typ: air.Typ + rise, Max: air.Max + rise}
	rounds := 1
	if _, _, sealed := p.sealed(); sealed {
		rounds = 3
	}
	for round := range rounds {
		reaches, err := p.reaches(air)
		if err != nil {
			return err
		}
		var least, most float64
		makes := catalogue{}
		for i, l := range p.strings {
			if l.worst, err = makes.extremes(p, l, reaches[i]); err != nil {
				return err
			}
			l.reach = reaches[i]
			least += l.quantity * l.worst.Min[figDraw] * l.worst.Min[figFeed]
			most += l.quantity * l.worst.Max[figDraw] * l.worst.Max[figFeed]
		}
		if round < rounds-1 {
			air = p.insideSpread(least, p.heatInside(), most)
		}
	}
	p.fill(r, air)
	return p.columns(r)
}

// fill writes the worst cases into the report.
func (p *plant) fill(r *Report, air Spread) {
	supply := &r.Supply
	supply.Inside = Range{Min: math.Min(air.Min, supply.Inside.Typ), Typ: supply.Inside.Typ, Max: math.Max(air.Max, supply.Inside.Typ)}
	var least, most float64
	for i, l := range p.strings {
		s := &r.Strings[i]
		w := &l.worst
		s.Current = l.ranged(figCurrent)
		s.LEDVoltage = l.ranged(figLEDVolts)
		s.Headroom = Range{Min: w.Min[figHeadroom], Typ: w.Typ[figHeadroom], Max: w.Max[figHeadroom]}
		s.Regulates = s.Headroom.Min >= 0
		if w.fluxKnown && !math.IsNaN(l.typ[figFlux]) {
			flux := l.ranged(figFlux)
			s.LuminousFlux = &flux
		}
		for k := range s.Devices {
			s.Devices[k].Power = l.ranged(figDevices + 2*k)
			s.Devices[k].Junction = l.ranged(figDevices + 2*k + 1)
		}
		least += l.quantity * l.ranged(figDraw).Min
		most += l.quantity * l.ranged(figDraw).Max
	}
	for i, rail := range p.rails {
		rr := &r.Rails[i]
		rr.Voltage = rail.ranged(railVolts)
		for k := range rr.Devices {
			rr.Devices[k].Power = rail.ranged(railDevices + 2*k)
			rr.Devices[k].Junction = rail.ranged(railDevices + 2*k + 1)
		}
		least += rail.ranged(railDraw).Min
		most += rail.ranged(railDraw).Max
	}
	v := p.build.Supply.Voltage
	supply.Current.Min, supply.Current.Max = math.Min(least, supply.Current.Typ), math.Max(most, supply.Current.Typ)
	supply.Power.Min, supply.Power.Max = supply.Current.Min*v.Min, supply.Current.Max*v.Max
	if m := p.build.Supply.MaxCurrent; m != nil && *m > 0 {
		supply.Loading = &Range{Min: supply.Current.Min / *m, Typ: supply.Current.Typ / *m, Max: supply.Current.Max / *m}
	}
}

// ranged returns a figure of the string with its typical value from the build
// solved as a whole.
func (l *line) ranged(f int) Range {
	typ := l.typ[f]
	return Range{Min: math.Min(l.worst.Min[f], typ), Typ: typ, Max: math.Max(l.worst.Max[f], typ)}
}

func (p *plant) powerLimit(l *line, k int) *float64 {
	d := l.Devices[k]
	if d.IsResistor() {
		return resistorWatts(l.spec, d.Role)
	}
	if part, ok := p.build.Parts[d.Part]; ok && part.Transistor != nil {
		return part.Transistor.MaxPower
	}
	return nil
}

func (p *plant) railPowerLimit(r *railLine, k int) *float64 {
	d := r.Devices[k]
	if d.IsResistor() {
		if fitted := r.spec.resistor(d.Role); fitted != nil {
			return fitted.Watts
		}
		return nil
	}
	return ratingsOf(p.build.Parts[d.Part]).power
}

// resistor returns the rail's resistor in a role, nil where it has none.
func (r *Rail) resistor(role string) *Resistor {
	switch role {
	case "pullup_resistor":
		return r.Pullup
	case "bias_resistor":
		return r.Bias
	case "pulldown_resistor":
		return r.Pulldown
	case "upper_resistor", "lower_resistor":
		if r.Control == nil || r.Control.Divider == nil {
			return nil
		}
		if role == "upper_resistor" {
			return &r.Control.Divider.Upper
		}
		return &r.Control.Divider.Lower
	}
	return nil
}

func (p *plant) junctionLimit(key string) *float64 {
	return ratingsOf(p.build.Parts[key]).junction
}

// ratings are a part's limits, whatever it is; what is not given is nil.
type ratings struct {
	power, junction, rth, volts, amps *float64
}

func ratingsOf(part Part) ratings {
	switch {
	case part.LED != nil:
		return ratings{junction: part.LED.MaxJunction, rth: part.LED.RthJunctionAmbient, amps: part.LED.MaxCurrent}
	case part.Transistor != nil:
		q := part.Transistor
		return ratings{q.MaxPower, q.MaxJunction, q.RthJunctionAmbient, q.MaxCollectorEmitterVoltage, q.MaxCollectorCurrent}
	case part.MOSFET != nil:
		q := part.MOSFET
		return ratings{q.MaxPower, q.MaxJunction, q.RthJunctionAmbient, q.MaxDrainSourceVoltage, q.MaxDrainCurrent}
	case part.Regulator != nil:
		q := part.Regulator
		return ratings{q.MaxPower, q.MaxJunction, q.RthJunctionAmbient, q.MaxInputOutput, q.MaxCurrent}
	case part.Module != nil:
		return ratings{power: part.Module.MaxPower}
	}
	return ratings{}
}

// resistorWatts is the rating of the resistor in a role, nil if not given.
func resistorWatts(s *String, role string) *float64 {
	if r := s.resistor(role); r != nil {
		return r.Watts
	}
	return nil
}

// resistor returns the string's resistor in a role, nil where it has none.
func (s *String) resistor(role string) *Resistor {
	d := &s.Driver
	var byRole map[string]*Resistor
	switch {
	case d.Resistor != nil:
		byRole = map[string]*Resistor{"resistor": &d.Resistor.Resistor}
	case d.FollowerSink != nil:
		byRole = map[string]*Resistor{"sense_resistor": &d.FollowerSink.Sense, "pullup_resistor": &d.FollowerSink.Pullup}
		if v := d.FollowerSink.Control.Divider; v != nil {
			byRole["upper_resistor"], byRole["lower_resistor"] = &v.Upper, &v.Lower
		}
	case d.ReferenceSink != nil:
		byRole = map[string]*Resistor{"sense_resistor": &d.ReferenceSink.Sense, "bias_resistor": &d.ReferenceSink.Bias}
	case d.RailSink != nil:
		byRole = map[string]*Resistor{"sense_resistor": &d.RailSink.Sense}
	case d.OpampSink != nil:
		byRole = map[string]*Resistor{"sense_resistor": &d.OpampSink.Sense}
		if v := d.OpampSink.Control.Divider; v != nil {
			byRole["upper_resistor"], byRole["lower_resistor"] = &v.Upper, &v.Lower
		}
	case d.Regulator != nil:
		byRole = map[string]*Resistor{"set_resistor": &d.Regulator.Set}
	case d.TwoTransistor != nil:
		byRole = map[string]*Resistor{"sense_resistor": &d.TwoTransistor.Sense, "bias_resistor": &d.TwoTransistor.Bias}
	}
	return byRole[role]
}
