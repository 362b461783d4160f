package calc

import (
	"fmt"
	"sort"

	"lanternbook/calc/device"
	"lanternbook/calc/driver"
	"lanternbook/calc/light"
	"lanternbook/calc/wiring"
)

// plant is a build wired up: every string a circuit, the runs a tree.
type plant struct {
	build   *Build
	strings []*line
	rails   []*railLine
	tree    wiring.Tree
	runAt   map[string]int // index in the tree by a run's id
	runOf   []int          // index in build.Runs by that in the tree
	wires   []conductor
	paths   []float64 // [Ω] from the ideal source to each run's far end
	loads   []wiring.Load
	result  wiring.Result
}

// conductor is a run's copper; given tells that its ohms do not follow heat.
type conductor struct {
	wiring.Conductor
	given bool
}

// line is one string of the plant.
type line struct {
	*driver.Assembly
	index    int
	spec     *String
	build    *Build
	quantity float64
	run      int       // index in the tree, −1 at the supply
	rail     *railLine // on which its base hangs; nil for the other kinds
	path     float64
	lights   []light.Source // by LED group; a zero flux is not known
	assumed  []string       // parts whose figures were assumed, in words
	started  bool
	clear    float64 // [V] that the last least tail stood above the sense resistor
	saved    driver.State
	turned   []float64 // how the knobs stand
	typ      []float64 // figures with everything typical
	worst    worst
	reach    reach
	runaway  error // typical heat without a stable temperature
}

// compile wires a build up. Kinds that cannot be solved are refused by name.
func compile(b *Build) (*plant, error) {
	p := &plant{build: b, runAt: map[string]int{}}
	if err := refuse(b); err != nil {
		return nil, err
	}
	if err := p.wire(); err != nil {
		return nil, err
	}
	railOf := map[string]*railLine{}
	for i := range b.Rails {
		r := p.wireRail(i)
		p.rails = append(p.rails, r)
		railOf[r.spec.ID] = r
	}
	for i := range b.Strings {
		s := &b.Strings[i]
		l := &line{index: i, spec: s, build: b, quantity: float64(s.Quantity), run: -1}
		if s.FedBy != "" && s.FedBy != "supply" {
			l.run = p.runAt[s.FedBy]
		}
		if err := l.assemble(b); err != nil {
			return nil, err
		}
		if d := s.Driver.RailSink; d != nil {
			l.rail = railOf[d.Rail]
			l.rail.lines = append(l.rail.lines, l)
		}
		p.strings = append(p.strings, l)
		p.loads = append(p.loads, wiring.Load{At: l.run})
	}
	for _, r := range p.rails {
		p.loads = append(p.loads, wiring.Load{At: r.run})
	}
	return p, nil
}

// refuse names what cannot be solved yet.
func refuse(b *Build) error {
	var faults Invalid
	for i := range b.Strings {
		switch kind := b.Strings[i].Driver.Kind; kind {
		case KindResistor, KindFollowerSink, KindReferenceSink, KindTwoTransistor, KindRailSink, KindOpampSink, KindRegulator, KindModule:
		default:
			faults = append(faults, Fault{fmt.Sprintf("/strings/%d/driver/kind", i),
				fmt.Sprintf("a driver of kind %q cannot be solved by this version", kind)})
		}
	}
	return faults.ErrOrNil()
}

// wire orders the runs so that a parent comes before its children.
func (p *plant) wire() error {
	runs := p.build.Runs
	p.tree.Source = p.build.Supply.SourceResistance
	for len(p.runOf) < len(runs) {
		before := len(p.runOf)
		for i := range runs {
			r := &runs[i]
			if _, done := p.runAt[r.ID]; done {
				continue
			}
			parent := -1
			if r.From != "supply" {
				at, ok := p.runAt[r.From]
				if !ok {
					continue
				}
				parent = at
			}
			var c conductor
			if r.OhmsPerMetre != nil {
				c = conductor{wiring.Conductor{OhmsPerMetre: *r.OhmsPerMetre}, true}
			} else {
				copper, err := wiring.ParseConductor(r.Conductor)
				if err != nil {
					return Invalid{{fmt.Sprintf("/runs/%d/conductor", i), err.Error()}}
				}
				c = conductor{copper, false}
			}
			p.runAt[r.ID] = len(p.runOf)
			p.runOf = append(p.runOf, i)
			p.wires = append(p.wires, c)
			p.tree.Parent = append(p.tree.Parent, parent)
			p.tree.Ohms = append(p.tree.Ohms, 0)
		}
		if len(p.runOf) == before {
			return Invalid{{"/runs", "the runs do not all lead back to the supply"}}
		}
	}
	p.heatWires(p.build.Ambient.Typ)
	return nil
}

