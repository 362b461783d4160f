package calc

import (
	"fmt"
	"math"
	"slices"

	"lanternbook/calc/quantity"
)

// attempt is an edit to try: what it is in words, its patch, and the same
// applied to a build in memory.
type attempt struct {
	text  string
	patch []Operation
	apply func(b *Build)
}

const (
	// mostRemedied is how many findings get remedies, and mostRemedies how
	// many each; the worst come first.
	mostRemedied = 24
	mostRemedies = 4
	// mostTries is how far along a series of values an edit goes.
	mostTries = 8
	// worthwhile is the least share of its miss by which an edit that does not
	// cure a finding must better it.
	worthwhile = 0.05
	// smallBuild is the number of strings up to which a change of the supply is
	// tried on the whole build.
	smallBuild = 60
)

// Values that a shop buys. Common practice, no source.
var (
	standardVolts = []float64{3.3, 5, 6, 9, 12, 15, 18, 24, 28, 36, 48}
	standardAmps  = []float64{0.25, 0.5, 1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10, 12.5, 15, 20, 30}
	standardWatts = []float64{0.125, 0.25, 0.5, 1, 2, 3, 5, 10, 25}
	standardArea  = []float64{0.5, 0.75, 1, 1.5, 2.5, 4, 6, 10} // [mm²] IEC 60228
)

// remedy tries edits for the findings that are fail or tight, and keeps those
// that make their finding better without making another one fail.
func (p *plant) remedy(r *Report) {
	done := 0
	for i := range r.Findings {
		f := &r.Findings[i]
		if f.Severity != Fail && f.Severity != Tight {
			continue
		}
		if done++; done > mostRemedied {
			return
		}
		for _, family := range p.attempts(f) {
			if rem, ok := p.tryFamily(r, f, family); ok {
				f.Remedies = append(f.Remedies, rem)
			}
			if len(f.Remedies) == mostRemedies {
				break
			}
		}
	}
}

// tryFamily tries attempts of one kind in turn, until one cures the finding;
// else the best that made it better is taken.
func (p *plant) tryFamily(r *Report, f *Finding, family []attempt) (Remedy, bool) {
	var best Remedy
	found := false
	last := *f
	for k, a := range family {
		if k == mostTries {
			break
		}
		after, gives, ok := p.try(r, f, a)
		if !ok || !better(&last, &after) {
			break
		}
		best, found, last = Remedy{Text: a.text, Gives: gives, Patch: a.patch}, true, after
		if after.Severity == Pass {
			break
		}
	}
	return best, found
}

// better says whether a finding has improved by more than rounding.
func better(before, after *Finding) bool {
	if rank(after.Severity) != rank(before.Severity) {
		return rank(after.Severity) > rank(before.Severity)
	}
	if before.Value == nil || after.Value == nil {
		return false
	}
	gain := margin(after) - margin(before)
	return gain > worthwhile*(1+math.Abs(margin(before)))
}

// margin is how far a value is on the good side of its limit.
func margin(f *Finding) float64 {
	if f.Limit == nil {
		return 0
	}
	scale := math.Max(math.Abs(*f.Limit), 1e-12)
	if f.Code == "wanted" {
		return -math.Abs(*f.Value-*f.Limit) / scale
	}
	if f.Least {
		return (*f.Value - *f.Limit) / scale
	}
	return (*f.Limit - *f.Value) / scale
}

