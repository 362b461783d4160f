package calc

import (
	"fmt"
	"strings"

	"lanternbook/calc/circuit"
	"lanternbook/calc/driver"
	"lanternbook/calc/fault"
)

// trial is one fault to try: in a device of a string or a rail, in its
// control, or in the supply.
type trial struct {
	line, rail int // −1 for none
	device     int // −1 is the control
	kind       fault.Kind
	how        fault.How
}

// trials lists every single fault of the build: string by string, then the
// rails, then the supply.
func (s *surveyor) trials() []trial {
	var out []trial
	for i, l := range s.p.strings {
		out = append(out, boardTrials(&l.Board, l.spec.control(), trial{line: i, rail: -1})...)
	}
	for k, r := range s.p.rails {
		out = append(out, boardTrials(&r.Board, r.spec.Control, trial{line: -1, rail: k})...)
	}
	for _, how := range fault.Ways(fault.Supply) {
		out = append(out, trial{line: -1, rail: -1, device: -1, kind: fault.Supply, how: how})
	}
	return out
}

func boardTrials(a *driver.Board, c *Control, at trial) []trial {
	var out []trial
	add := func(device int, kind fault.Kind, ways []fault.How) {
		for _, how := range ways {
			t := at
			t.device, t.kind, t.how = device, kind, how
			out = append(out, t)
		}
	}
	for k, d := range a.Devices {
		ways := fault.Ways(d.Kind())
		if c != nil && c.Pot != nil && trackOf(d.Role) != "" {
			// A pot's track has no value that could be misread.
			ways = []fault.How{fault.Open, fault.Shorted}
		}
		add(k, d.Kind(), ways)
	}
	if a.Source != circuit.None {
		add(-1, fault.Control, fault.Ways(fault.Control))
	}
	return out
}

// trackOf names the part of a pot's track that a role stands for, "" for none.
func trackOf(role string) string {
	switch role {
	case "upper_resistor":
		return "upper track of the pot"
	case "lower_resistor":
		return "lower track of the pot"
	}
	return ""
}

// failure begins the account of a trial: what it is, in words and by pointer.
func (s *surveyor) failure(t trial) Failure {
	f := Failure{String: t.line, Rail: t.rail, Kind: t.kind, How: t.how, Where: "supply", At: "/supply/voltage", Role: "supply"}
	name := "the supply"
	var board *driver.Board
	var c *Control
	root := ""
	switch {
	case t.line >= 0:
		l := s.p.strings[t.line]
		board, c = &l.Board, l.spec.control()
		f.Where, root = l.where(), l.pointer("/driver")
	case t.rail >= 0:
		r := s.p.rails[t.rail]
		board, c = &r.Board, r.spec.Control
		f.Where, root = r.name(), fmt.Sprintf("/rails/%d", t.rail)
	default:
		f.Fault = t.how.Words(name)
		return f
	}
	if t.device < 0 {
		f.Role, f.At, name = "control", root+"/control", "control"
	} else {
		d := board.Devices[t.device]
		f.Role, f.Part = d.Role, d.Part
		name = strings.ReplaceAll(d.Role, "_", " ")
		f.At = root + partPath(d.Role, s.kindOf(t))
		switch {
		case d.IsLED():
			l := s.p.strings[t.line]
			f.At, name = l.pointer(fmt.Sprintf("/leds/%d", l.stackOf(d.Part))), "one LED"
			if len(l.LEDs) > 1 {
				name = "one " + d.Part
			}
		case c != nil && c.Pot != nil && trackOf(d.Role) != "":
			f.At, name = root+"/control/pot", trackOf(d.Role)
		}
	}
	f.Fault = t.how.Words(name)
	return f
}

// kindOf is the kind of the driver or rail a trial is in.
func (s *surveyor) kindOf(t trial) string {
	if t.line >= 0 {
		return s.p.strings[t.line].spec.Driver.Kind
	}
	return s.p.rails[t.rail].spec.Kind
}

// stackOf is the first stack of a string with LEDs of a part.
func (l *line) stackOf(part string) int {
	for k, stack := range l.spec.LEDs {
		if stack.Part == part {
			return k
		}
	}
	return 0
}

// partPath is where the part in a role stands below a driver or rail.
func partPath(role, kind string) string {
	switch role {
	case "sink_transistor":
		if kind == KindTwoTransistor {
			return "/pass"
		}
		return "/npn"
	case "sensor_transistor":
		return "/sensor"
	case "follower_transistor":
		if kind == "buffered-reference" {
			return "/npn"
		}
		return "/pnp"
	case "reference", "fet", "opamp", "regulator", "module", "base_resistor":
		return "/" + role
	}
	return resistorPath(role)
}
