package calc

import (
	"lanternbook/calc/driver"
	"lanternbook/calc/wiring"
)

// surveyor holds a build wired up for faults and its solution without one, to
// which it comes back after each.
type surveyor struct {
	p       *plant
	volts   float64 // [V] of the supply
	air     float64 // [°C] round the parts
	coupled bool    // strings share cable or source resistance

	// lines are the strings of the build, and last the patient: the one of a
	// string's Quantity that has the fault. Its slot is nil for a fault
	// elsewhere, and then the string has its whole quantity again.
	lines  []*line
	lineAt []straightLine
	homes  []home
	onRail [][]int // the strings on each rail

	rails     []railStanding
	railHomes []railHome

	loads  []wiring.Load
	result wiring.Result
	all    []int // every string
	scope  []int // the strings that a fault can reach, its own not among them

	made     *line // the last patient
	madeHome home

	assumed, missing []string
	said             map[string]bool
	atHome           float64 // [A] out of the supply without a fault
}

// straightLine is a string as a straight line round the point it was last solved
// at: what it takes from its feed and from its rail.
type straightLine struct {
	feed, rail        float64 // [V]
	draw, drawSlope   float64 // [A], [S] by the feed
	takes, takesSlope float64 // [A], [S] by the rail
	stale             bool    // to be solved again wherever it stands
	touched           bool    // was solved since the last homecoming
	cold              bool    // is kept from heating itself
}

// home is a string without a fault.
type home struct {
	state   driver.State
	at      straightLine
	current float64 // [A] through its LEDs
	power   float64 // [W] in what holds the current
	limits  []limit
}

type railStanding struct {
	touched, cold bool
}

type railHome struct {
	state  driver.State
	volts  float64
	power  []float64 // [W] of each device
	limits []limit
}

// newSurveyor wires a build up and solves it without a fault.
func newSurveyor(b *Build) (*surveyor, error) {
	p, err := compile(b)
	if err != nil {
		return nil, err
	}
	air, err := p.operateOrCold()
	if err != nil {
		return nil, err
	}
	s := &surveyor{p: p, volts: b.Supply.Voltage.Typ, air: air, coupled: p.coupled(), said: map[string]bool{}}
	for _, l := range p.strings {
		s.ready(&l.Board)
		l.Meter()
		l.started = true
		s.lines = append(s.lines, l)
		s.all = append(s.all, l.index)
	}
	s.lines = append(s.lines, nil)
	s.onRail = make([][]int, len(p.rails))
	for k, r := range p.rails {
		s.ready(&r.Board)
		r.Meter()
		for _, l := range r.lines {
			s.onRail[k] = append(s.onRail[k], l.index)
		}
	}
	s.lineAt = make([]straightLine, len(s.lines))
	s.rails = make([]railStanding, len(p.rails))
	s.loads = make([]wiring.Load, len(s.lines)+len(p.rails))
	s.scope = s.all
	for j, l := range p.strings {
		s.lineAt[j] = straightLine{feed: l.Net.Voltage(l.Feed), stale: true}
		s.lineAt[j].cold = l.runaway != nil
	}
	if err := s.settleAir(); err != nil {
		return nil, err
	}
	s.keepHome()
	s.atHome = s.total()
	return s, nil
}

// ready makes a board fit for faults, and notes what had to be assumed.
func (s *surveyor) ready(a *driver.Board) {
	a.Usable(func(part string) float64 {
		if v := s.p.build.Parts[part].Transistor.MaxEmitterBaseVoltage; v != nil && *v > 0 {
			return *v
		}
		s.assume(part + ": its emitter-base junction breaks down at 7 V")
		return assumedBreakdown
	})
}

// assumedBreakdown is the reverse voltage in volts at which the emitter-base
// junction of a transistor conducts whose rating is not given. Common practice,
// no source: 5 to 8 V.
const assumedBreakdown = 7.0