// try solves the build with the edit and returns the finding afterwards. An
// edit within one string is tried on that string alone, behind what the cable
// and the other strings leave it.
func (p *plant) try(r *Report, f *Finding, a attempt) (after Finding, gives string, ok bool) {
	b := p.build.clone()
	a.apply(&b)
	i, alone := stringOf(f.At)
	alone = alone && a.withinString(i) && p.strings[i].rail == nil
	if !alone && len(b.Strings) > smallBuild {
		return after, "", false
	}
	if alone {
		b = p.strings[i].alone(b)
	}
	tried, _, err := examine(&b)
	if err != nil {
		return after, "", false
	}
	found := false
	for k := range tried.Findings {
		g := &tried.Findings[k]
		if g.Code == f.Code && g.Where == f.Where && about(g) == about(f) {
			after, found = *g, true
		}
		if g.Severity == Fail && !(g.Code == f.Code && g.Where == f.Where) && !alreadyFails(r, g) && !(alone && g.Where == "supply") {
			return after, "", false
		}
	}
	if !found {
		return after, "", false
	}
	gives = after.Message
	if j := slices.IndexFunc(tried.Strings, func(s StringReport) bool { return "string "+s.Label == f.Where }); j >= 0 && f.Code != "wanted" {
		gives += "; " + amps(tried.Strings[j].Current.Typ)
	}
	return after, gives, true
}

// about tells findings of one code and string apart: by what they are of.
func about(f *Finding) string {
	at := f.At
	if f.Code == "resistor-power" {
		return at
	}
	if f.Code == "led-current" || f.Code == "led-junction" || f.Code == "transistor-power" || f.Code == "transistor-junction" {
		for i, c := range f.Message {
			if c == ':' {
				return f.Message[:i]
			}
		}
	}
	return ""
}

func alreadyFails(r *Report, g *Finding) bool {
	return slices.ContainsFunc(r.Findings, func(h Finding) bool {
		return h.Code == g.Code && h.Where == g.Where && h.Severity == Fail
	})
}

// stringOf reads the string's index from a pointer into it.
func stringOf(at string) (int, bool) {
	var i int
	n, _ := fmt.Sscanf(at, "/strings/%d", &i)
	return i, n == 1
}

// withinString says whether the edit touches nothing but string i.
func (a *attempt) withinString(i int) bool {
	for _, op := range a.patch {
		if k, ok := stringOf(op.Path); !ok || k != i {
			return false
		}
	}
	return true
}

// alone returns the build with only this string, fed as it is in the whole.
func (l *line) alone(b Build) Build {
	s := b.Strings[l.index]
	s.FedBy = ""
	b.Strings = []String{s}
	b.Runs, b.Rails = nil, nil
	b.Supply.Voltage = l.reach.volts
	b.Supply.SourceResistance = l.path / l.quantity
	b.Ambient = l.reach.inside
	b.Enclosure = nil
	return b
}

// attempts lists the edits worth trying for a finding, by family.
func (p *plant) attempts(f *Finding) [][]attempt {
	i, ok := stringOf(f.At)
	if !ok {
		if f.Code == "supply-loading" {
			return [][]attempt{p.largerSupply()}
		}
		return nil
	}
	l := p.strings[i]
	switch f.Code {
	case "headroom":
		if l.spec.Driver.Kind == KindResistor {
			return [][]attempt{l.fewerAtSameCurrent(), p.otherVoltage(1)}
		}
		return [][]attempt{l.fewer(), p.otherVoltage(1), l.lowerSense(), p.thickerRun(l)}
	case "wanted":
		return [][]attempt{p.asWanted(l)}
	case "led-current", "led-junction", "transistor-current", "thermal-runaway":
		return [][]attempt{l.senseUp(), l.controlDown()}
	case "transistor-power", "transistor-junction":
		return [][]attempt{l.more(), p.otherVoltage(-1), l.senseUp(), l.controlDown()}
	case "transistor-voltage":
		return [][]attempt{p.otherVoltage(-1)}
	case "resistor-power":
		return [][]attempt{l.moreWatts(f), l.senseUp()}
	case "base-drive", "reference-current":
		return [][]attempt{l.moreDrive()}
	}
	return nil
}

func replace(path string, v any) Operation { return Operation{Op: "replace", Path: path, Value: v} }

