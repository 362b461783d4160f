package calc

import (
	"cmp"
	"errors"
	"math"
	"slices"

	"lanternbook/calc/fault"
)

// Failures is what Survey found: every single fault of a build with what comes
// of it, everything else typical.
type Failures struct {
	Tried int       `json:"tried"` // of Total; fewer when the survey was stopped
	Total int       `json:"total"`
	All   []Failure `json:"all"` // those that matter first, the worst of them first
	// Assumed says what had to be assumed of a part, and Missing which ratings
	// are not given: whether such a part survives cannot be told.
	Assumed []string `json:"assumed"`
	Missing []string `json:"missing"`
}

// Matter returns the failures that matter: something leaves its limits, or
// other strings change by more than a tenth, or nobody can tell.
func (f Failures) Matter() []Failure {
	n := 0
	for n < len(f.All) && f.All[n].Matters {
		n++
	}
	return f.All[:n]
}

// Failure is one fault with what every test point of its string then reads and
// what becomes of the rest. The fault is in one of a string's Quantity.
type Failure struct {
	At     string     `json:"at"`     // JSON Pointer to the part or the setting
	Where  string     `json:"where"`  // "string A", "rail main", "supply"
	String int        `json:"string"` // index of the string it is in, −1 for none
	Rail   int        `json:"rail"`   // index of the rail it is in, −1 for none
	Kind   fault.Kind `json:"kind"`
	Role   string     `json:"role"`
	Part   string     `json:"part,omitempty"`
	How    fault.How  `json:"how"`

	Fault   string `json:"fault"` // what is wrong, in words
	Text    string `json:"text"`  // the same with what comes of it
	Matters bool   `json:"matters"`
	// Unsolved says why no operating point was found; the figures are then nil
	// or zero, and nobody can tell what happens.
	Unsolved string `json:"unsolved,omitempty"`
	// Runaway tells that a part finds no stable temperature. The figures are
	// those of the first moment, with its string or rail still cold.
	Runaway bool `json:"runaway,omitempty"`

	Current  float64      `json:"current"`            // [A] through the string's LEDs
	Was      float64      `json:"was"`                // [A] the same without the fault
	Voltages *Voltages    `json:"voltages,omitempty"` // of the string with the fault, read with a usual meter
	LEDs     []LEDReading `json:"leds,omitempty"`     // by part
	Rails    []RailChange `json:"rails,omitempty"`    // its own rail, and any that moves
	Supply   float64      `json:"supply"`             // [A] out of the supply
	Beyond   int          `json:"beyond"`             // how many limits are left
	Over     []Over       `json:"over,omitempty"`     // the worst of them, the worst first
	// Others are the strings without a fault of their own that change by more
	// than a hundredth, and every string on a rail or supply that is wrong. Most
	// is the largest change of any, with its sign.
	Others   []Change `json:"others,omitempty"`
	Most     float64  `json:"most"` // [1] of the current it has without the fault
	Remedies []Remedy `json:"remedies,omitempty"`

	trial trial
	tells string // what comes of it, in words
}

// LEDReading is what a meter reads across the LEDs of one part.
type LEDReading struct {
	Part   string   `json:"part"`
	Each   *float64 `json:"each,omitempty"`   // [V] across a sound one, nil where none is left
	Faulty *float64 `json:"faulty,omitempty"` // [V] across the one with the fault; negative when it stands in reverse
}

// RailChange is a base rail with its points.
type RailChange struct {
	Rail      int      `json:"rail"`                // index in the build
	Volts     float64  `json:"volts"`               // [V]
	Was       float64  `json:"was"`                 // [V] without the fault
	Control   *float64 `json:"control,omitempty"`   // [V] at a follower's base
	Reference *float64 `json:"reference,omitempty"` // [V] across the reference
}

// Over is one part beyond one of its limits.
type Over struct {
	Where string  `json:"where"` // "string A", "rail main", "supply"
	Role  string  `json:"role"`
	Part  string  `json:"part,omitempty"`
	What  string  `json:"what"`  // "power", "junction", "current", "voltage", "emitter-base voltage"
	Value float64 `json:"value"` // in Unit
	Limit float64 `json:"limit"` // in Unit
	Unit  string  `json:"unit"`
}

// Change is a string without a fault of its own whose current changes.
type Change struct {
	String   int      `json:"string"`  // index in the build
	Current  float64  `json:"current"` // [A]
	Was      float64  `json:"was"`     // [A]
	Voltages Voltages `json:"voltages"`
}

const (
	// toldChange is the share of its current by which a string must change to
	// be listed, and matteringChange that by which a failure matters: some
	// 10 % are seen side by side. Common practice, no source.
	toldChange      = 0.01
	matteringChange = 0.10
)

// Survey solves a build with every single fault in turn: for every string each
// LED part open, shorted and reversed (one LED, its built-in protection not
// counted), each transistor with a lead open, two leads shorted, collector and
// emitter swapped, each resistor open, shorted and ten times up and down, the
// reference and the control wrong; likewise for the rails; and the supply at
// half and at five quarters of its voltage. Everything else is typical.
//
// For the failures that matter it then tries edits of the design, and keeps
// those that cure them or make them clearly milder: a resistor in each base on
// a rail, a resistor of a higher rating, an LED more, or fewer with a resistor,
// less current. In a large build only the worst failures are tried.
//
// progress, when not nil, is called after each with how many are done; the
// survey stops when it returns false, and what was found until then is
// returned. The errors are those of Check, for the build without a fault.
func Survey(b Build, progress func(done, total int) bool) (Failures, error) {
	s, err := newSurveyor(&b)
	if err != nil {
		return Failures{}, err
	}
	out := Failures{All: []Failure{}, Assumed: s.assumed, Missing: s.missing}
	trials := s.trials()
	out.Total = len(trials)
	goOn := func() bool { return progress == nil || progress(out.Tried, out.Total) }
	going := true
	for k := 0; k < len(trials) && going; k++ {
		if f, ok := s.try(trials[k], nil); ok {
			out.All = append(out.All, f)
		}
		out.Tried++
		going = goOn()
	}
	out.rank()
	if going {
		s.cure(&out, goOn)
	}
	return out, nil
}

// rank sorts the failures: what matters first; of that what burns first, by
// how far beyond its limit, then by how much other strings change.
func (f *Failures) rank() {
	slices.SortStableFunc(f.All, func(a, b Failure) int {
		if a.Matters != b.Matters {
			if a.Matters {
				return -1
			}
			return 1
		}
		if !a.Matters {
			return 0
		}
		return cmp.Or(-cmp.Compare(a.worst(), b.worst()), -cmp.Compare(math.Abs(a.Most), math.Abs(b.Most)))
	})
}

// worst is how many times the worst part is beyond its limit; 1 where none is.
func (f *Failure) worst() float64 {
	if f.Runaway {
		return math.Inf(1)
	}
	if len(f.Over) == 0 {
		return 1
	}
	return f.Over[0].times()
}

// times is a value as a multiple of its limit; a temperature counts from 25 °C.
func (o *Over) times() float64 {
	if o.Unit == "°C" {
		return (o.Value - ratedAir) / math.Max(o.Limit-ratedAir, 1)
	}
	return o.Value / math.Max(o.Limit, 1e-12)
}

// ratedAir is the air in °C that ratings are given for.
const ratedAir = 25.0

// reason is why a build has no operating point, in words.
func reason(err error) string {
	var u *Unsolved
	if errors.As(err, &u) && u.Cause != nil {
		return u.Cause.Error()
	}
	return err.Error()
}