// keepHome keeps the build's solution without a fault.
func (s *surveyor) keepHome() {
	s.homes = make([]home, len(s.lines))
	for j := range s.p.strings {
		s.lineAt[j].touched = false
		s.keep(&s.homes[j], j)
	}
	s.railHomes = make([]railHome, len(s.p.rails))
	for k, r := range s.p.rails {
		h := &s.railHomes[k]
		s.rails[k].touched = false
		h.volts = r.volts
		for _, d := range r.Devices {
			h.power = append(h.power, r.Power(d))
		}
		h.limits = s.railLimits(r)
		s.measureRail(r, s.rails[k].cold, h.limits)
		for i := range h.limits {
			h.limits[i].home = h.limits[i].value
		}
		r.Save(&h.state)
	}
}

// goHome puts everything that a fault has moved back.
func (s *surveyor) goHome(air float64) {
	for _, j := range s.scope {
		s.lineHome(j, &s.homes[j])
		s.lines[j].Net.SetAir(air)
	}
	if n := len(s.lines) - 1; s.lines[n] != nil {
		s.lineHome(n, &s.madeHome)
		s.lines[n].Net.SetAir(air)
	}
	for k, r := range s.p.rails {
		at, h := &s.rails[k], &s.railHomes[k]
		r.Net.SetAir(air)
		if !at.touched {
			continue
		}
		if at.cold {
			r.Net.Warm()
		}
		r.Board.Load(&h.state)
		r.volts, r.started = h.volts, true
		*at = railStanding{}
	}
	s.air = air
}

func (s *surveyor) lineHome(j int, h *home) {
	at, l := &s.lineAt[j], s.lines[j]
	if !at.touched {
		*at = h.at
		return
	}
	if at.cold && !h.at.cold {
		l.Net.Warm()
	}
	l.Load(&h.state)
	l.started = true
	*at = h.at
}

// patient puts in the one of string i that gets the faults, alike and solved in
// its place. With spec it is made by that instead, as an edit would have it.
func (s *surveyor) patient(i int, spec *String) error {
	n := len(s.lines) - 1
	l := s.p.strings[i]
	l.quantity = float64(l.spec.Quantity) - 1
	if spec == nil {
		spec = l.spec
	}
	if s.made != nil && s.made.index == i && s.made.spec == spec {
		s.lines[n] = s.made
		s.lineAt[n] = s.madeHome.at
		return nil
	}
	sick := &line{index: i, spec: spec, quantity: 1, run: l.run, rail: l.rail}
	if err := sick.assemble(s.p.build); err != nil {
		return err
	}
	s.ready(&sick.Board)
	sick.Meter()
	if s.homes[i].at.cold {
		sick.Net.Isothermal()
	}
	sick.Net.SetAir(s.air)
	if sick.rail != nil {
		sick.Net.Hold(sick.Rail, sick.rail.volts)
	}
	s.lines[n], s.made = sick, sick
	s.lineAt[n] = straightLine{cold: s.homes[i].at.cold}
	if err := s.solveLine(n, s.homes[i].at.feed); err != nil {
		s.made = nil
		return err
	}
	s.lineAt[n].touched = false
	s.keep(&s.madeHome, n)
	return nil
}

// keep keeps a string's solution without a fault.
func (s *surveyor) keep(h *home, j int) {
	l := s.lines[j]
	h.at, h.current = s.lineAt[j], l.Net.LEDCurrent(l.Stack)
	h.power = l.Power(l.Devices[l.Holder])
	h.limits = s.limitsOf(l)
	s.measure(l, h.at.cold, h.limits)
	for k := range h.limits {
		h.limits[k].home = h.limits[k].value
	}
	l.Save(&h.state)
}

// discharge takes the patient out.
func (s *surveyor) discharge() {
	n := len(s.lines) - 1
	if s.lines[n] != nil {
		l := s.p.strings[s.lines[n].index]
		l.quantity = float64(l.spec.Quantity)
	}
	s.lines[n] = nil
}