// fewer takes LEDs away one at a time from the largest stack.
func (l *line) fewer() []attempt {
	k := l.largest()
	stack := l.spec.LEDs[k]
	var out []attempt
	for n := stack.Quantity - 1; n >= 1; n-- {
		out = append(out, l.ledCount(k, n, l.leds1(stack.Quantity-n)+" fewer"))
	}
	return out
}

// more adds one LED to the largest stack.
func (l *line) more() []attempt {
	k := l.largest()
	return []attempt{l.ledCount(k, l.spec.LEDs[k].Quantity+1, "one LED more")}
}

func (l *line) leds1(n int) string {
	if n == 1 {
		return "one LED"
	}
	return fmt.Sprintf("%d LEDs", n)
}

func (l *line) largest() int {
	k := 0
	for j := range l.spec.LEDs {
		if l.spec.LEDs[j].Quantity >= l.spec.LEDs[k].Quantity {
			k = j
		}
	}
	return k
}

func (l *line) ledCount(k, n int, text string) attempt {
	return attempt{
		text:  fmt.Sprintf("%s: %d × %s", text, n, l.spec.LEDs[k].Part),
		patch: []Operation{replace(l.pointer(fmt.Sprintf("/leds/%d/quantity", k)), n)},
		apply: func(b *Build) { b.Strings[l.index].LEDs[k].Quantity = n },
	}
}

// fewerAtSameCurrent takes one LED away and gives its volts to the resistor.
func (l *line) fewerAtSameCurrent() []attempt {
	k := l.largest()
	n := l.spec.LEDs[k].Quantity - 1
	current := l.Net.LEDCurrent(l.Stack)
	if w := l.spec.Wanted; w != nil && w.Current != nil {
		current = *w.Current
	}
	if n < 1 || !(current > 0) {
		return nil
	}
	volts := 0.0
	for j, led := range l.LEDs {
		count := float64(led.Count)
		if led.Part == l.spec.LEDs[k].Part {
			count--
		}
		volts += count * l.Net.LEDVoltageAt(l.Stack, j, current)
	}
	_, ohms := quantity.Nearest("E24", (l.Net.Voltage(l.Feed)-volts)/current)
	if !(ohms > 0) {
		return nil
	}
	a := l.ledCount(k, n, "one LED fewer")
	a.text += " with " + ohmic(ohms)
	a.patch = append(a.patch, replace(l.pointer("/driver/resistor/ohms"), ohms))
	fewer := a.apply
	a.apply = func(b *Build) {
		fewer(b)
		b.Strings[l.index].Driver.Resistor.Resistor.Ohms = ohms
	}
	return []attempt{a}
}

// setSense is the edit that fits another sense (or series) resistor.
func (l *line) setSense(ohms float64, text string) attempt {
	role := l.Devices[l.SenseAt].Role
	return attempt{
		text:  text,
		patch: []Operation{replace(l.pointer("/driver"+resistorPath(role)+"/ohms"), ohms)},
		apply: func(b *Build) { b.Strings[l.index].resistor(role).Ohms = ohms },
	}
}

// senseUp fits larger sense (or series) resistors of E24 in turn.
func (l *line) senseUp() []attempt {
	if l.SenseAt < 0 {
		return nil
	}
	role := l.Devices[l.SenseAt].Role
	ohms := l.spec.resistor(role).Ohms
	var out []attempt
	for range mostTries {
		_, ohms = quantity.Nearest("E24", ohms*1.01)
		if math.IsNaN(ohms) {
			break
		}
		out = append(out, l.setSense(ohms, roleWords(role)+" "+ohmic(ohms)))
	}
	return out
}

func roleWords(role string) string {
	switch role {
	case "resistor":
		return "series resistor"
	case "sense_resistor":
		return "sense resistor"
	}
	return role
}

