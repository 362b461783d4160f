package calc

import (
	"math"

	"lanternbook/calc/circuit"
	"lanternbook/calc/heat"
	"lanternbook/calc/spread"
)

// The figures of one string, in the order of its vector; behind them stand
// each device's power and junction temperature in turn.
const (
	figCurrent  = iota // [A] through the LEDs
	figLEDVolts        // [V] across all of them
	figHeadroom        // [V]
	figFlux            // [lm]
	figDraw            // [A] from the feed
	figFeed            // [V]
	figDrive           // [A] that bias or pull-up bring to the base
	figSpare           // [A] left for follower, sensor or reference; [V] for a MOSFET's gate
	figControl         // [V] of the control, 0 without
	figDevices
)

// corner is where a string is solved: the voltage behind its cable, the
// temperatures, and how its knobs stand.
type corner struct {
	volts   float64 // [V] ideal voltage behind ohms
	ohms    float64 // [Ω]
	ambient float64 // [°C] outside
	inside  float64 // [°C] round the parts
	rail    float64 // [V] of the base rail, where there is one
}

// collect reads the string's figures at its present operating point into out.
func (l *line) collect(out []float64) {
	net := l.Net
	out[figCurrent] = net.LEDCurrent(l.Stack)
	out[figLEDVolts] = l.LEDVolts()
	out[figDraw] = l.Draw()
	out[figFeed] = net.Voltage(l.Feed)
	out[figFlux] = l.flux()
	out[figDrive], out[figSpare] = l.drive()
	out[figControl] = 0
	if l.Control != circuit.None {
		out[figControl] = net.Voltage(l.Control)
	}
	for k, d := range l.Devices {
		out[figDevices+2*k] = l.Power(d)
		out[figDevices+2*k+1] = l.Junction(d)
	}
}

// figures is how many figures the string has.
func (l *line) figures() int { return figDevices + 2*len(l.Devices) }

// flux is the string's light in lumens; NaN where it is not known.
func (l *line) flux() float64 {
	current := l.Net.LEDCurrent(l.Stack)
	total := 0.0
	for k, source := range l.lights {
		if source.Flux == 0 {
			return math.NaN()
		}
		each, ok := source.At(current, l.Net.LEDJunction(l.Stack, k))
		if !ok {
			return math.NaN()
		}
		total += each * float64(l.LEDs[k].Count)
	}
	return total
}

// drive is the current in amperes that bias or pull-up bring, and what of it
// the sink's base leaves over.
func (l *line) drive() (brings, spare float64) {
	if l.Gate != circuit.None {
		return 0, l.Net.Voltage(l.Feed) - l.High - l.Net.Voltage(l.Gate)
	}
	k := l.driveResistor()
	if k < 0 {
		return 0, 0
	}
	brings = l.Current(l.Devices[k])
	return brings, brings - l.BaseCurrent(l.Devices[l.Holder])
}

// driveResistor is the index of the resistor that feeds the base, or −1.
func (l *line) driveResistor() int {
	for k, d := range l.Devices {
		if d.Role == "bias_resistor" || d.Role == "pullup_resistor" {
			return k
		}
	}
	return -1
}

// worst is a string's figures with their worst cases.
type worst struct {
	*spread.Extremes
	left      *spread.Extremes // the search for what is left over
	fluxKnown bool
	runaway   error // a corner without a stable temperature
}

// reach is how far the world outside the string may move it.
type reach struct {
	volts           Spread // [V] behind the string's own share of the cable
	ambient, inside Spread // [°C]
	ohms            [3]float64
}

// between returns a spread's value at a turn from −1 to 1.
func between(s Spread, turn float64) float64 {
	if turn < 0 {
		return s.Typ + (s.Typ-s.Min)*turn
	}
	return s.Typ + (s.Max-s.Typ)*turn
}

// at returns the corner of a reach at turns of the supply and of the ambient.
func (r *reach) at(supply, ambient float64) corner {
	c := corner{volts: between(r.volts, supply), ambient: between(r.ambient, ambient), inside: between(r.inside, ambient)}
	c.ohms = r.ohms[1]
	if ambient < 0 {
		c.ohms += (r.ohms[1] - r.ohms[0]) * ambient
	} else {
		c.ohms += (r.ohms[2] - r.ohms[1]) * ambient
	}
	return c
}

// solveAt solves the string in a corner with its knobs as they stand.
func (l *line) solveAt(c corner) error {
	l.Net.SetAir(c.inside)
	if l.rail != nil {
		l.Net.Hold(l.Rail, c.rail)
	}
	return l.behindOf(c.volts, c.ohms, 0)
}

// turns is how many values the world may take a string through: its own knobs,
// the supply, the ambient, and its rail where it hangs on one.
func (l *line) turns() int {
	if l.rail != nil {
		return len(l.Knobs) + 3
	}
	return len(l.Knobs) + 2
}

