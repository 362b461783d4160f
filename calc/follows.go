package calc

// slopeStep is the share of the supply's voltage either way over which a
// slope is taken.
const slopeStep = 1e-2

// onFeed says whether the string's control is a pot or a divider across the
// feed, its own or its rail's.
func (l *line) onFeed() bool {
	c := l.spec.control()
	if l.rail != nil {
		c = l.rail.spec.Control
	}
	return c != nil && c.Volts == nil
}

// followSupply reports what the supply does to the strings whose control
// hangs on it. The build is solved as a whole, so that cable and rails follow
// too; a string in a build without a solution there goes without.
func (p *plant) followSupply(r *Report) {
	var on []*line
	for _, l := range p.strings {
		if l.onFeed() {
			on = append(on, l)
		}
	}
	if len(on) == 0 {
		return
	}
	v := p.build.Supply.Voltage
	step := slopeStep * v.Typ
	at := []float64{v.Typ - step, v.Typ + step, v.Min, v.Max}
	current := make([][4]float64, len(on))
	for k, volts := range at {
		if _, err := p.operate(volts, p.build.Ambient.Typ); err != nil {
			return
		}
		for i, l := range on {
			current[i][k] = l.Net.LEDCurrent(l.Stack)
		}
	}
	for i, l := range on {
		c := &current[i]
		f := FollowsSupply{PerVolt: (c[1] - c[0]) / (2 * step), AtLowest: c[2], AtHighest: c[3]}
		if typ := l.typ[figCurrent]; typ > leastCurrent {
			f.Swing = (c[3] - c[2]) / typ
		}
		r.Strings[l.index].ControlFollowsSupply = &f
	}
}
