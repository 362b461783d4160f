package calc

import (
	"errors"
	"math"

	"lanternbook/calc/heat"
	"lanternbook/calc/wiring"
)

const (
	// nearFeed and nearRail are how far in volts a sound string's feed or rail
	// may move before it is solved again: its straight line is then still right
	// to a part in ten thousand of its current.
	nearFeed, nearRail = 1e-3, 1e-4
	// wideFeed is the same for a string that holds its current, so that its line
	// has it change by less than heldShare: what comes with the end of its
	// headroom grows e-fold in 26 mV.
	wideFeed, heldShare = 0.02, 1e-4
	// surveyRest is the step in volts at which the string with the fault, cable
	// and rail agree.
	surveyRest = 1e-6
	// nearAir is the step in kelvin at which a can's air counts as at rest.
	nearAir = 0.02
)

// settleAir settles the build, and in a sealed can its air with it. What burns
// or overloads the supply does not last until the air has followed.
func (s *surveyor) settleAir() error {
	area, transfer, sealed := s.p.sealed()
	for range treePatience {
		if err := s.settle(); err != nil || !sealed || !s.lasts() {
			return err
		}
		next := s.p.build.Ambient.Typ + heat.EnclosureRise(s.heat(), area, transfer)
		if math.Abs(next-s.air) < nearAir {
			return nil
		}
		s.air = next
		for j, l := range s.lines {
			if l != nil {
				l.Net.SetAir(next)
				s.lineAt[j].stale = true
			}
		}
		for k, r := range s.p.rails {
			r.Net.SetAir(next)
			s.rails[k].touched = true
		}
	}
	return &Unsolved{"(all)", errors.New("the air in the can finds no stable temperature")}
}

// lasts says whether the present state can go on: no part has run away and the
// supply can give what is drawn.
func (s *surveyor) lasts() bool {
	for j := range s.lines {
		if s.lines[j] != nil && s.lineAt[j].cold && s.homes != nil {
			return false
		}
	}
	for k := range s.rails {
		if s.rails[k].cold {
			return false
		}
	}
	m := s.p.build.Supply.MaxCurrent
	return m == nil || s.total() <= *m
}

// heat is what the build takes from its feeds in watts.
func (s *surveyor) heat() float64 {
	total := 0.0
	for j, l := range s.lines {
		if l != nil {
			total += l.quantity * s.lineAt[j].draw * s.lineAt[j].feed
		}
	}
	for _, r := range s.p.rails {
		total += r.Draw() * r.Net.Voltage(r.Feed)
	}
	return total
}

// settle solves strings, rails and cable together. Sound strings that hardly
// move stand in as straight lines.
func (s *surveyor) settle() error {
	n := len(s.lines) - 1
	for round := range treePatience {
		for _, j := range s.scope {
			if s.lineAt[j].stale {
				if err := s.solveLine(j, s.lineAt[j].feed); err != nil {
					return err
				}
			}
		}
		if s.lines[n] != nil && s.lineAt[n].stale {
			if err := s.solveLine(n, s.lineAt[n].feed); err != nil {
				return err
			}
		}
		for k := range s.p.rails {
			if s.reaches(k) {
				if err := s.balance(k); err != nil {
					return err
				}
			}
		}
		moved, err := s.share(round > treePatience/2)
		if err != nil {
			return err
		}
		if moved < surveyRest {
			return nil
		}
	}
	return &Unsolved{"(all)", errors.New("strings and cable do not settle")}
}

// reaches says whether the present fault can reach a rail.
func (s *surveyor) reaches(k int) bool {
	l := s.lines[len(s.lines)-1]
	return s.coupled || s.rails[k].touched || len(s.scope) == len(s.all) || l != nil && l.rail == s.p.rails[k]
}

// share solves the cable with what strings and rails draw, and solves again
// what it moves. It returns how far the furthest feed moved in volts that is
// not within what a straight line covers.
func (s *surveyor) share(damped bool) (moved float64, err error) {
	if s.coupled {
		for j, l := range s.lines {
			at := &s.lineAt[j]
			s.loads[j] = wiring.Load{At: -1}
			if l != nil && l.quantity > 0 {
				s.loads[j] = wiring.Load{At: l.run, Volts: at.feed, Current: l.quantity * at.draw, Slope: math.Max(0, l.quantity*at.drawSlope)}
			}
		}
		for k, r := range s.p.rails {
			s.loads[len(s.lines)+k] = wiring.Load{At: r.run, Volts: r.Net.Voltage(r.Feed), Current: r.Draw(), Slope: math.Max(0, r.Net.HeldSlope(r.Feed))}
		}
		s.p.tree.Solve(s.volts, s.loads, &s.result)
	}
	move := func(j int, tolerance float64) error {
		at, l := &s.lineAt[j], s.lines[j]
		feed := s.feedOf(l.run)
		d := math.Abs(feed - at.feed)
		if d < tolerance || l.quantity == 0 || tolerance == nearFeed && at.holds(d) {
			return nil
		}
		moved = math.Max(moved, d)
		if damped {
			feed = (feed + at.feed) / 2
		}
		return s.solveLine(j, feed)
	}
	for _, j := range s.scope {
		if err := move(j, nearFeed); err != nil {
			return moved, err
		}
	}
	if n := len(s.lines) - 1; s.lines[n] != nil {
		if err := move(n, surveyRest); err != nil {
			return moved, err
		}
	}
	for k, r := range s.p.rails {
		if d := math.Abs(s.feedOf(r.run) - r.Net.Voltage(r.Feed)); d >= surveyRest && s.reaches(k) {
			moved = math.Max(moved, d)
			s.rails[k].touched = true
			r.FeedAt(s.feedOf(r.run))
		}
	}
	return moved, nil
}

