package calc

import (
	"errors"
	"fmt"
	"math"

	"lanternbook/calc/circuit"
	"lanternbook/calc/heat"
)

// Unsolved says that a string has no operating point that could be found.
type Unsolved struct {
	String string // its label
	Cause  error
}

// Error names the string and the cause.
func (u *Unsolved) Error() string { return fmt.Sprintf("string %s: %v", u.String, u.Cause) }

// Unwrap returns the cause.
func (u *Unsolved) Unwrap() error { return u.Cause }

const (
	// treeRest is the step in volts at which strings and cable agree.
	treeRest = 1e-7
	// treePatience is how often strings and cable are solved in turn.
	treePatience = 60
	// airRest is the step in kelvin at which heat and a can's air agree.
	airRest = 1e-5
	// fullPatience is how often the full current and its drop are solved in
	// turn.
	fullPatience = 30
	// leastCurrent is the current in amperes below which a driver carries
	// nothing.
	leastCurrent = 1e-9
	// baseRest is how near in volts to the base a tail counts as held at it:
	// there the current hardly moves with it.
	baseRest = 5e-3
	// needRest is the step in volts at which the least voltage is found: the
	// logarithm of the loss is nearly straight, so that the step itself is right
	// to some 1e-5 V and needs no solution of its own.
	needRest = 1e-3
	// needStep is how far in volts that search goes down at once: saturation
	// grows tenfold in 60 mV at room temperature, and above it the slope of an
	// Early effect points far below.
	needStep = 0.06
	// usualSaturation is the collector-emitter voltage in volts from which the
	// search for the least one starts.
	usualSaturation = 0.15
	// held is the share of the full current that still counts as holding it.
	held = 0.99
)

// coupled says whether strings share any resistance.
func (p *plant) coupled() bool { return p.tree.Source > 0 || len(p.tree.Parent) > 0 }

// operate solves the whole build at a supply voltage in volts and an outside
// temperature in °C, with the strings' knobs as they stand. It returns the
// temperature inside.
func (p *plant) operate(volts, ambient float64) (inside float64, err error) {
	p.heatWires(ambient)
	area, transfer, sealed := p.sealed()
	inside = ambient
	for range treePatience {
		if err := p.settle(volts, inside); err != nil {
			return inside, err
		}
		if !sealed {
			return inside, nil
		}
		next := ambient + heat.EnclosureRise(p.heatInside(), area, transfer)
		if math.Abs(next-inside) < airRest {
			return next, nil
		}
		inside = next
	}
	return inside, &Unsolved{"(all)", errors.New("the air in the can finds no stable temperature")}
}

func (p *plant) sealed() (area, transfer float64, ok bool) {
	e := p.build.Enclosure
	if e == nil || e.Kind != "sealed" || e.SurfaceArea == nil || e.HeatTransfer == nil {
		return 0, 0, false
	}
	return *e.SurfaceArea, *e.HeatTransfer, true
}

// heatInside is what the strings turn into heat, their light counted as heat
// too, in watts.
func (p *plant) heatInside() float64 {
	total := 0.0
	for _, l := range p.strings {
		total += l.quantity * l.Draw() * l.Net.Voltage(l.Feed)
	}
	for _, r := range p.rails {
		total += r.Draw() * r.Net.Voltage(r.Feed)
	}
	return total
}

// settle solves strings and cable together in air of a given temperature.
func (p *plant) settle(volts, air float64) error {
	for _, r := range p.rails {
		r.Net.SetAir(air)
		if err := r.feedAt(volts); err != nil {
			return err
		}
		for _, l := range r.lines {
			l.Net.Hold(l.Rail, r.volts)
		}
	}
	for _, l := range p.strings {
		l.Net.SetAir(air)
		if err := l.at(l.feedGuess(volts)); err != nil {
			return err
		}
	}
	for range treePatience {
		if err := p.balance(); err != nil {
			return err
		}
		moved, err := p.share(volts)
		if err != nil {
			return err
		}
		if moved < treeRest {
			return nil
		}
	}
	return &Unsolved{"(all)", errors.New("strings and cable do not settle")}
}

