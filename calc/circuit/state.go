package circuit

// State is a solution to come back to. Its zero value is ready; saving into
// the same State again allocates nothing.
type State struct {
	v, load []float64
	held    []bool
	stacks  []ledStack
	bjts    []bjt

	amps       []amp
	regulators []regulator
	sources    []source
}

// Save keeps the circuit's voltages, holds, loads and the state of its parts.
func (c *Circuit) Save(s *State) {
	s.v = append(s.v[:0], c.v...)
	s.load = append(s.load[:0], c.load...)
	s.held = append(s.held[:0], c.held...)
	s.stacks = append(s.stacks[:0], c.stacks...)
	s.bjts = append(s.bjts[:0], c.bjts...)
	s.amps = append(s.amps[:0], c.amps...)
	s.regulators = append(s.regulators[:0], c.regulators...)
	s.sources = append(s.sources[:0], c.sources...)
}

// Load puts the circuit back to what Save kept.
func (c *Circuit) Load(s *State) {
	copy(c.v, s.v)
	copy(c.load, s.load)
	copy(c.held, s.held)
	copy(c.stacks, s.stacks)
	copy(c.bjts, s.bjts)
	copy(c.amps, s.amps)
	copy(c.regulators, s.regulators)
	copy(c.sources, s.sources)
	c.ready = false
}

// Advance moves the state on by as much as the last solution differed from the
// one before, where the next of an evenly spaced series of solutions lies. The
// first call only remembers.
func (c *Circuit) Advance() {
	need := len(c.v) + len(c.stacks) + 3*len(c.bjts)
	first := len(c.last) != need
	if first {
		c.last = make([]float64, need)
	}
	at := c.last
	move := func(now *float64) {
		was := at[0]
		at[0] = *now
		if !first {
			*now += *now - was
		}
		at = at[1:]
	}
	for n := range c.v {
		if c.held[n] {
			at = at[1:]
			continue
		}
		move(&c.v[n])
	}
	for i := range c.stacks {
		move(&c.stacks[i].x)
	}
	for i := range c.bjts {
		q := &c.bjts[i]
		move(&q.vbe)
		move(&q.vbc)
		if q.rth == 0 {
			at = at[1:]
			continue
		}
		move(&q.t)
	}
}
