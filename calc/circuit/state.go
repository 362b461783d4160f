package circuit

// State is a solution to come back to. Its zero value is ready; saving into
// the same State again allocates nothing.
type State struct {
	v, load []float64
	held    []bool
	stacks  []ledStack
	bjts    []bjt
}

// Save keeps the circuit's voltages, holds, loads and the state of its parts.
func (c *Circuit) Save(s *State) {
	s.v = append(s.v[:0], c.v...)
	s.load = append(s.load[:0], c.load...)
	s.held = append(s.held[:0], c.held...)
	s.stacks = append(s.stacks[:0], c.stacks...)
	s.bjts = append(s.bjts[:0], c.bjts...)
}

// Load puts the circuit back to what Save kept.
func (c *Circuit) Load(s *State) {
	copy(c.v, s.v)
	copy(c.load, s.load)
	copy(c.held, s.held)
	copy(c.stacks, s.stacks)
	copy(c.bjts, s.bjts)
	c.ready = false
}
