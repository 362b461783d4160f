package calc

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"lanternbook/calc/driver"
)

// HeadroomBreakdown tells where a string's headroom goes between its typical
// value and its worst case.
type HeadroomBreakdown struct {
	String  string  `json:"string"`  // its label
	Typical float64 `json:"typical"` // [V] left over with everything typical
	Worst   float64 `json:"worst"`   // [V] left over in the worst case
	// Items add up to Worst less Typical; the largest, of either sign, first.
	Items []BreakdownItem `json:"items"`
	// Usual and Least lead from the supply down to what is left over, with
	// everything typical and in the worst case.
	Usual Staircase `json:"usual"`
	Least Staircase `json:"least"`
	// Sentence names the biggest culprit.
	Sentence string `json:"sentence"`
}

// BreakdownItem is one value's share of the way to the worst case.
type BreakdownItem struct {
	Culprit string  `json:"culprit"` // "supply", "wire", "temperature", "rail", "bin", "gain", "VBE", "tolerance" or "setting"
	Name    string  `json:"name"`    // "white-2835 bin", "sense resistor"
	Volts   float64 `json:"volts"`   // [V] by which it moves what is left over; negative where it takes
	At      string  `json:"at"`      // JSON Pointer to the value in the build
}

// Staircase shares out the supply's voltage: Supply less every step is Left.
type Staircase struct {
	Supply float64 `json:"supply"` // [V] the supply's own voltage
	Steps  []Step  `json:"steps"`
	Left   float64 `json:"left"` // [V] left over; of a series resistor what stands across it
}

// Step is what one part of the string takes of the supply's voltage.
type Step struct {
	Name     string  `json:"name"`               // "run", "LEDs", "driver" or "sense"
	Part     string  `json:"part,omitempty"`     // key of the LEDs
	Quantity int     `json:"quantity,omitempty"` // of the LEDs
	Volts    float64 `json:"volts"`              // [V] it takes
	Level    float64 `json:"level"`              // [V] that remain below it
}

// The culprits that lie outside a string.
const (
	culpritSupply      = "supply"
	culpritWire        = "wire"
	culpritTemperature = "temperature"
	culpritRail        = "rail"
)

// Breakdown tells where the headroom of string i goes from typical to its
// worst case: how many volts of it each value takes that may be off, and how
// the supply's voltage is shared out at either end. The items add up to
// headroom.min less headroom.typ of the report.
//
// The corner of the worst case is reached by turning one value after the
// other: supply, wire, temperature, rail, then the string's own values in the
// order of its circuit. What each moves depends on what was turned before it,
// so that the same way is gone in the opposite order too and the two answers
// are averaged: what two values do only together is then shared by both in
// halves, whatever the order. A point on the way that has no stable
// temperature passes its share on to the next.
//
// "wire" is the drop in source resistance and cable, with the copper at its
// temperature and the other strings drawing what they do in the corner;
// supply and temperature take the rail along, which shares both: a follower's
// drift cancels the sink's. "rail" is the rail at its worst for reasons of its
// own.
//
// It returns the errors of Check, and Invalid where there is no string i.
//
// Source: derivation; shapley (1953), whose value the average is where effects
// are joint in pairs at most.
func Breakdown(b Build, i int) (HeadroomBreakdown, error) {
	if i < 0 || i >= len(b.Strings) {
		return HeadroomBreakdown{}, Invalid{{fmt.Sprintf("/strings/%d", i), "there is no such string"}}
	}
	_, p, err := examine(&b)
	if err != nil {
		return HeadroomBreakdown{}, err
	}
	l := p.strings[i]
	w := &l.worst
	out := HeadroomBreakdown{String: l.spec.Label, Typical: w.Typ[figHeadroom], Worst: w.Min[figHeadroom]}
	if out.Items, err = p.shares(l); err != nil {
		return HeadroomBreakdown{}, err
	}
	if len(out.Items) == 0 {
		out.Worst = out.Typical // but for what the solver rounds
	}
	lowest := l.lowestHeadroom()
	if out.Usual, err = p.staircase(l, make([]float64, l.turns()), out.Typical); err != nil {
		return HeadroomBreakdown{}, err
	}
	if out.Least, err = p.staircase(l, lowest, out.Worst); err != nil {
		return HeadroomBreakdown{}, err
	}
	l.toTypical()
	out.Sentence = out.sentence()
	return out, nil
}

// lowestHeadroom is the corner that leaves least over.
func (l *line) lowestHeadroom() []float64 {
	turn := make([]float64, l.turns())
	for k, s := range l.worst.Lowest[figHeadroom] {
		turn[k] = float64(s)
	}
	return turn
}

// knob is one value to turn on the way to a corner.
type knob struct {
	item   BreakdownItem
	turn   func(to *standing)
	matter bool // it stands elsewhere in the corner than typically
}

// standing is a string's corner on the way from typical to the worst.
type standing struct {
	turn            []float64
	supply, ambient float64 // as turns
	volts, drop     float64 // [V] of the supply, and lost by what others draw
	ohms, inside    float64 // [Ω], [°C]
	above           float64 // [V] that the rail is off
}