// turnTo turns the string's knobs; behind them the turns are those of supply,
// ambient and rail.
func (l *line) turnTo(turn []float64) {
	for k, knob := range l.Knobs {
		if l.turned[k] != turn[k] {
			knob.Turn(turn[k])
			l.turned[k] = turn[k]
		}
	}
}

// extremes finds the worst case of every figure over the string's own knobs,
// the supply and the ambient. A corner in which a part runs away thermally is
// kept as that and left out of the figures; where the typical figures
// themselves would be left out, the string is solved as if it stayed cold.
func (l *line) extremes(r reach, like *worst) (worst, error) {
	w, err := l.search(r, like)
	if err != nil || w.runaway == nil || !(math.IsNaN(w.Typ[figCurrent]) || math.IsNaN(w.Typ[figHeadroom])) {
		return w, err
	}
	runaway := w.runaway
	l.Net.Isothermal()
	l.Net.Restart()
	l.started = false
	w, err = l.search(r, nil)
	w.runaway = runaway
	return w, err
}

// search is extremes for the string's heat as it stands. With like, the worst
// case of a string of the same make in the same state, only the corners that
// mattered there are solved.
func (l *line) search(r reach, like *worst) (worst, error) {
	w := worst{fluxKnown: true}
	find := func(like *spread.Extremes, figures int, eval spread.Eval) (*spread.Extremes, error) {
		if like != nil {
			return spread.Replay(like, eval)
		}
		return spread.Find(l.turns(), figures, eval)
	}
	var likeAll, likeLeft *spread.Extremes
	if like != nil {
		likeAll, likeLeft = like.Extremes, like.left
	}
	all, err := find(likeAll, l.figures(), func(turn, out []float64) error {
		_, ok, wrong := l.corner(&w, r, turn)
		if !ok {
			fillNaN(out)
			return wrong
		}
		l.collect(out)
		w.fluxKnown = w.fluxKnown && !math.IsNaN(out[figFlux])
		return nil
	})
	if err != nil {
		return w, err
	}
	w.Extremes = all
	// What is left over costs several solutions; it gets a search of its own.
	left, err := find(likeLeft, 1, func(turn, out []float64) error {
		c, ok, wrong := l.corner(&w, r, turn)
		fillNaN(out)
		if !ok {
			return wrong
		}
		over, wrong := l.headroom(c.volts, c.ohms)
		if isRunaway(wrong) {
			w.runaway = wrong
			return nil
		}
		out[0] = over.headroom
		return wrong
	})
	if err != nil {
		return w, err
	}
	w.Min[figHeadroom], w.Typ[figHeadroom], w.Max[figHeadroom] = left.Min[0], left.Typ[0], left.Max[0]
	w.Lowest[figHeadroom], w.Highest[figHeadroom] = left.Lowest[0], left.Highest[0]
	w.left = left
	l.toTypical()
	return w, nil
}

// drawExtremes is extremes for what the string takes from the feed, and from
// its rail, alone.
func (l *line) drawExtremes(r reach, like *spread.Extremes) (*spread.Extremes, error) {
	var w worst
	eval := func(turn, out []float64) error {
		_, ok, err := l.corner(&w, r, turn)
		fillNaN(out)
		if ok {
			out[0] = l.Draw()
			if l.rail != nil {
				out[1] = l.Net.HeldCurrent(l.Rail)
			}
		}
		return err
	}
	defer l.toTypical()
	if like != nil {
		return spread.Replay(like, eval)
	}
	return spread.Find(l.turns(), 2, eval)
}

// corner solves the string with its knobs, supply and ambient turned; ok is
// false where it runs away.
func (l *line) corner(w *worst, r reach, turn []float64) (c corner, ok bool, err error) {
	l.turnTo(turn)
	n := len(l.Knobs)
	c = r.at(turn[n], turn[n+1])
	if l.rail != nil {
		c.rail = between(l.rail.at(turn[n], turn[n+1]), turn[n+2])
	}
	err = l.solveAt(c)
	if isRunaway(err) {
		w.runaway = err
		return c, false, nil
	}
	return c, err == nil, err
}

func fillNaN(out []float64) {
	for f := range out {
		out[f] = math.NaN()
	}
}

// toTypical turns every knob back.
func (l *line) toTypical() {
	for k, knob := range l.Knobs {
		knob.Turn(0)
		l.turned[k] = 0
	}
}

