package calc

import (
	"errors"
	"math"

	"lanternbook/calc/driver"
	"lanternbook/calc/spread"
)

// railLine is one base rail of the plant with the strings that hang on it.
type railLine struct {
	*driver.Rail
	index   int
	spec    *Rail
	run     int // index in the tree, −1 at the supply
	path    float64
	lines   []*line
	volts   float64 // [V] at which rail and strings balance
	started bool
	turned  []float64
	typ     []float64 // figures with everything typical
	// loads are the least, typical and most base current of all strings [A].
	loads Spread
	// reach is the rail's voltage by supply and ambient, each at its least,
	// typical and highest.
	reach [3][3]Spread
	worst *spread.Extremes
}

// The figures of a rail; behind them stand each device's power and junction.
const (
	railVolts = iota // [V]
	railDraw         // [A] from the feed
	railDrive        // [A] through pull-up or bias
	railSpare        // [A] of that left for the follower or reference
	railDevices
)

// wireRail makes a rail's circuit.
func (p *plant) wireRail(i int) *railLine {
	b := p.build
	spec := &b.Rails[i]
	r := &railLine{index: i, spec: spec, run: -1}
	if spec.FedBy != "" && spec.FedBy != "supply" {
		r.run = p.runAt[spec.FedBy]
	}
	var l line // gathers what its transistors had to assume
	switch spec.Kind {
	case "follower":
		r.Rail = driver.FollowerRail(control(*spec.Control), l.transistor(b, spec.PNP), resistance(*spec.Pullup))
	case "reference":
		r.Rail = driver.ReferenceRail(reference(*spec.Reference), resistance(*spec.Bias))
	default:
		r.Rail = driver.BufferedRail(reference(*spec.Reference), resistance(*spec.Bias), l.transistor(b, spec.NPN), resistance(*spec.Pulldown))
	}
	r.turned = make([]float64, len(r.Knobs))
	return r
}

func reference(r Reference) driver.Reference {
	return driver.Reference{Volts: limits(r.Volts), Tempco: r.Tempco, Ohms: r.Ohms}
}

// name is how findings call the rail.
func (r *railLine) name() string { return "rail " + r.spec.ID }

// feedAt puts the rail's own feed at a voltage in volts.
func (r *railLine) feedAt(feed float64) error {
	if !r.started {
		r.Start(feed)
		r.FeedAt(feed)
		if err := r.Net.Solve(); err != nil {
			return &Unsolved{r.name(), err}
		}
		r.volts = r.Net.Voltage(r.Out)
		r.started = true
	}
	r.FeedAt(feed)
	return nil
}

// balance brings rail and strings together: each string, which the caller has
// solved at the rail's voltage, stands in as a straight line of what it takes
// more for a volt more, with which the rail is solved again. The rail itself
// stays free: held at a voltage that is not its own, a follower's heat could
// run away where in the whole it does not. Strings take more and a rail gives
// less the higher it stands, so that every trial bounds the answer from one
// side; a step past a bound, or one that does not come to rest, is taken half
// way between them.
func (r *railLine) balance() error {
	defer r.Load(0, 0)
	low, high, last := math.Inf(-1), math.Inf(1), math.Inf(1)
	for k := range treePatience {
		takes, slope := 0.0, 0.0
		for _, l := range r.lines {
			if k > 0 {
				l.Net.Hold(l.Rail, r.volts)
				if err := l.solve(); err != nil {
					return err
				}
			}
			takes += l.quantity * l.Net.HeldCurrent(l.Rail)
			slope += l.quantity * math.Max(0, l.Net.HeldSlope(l.Rail))
		}
		r.Load(takes-slope*r.volts, slope)
		if err := r.Net.Solve(); err != nil {
			return &Unsolved{r.name(), err}
		}
		step := r.Net.Voltage(r.Out) - r.volts
		if math.Abs(step) < treeRest {
			return nil
		}
		if step > 0 {
			low = r.volts
		} else {
			high = r.volts
		}
		next := r.volts + step
		restless := math.Abs(step) > math.Abs(last)/2 && !math.IsInf(high-low, 0)
		if restless || !(next > low && next < high) {
			next = (low + high) / 2
		}
		last = step
		if high-low < treeRest {
			return nil
		}
		r.volts = next
	}
	return &Unsolved{r.name(), errors.New("rail and strings do not settle")}
}

