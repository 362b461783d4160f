package calc

import (
	"fmt"
	"strconv"
	"strings"
)

// DialTable is what turning a pot, or moving a control voltage, does to the
// strings that it sets.
type DialTable struct {
	Where   string       `json:"where"`   // "string A", "rail main"
	At      string       `json:"at"`      // JSON Pointer to the setting in the build
	By      string       `json:"by"`      // "turn": the setting is a pot's turn, 0 to 1; "volts": a control voltage [V]
	Setting float64      `json:"setting"` // in the unit of the field By, as the build has it
	Strings []DialString `json:"strings"` // one of each kind that the setting reaches
	// Usual, Cold and Hot are the highest settings at which every string still
	// holds its current: with everything typical, and with every part at its
	// worst on a cold day with a low supply and on a hot one with a high supply.
	Usual DialLimit `json:"usual"`
	Cold  DialLimit `json:"cold"`
	Hot   DialLimit `json:"hot"`
}

// DialString is a string on a dial; of several of the same LEDs and driver it
// is the one with the least left over.
type DialString struct {
	Index  int    `json:"index"` // in the build's strings
	Label  string `json:"label"`
	Stands int    `json:"stands"` // for how many strings, quantities counted

	Points []DialPoint  `json:"points"` // the table, rising in Setting
	Curve  []CurvePoint `json:"curve"`  // the same typically, finer
}

// DialPoint is a row of the table. Runaway tells that in some corner a part
// has no stable temperature; where it has none typically, the figures are 0.
type DialPoint struct {
	Setting      float64 `json:"setting"`                 // in the unit of the field By
	Control      float64 `json:"control"`                 // [V] at the control, typically
	Current      Range   `json:"current"`                 // [A] through the LEDs
	LuminousFlux *Range  `json:"luminous_flux,omitempty"` // [lm] of one string; nil when not known
	Headroom     Range   `json:"headroom"`                // [V] left over
	Regulates    bool    `json:"regulates"`               // headroom.min is 0 or more
	Runaway      bool    `json:"runaway"`
}

// CurvePoint is a point of the curve, everything typical. Runaway tells that a
// part has no stable temperature there; the figures are then 0.
type CurvePoint struct {
	Setting      float64  `json:"setting"`                 // in the unit of the field By
	Control      float64  `json:"control"`                 // [V]
	Current      float64  `json:"current"`                 // [A]
	LuminousFlux *float64 `json:"luminous_flux,omitempty"` // [lm] of one string; nil when not known
	LeftOver     float64  `json:"left_over"`               // [V]
	Runaway      bool     `json:"runaway"`
}

// DialLimit is the highest setting that still regulates in one corner. With
// None there is no such setting, with Whole the dial's far end still does.
type DialLimit struct {
	Setting float64 `json:"setting"` // in the unit of the field By
	Control float64 `json:"control"` // [V] at the control there, as a meter reads it with everything typical
	None    bool    `json:"none"`
	Whole   bool    `json:"whole"`
}

const (
	// tablePoints is how many rows a dial's table has.
	tablePoints = 21
	// finer is how many steps of the curve a step of the table is.
	finer = 5
)

// Dial turns the pot, or moves the control voltage, of a string ("/strings/0")
// or of a base rail ("/rails/0") through its whole range and tells what
// current and light that gives, and up to where this stack of LEDs still
// regulates. A pot goes from end to end. A control voltage goes from 0 to a
// round figure above the highest that regulates, its spread keeping its share
// of it.
//
// A string's own control is turned with the other strings drawing what they
// do at the build's own setting. A rail's moves all its strings: the build is
// solved as a whole at every setting.
//
// It returns the errors of Check, and Invalid where there is nothing to turn.
func Dial(b Build, where string) (DialTable, error) {
	_, p, err := examine(&b)
	if err != nil {
		return DialTable{}, err
	}
	d, err := p.dialler(where)
	if err != nil {
		return DialTable{}, err
	}
	if err := d.fill(); err != nil {
		return DialTable{}, err
	}
	return d.table, nil
}

// dialler turns one setting of a plant.
type dialler struct {
	p     *plant
	rail  *railLine // nil for a string's own control
	lines []*line   // one of each kind
	table DialTable
	top   float64 // highest setting
	set   func(v float64)
}

// dialler finds what there is to turn.
func (p *plant) dialler(where string) (*dialler, error) {
	d := &dialler{p: p}
	kind, rest, _ := strings.Cut(strings.TrimPrefix(where, "/"), "/")
	i, err := strconv.Atoi(rest)
	var ctl *Control
	var below string
	switch {
	case err != nil || i < 0:
		return nil, Invalid{{where, "is not a string or a rail: write /strings/0 or /rails/0"}}
	case kind == "strings" && i < len(p.strings):
		l := p.strings[i]
		ctl, below = l.spec.control(), "/driver/control"
		d.lines, d.table.Where = []*line{l}, l.where()
		d.table.Strings = []DialString{{Index: i, Label: l.spec.Label, Stands: l.spec.Quantity}}
		d.setting(ctl, l.SetPot, l.SetControl)
	case kind == "rails" && i < len(p.rails):
		d.rail = p.rails[i]
		ctl, below = d.rail.spec.Control, "/control"
		d.table.Where = d.rail.name()
		d.represent()
		d.setting(ctl, d.rail.SetPot, d.rail.SetControl)
	default:
		return nil, Invalid{{where, "is not in the build"}}
	}
	switch {
	case ctl == nil:
		return nil, Invalid{{where, "has no control of its own to turn"}}
	case ctl.Divider != nil:
		return nil, Invalid{{where + below, "is a fixed divider: there is nothing to turn"}}
	case len(d.lines) == 0:
		return nil, Invalid{{where, "has no strings on it"}}
	}
	d.table.At = where + below + "/volts"
	if ctl.Pot != nil {
		d.table.At = where + below + "/pot/turn"
	}
	return d, nil
}

// setting takes a control's setting over.
func (d *dialler) setting(ctl *Control, setPot func(upper, lower float64), setVolts func(typ float64)) {
	switch {
	case ctl == nil || ctl.Divider != nil:
	case ctl.Pot != nil:
		d.table.By, d.table.Setting, d.top = "turn", ctl.Pot.Turn, 1
		d.set = func(turn float64) {
			pot := *ctl.Pot
			pot.Turn = turn
			sides := control(Control{Pot: &pot})
			setPot(sides.Upper.Ohms, sides.Lower.Ohms)
		}
	default:
		d.table.By, d.table.Setting = "volts", ctl.Volts.Typ
		d.set = setVolts
	}
}

// represent picks of every kind of string on the rail the one with the least
// left over.
func (d *dialler) represent() {
	at := map[string]int{}
	for _, l := range d.rail.lines {
		key := l.kindKey()
		k, ok := at[key]
		if !ok {
			k = len(d.lines)
			at[key] = k
			d.lines = append(d.lines, l)
			d.table.Strings = append(d.table.Strings, DialString{})
		}
		s := &d.table.Strings[k]
		s.Stands += l.spec.Quantity
		if kept := d.lines[k]; !ok || l.worst.Min[figHeadroom] < kept.worst.Min[figHeadroom] {
			d.lines[k] = l
		}
		s.Index, s.Label = d.lines[k].index, d.lines[k].spec.Label
	}
}

// unsolvedDial says where on its way the dial has no solution.
func (d *dialler) unsolvedDial(v float64, err error) error {
	return fmt.Errorf("%s at a setting of %.4g: %w", d.table.Where, v, err)
}
