package calc

import (
	"cmp"
	"math"
	"slices"

	"lanternbook/calc/driver"
	"lanternbook/calc/fault"
	"lanternbook/calc/heat"
)

// What a limit is of.
const (
	overPower       = "power"
	overJunction    = "junction"
	overCurrent     = "current"
	overVoltage     = "voltage"
	overEmitterBase = "emitter-base voltage"
)

var unitOf = map[string]string{overPower: "W", overJunction: "°C", overCurrent: "A", overVoltage: "V", overEmitterBase: "V"}

// limit is one limit of one device, in the unit that goes with what.
type limit struct {
	device      int
	what        string
	most        float64 // as rated; a dissipation at 25 °C
	nothingAt   float64 // [°C] air in which a dissipation has fallen to nothing; 0 where it does not fall
	rth         float64 // [K/W] for a junction
	value, home float64 // now, and without a fault
}

// in returns the limit in air of a temperature in °C.
func (m *limit) in(air float64) float64 {
	if m.nothingAt > 0 {
		return heat.Derated(m.most, ratedAir, m.nothingAt, air)
	}
	return m.most
}

const (
	// worse is by how much a part that is beyond a limit without any fault must
	// get further beyond it to count.
	worse = 1.1
	// mostOver is how many parts beyond their limits are listed.
	mostOver = 24
)

// limitsOf lists the limits of a string's devices.
func (s *surveyor) limitsOf(l *line) []limit {
	return s.boardLimits(&l.Board, l.where(), l.spec.resistor)
}

func (s *surveyor) railLimits(r *railLine) []limit {
	return s.boardLimits(&r.Board, r.name(), r.spec.resistor)
}

func (s *surveyor) boardLimits(a *driver.Board, where string, resistor func(role string) *Resistor) []limit {
	var out []limit
	for k, d := range a.Devices {
		add := func(what string, most *float64, missing string) {
			switch {
			case most != nil:
				out = append(out, limit{device: k, what: what, most: *most})
			case missing != "":
				s.lack(d.Part + " has no " + missing)
			}
		}
		part := s.p.build.Parts[d.Part]
		rated := ratingsOf(part)
		switch d.Kind() {
		case fault.Resistor:
			if fitted := resistor(d.Role); fitted != nil {
				if fitted.Watts == nil {
					s.lack("the " + roleInWords(d.Role) + " of " + where + " has no rating (watts)")
				}
				add(overPower, fitted.Watts, "")
			}
		case fault.LED:
			add(overCurrent, rated.amps, "greatest current (max_current)")
		case fault.Transistor, fault.MOSFET, fault.Regulator, fault.Module:
			add(overPower, rated.power, "rated dissipation (max_power)")
			add(overVoltage, rated.volts, "")
			add(overCurrent, rated.amps, "")
			if q := part.Transistor; q != nil {
				add(overEmitterBase, q.MaxEmitterBaseVoltage, "")
			}
		}
		if rated.junction == nil {
			continue
		}
		for i := range out {
			if out[i].device == k && out[i].what == overPower {
				out[i].nothingAt = *rated.junction
			}
		}
		if rated.rth != nil {
			add(overJunction, rated.junction, "")
			out[len(out)-1].rth = *rated.rth
		}
	}
	return out
}

// measure reads what the limits are of at a string's present solution.
func (s *surveyor) measure(l *line, cold bool, limits []limit) {
	s.measureBoard(&l.Board, cold, limits)
}

func (s *surveyor) measureRail(r *railLine, cold bool, limits []limit) {
	s.measureBoard(&r.Board, cold, limits)
}

func (s *surveyor) measureBoard(a *driver.Board, cold bool, limits []limit) {
	for i := range limits {
		m := &limits[i]
		d := a.Devices[m.device]
		switch m.what {
		case overPower:
			m.value = a.Power(d)
		case overJunction:
			m.value = a.Junction(d)
			if cold {
				m.value = s.air + m.rth*a.Power(d)
			}
		case overCurrent:
			m.value = a.Amperes(d)
		case overVoltage:
			m.value = a.Volts(d)
		case overEmitterBase:
			m.value = a.EmitterBaseVolts(d)
		}
	}
}

