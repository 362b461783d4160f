package wiring

// Tree is the runs from one supply: run i hangs on run Parent[i], or on the
// supply where that is −1. A parent comes before its children.
type Tree struct {
	Parent []int
	Ohms   []float64 // [Ω] out and back
	Source float64   // [Ω] of the supply

	a, b []float64 // each run's far end as a + b·V, summed over what hangs on it
}

// Load is what hangs at one place as a straight line: Current at Volts, and
// Slope more for every volt more.
type Load struct {
	At      int     // run at whose far end it hangs; −1 at the supply
	Volts   float64 // [V]
	Current float64 // [A]
	Slope   float64 // [S]
}

// Result is the tree's state.
type Result struct {
	Supply  float64   // [V] at the supply's terminals
	Total   float64   // [A] out of the supply
	Volts   []float64 // [V] at each run's far end, out and back taken off
	Current []float64 // [A] through each run
}

// Solve returns the voltages and currents with an ideal voltage in volts
// behind the source resistance, in one pass to the root and one back. The
// slices of r are used again.
//
// Source: derivation, Kirchhoff's laws on a tree.
func (t *Tree) Solve(volts float64, loads []Load, r *Result) {
	n := len(t.Parent)
	if len(t.a) != n+1 {
		t.a, t.b = make([]float64, n+1), make([]float64, n+1)
		r.Volts, r.Current = make([]float64, n), make([]float64, n)
	}
	if len(r.Volts) != n {
		r.Volts, r.Current = make([]float64, n), make([]float64, n)
	}
	clear(t.a)
	clear(t.b)
	for _, l := range loads {
		t.a[l.At+1] += l.Current - l.Slope*l.Volts
		t.b[l.At+1] += l.Slope
	}
	for i := n - 1; i >= 0; i-- {
		share := 1 / (1 + t.Ohms[i]*t.b[i+1])
		t.a[t.Parent[i]+1] += t.a[i+1] * share
		t.b[t.Parent[i]+1] += t.b[i+1] * share
	}
	r.Total = (t.a[0] + t.b[0]*volts) / (1 + t.Source*t.b[0])
	r.Supply = volts - t.Source*r.Total
	for i := range n {
		up := r.Supply
		if p := t.Parent[i]; p >= 0 {
			up = r.Volts[p]
		}
		r.Current[i] = (t.a[i+1] + t.b[i+1]*up) / (1 + t.Ohms[i]*t.b[i+1])
		r.Volts[i] = up - t.Ohms[i]*r.Current[i]
	}
}

// PathOhms returns the resistance in ohms that a current drawn at a run's far
// end sees back to the ideal source, everything else drawing as it did.
func (t *Tree) PathOhms(at int) float64 {
	ohms := t.Source
	for ; at >= 0; at = t.Parent[at] {
		ohms += t.Ohms[at]
	}
	return ohms
}