// heatWires sets every run's resistance, out and back, at a temperature in °C,
// and with it what every string sees of it.
func (p *plant) heatWires(celsius float64) {
	for k, i := range p.runOf {
		perMetre := p.wires[k].OhmsPerMetre
		if !p.wires[k].given {
			perMetre = p.wires[k].At(celsius)
		}
		p.tree.Ohms[k] = 2 * p.build.Runs[i].Length * perMetre
	}
	// A run's path is its parent's and itself; the supply's own stands last.
	n := len(p.runOf)
	if len(p.paths) != n+1 {
		p.paths = make([]float64, n+1)
	}
	p.paths[n] = p.tree.Source
	at := func(run int) float64 {
		if run < 0 {
			return p.paths[n]
		}
		return p.paths[run]
	}
	for k, parent := range p.tree.Parent {
		p.paths[k] = at(parent) + p.tree.Ohms[k]
	}
	for _, l := range p.strings {
		l.path = at(l.run) * l.quantity
	}
	for _, r := range p.rails {
		r.path = at(r.run)
	}
}

// assemble wires the string's circuit with the parts of the build.
func (l *line) assemble(b *Build) error {
	leds := l.leds(b)
	d := &l.spec.Driver
	switch {
	case d.Resistor != nil:
		l.Assembly = driver.Series(leds, resistance(d.Resistor.Resistor))
	case d.FollowerSink != nil:
		f := d.FollowerSink
		l.Assembly = driver.FollowerSink(leds, driver.Follower{
			Control: control(f.Control), PNP: l.transistor(b, f.PNP), NPN: l.transistor(b, f.NPN),
			Pullup: resistance(f.Pullup), Sense: resistance(f.Sense),
		})
	case d.ReferenceSink != nil:
		f := d.ReferenceSink
		l.Assembly = driver.ReferenceSink(leds, driver.Fixed{
			Reference: reference(f.Reference), Bias: resistance(f.Bias), NPN: l.transistor(b, f.NPN), Sense: resistance(f.Sense),
		})
	case d.RailSink != nil:
		f := d.RailSink
		on := driver.OnRail{NPN: l.transistor(b, f.NPN), Sense: resistance(f.Sense)}
		if f.BaseResistor != nil {
			on.BaseResistor = *f.BaseResistor
		}
		l.Assembly = driver.RailSink(leds, on)
	case d.TwoTransistor != nil:
		f := d.TwoTransistor
		l.Assembly = driver.TwoTransistor(leds, driver.Limiter{
			Pass: l.transistor(b, f.Pass), Sensor: l.transistor(b, f.Sensor),
			Bias: resistance(f.Bias), Sense: resistance(f.Sense),
		})
	case d.OpampSink != nil:
		return l.assembleOpamp(b, leds, d.OpampSink)
	case d.Regulator != nil:
		return l.assembleRegulator(b, leds, d.Regulator)
	case d.ModuleInstance != nil:
		return l.assembleModule(b, leds, d.ModuleInstance)
	}
	return nil
}

func resistance(r Resistor) driver.Resistance {
	return driver.Resistance{Ohms: r.Ohms, Tolerance: r.Tolerance}
}

func limits(s Spread) driver.Range { return driver.Range{Min: s.Min, Typ: s.Typ, Max: s.Max} }

// leastOhms stands for a pot's end with nothing left of its track.
const leastOhms = 1e-3

func control(c Control) driver.Control {
	switch {
	case c.Pot != nil:
		return driver.Control{
			Upper: driver.Resistance{Ohms: max(leastOhms, c.Pot.Upper+c.Pot.Ohms*(1-c.Pot.Turn))},
			Lower: driver.Resistance{Ohms: max(leastOhms, c.Pot.Lower+c.Pot.Ohms*c.Pot.Turn)},
		}
	case c.Divider != nil:
		return driver.Control{Upper: resistance(c.Divider.Upper), Lower: resistance(c.Divider.Lower)}
	}
	out := driver.Control{Volts: limits(*c.Volts)}
	if c.Ohms != nil {
		out.Ohms = *c.Ohms
	}
	return out
}