// controlDown lowers the control voltage by steps of a tenth.
func (l *line) controlDown() []attempt {
	f := l.spec.Driver.FollowerSink
	if f == nil || f.Control.Volts == nil {
		return nil
	}
	var out []attempt
	for share := 0.9; share > 0.45; share -= 0.1 {
		out = append(out, l.setControl(scaled(*f.Control.Volts, share), "control "))
	}
	return out
}

func (l *line) setControl(v Spread, text string) attempt {
	return attempt{
		text:  text + volts(v.Typ),
		patch: []Operation{replace(l.pointer("/driver/control/volts"), v)},
		apply: func(b *Build) { b.Strings[l.index].Driver.FollowerSink.Control.Volts = &v },
	}
}

// lowerSense lets the sense resistor take fewer volts at the same current.
func (l *line) lowerSense() []attempt {
	f := l.spec.Driver.FollowerSink
	if f == nil || f.Control.Volts == nil {
		return nil
	}
	var out []attempt
	for _, share := range []float64{0.7, 0.5, 0.35, 0.25} {
		ohms, _ := quantity.Nearest("E24", f.Sense.Ohms*share)
		if math.IsNaN(ohms) {
			break
		}
		a := l.setControl(scaled(*f.Control.Volts, ohms/f.Sense.Ohms), "control ")
		sense := l.setSense(ohms, "")
		control := a.apply
		a.text += " with sense " + ohmic(ohms)
		a.patch = append(a.patch, sense.patch...)
		a.apply = func(b *Build) { control(b); sense.apply(b) }
		out = append(out, a)
	}
	return out
}

// scaled multiplies a spread, rounded to what can be set.
func scaled(s Spread, by float64) Spread {
	round := func(v float64) float64 {
		step := math.Pow(10, math.Floor(math.Log10(math.Max(math.Abs(v), 1e-9)))-2)
		return math.Round(v*by/step) * step
	}
	tidy := func(v float64) float64 { return math.Round(round(v)*1e9) / 1e9 }
	return Spread{Min: tidy(s.Min), Typ: tidy(s.Typ), Max: tidy(s.Max), Bare: s.Bare}
}

// otherVoltage takes the next standard supplies up or down, their spread in
// proportion.
func (p *plant) otherVoltage(way int) []attempt {
	v := p.build.Supply.Voltage
	list := slices.Clone(standardVolts)
	if way < 0 {
		slices.Reverse(list)
	}
	var out []attempt
	for _, next := range list {
		if float64(way)*(next-v.Typ) <= 0.05*v.Typ || next > dryTouch {
			continue
		}
		to := scaled(v, next/v.Typ)
		to.Typ = next
		out = append(out, attempt{
			text:  quantity.Text(next, "V") + " supply",
			patch: []Operation{replace("/supply/voltage", to)},
			apply: func(b *Build) { b.Supply.Voltage = to },
		})
	}
	return out
}

// largerSupply takes the next standard current ratings.
func (p *plant) largerSupply() []attempt {
	var out []attempt
	for _, rating := range standardAmps {
		if m := p.build.Supply.MaxCurrent; m != nil && rating > *m {
			out = append(out, attempt{
				text:  quantity.Text(rating, "A") + " supply",
				patch: []Operation{replace("/supply/max_current", rating)},
				apply: func(b *Build) { b.Supply.MaxCurrent = &rating },
			})
		}
	}
	return out
}

// thickerRun takes the next conductors for the run on the string's way that
// loses most.
func (p *plant) thickerRun(l *line) []attempt {
	worst, most := -1, 0.0
	for k := l.run; k >= 0; k = p.tree.Parent[k] {
		if drop := p.tree.Ohms[k] * p.result.Current[k]; drop > most && !p.wires[k].given {
			worst, most = k, drop
		}
	}
	if worst < 0 {
		return nil
	}
	i := p.runOf[worst]
	var out []attempt
	for _, area := range standardArea {
		if area*1e-6 <= p.wires[worst].Area*1.01 {
			continue
		}
		name := fmt.Sprintf("%g mm2", area)
		out = append(out, attempt{
			text:  fmt.Sprintf("%g mm² for run %s", area, p.build.Runs[i].ID),
			patch: []Operation{replace(fmt.Sprintf("/runs/%d/conductor", i), name)},
			apply: func(b *Build) { b.Runs[i].Conductor = name },
		})
	}
	return out
}

