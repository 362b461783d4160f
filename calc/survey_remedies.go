package calc

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"lanternbook/calc/fault"
)

const (
	// steadyCurrent is the share by which an edit against a fault may move the
	// current of a sound string that it is not about, and lessCurrent that of
	// the string it is about.
	steadyCurrent = 0.06
	lessCurrent   = 0.3
	// muchMilder is the share by which an edit must better what it does not
	// cure to be worth telling.
	muchMilder = 0.5
	// mostWatts is the largest resistor that is offered, in watts.
	mostWatts = 5
)

// standardBase are resistors for the base of each string on a rail, in ohms.
// Common practice, no source: 470 is usual.
var standardBase = []float64{100, 220, 330, 470, 680, 1000}

// clinic tries edits of the design against the failures that matter. What an
// edit makes of the build is kept, since many failures ask for the same.
type clinic struct {
	s    *surveyor
	made map[string]*surveyor // by the edit; nil where it will not do
	won  map[string]int       // which of a family did best, by make and failure
}

// cure tries edits for the failures that matter, as long as go says so.
func (s *surveyor) cure(out *Failures, goOn func() bool) {
	c := clinic{s: s, made: map[string]*surveyor{}, won: map[string]int{}}
	for i := range out.Matter() {
		f := &out.All[i]
		if len(s.all) > smallBuild && i == mostRemedied || !goOn() {
			return
		}
		if f.Unsolved != "" || f.trial.kind == fault.Supply {
			continue
		}
		for k, family := range s.switches(f) {
			if r, ok := c.tryFamily(f, k, family); ok {
				f.Remedies = append(f.Remedies, r)
			}
			if len(f.Remedies) == mostRemedies {
				break
			}
		}
	}
}

// switches lists the edits worth trying for a failure, by family.
func (s *surveyor) switches(f *Failure) [][]attempt {
	families := [][]attempt{s.baseResistors(f), s.higherRating(f)}
	if f.String < 0 {
		return families
	}
	l := s.p.strings[f.String]
	if l.spec.Driver.Kind == KindResistor {
		return append(families, l.fewerAtSameCurrent(), l.senseUp())
	}
	return append(families, l.more(), l.senseUp())
}

// baseResistors puts a resistor into the base of each string on the failure's
// rail.
func (s *surveyor) baseResistors(f *Failure) []attempt {
	k := f.Rail
	if f.String >= 0 && s.p.strings[f.String].rail != nil {
		k = s.p.strings[f.String].rail.index
	}
	if k < 0 {
		return nil
	}
	var out []attempt
	for _, ohms := range standardBase {
		a := attempt{text: ohmic(ohms) + " in each base on " + s.p.rails[k].name()}
		var on []int
		for _, j := range s.onRail[k] {
			has := s.p.strings[j].spec.Driver.RailSink.BaseResistor
			if has != nil && *has >= ohms {
				continue
			}
			op := Operation{Op: "add", Path: s.p.strings[j].pointer("/driver/base_resistor"), Value: ohms}
			if has != nil {
				op.Op = "replace"
			}
			a.patch = append(a.patch, op)
			on = append(on, j)
		}
		a.apply = func(b *Build) {
			for _, j := range on {
				b.Strings[j].Driver.RailSink.BaseResistor = &ohms
			}
		}
		if len(on) > 0 {
			out = append(out, a)
		}
	}
	return out
}

// higherRating takes the next ratings for the resistor that is furthest beyond
// its own.
func (s *surveyor) higherRating(f *Failure) []attempt {
	for i := range f.Over {
		o := &f.Over[i]
		if o.What != overPower || ratingsOf(s.p.build.Parts[o.Part]).power != nil {
			continue
		}
		at := s.resistorAt(o)
		if at == "" {
			continue
		}
		var out []attempt
		for _, w := range standardWatts {
			if w > o.Limit && w <= mostWatts {
				out = append(out, attempt{
					text:  fmt.Sprintf("%s for the %s of %s", watts(w), roleInWords(o.Role), o.Where),
					patch: []Operation{replace(at+"/watts", w)},
					apply: func(b *Build) { b.setWatts(at, w) },
				})
			}
		}
		return out
	}
	return nil
}

// resistorAt points to the resistor that a limit is of, "" for any other part.
func (s *surveyor) resistorAt(o *Over) string {
	for _, l := range s.p.strings {
		if l.where() == o.Where && l.spec.resistor(o.Role) != nil {
			return l.pointer("/driver" + resistorPath(o.Role))
		}
	}
	for k, r := range s.p.rails {
		if r.name() == o.Where && r.spec.resistor(o.Role) != nil {
			return fmt.Sprintf("/rails/%d%s", k, resistorPath(o.Role))
		}
	}
	return ""
}

// setWatts rates the resistor that a pointer leads to.
func (b *Build) setWatts(at string, rating float64) {
	i, k := 0, 0
	role := at[strings.LastIndex(at, "/")+1:]
	if role != "resistor" {
		role += "_resistor"
	}
	if n, _ := fmt.Sscanf(at, "/strings/%d", &i); n == 1 {
		b.Strings[i].resistor(role).Watts = &rating
		return
	}
	if n, _ := fmt.Sscanf(at, "/rails/%d", &k); n == 1 {
		r := b.Rails[k]
		for _, p := range []**Resistor{&r.Pullup, &r.Bias, &r.Pulldown} {
			*p = copyOf(*p)
		}
		if r.Control != nil && r.Control.Divider != nil {
			r.Control = copyOf(r.Control)
			r.Control.Divider = copyOf(r.Control.Divider)
		}
		r.resistor(role).Watts = &rating
		b.Rails = slices.Clone(b.Rails)
		b.Rails[k] = r
	}
}

