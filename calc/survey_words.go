package calc

import (
	"fmt"
	"math"
	"strings"

	"lanternbook/calc/driver"
	"lanternbook/calc/fault"
)

const (
	// hotter and warm are by how many times a part's heat must grow, and to how
	// many watts, for the sentence to say so.
	hotter = 1.2
	warm   = 0.1
	// mostTold is how many parts beyond their limits a sentence names.
	mostTold = 2
	// moreTaken and muchTaken are the same for what a string takes from its
	// rail, in amperes.
	moreTaken = 3
	muchTaken = 1e-3
	// movedRail is the share by which a rail must move to be told.
	movedRail = 0.02
)

// sentence says what is wrong and what comes of it, while the fault is settled.
func (s *surveyor) sentence(f *Failure, t trial) string {
	head := f.Fault + ": "
	if f.Where != "supply" {
		head = f.Where + ": " + head
	}
	if f.Unsolved != "" {
		return head + "no operating point was found, so nobody can tell what comes of it (" + f.Unsolved + ")"
	}
	var told []string
	add := func(words string) {
		if words != "" {
			told = append(told, words)
		}
	}
	if l := s.lines[len(s.lines)-1]; l != nil {
		add(becomes(f.Current, f.Was))
		add(s.takenFromRail(l))
		add(s.heated(&l.Board, l.Holder, s.madeHome.power, "its ", t))
	}
	for _, c := range f.Rails {
		add(s.railMoved(&c))
		r := s.p.rails[c.Rail]
		for k := range r.Devices {
			if t.rail < 0 || t.device != k {
				add(s.heated(&r.Board, k, s.railHomes[c.Rail].power[k], "the ", t))
			}
		}
	}
	if f.Runaway {
		add("a part finds no stable temperature and burns")
	}
	add(s.tooMuch(f))
	add(s.othersChange(f, t))
	f.tells = strings.Join(told, "; ")
	return head + f.tells
}

// becomes says what a string's light does.
func becomes(now, was float64) string {
	change := changeOf(now, was)
	from := fmt.Sprintf("%s instead of %s", amps(now), amps(was))
	switch {
	case now < dark && was < dark:
		return "as dark as before"
	case now < dark:
		return "dark"
	case math.Abs(change) < toldChange:
		return "its light stays"
	case change < -matteringChange:
		return "dim, " + from
	case change > matteringChange:
		return "bright, " + from
	}
	return from
}

// takenFromRail says when a string loads its rail, or lifts it.
func (s *surveyor) takenFromRail(l *line) string {
	if l.rail == nil {
		return ""
	}
	takes, was := l.Net.HeldCurrent(l.Rail), s.madeHome.at.takes
	switch {
	case takes > muchTaken && takes > moreTaken*was:
		return "its transistor takes " + amps(takes) + " from the rail"
	case takes < -muchTaken:
		return "it feeds " + amps(-takes) + " into the rail"
	}
	return ""
}

func (s *surveyor) railMoved(c *RailChange) string {
	change := (c.Volts - c.Was) / math.Max(c.Was, seenVolts)
	to := fmt.Sprintf("from %s to %s", volts(c.Was), volts(c.Volts))
	switch {
	case math.Abs(change) < movedRail:
		return ""
	case c.Volts < seenVolts:
		return "the rail falls to nothing"
	case change < 0:
		return "the rail falls " + to
	}
	return "the rail rises " + to
}

// heated says when a device burns much more than it did.
func (s *surveyor) heated(a *driver.Board, k int, was float64, whose string, t trial) string {
	d := a.Devices[k]
	power := a.Power(d)
	if !(power > warm && power > hotter*was) || whose == "its " && t.device == k && t.kind != fault.Resistor {
		return ""
	}
	return fmt.Sprintf("%s%s heats from %s to %s", whose, shortName(d.Role), watts(was), watts(power))
}

// shortName is how the sentence calls a device.
func shortName(role string) string {
	switch {
	case strings.HasPrefix(role, "led_"):
		return "LED"
	case role == "sink_transistor":
		return "transistor"
	case role == "follower_transistor":
		return "follower"
	}
	return roleInWords(role)
}

// tooMuch names the parts that are furthest beyond their limits.
func (s *surveyor) tooMuch(f *Failure) string {
	if f.Beyond == 0 {
		return ""
	}
	var parts []string
	seen := map[string]bool{}
	for i := range f.Over {
		o := &f.Over[i]
		name := "the " + shortName(o.Role)
		if o.Where != f.Where {
			name += " of " + o.Where
		}
		if o.Role == "supply" {
			name = "the supply, which then shuts down or blows its fuse"
		}
		if seen[name] {
			continue
		}
		seen[name] = true
		if len(parts) < mostTold {
			parts = append(parts, fmt.Sprintf("%s (%s of %s)", name, inUnit(o.Value, o.Unit), inUnit(o.Limit, o.Unit)))
		}
	}
	more := ""
	if rest := len(seen) - len(parts); rest > 0 {
		more = fmt.Sprintf(" and %d more", rest)
	}
	return "too much for " + strings.Join(parts, ", ") + more
}

func inUnit(v float64, unit string) string {
	switch unit {
	case "W":
		return watts(v)
	case "A":
		return amps(v)
	case "°C":
		return celsius(v)
	}
	return volts(v)
}

// othersChange says what the strings without a fault do.
func (s *surveyor) othersChange(f *Failure, t trial) string {
	who, whose := "the strings", "strings"
	if t.line >= 0 {
		who, whose = "the other strings", "other strings"
	}
	all, changed, darkened := 0.0, 0.0, 0.0
	for _, l := range s.p.strings {
		all += l.quantity
	}
	if all == 0 {
		return ""
	}
	least, most, only := math.Inf(1), math.Inf(-1), ""
	for i := range f.Others {
		c := &f.Others[i]
		change := changeOf(c.Current, c.Was)
		if math.Abs(change) < toldChange {
			continue
		}
		l := s.p.strings[c.String]
		changed += l.quantity
		only = l.where()
		if c.Current < dark {
			darkened += l.quantity
		}
		least, most = math.Min(least, change), math.Max(most, change)
	}
	one := changed == 1 && all > 1
	switch {
	case changed == 0 && t.line < 0:
		return "the strings keep their light"
	case changed == 0:
		return who + " stay as they are"
	case one:
		who = only
	case changed < all:
		who = fmt.Sprintf("%.0f %s", changed, whose)
	}
	say := func(verb, change string) string {
		if one {
			verb = map[string]string{"go": "goes", "lose": "loses", "gain": "gains", "change by": "changes by"}[verb]
		}
		return who + " " + verb + " " + change
	}
	switch {
	case darkened == changed:
		return say("go", "dark")
	case most < 0:
		return say("lose", upTo(least, most))
	case least > 0:
		return say("gain", upTo(most, least))
	}
	return say("change by", signed(least)+" to "+signed(most))
}

// upTo writes shares that run from the least to the most; alike they are one.
func upTo(most, least float64) string {
	text := percent(100 * math.Abs(most))
	if text != percent(100*math.Abs(least)) {
		return "up to " + text
	}
	return text
}

func signed(v float64) string {
	if v < 0 {
		return "−" + percent(-100*v)
	}
	return "+" + percent(100*v)
}