// collect reads the rail's figures at its present solution.
func (r *railLine) collect(out []float64) {
	out[railVolts] = r.Net.Voltage(r.Out)
	out[railDraw] = r.Draw()
	out[railDrive], out[railSpare] = 0, 0
	for k, d := range r.Devices {
		if d.Role == "pullup_resistor" || d.Role == "bias_resistor" {
			out[railDrive] = r.Current(d)
			out[railSpare] = out[railDrive]
		}
		out[railDevices+2*k] = r.Power(d)
		out[railDevices+2*k+1] = r.Junction(d)
	}
	for _, d := range r.Devices {
		if d.Role == "follower_transistor" && r.spec.Kind == "buffered-reference" {
			out[railSpare] -= r.BaseCurrent(d)
		}
	}
	if r.spec.Kind != "buffered-reference" {
		out[railSpare] -= r.load()
	}
}

// load is what all strings take from the rail in amperes.
func (r *railLine) load() float64 {
	total := 0.0
	for _, l := range r.lines {
		total += l.quantity * l.Net.HeldCurrent(l.Rail)
	}
	return total
}

func (r *railLine) figures() int { return railDevices + 2*len(r.Devices) }

// solveFree solves the rail with its voltage free and a load in amperes.
func (r *railLine) solveFree(load, volts, ohms, air float64) error {
	r.Load(load, 0)
	r.Net.SetAir(air)
	if ohms == 0 {
		r.FeedAt(volts)
	} else {
		r.FeedBehind(volts, ohms, 0)
	}
	if err := r.Net.Solve(); err != nil {
		return &Unsolved{r.name(), err}
	}
	return nil
}

// extremes finds how far the rail's own values and the gain of the strings'
// transistors move its voltage, on each supply and at each ambient, which the
// strings share with it, and the worst case of its parts. The strings' base
// currents are taken at their own extremes.
func (r *railLine) extremes(reach reach) error {
	n := len(r.Knobs)
	solve := func(turn []float64, load, supply, ambient float64) error {
		for k, knob := range r.Knobs {
			if r.turned[k] != turn[k] {
				knob.Turn(turn[k])
				r.turned[k] = turn[k]
			}
		}
		c := reach.at(supply, ambient)
		return r.solveFree(between(r.loads, load), c.volts, c.ohms, c.inside)
	}
	for supply := range 3 {
		for ambient := range 3 {
			x, err := spread.Find(n+1, 1, func(turn, out []float64) error {
				err := solve(turn, turn[n], float64(supply-1), float64(ambient-1))
				out[0] = r.Net.Voltage(r.Out)
				return err
			})
			if err != nil {
				return err
			}
			r.reach[supply][ambient] = Spread{Min: x.Min[0], Typ: x.Typ[0], Max: x.Max[0]}
		}
	}
	worst, err := spread.Find(n+3, r.figures(), func(turn, out []float64) error {
		wrong := solve(turn, turn[n], turn[n+1], turn[n+2])
		r.collect(out)
		if r.spec.Kind != "buffered-reference" {
			out[railSpare] = out[railDrive] - between(r.loads, turn[n])
		}
		return wrong
	})
	r.worst = worst
	for k, knob := range r.Knobs {
		knob.Turn(0)
		r.turned[k] = 0
	}
	return err
}

// at returns the rail's reach at a turn of the supply and one of the ambient.
func (r *railLine) at(supply, ambient float64) Spread {
	mix := func(pick func(s Spread) float64) float64 {
		var across Spread
		for k, to := range []*float64{&across.Min, &across.Typ, &across.Max} {
			row := &r.reach[k]
			*to = between(Spread{Min: pick(row[0]), Typ: pick(row[1]), Max: pick(row[2])}, ambient)
		}
		return between(across, supply)
	}
	return Spread{
		Min: mix(func(s Spread) float64 { return s.Min }),
		Typ: mix(func(s Spread) float64 { return s.Typ }),
		Max: mix(func(s Spread) float64 { return s.Max }),
	}
}

// ranged returns a figure of the rail with its typical value from the build
// solved as a whole.
func (r *railLine) ranged(f int) Range {
	typ := r.typ[f]
	return Range{Min: math.Min(r.worst.Min[f], typ), Typ: typ, Max: math.Max(r.worst.Max[f], typ)}
}