// tryFamily tries edits of one kind in turn until one cures the failure; else
// the one that betters it most is taken, if that is much.
func (c *clinic) tryFamily(f *Failure, k int, family []attempt) (Remedy, bool) {
	key := c.like(f, k)
	first, last := 0, len(family)
	if won, seen := c.won[key]; seen {
		first, last = won, min(won+1, last)
	}
	var best Remedy
	c.won[key] = len(family)
	found, before := false, *f
	for i := first; i < last; i++ {
		a := family[i]
		after, ok := c.try(f, a)
		if !ok || !milder(&before, &after, worthwhile) {
			if found {
				break
			}
			continue
		}
		before = after
		if milder(f, &after, muchMilder) {
			best, found = Remedy{Text: a.text, Gives: after.tells, Patch: a.patch}, true
			c.won[key] = i
		}
		if !after.Matters {
			break
		}
	}
	return best, found
}

// like is a key that failures of one kind in strings of one make share.
func (c *clinic) like(f *Failure, family int) string {
	key := fmt.Sprintf("%d %d %s %s %s", family, f.Rail, f.Role, f.Part, f.How)
	if f.String >= 0 {
		key += c.s.p.strings[f.String].kindKey()
	}
	return key
}

// milder says whether a failure no longer matters, or is less than another by
// a share: the worst part less far beyond its limit and the other strings
// changed no more, or these changed less and no part further beyond.
func milder(before, after *Failure, share float64) bool {
	if !after.Matters {
		return before.Matters
	}
	was, is := before.worst(), after.worst()
	moved, moves := math.Abs(before.Most), math.Abs(after.Most)
	switch {
	case is < was*(1-share) || math.IsInf(was, 1) && !math.IsInf(is, 1):
		return moves < moved+worthwhile
	case moved > matteringChange && moves < moved*(1-share):
		return is <= was
	}
	return false
}

// try solves the build with the edit, without the fault and with it.
func (c *clinic) try(f *Failure, a attempt) (after Failure, ok bool) {
	if f.String >= 0 && a.withinString(f.String) {
		return c.tryString(f, a)
	}
	key := a.patch[0].Path + " " + a.text
	s, seen := c.made[key]
	if !seen {
		s = c.edited(a)
		c.made[key] = s
	}
	if s == nil {
		return after, false
	}
	t, ok := s.alike(c.s, f.trial)
	if !ok {
		return after, false
	}
	after, ok = s.try(t, nil)
	return after, ok && after.Unsolved == ""
}

// tryString is try for an edit within the string that has the fault: the other
// strings stay as they are.
func (c *clinic) tryString(f *Failure, a attempt) (after Failure, ok bool) {
	s := c.s
	b := s.p.build.clone()
	a.apply(&b)
	spec := &b.Strings[f.String]
	after, ok = s.try(f.trial, spec)
	h := &s.madeHome
	if !ok || after.Unsolved != "" || s.made == nil || s.made.spec != spec {
		return after, false
	}
	was := &s.homes[f.String]
	if math.Abs(h.current-was.current) > lessCurrent*was.current || s.sickAtHome(h) && !s.sickAtHome(was) {
		return after, false
	}
	return after, s.keepsHeadroom(s.made)
}

// edited solves the build with an edit and no fault; nil where it has no
// solution or spoils a sound string.
func (c *clinic) edited(a attempt) *surveyor {
	b := c.s.p.build.clone()
	a.apply(&b)
	s, err := newSurveyor(&b)
	if err != nil {
		return nil
	}
	for j := range s.all {
		was, is := &c.s.homes[j], &s.homes[j]
		if math.Abs(is.current-was.current) > steadyCurrent*was.current || s.sickAtHome(is) && !c.s.sickAtHome(was) {
			return nil
		}
	}
	return s
}

// sickAtHome says whether a string has a part beyond a limit without a fault.
func (s *surveyor) sickAtHome(h *home) bool {
	return slices.ContainsFunc(h.limits, func(m limit) bool { return m.home > m.in(s.air) })
}

// keepsHeadroom says whether a string that an edit has made still holds its
// current on the lowest supply with cold LEDs of the highest bin, or holds it
// no worse than before.
func (s *surveyor) keepsHeadroom(l *line) bool {
	if l.Edge == nil {
		return true
	}
	sound := s.p.strings[l.index]
	l.Load(&s.madeHome.state)
	return s.leastLeft(l) >= min(0, s.leastLeft(sound))
}

// leastLeft is what is left over in volts at the string's typical point less
// what supply, bins and cold may take of it.
func (s *surveyor) leastLeft(l *line) float64 {
	b := s.p.build
	left, err := l.headroom(s.homes[l.index].at.feed, 0)
	if err != nil {
		return math.Inf(-1)
	}
	least := left.headroom - (b.Supply.Voltage.Typ - b.Supply.Voltage.Min)
	for _, led := range l.LEDs {
		colder := b.Ambient.Typ - b.Ambient.Min
		least -= float64(led.Count) * (led.Shift.Max + math.Max(0, -led.Model.Tempco)*colder)
	}
	return least
}

// alike finds the same trial in the build with an edit, whose devices may
// stand elsewhere.
func (s *surveyor) alike(from *surveyor, t trial) (trial, bool) {
	if t.line < 0 || t.device < 0 {
		return t, true
	}
	d := from.p.strings[t.line].Devices[t.device]
	for k, e := range s.p.strings[t.line].Devices {
		if e.Role == d.Role && e.Part == d.Part {
			t.device = k
			return t, true
		}
	}
	return t, false
}