// shares walks to the string's worst corner in both orders.
func (p *plant) shares(l *line) ([]BreakdownItem, error) {
	knobs, typical := p.knobs(l, l.lowestHeadroom())
	first, last := l.worst.Typ[figHeadroom], l.worst.Min[figHeadroom]
	n := len(knobs)
	for _, reverse := range []bool{false, true} {
		s := typical
		s.turn = make([]float64, len(l.Knobs))
		before := first
		for step := range n {
			k := step
			if reverse {
				k = n - 1 - step
			}
			knobs[k].turn(&s)
			after := last
			if step < n-1 {
				left, err := l.leftAt(&s)
				if err != nil {
					return nil, err
				}
				if after = left; math.IsNaN(left) {
					after = before
				}
			}
			knobs[k].item.Volts += (after - before) / 2
			before = after
		}
	}
	items := []BreakdownItem{}
	for _, k := range knobs {
		items = append(items, k.item)
	}
	sort.SliceStable(items, func(i, k int) bool { return math.Abs(items[i].Volts) > math.Abs(items[k].Volts) })
	return items, nil
}

// knobs lists what stands elsewhere in a corner than typically, in the order
// in which it is turned, and where everything stands before.
func (p *plant) knobs(l *line, corner []float64) ([]knob, standing) {
	n := len(l.Knobs)
	r := &l.reach
	v := p.build.Supply.Voltage
	mid, end := r.at(0, 0), r.at(corner[n], corner[n+1])
	supply := between(v, corner[n])
	typical := standing{volts: v.Typ, drop: v.Typ - mid.volts, ohms: mid.ohms, inside: mid.inside}
	drop := supply - end.volts
	all := []knob{
		{BreakdownItem{culpritSupply, "supply", 0, "/supply/voltage"}, func(s *standing) { s.volts, s.supply = supply, corner[n] }, supply != v.Typ},
		{BreakdownItem{culpritWire, "wire", 0, p.wirePointer()}, func(s *standing) { s.drop, s.ohms = drop, end.ohms }, drop != typical.drop || end.ohms != mid.ohms},
	}
	heat := knob{
		BreakdownItem{culpritTemperature, "temperature", 0, "/ambient"},
		func(s *standing) { s.ambient, s.inside = corner[n+1], end.inside }, end.ambient != mid.ambient || end.inside != mid.inside,
	}
	all = append(all, heat)
	if l.rail != nil {
		rail := l.rail.at(corner[n], corner[n+1])
		above := between(rail, corner[n+2]) - rail.Typ
		all = append(all, knob{
			BreakdownItem{culpritRail, l.rail.name(), 0, fmt.Sprintf("/rails/%d", l.rail.index)},
			func(s *standing) { s.above = above }, above != 0,
		})
	}
	for k, own := range l.Knobs {
		name := own.Name
		if part, ok := strings.CutSuffix(name, " bin"); ok && own.Culprit == driver.Bin {
			name = p.build.nameOf(part) + " bin"
		}
		all = append(all, knob{
			BreakdownItem{string(own.Culprit), name, 0, l.knobPointer(own)},
			func(s *standing) { s.turn[k] = corner[k] }, corner[k] != 0,
		})
	}
	kept := all[:0]
	for _, k := range all {
		if k.matter {
			kept = append(kept, k)
		}
	}
	return kept, typical
}

// wirePointer points to what makes the drop.
func (p *plant) wirePointer() string {
	if len(p.build.Runs) == 0 {
		return "/supply/source_resistance"
	}
	return "/runs"
}

// leftAt is what the string leaves over where it stands, in volts; NaN where
// it has no stable temperature.
func (l *line) leftAt(s *standing) (float64, error) {
	l.turnTo(s.turn)
	at := corner{volts: s.volts - s.drop, ohms: s.ohms, inside: s.inside}
	if l.rail != nil {
		at.rail = l.rail.at(s.supply, s.ambient).Typ + s.above
	}
	err := l.solveAt(at)
	var left leftOver
	if err == nil {
		left, err = l.headroom(at.volts, at.ohms)
	}
	if isRunaway(err) {
		return math.NaN(), nil
	}
	return left.headroom, err
}

// staircase leads from the supply to what is left over in a corner, which the
// search for the worst case has found to be left in volts.
func (p *plant) staircase(l *line, turn []float64, left float64) (Staircase, error) {
	c, err := l.column(turn, between(p.build.Supply.Voltage, turn[len(l.Knobs)]))
	if err != nil {
		return Staircase{}, err
	}
	s := Staircase{Supply: c.Supply, Left: left}
	level := c.Supply
	step := func(name, part string, quantity int, volts float64) {
		level -= volts
		s.Steps = append(s.Steps, Step{Name: name, Part: part, Quantity: quantity, Volts: volts, Level: level})
	}
	step("run", "", 0, c.Run)
	for _, led := range c.LEDs {
		step("LEDs", led.Part, led.Quantity, float64(led.Quantity)*led.Each)
	}
	if !l.Devices[l.Holder].IsResistor() {
		// What the two solutions differ by is below what a meter shows; the
		// driver's share takes it, so that the stairs end where the report does.
		step("driver", "", 0, level-c.Sense-left)
		step("sense", "", 0, c.Sense)
	}
	return s, nil
}

// sentence names the biggest culprit.
func (d *HeadroomBreakdown) sentence() string {
	worst := BreakdownItem{}
	for _, item := range d.Items {
		if item.Volts < worst.Volts {
			worst = item
		}
	}
	lost := d.Typical - d.Worst
	if !(worst.Volts < 0) || !(lost > 0) {
		return "Nothing takes from what is left over: every value is stated without spread."
	}
	name := worst.Name
	if worst.Culprit == string(driver.Tolerance) {
		name += "'s tolerance"
	}
	return fmt.Sprintf("The %s costs most: %s of the %s between a usual day and the worst case.", name, volts(-worst.Volts), volts(lost))
}
