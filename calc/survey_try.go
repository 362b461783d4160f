package calc

import (
	"strings"

	"lanternbook/calc/circuit"
	"lanternbook/calc/driver"
	"lanternbook/calc/fault"
)

// try solves the build with one fault and comes home again. With spec, the
// string that has it is made by that. ok is false where the fault changes
// nothing at all, since it lies between points that are held.
func (s *surveyor) try(t trial, spec *String) (f Failure, ok bool) {
	f = s.failure(t)
	f.trial = t
	volts, air := s.volts, s.air
	s.reach(t)
	defer func() {
		s.volts = volts
		s.goHome(air)
		s.discharge()
	}()
	if t.line >= 0 {
		if err := s.patient(t.line, spec); err != nil {
			f.Unsolved, f.Matters = reason(err), true
			f.Text = s.sentence(&f, t)
			return f, true
		}
	}
	mend := s.do(t)
	if mend == nil {
		return f, false
	}
	defer mend()
	if err := s.settleAir(); err != nil {
		f.Unsolved, f.Matters = reason(err), true
	} else {
		s.judge(&f, t)
		s.read(&f, t)
	}
	f.Text = s.sentence(&f, t)
	return f, true
}

// reach sets what the fault of a trial can reach beside its own string.
func (s *surveyor) reach(t trial) {
	_, _, sealed := s.p.sealed()
	switch {
	case s.coupled || sealed || t.kind == fault.Supply:
		s.scope = s.all
	case t.rail >= 0:
		s.scope = s.onRail[t.rail]
	case s.p.strings[t.line].rail != nil:
		s.scope = s.onRail[s.p.strings[t.line].rail.index]
	default:
		s.scope = nil
	}
}

// What a wrong supply gives, as a share of its voltage.
const (
	halfSupply    = 0.5
	quarterUpMore = 1.25
)

// do does what the trial says; nil where nothing changes.
func (s *surveyor) do(t trial) (mend func()) {
	n := len(s.lines) - 1
	switch {
	case t.kind == fault.Supply:
		if t.how == fault.Half {
			s.volts *= halfSupply
		} else {
			s.volts *= quarterUpMore
		}
		return func() {}
	case t.line >= 0:
		s.lineAt[n].stale = true
		return breakBoard(&s.lines[n].Board, t)
	}
	s.rails[t.rail].touched = true
	return breakBoard(&s.p.rails[t.rail].Board, t)
}

func breakBoard(a *driver.Board, t trial) func() {
	if t.device < 0 {
		return a.BreakControl(t.how)
	}
	return a.Break(a.Devices[t.device], t.how)
}

// read fills in what a meter reads in the string with the fault.
func (s *surveyor) read(f *Failure, t trial) {
	l := s.lines[len(s.lines)-1]
	if l == nil {
		return
	}
	v := l.voltages()
	f.Voltages = &v
	for k, led := range l.LEDs {
		r := LEDReading{Part: led.Part}
		here := t.kind == fault.LED && t.device == k
		if !here || led.Count > 1 {
			each := l.Net.LEDVoltage(l.Stack, k)
			r.Each = &each
		}
		if here {
			faulty := l.FaultyLED()
			if t.how == fault.Reversed {
				faulty = -faulty
			}
			r.Faulty = &faulty
		}
		f.LEDs = append(f.LEDs, r)
	}
}

// voltages are the string's test points against its own return.
func (l *line) voltages() Voltages {
	v := Voltages{
		Feed: l.Net.Voltage(l.Feed), Tail: l.Net.Voltage(l.Tail),
		Control: l.point(l.Control), Base: l.point(l.Base), Sense: l.point(l.Sense), Gate: l.point(l.Gate),
	}
	if l.HighSide {
		top := v.Feed - v.Tail
		v.Tail, v.Sense, v.Top = 0, nil, &top
	}
	return v
}

func pointOf(a *driver.Board, n circuit.Node) *float64 {
	if n == circuit.None {
		return nil
	}
	v := a.Net.Voltage(n)
	return &v
}

func roleInWords(role string) string { return strings.ReplaceAll(role, "_", " ") }
