package circuit

import (
	"fmt"
	"math"
)

// Unsolved says that no operating point was found, and how far the search was
// from one.
type Unsolved struct {
	Steps   int     // Newton steps tried in all
	Volts   float64 // [V] the last step of the node furthest from rest
	At      string  // that node
	Celsius float64 // [°C] the hottest junction of the search
	Runaway bool    // a part's heat has no stable temperature
}

// Error returns the sentence for the log; the caller names the string.
func (u *Unsolved) Error() string {
	if u.Runaway {
		return fmt.Sprintf("thermal runaway: a junction passes %.0f °C", u.Celsius)
	}
	return fmt.Sprintf("no operating point after %d steps; the voltage at %q still moves by %.3g V", u.Steps, u.At, u.Volts)
}

func (u *Unsolved) copy() *Unsolved {
	own := *u
	return &own
}

const (
	// restVolts is the last step of a Newton search that is taken as its end.
	// Convergence is quadratic: the error that remains is of the order of its
	// square over the thermal voltage, some 1e-9 V.
	restVolts = 1e-7
	// restKelvin is the same for temperatures.
	restKelvin = 1e-3
	// patience is the number of Newton steps before another way is tried.
	patience = 60
	// leak is the conductance in siemens from every node to the return that
	// keeps a node without any current path solvable.
	leak = 1e-12
	// runawayC is the junction temperature above which silicon and solder are
	// gone: a search that ends there has no stable temperature.
	runawayC = 400
)

// Solve finds the operating point, starting from the last one. When Newton's
// method does not settle from there it starts cold, then adds a leak to every
// node and takes it away by steps, then raises the sources by steps. It
// returns *Unsolved when nothing does.
func (c *Circuit) Solve() error {
	if !c.ready {
		c.prepare()
	}
	if !c.modal() {
		return c.solve()
	}
	for i := range c.amps {
		c.amps[i].failed = 0
	}
	for range mostModes {
		err := c.solve()
		if err != nil && !c.starve() {
			return err
		}
		if err == nil && !c.remode() {
			return nil
		}
	}
	return c.search.copy()
}

func (c *Circuit) solve() error {
	for i := range c.bjts {
		if q := &c.bjts[i]; q.rth == 0 && q.t != c.air {
			q.t, q.fresh = c.air, false
		}
	}
	worst := &c.search
	*worst = Unsolved{}
	c.gmin = leak
	if c.newton(worst) {
		return c.hot(worst)
	}
	c.cold()
	if c.newton(worst) {
		return c.hot(worst)
	}
	c.cold()
	for c.gmin = 1e-2; c.gmin > leak; c.gmin /= 10 {
		if !c.newton(worst) {
			break
		}
	}
	if c.gmin = leak; c.newton(worst) {
		return c.hot(worst)
	}
	c.cold()
	held := append([]float64(nil), c.v...)
	for step := 1; step <= sourceSteps; step++ {
		c.scaleHeld(held, float64(step)/sourceSteps)
		if !c.newton(worst) {
			c.scaleHeld(held, 1)
			worst.Runaway = worst.Celsius > runawayC
			return worst.copy()
		}
	}
	c.scaleHeld(held, 1)
	return c.hot(worst)
}

// sourceSteps is the number of steps in which the sources are raised.
const sourceSteps = 40

func (c *Circuit) scaleHeld(held []float64, share float64) {
	for n, fixed := range c.held {
		if fixed {
			c.v[n] = held[n] * share
		}
	}
}

// hot refuses a solution in which a junction is beyond survival.
func (c *Circuit) hot(worst *Unsolved) error {
	for i := range c.bjts {
		if c.bjts[i].t > runawayC && !c.bjts[i].off {
			worst.Celsius, worst.Runaway = c.bjts[i].t, true
			return worst.copy()
		}
	}
	for i := range c.stacks {
		if c.stacks[i].runaway && !c.stacks[i].off {
			worst.Runaway = true
			for _, t := range c.stacks[i].junction {
				worst.Celsius = math.Max(worst.Celsius, t)
			}
			return worst.copy()
		}
	}
	return nil
}

// Restart forgets the last solution, so that the next Solve starts cold.
func (c *Circuit) Restart() { c.cold() }