// balance brings every rail to where it and its strings agree. The strings
// have been solved with the rail held where it stands.
func (p *plant) balance() error {
	for _, r := range p.rails {
		if err := r.balance(); err != nil {
			return err
		}
	}
	return nil
}

// share solves the cable with what strings and rails draw and moves their
// feeds to what it leaves them; it returns how far the furthest moved in volts.
func (p *plant) share(volts float64) (moved float64, err error) {
	for i, l := range p.strings {
		p.loads[i].Volts = l.Net.Voltage(l.Feed)
		p.loads[i].Current = l.quantity * l.Draw()
		p.loads[i].Slope = math.Max(0, l.quantity*l.Net.HeldSlope(l.Feed))
	}
	for k, r := range p.rails {
		i := len(p.strings) + k
		p.loads[i].Volts = r.Net.Voltage(r.Feed)
		p.loads[i].Current = r.Draw()
		p.loads[i].Slope = math.Max(0, r.Net.HeldSlope(r.Feed))
	}
	p.tree.Solve(volts, p.loads, &p.result)
	for _, l := range p.strings {
		feed := p.feedOf(l.run)
		step := math.Abs(feed - l.Net.Voltage(l.Feed))
		moved = math.Max(moved, step)
		if step < treeRest {
			continue // it stands where it is to stand
		}
		if err := l.at(feed); err != nil {
			return moved, err
		}
	}
	for _, r := range p.rails {
		feed := p.feedOf(r.run)
		moved = math.Max(moved, math.Abs(feed-r.Net.Voltage(r.Feed)))
		if err := r.feedAt(feed); err != nil {
			return moved, err
		}
	}
	return moved, nil
}

// feedOf is the voltage at a run's far end after the tree was solved.
func (p *plant) feedOf(run int) float64 {
	if run < 0 {
		return p.result.Supply
	}
	return p.result.Volts[run]
}

// feedGuess is where the search for a string's feed starts: where it was, if
// that is near.
func (l *line) feedGuess(volts float64) float64 {
	if v := l.Net.Voltage(l.Feed); l.path > 0 && math.Abs(v-volts) < 0.3*volts {
		return v
	}
	return volts
}

// at solves the string with its feed at a voltage in volts.
func (l *line) at(feed float64) error {
	if !l.started {
		l.Start(feed)
		l.started = true
	}
	l.FeedAt(feed)
	return l.solve()
}

func (l *line) solve() error {
	if err := l.Net.Solve(); err != nil {
		l.started = false
		return &Unsolved{l.spec.Label, err}
	}
	return nil
}

// behindOf solves the string with its feed behind a resistance in ohms from an
// ideal voltage in volts; extra in amperes is drawn at the feed besides.
func (l *line) behindOf(volts, ohms, extra float64) error {
	if ohms == 0 {
		return l.at(volts)
	}
	if !l.started {
		l.Start(volts)
		l.started = true
	}
	if !l.Switching() {
		l.FeedBehind(volts, ohms, extra)
		return l.solve()
	}
	// The cable carries what the module takes, not what the LEDs carry.
	other := 0.0
	for range treePatience {
		l.FeedBehind(volts, ohms, extra+other)
		if err := l.solve(); err != nil {
			return err
		}
		next := l.Draw() - l.Net.LEDCurrent(l.Stack)
		if math.Abs(next-other)*ohms < treeRest {
			return nil
		}
		other = next
	}
	return &Unsolved{l.spec.Label, errors.New("module and cable do not settle")}
}

// senseVolts is what stands across the resistor that measures the current.
func (l *line) senseVolts() float64 {
	if l.Sense == circuit.None {
		return 0
	}
	return l.Net.Voltage(l.Sense)
}

// leftOver is a string's headroom with what it is made of.
type leftOver struct {
	headroom float64 // [V]
	full     float64 // [A] the current it would hold
	feed     float64 // [V] at that current
	need     float64 // [V] least across the driver at which 99 % of it still flow
	sense    float64 // [V] of that across the sense resistor
}