// beyond adds to the failure what of a board is beyond its limits.
func (s *surveyor) beyond(f *Failure, a *driver.Board, where string, limits []limit) {
	for i := range limits {
		m := &limits[i]
		most := m.in(s.air)
		if !(m.value > most) || m.home > most && m.value < worse*m.home {
			continue
		}
		d := a.Devices[m.device]
		f.Over = append(f.Over, Over{Where: where, Role: d.Role, Part: d.Part, What: m.what, Value: m.value, Limit: most, Unit: unitOf[m.what]})
	}
}

// judge finds what the fault that is settled does to everything it reaches.
func (s *surveyor) judge(f *Failure, t trial) {
	n := len(s.lines) - 1
	if l := s.lines[n]; l != nil {
		at, h := &s.lineAt[n], &s.madeHome
		s.measure(l, at.cold, h.limits)
		limits := h.limits
		if t.kind == fault.LED && l.LEDs[t.device].Count == 1 {
			limits = slices.DeleteFunc(slices.Clone(limits), func(m limit) bool { return m.device == t.device })
		}
		s.beyond(f, &l.Board, l.where(), limits)
		f.Current, f.Was = l.Net.LEDCurrent(l.Stack), h.current
		f.Runaway = at.cold && !h.at.cold
	}
	for _, j := range s.scope {
		l, at := s.lines[j], &s.lineAt[j]
		listed := t.kind == fault.Supply || t.rail >= 0 && l.rail == s.p.rails[t.rail]
		if !at.touched && !listed || l.quantity == 0 {
			continue
		}
		h := &s.homes[j]
		s.measure(l, at.cold, h.limits)
		s.beyond(f, &l.Board, l.where(), h.limits)
		f.Runaway = f.Runaway || at.cold && !h.at.cold
		current := l.Net.LEDCurrent(l.Stack)
		change := changeOf(current, h.current)
		if math.Abs(change) > math.Abs(f.Most) {
			f.Most = change
		}
		if listed || math.Abs(change) > toldChange {
			f.Others = append(f.Others, Change{String: j, Current: current, Was: h.current, Voltages: l.voltages()})
		}
	}
	for k, r := range s.p.rails {
		h := &s.railHomes[k]
		if s.rails[k].touched {
			s.measureRail(r, s.rails[k].cold, h.limits)
			s.beyond(f, &r.Board, r.name(), h.limits)
			f.Runaway = f.Runaway || s.rails[k].cold
		}
		if own := s.lines[n] != nil && s.lines[n].rail == r; own || t.rail == k || s.rails[k].touched && farFrom(r.volts, h.volts) {
			f.Rails = append(f.Rails, RailChange{Rail: k, Volts: r.volts, Was: h.volts, Control: pointOf(&r.Board, r.Control), Reference: pointOf(&r.Board, r.Reference)})
		}
	}
	f.Supply = s.total()
	if m := s.p.build.Supply.MaxCurrent; m != nil && f.Supply > *m && s.atHome < *m {
		f.Over = append(f.Over, Over{Where: "supply", Role: "supply", What: overCurrent, Value: f.Supply, Limit: *m, Unit: "A"})
	}
	slices.SortStableFunc(f.Over, func(a, b Over) int { return -cmp.Compare(a.times(), b.times()) })
	if f.Beyond = len(f.Over); f.Beyond > mostOver {
		f.Over = f.Over[:mostOver]
	}
	f.Matters = f.Runaway || f.Beyond > 0 || math.Abs(f.Most) > matteringChange
}

// changeOf is how far a current has changed, as a share of what it was. A
// string that was dark changes by as many times a tenth of a milliampere.
func changeOf(now, was float64) float64 { return (now - was) / max(was, dark) }

const (
	// dark is the current in amperes below which a string counts as dark. It is
	// common practice, no source: small LEDs glow from some 10 µA on.
	dark = 1e-4
	// seenVolts is by how much a rail must move to be listed, in volts.
	seenVolts = 0.005
)

func farFrom(a, b float64) bool { return math.Abs(a-b) > seenVolts }

// total is what the supply gives in amperes.
func (s *surveyor) total() float64 {
	total := 0.0
	for j, l := range s.lines {
		if l != nil && l.quantity > 0 {
			total += l.quantity * s.lineAt[j].draw
		}
	}
	for _, r := range s.p.rails {
		total += r.Draw()
	}
	return total
}

func (s *surveyor) assume(what string) {
	if !s.said[what] {
		s.said[what] = true
		s.assumed = append(s.assumed, what)
	}
}

func (s *surveyor) lack(what string) {
	if !s.said[what] {
		s.said[what] = true
		s.missing = append(s.missing, what)
	}
}