func (c *Circuit) cold() {
	for n := range c.v {
		if !c.held[n] {
			c.v[n] = 0
		}
	}
	for i := range c.stacks {
		c.stacks[i].start()
	}
	for i := range c.bjts {
		c.bjts[i].start(c.air)
	}
}

// prepare numbers the unknowns and makes the work space.
func (c *Circuit) prepare() {
	nodes := len(c.name)
	c.row = c.row[:0]
	if len(c.col) != nodes {
		c.col = make([]int, nodes)
		c.g = make([]float64, nodes*nodes)
		c.sum = make([]float64, nodes)
		c.lu = make([]float64, nodes*nodes)
		c.rhs = make([]float64, nodes)
		c.probe = make([]float64, nodes)
		c.perm = make([]int, nodes)
		c.row = make([]int, 0, nodes)
	}
	for n, fixed := range c.held {
		c.col[n] = -1
		if !fixed {
			c.col[n] = len(c.row)
			c.row = append(c.row, n)
		}
	}
	c.ready = true
}

// newton runs Newton's method from the present state and says whether it
// settled.
func (c *Circuit) newton(worst *Unsolved) bool {
	for range patience {
		worst.Steps++
		c.assemble()
		if !c.factor() {
			return false
		}
		for i, n := range c.row {
			c.rhs[i] = -c.sum[n]
		}
		c.substitute(c.rhs)
		moved, at, limited := 0.0, 0, false
		for i, n := range c.row {
			d := c.rhs[i]
			if !(math.Abs(d) < 1e9) {
				return false
			}
			c.v[n] += d
			if a := math.Abs(d); a > moved {
				moved, at = a, n
			}
		}
		for i := range c.fets {
			f := &c.fets[i]
			f.step(c.v[f.g]-c.v[f.s], c.v[f.d]-c.v[f.s])
		}
		for i := range c.sources {
			if s := &c.sources[i]; s.mode != holding {
				s.current = s.conducts * c.v[s.n]
			}
		}
		kelvin := 0.0
		for i := range c.stacks {
			if s := &c.stacks[i]; !s.off {
				moved = max(moved, s.settle(c.v[s.a]-c.v[s.b]))
				limited = limited || s.limited
			}
		}
		for i := range c.bjts {
			q := &c.bjts[i]
			if q.off {
				continue
			}
			volts, k := q.settle(q.sign*(c.v[q.b]-c.v[q.e]), q.sign*(c.v[q.b]-c.v[q.c]))
			moved, kelvin = max(moved, volts), max(kelvin, k)
			limited = limited || q.limited
			worst.Celsius = max(worst.Celsius, q.t)
		}
		for i := range c.clamps {
			k := &c.clamps[i]
			was := k.conductance
			k.step(c.air, c.v[k.n], c.v[k.feed])
			limited = limited || was != k.conductance
		}
		worst.Volts, worst.At = moved, c.name[at]
		if !limited && moved < restVolts && kelvin < restKelvin {
			return true
		}
	}
	return false
}

// assemble sums the currents leaving every node and their slopes.
func (c *Circuit) assemble() {
	nodes := len(c.name)
	g, sum := c.g, c.sum
	clear(g)
	copy(sum, c.load)
	for n := 1; n < nodes; n++ {
		g[n*nodes+n] += c.gmin
		sum[n] += c.gmin * c.v[n]
	}
	for i := range c.resistors {
		r := &c.resistors[i]
		if !r.off {
			c.conduct(r.a, r.b, 1/r.ohms, (c.v[r.a]-c.v[r.b])/r.ohms)
		}
	}
	for i := range c.clamps {
		k := &c.clamps[i]
		k.step(c.air, c.v[k.n], c.v[k.feed])
		g[int(k.n)*nodes+int(k.n)] += k.conductance
		sum[k.n] += k.current
	}
	for i := range c.stacks {
		s := &c.stacks[i]
		if s.off {
			continue
		}
		s.runaway = false
		s.step(c.air, c.v[s.a]-c.v[s.b])
		c.conduct(s.a, s.b, s.ge, s.ieff)
	}
	for i := range c.bjts {
		q := &c.bjts[i]
		if q.off {
			continue
		}
		q.step(c.air, q.sign*(c.v[q.b]-c.v[q.e]), q.sign*(c.v[q.b]-c.v[q.c]))
		ic, ib := q.sign*q.i0[0], q.sign*q.i0[1]
		sum[q.c] += ic
		sum[q.b] += ib
		sum[q.e] -= ic + ib
		nb, ne, nc := int(q.b), int(q.e), int(q.c)
		gc, gb := &q.gi[0], &q.gi[1]
		c.spreadRow(nc, nb, ne, nc, gc[0], gc[1])
		c.spreadRow(nb, nb, ne, nc, gb[0], gb[1])
		c.spreadRow(ne, nb, ne, nc, -gc[0]-gb[0], -gc[1]-gb[1])
	}
	if len(c.fets)+len(c.sources)+len(c.regulators)+len(c.amps) > 0 {
		c.assembleModal()
	}
}