// headroom finds what is left over at the string's present operating point,
// which stands behind a resistance in ohms from an ideal voltage in volts, and
// leaves the string as it was. The full current is what flows with the
// tail at the driver's edge, for a transistor its collector at its base where
// the active region ends: a higher collector adds a little by its Early effect
// and by its heat, which no string needs.
func (l *line) headroom(volts, ohms float64) (leftOver, error) {
	net := l.Net
	if l.Edge == nil {
		across := net.Voltage(l.Tail)
		return leftOver{headroom: across, full: math.Max(0, net.LEDCurrent(l.Stack)), feed: net.Voltage(l.Feed), need: across, sense: across}, nil
	}
	l.Save(&l.saved)
	defer l.Load(&l.saved)
	r := leftOver{full: net.LEDCurrent(l.Stack), feed: net.Voltage(l.Feed)}
	base := l.Edge()
	short := net.Voltage(l.Tail) < base
	net.Detach(l.Stack)
	if !short {
		l.FeedAt(r.feed)
	}
	settled := false
	for range fullPatience {
		net.Hold(l.Tail, base)
		if short {
			// The full current does not flow, so neither does its drop.
			if err := l.behindOf(volts, ohms, r.full); err != nil {
				return r, err
			}
		} else if err := net.Solve(); err != nil {
			return r, &Unsolved{l.spec.Label, err}
		}
		full, edge := net.HeldCurrent(l.Tail), l.Edge()
		moved := math.Abs(edge - base)
		if short {
			moved += ohms * math.Abs(full-r.full)
		}
		r.full, base = full, edge
		if settled = moved < baseRest; settled {
			break
		}
	}
	if !settled {
		// The cable could not carry the full current at any voltage: what is
		// left over is then told for the feed as it stands.
		l.FeedAt(r.feed)
		net.Hold(l.Tail, base)
		if err := net.Solve(); err != nil {
			return r, &Unsolved{l.spec.Label, err}
		}
		r.full = net.HeldCurrent(l.Tail)
	}
	r.feed = net.Voltage(l.Feed)
	r.full = math.Max(r.full, 0)
	available := r.feed - net.StackVoltage(l.Stack, r.full)
	if r.full < leastCurrent {
		// A driver that is to carry nothing needs nothing but its edge.
		r.need, r.sense = base, l.senseVolts()
		r.headroom = available - r.need
		return r, nil
	}
	l.FeedAt(r.feed)
	if err := l.findNeed(&r, base); err != nil {
		return r, err
	}
	r.headroom = available - r.need
	if math.IsNaN(r.headroom) || math.IsInf(r.headroom, 0) {
		return r, &Unsolved{l.spec.Label, errors.New("what is left over cannot be told")}
	}
	return r, nil
}

// findNeed lowers the tail, with the LEDs detached, until the current has lost
// 1 %. Saturation takes current away exponentially, so Newton's method goes by
// the logarithm of the loss, kept inside a bracket whose upper end holds it and
// whose lower end is the sense voltage at 99 %: a tail below that carries
// nothing, and with a base that is held the transistor would swallow amperes
// there.
func (l *line) findNeed(r *leftOver, high float64) error {
	net := l.Net
	low, lost := held*l.senseVolts(), (1-held)*r.full
	sense := l.senseVolts()
	try := math.Min(high, sense+usualSaturation)
	if l.clear > 0 {
		try = math.Min(high, sense+l.clear)
	}
	for range treePatience {
		net.Hold(l.Tail, try)
		if err := net.Solve(); err != nil {
			return &Unsolved{l.spec.Label, err}
		}
		loss := r.full - net.HeldCurrent(l.Tail)
		if loss > lost {
			low = try
		} else {
			high = try
		}
		next := math.Max(try+math.Log(loss/lost)*loss/net.HeldSlope(l.Tail), try-needStep)
		rest := needRest
		if !(next > low && next < high) {
			next, rest = (low+high)/2, needRest/10
		}
		last := try
		try = next
		if math.Abs(try-last) < rest {
			break
		}
	}
	l.clear = try - sense
	r.need, r.sense = try, l.senseVolts()
	return nil
}