// holds says whether a string's current hardly moves with its feed, by d volts.
func (at *straightLine) holds(d float64) bool {
	return d < wideFeed && math.Abs(at.drawSlope*d) < heldShare*math.Abs(at.draw)
}

// feedOf is the voltage in volts at a run's far end.
func (s *surveyor) feedOf(run int) float64 {
	switch {
	case !s.coupled:
		return s.volts
	case run < 0:
		return s.result.Supply
	}
	return s.result.Volts[run]
}

// solveLine solves a string at its rail's voltage with its feed at a voltage in
// volts. One that finds no stable temperature, or only one that nothing
// survives, is solved as it stands in the first moment.
func (s *surveyor) solveLine(j int, feed float64) error {
	l, at := s.lines[j], &s.lineAt[j]
	at.touched, at.stale = true, false
	if l.rail != nil {
		l.Net.Hold(l.Rail, l.rail.volts)
		at.rail = l.rail.volts
	}
	err := l.at(feed)
	if err != nil && !isRunaway(err) {
		err = l.at(feed) // from the driver's own guess
	}
	if !at.cold && (err != nil || l.Net.Burnt()) {
		at.cold = true
		l.Net.Isothermal()
		l.started = false
		err = l.at(feed)
	}
	if err != nil {
		return err
	}
	at.feed, at.draw, at.drawSlope = feed, l.Draw(), l.Net.HeldSlope(l.Feed)
	if l.rail != nil {
		at.takes, at.takesSlope = l.Net.HeldCurrent(l.Rail), math.Max(0, l.Net.HeldSlope(l.Rail))
	}
	return nil
}

// solveRail is solveLine for a rail with the load that was put on it.
func (s *surveyor) solveRail(k int) error {
	r, at := s.p.rails[k], &s.rails[k]
	err := r.Net.Solve()
	again := func() {
		feed := r.Net.Voltage(r.Feed)
		r.Start(feed)
		err = r.Net.Solve()
	}
	if err != nil && !isRunaway(err) {
		again()
	}
	if !at.cold && (err != nil || r.Net.Burnt()) {
		at.cold = true
		r.Net.Isothermal()
		again()
	}
	if err != nil {
		return &Unsolved{r.name(), err}
	}
	return nil
}

// balance brings a rail and its strings together, as railLine.balance does,
// and keeps the answer between the highest voltage at which the strings were
// seen to take less than the rail gives, and the lowest at which they take
// more: a fault may bend both far from straight.
func (s *surveyor) balance(k int) error {
	r := s.p.rails[k]
	defer r.Load(0, 0)
	low, high, last := math.Inf(-1), math.Inf(1), math.Inf(1)
	for range treePatience {
		takes, slope := 0.0, 0.0
		add := func(j int, tolerance float64) error {
			l, at := s.lines[j], &s.lineAt[j]
			if l.quantity == 0 {
				return nil
			}
			if d := math.Abs(r.volts - at.rail); d > tolerance {
				if err := s.solveLine(j, at.feed); err != nil {
					return err
				}
			}
			takes += l.quantity * (at.takes + at.takesSlope*(r.volts-at.rail))
			slope += l.quantity * at.takesSlope
			return nil
		}
		for _, j := range s.onRail[k] {
			if err := add(j, nearRail); err != nil {
				return err
			}
		}
		if n := len(s.lines) - 1; s.lines[n] != nil && s.lines[n].rail == r {
			if err := add(n, surveyRest/10); err != nil {
				return err
			}
		}
		r.Load(takes-slope*r.volts, slope)
		if err := s.solveRail(k); err != nil {
			return err
		}
		step := r.Net.Voltage(r.Out) - r.volts
		if math.Abs(step) < surveyRest/10 {
			return nil
		}
		s.rails[k].touched = true
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
		last, r.volts = step, next
	}
	return &Unsolved{r.name(), errors.New("rail and strings do not settle")}
}