// conduct adds a two-pole's current from a to b and its conductance.
func (c *Circuit) conduct(a, b Node, conductance, current float64) {
	nodes := len(c.name)
	i, k := int(a), int(b)
	c.g[i*nodes+i] += conductance
	c.g[k*nodes+k] += conductance
	c.g[i*nodes+k] -= conductance
	c.g[k*nodes+i] -= conductance
	c.sum[a] += current
	c.sum[b] -= current
}

// spreadRow adds one terminal's slopes on Vbe and Vbc to its node's row.
func (c *Circuit) spreadRow(row, b, e, col int, onBE, onBC float64) {
	r := c.g[row*len(c.name) : (row+1)*len(c.name)]
	r[b] += onBE + onBC
	r[e] -= onBE
	r[col] -= onBC
}

// factor takes the unknown nodes' block of the slopes apart into triangles,
// with partial pivoting.
func (c *Circuit) factor() bool {
	n, nodes := len(c.row), len(c.name)
	lu := c.lu
	for i, from := range c.row {
		for k, to := range c.row {
			lu[i*n+k] = c.g[from*nodes+to]
		}
	}
	for k := range n {
		p := k
		for i := k + 1; i < n; i++ {
			if math.Abs(lu[i*n+k]) > math.Abs(lu[p*n+k]) {
				p = i
			}
		}
		c.perm[k] = p
		if !(math.Abs(lu[p*n+k]) > 1e-300) {
			return false
		}
		if p != k {
			for j := range n {
				lu[k*n+j], lu[p*n+j] = lu[p*n+j], lu[k*n+j]
			}
		}
		inv := 1 / lu[k*n+k]
		for i := k + 1; i < n; i++ {
			f := lu[i*n+k] * inv
			lu[i*n+k] = f
			if f == 0 {
				continue
			}
			for j := k + 1; j < n; j++ {
				lu[i*n+j] -= f * lu[k*n+j]
			}
		}
	}
	return true
}

// substitute solves for x in place with the last factors.
func (c *Circuit) substitute(x []float64) {
	n := len(c.row)
	lu := c.lu
	for k := range n {
		if p := c.perm[k]; p != k {
			x[k], x[p] = x[p], x[k]
		}
	}
	for k := range n {
		for i := k + 1; i < n; i++ {
			x[i] -= lu[i*n+k] * x[k]
		}
	}
	for i := n - 1; i >= 0; i-- {
		s := x[i]
		for j := i + 1; j < n; j++ {
			s -= lu[i*n+j] * x[j]
		}
		x[i] = s / lu[i*n+i]
	}
}

// HeldCurrent returns the current in amperes that a held node gives to the
// circuit at the last solution, a drawn load included.
func (c *Circuit) HeldCurrent(n Node) float64 {
	nodes := len(c.name)
	current := c.sum[n] - c.gmin*c.v[n]
	for i, m := range c.row {
		current += c.g[int(n)*nodes+m] * c.rhs[i]
	}
	return current
}

// HeldSlope returns dI/dV in siemens of a held node at the last solution: how
// much more it would give for a volt more, everything else following.
func (c *Circuit) HeldSlope(n Node) float64 {
	nodes := len(c.name)
	for i, m := range c.row {
		c.probe[i] = -c.g[m*nodes+int(n)]
	}
	c.substitute(c.probe)
	slope := c.g[int(n)*nodes+int(n)]
	for i, m := range c.row {
		slope += c.g[int(n)*nodes+m] * c.probe[i]
	}
	return slope
}
