package calc

import (
	"fmt"
	"math"
	"slices"
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
		same := g.Code == f.Code && g.Where == f.Where
		if same && about(g) == about(f) {
			after, found = *g, true
		}
		elsewhere := alone && g.Where == "supply" // of this string alone
		if g.Severity == Fail && !same && !elsewhere && !alreadyFails(r, g) {
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