// reaches finds how far supply, cable and the other strings may move each
// string's feed. With nothing shared that is the supply's own spread. With
// cable or source resistance the whole build is solved twice more: every
// string drawing its most from the lowest supply over hot copper, and its
// least from the highest over cold copper; each string's own share of the drop
// is taken out again, since the string carries it along.
func (p *plant) reaches(air Spread) ([]reach, error) {
	b := p.build
	out := make([]reach, len(p.strings))
	whole := reach{volts: b.Supply.Voltage, ambient: b.Ambient, inside: air}
	for i := range out {
		out[i] = whole
	}
	railReach := make([]reach, len(p.rails))
	for k, r := range p.rails {
		railReach[k] = whole
		railReach[k].ohms = [3]float64{r.path, r.path, r.path}
	}
	if err := p.railReaches(out, railReach); err != nil || !p.coupled() {
		return out, err
	}
	for side, ambient := range []float64{b.Ambient.Min, b.Ambient.Typ, b.Ambient.Max} {
		p.heatWires(ambient)
		for i, l := range p.strings {
			out[i].ohms[side] = l.path
		}
	}
	p.heatWires(b.Ambient.Typ)
	// The searches above left their own solutions behind.
	if err := p.settle(b.Supply.Voltage.Typ, air.Typ); err != nil {
		return nil, err
	}
	for i, l := range p.strings {
		out[i].volts.Typ = l.Net.Voltage(l.Feed) + l.path*l.Draw()
	}
	typical := make([]float64, len(p.rails)) // [V]
	for k, r := range p.rails {
		typical[k] = r.volts
		railReach[k].volts.Typ = r.Net.Voltage(r.Feed) + r.path*r.Draw()
	}
	draws := make([]*spread.Extremes, len(p.strings))
	seen := drawCatalogue{}
	for i, l := range p.strings {
		r := out[i]
		r.volts = Spread{Min: b.Supply.Voltage.Min, Typ: b.Supply.Voltage.Typ, Max: b.Supply.Voltage.Max}
		x, err := seen.extremes(p, l, r)
		if err != nil {
			return nil, err
		}
		draws[i] = x
	}
	for _, end := range []struct {
		volts, ambient, air float64
		pick                func(x *spread.Extremes, f int) []int8
		set                 func(r *reach, v float64)
	}{
		{b.Supply.Voltage.Min, b.Ambient.Max, air.Max, func(x *spread.Extremes, f int) []int8 { return x.Highest[f] }, func(r *reach, v float64) { r.volts.Min = math.Min(v, r.volts.Typ) }},
		{b.Supply.Voltage.Max, b.Ambient.Min, air.Min, func(x *spread.Extremes, f int) []int8 { return x.Lowest[f] }, func(r *reach, v float64) { r.volts.Max = math.Max(v, r.volts.Typ) }},
	} {
		p.heatWires(end.ambient)
		for i, l := range p.strings {
			turn := make([]float64, len(l.Knobs))
			for k := range turn {
				turn[k] = float64(end.pick(draws[i], 0)[k])
			}
			l.turnTo(turn)
		}
		for _, r := range p.rails {
			for k, knob := range r.Knobs {
				knob.Turn(float64(end.pick(r.worst, railVolts)[k]))
			}
		}
		if err := p.settle(end.volts, end.air); err != nil {
			return nil, err
		}
		for k, r := range p.rails {
			end.set(&railReach[k], r.Net.Voltage(r.Feed)+r.path*r.Draw())
		}
		for i, l := range p.strings {
			end.set(&out[i], l.Net.Voltage(l.Feed)+l.path*l.Draw())
		}
	}
	p.heatWires(b.Ambient.Typ)
	for _, l := range p.strings {
		l.toTypical()
	}
	for k, r := range p.rails {
		for _, knob := range r.Knobs {
			knob.Turn(0)
		}
		r.volts = typical[k]
	}
	// What the strings take from the rail hangs on their feeds.
	return out, p.railReaches(out, railReach)
}

// railReaches finds how far each rail goes, from the base currents that its
// strings take at most and at least.
func (p *plant) railReaches(strings, rails []reach) error {
	draws := drawCatalogue{}
	for k, r := range p.rails {
		typ := Exactly(r.volts)
		for supply := range r.reach {
			r.reach[supply] = [3]Spread{typ, typ, typ}
		}
		r.loads = Spread{}
		for _, l := range r.lines {
			x, err := draws.extremes(p, l, strings[l.index])
			if err != nil {
				return err
			}
			r.loads.Min += l.quantity * x.Min[1]
			r.loads.Typ += l.quantity * x.Typ[1]
			r.loads.Max += l.quantity * x.Max[1]
		}
		if err := r.extremes(rails[k]); err != nil {
			return err
		}
	}
	return nil
}

// insideSpread returns the air round the parts for a heat in watts that goes
// from least to most.
func (p *plant) insideSpread(least, typ, most float64) Spread {
	a := p.build.Ambient
	area, transfer, sealed := p.sealed()
	if !sealed {
		return Spread{Min: a.Min, Typ: a.Typ, Max: a.Max}
	}
	return Spread{
		Min: a.Min + heat.EnclosureRise(least, area, transfer),
		Typ: a.Typ + heat.EnclosureRise(typ, area, transfer),
		Max: a.Max + heat.EnclosureRise(most, area, transfer),
	}
}