// moreWatts takes the next standard ratings of the resistor at fault.
func (l *line) moreWatts(f *Finding) []attempt {
	var out []attempt
	for _, d := range l.Devices {
		if !d.IsResistor() || l.pointer("/driver"+resistorPath(d.Role)) != f.At {
			continue
		}
		for _, w := range standardWatts {
			if f.Limit != nil && w > *f.Limit {
				out = append(out, attempt{
					text:  quantity.Text(w, "W") + " resistor",
					patch: []Operation{replace(f.At+"/watts", w)},
					apply: func(b *Build) { b.Strings[l.index].resistor(d.Role).Watts = &w },
				})
			}
		}
	}
	return out
}

// moreDrive lowers bias or pull-up along E24.
func (l *line) moreDrive() []attempt {
	k := l.driveResistor()
	if k < 0 {
		return nil
	}
	role := l.Devices[k].Role
	ohms := l.spec.resistor(role).Ohms
	name := "bias "
	if role == "pullup_resistor" {
		name = "pull-up "
	}
	var out []attempt
	for _, share := range []float64{1.2, 1.5, 2, 3, 5, 8, 12, 20} {
		to, _ := quantity.Nearest("E24", ohms/share)
		if math.IsNaN(to) {
			break
		}
		out = append(out, attempt{
			text:  name + ohmic(to),
			patch: []Operation{replace(l.pointer("/driver"+resistorPath(role)+"/ohms"), to)},
			apply: func(b *Build) { b.Strings[l.index].resistor(role).Ohms = to },
		})
	}
	return out
}

// asWanted fits the E24 resistor nearest to what is wanted.
func (p *plant) asWanted(l *line) []attempt {
	s, err := Suggest(*p.build, l.index)
	if err != nil || len(s.Choices) == 0 {
		return nil
	}
	var want float64
	w := l.spec.Wanted
	best, off := -1, math.Inf(1)
	for k, c := range s.Choices {
		got := c.Current
		if w.Current != nil {
			want = *w.Current
		} else {
			want = *w.LuminousFlux
			if c.Flux == nil {
				continue
			}
			got = *c.Flux
		}
		if d := math.Abs(got - want); c.Series == "E24" && d < off {
			best, off = k, d
		}
	}
	if best < 0 {
		return nil
	}
	c := s.Choices[best]
	return []attempt{l.setSense(c.Value, roleWords(l.Devices[l.SenseAt].Role)+" "+ohmic(c.Value))}
}

// clone copies what an edit may touch.
func (b *Build) clone() Build {
	c := *b
	c.Strings = slices.Clone(b.Strings)
	c.Runs = slices.Clone(b.Runs)
	for i := range c.Strings {
		s := &c.Strings[i]
		s.LEDs = slices.Clone(s.LEDs)
		d := &s.Driver
		d.Resistor = copyOf(d.Resistor)
		d.FollowerSink = copyOf(d.FollowerSink)
		d.ReferenceSink = copyOf(d.ReferenceSink)
		d.TwoTransistor = copyOf(d.TwoTransistor)
		d.RailSink = copyOf(d.RailSink)
		d.OpampSink = copyOf(d.OpampSink)
		d.Regulator = copyOf(d.Regulator)
		if d.FollowerSink != nil {
			d.FollowerSink.Control.Divider = copyOf(d.FollowerSink.Control.Divider)
		}
	}
	return c
}

func copyOf[T any](p *T) *T {
	if p == nil {
		return nil
	}
	v := *p
	return &v
}