// leds gathers the string's LEDs by part, since those alike share a report.
func (l *line) leds(b *Build) []driver.LED {
	at := map[string]int{}
	var out []driver.LED
	for _, stack := range l.spec.LEDs {
		if k, ok := at[stack.Part]; ok {
			out[k].Count += stack.Quantity
			continue
		}
		at[stack.Part] = len(out)
		part := b.Parts[stack.Part].LED
		led, assumed := ledModel(part)
		if assumed != "" {
			l.assumed = append(l.assumed, stack.Part+": "+assumed)
		}
		v := part.ForwardVoltage
		out = append(out, driver.LED{
			Part: stack.Part, Count: stack.Quantity, Model: led,
			Shift: driver.Range{Min: v.Min - v.Typ, Max: v.Max - v.Typ},
		})
		l.lights = append(l.lights, lightSource(part))
	}
	return out
}

func ledModel(part *LED) (device.LED, string) {
	var led device.LED
	assumed := ""
	fitted := false
	if part.Model == nil && len(part.Points) > 1 {
		led, fitted = device.LEDFromPoints(part.Points)
	}
	switch {
	case part.Model != nil:
		led = device.LED{Is: part.Model.Is, N: part.Model.N, Rs: part.Model.Rs}
	case !fitted:
		led = device.LEDFromPoint(part.ForwardVoltage.Typ, part.TestCurrent)
		assumed = "the slope of its curve, for want of a model or of measured points"
	}
	led.Tempco = part.VoltageTempco
	if part.RthJunctionAmbient != nil {
		led.Rth = *part.RthJunctionAmbient
	}
	return led, assumed
}

func lightSource(part *LED) light.Source {
	s := light.Source{TestCurrent: part.TestCurrent, Curve: append([][2]float64(nil), part.FluxCurve...)}
	sort.Slice(s.Curve, func(i, k int) bool { return s.Curve[i][0] < s.Curve[k][0] })
	switch {
	case part.LuminousFlux != nil:
		s.Flux = *part.LuminousFlux
	case part.LuminousIntensity != nil && part.BeamAngle != nil && *part.BeamAngle > 0 && *part.BeamAngle < 180:
		s.Flux = light.FluxOfIntensity(*part.LuminousIntensity, *part.BeamAngle)
	}
	if part.FluxTempco != nil {
		s.Tempco = *part.FluxTempco
	}
	return s
}

func (l *line) transistor(b *Build, key string) driver.Transistor {
	part := b.Parts[key].Transistor
	q := driver.Transistor{Part: key, Gain: driver.Range{Min: 1, Typ: 1, Max: 1}}
	if m := part.Model; m != nil {
		q.Model = gummelPoon(m)
	} else {
		var f device.BJTFigures
		if part.VBEOn != nil {
			f.VBE, f.VBEAt = part.VBEOn.Volts.Typ, part.VBEOn.At
		}
		if part.HFE != nil {
			f.HFE = part.HFE.Typ
		}
		if part.VCESat != nil {
			f.VCESat, f.SatIc, f.SatIb = part.VCESat.Volts, part.VCESat.Ic, part.VCESat.Ib
		}
		var assumed []string
		q.Model, assumed = device.BJTFromFigures(f)
		for _, a := range assumed {
			l.assumed = append(l.assumed, key+": "+a)
		}
	}
	if part.RthJunctionAmbient != nil {
		q.Rth = *part.RthJunctionAmbient
	}
	if h := part.HFE; h != nil && h.Typ > 0 {
		q.Gain.Min, q.Gain.Max = h.Min/h.Typ, h.Max/h.Typ
	}
	if part.VBEOn != nil {
		v := part.VBEOn.Volts
		q.VBE = driver.Range{Min: v.Min - v.Typ, Max: v.Max - v.Typ}
	}
	return q
}

func gummelPoon(m *GummelPoon) device.BJT {
	b := device.BJTDefaults()
	set := func(to *float64, from *float64) {
		if from != nil {
			*to = *from
		}
	}
	set(&b.Is, m.Is)
	set(&b.Bf, m.Bf)
	set(&b.Br, m.Br)
	set(&b.Nf, m.Nf)
	set(&b.Nr, m.Nr)
	set(&b.Vaf, m.Vaf)
	set(&b.Var, m.Var)
	set(&b.Ikf, m.Ikf)
	set(&b.Ikr, m.Ikr)
	set(&b.Ise, m.Ise)
	set(&b.Isc, m.Isc)
	set(&b.Ne, m.Ne)
	set(&b.Nc, m.Nc)
	set(&b.Rb, m.Rb)
	b.Rbm = b.Rb
	set(&b.Rbm, m.Rbm)
	set(&b.Irb, m.Irb)
	set(&b.Re, m.Re)
	set(&b.Rc, m.Rc)
	set(&b.Xti, m.Xti)
	set(&b.Xtb, m.Xtb)
	set(&b.Eg, m.Eg)
	return b
}
