package fault

import "slices"

// Kind is what a part is, as far as its faults go.
type Kind string

// The kinds.
const (
	LED        Kind = "led"
	Resistor   Kind = "resistor"
	Transistor Kind = "transistor"
	Reference  Kind = "reference"
	MOSFET     Kind = "mosfet"
	Opamp      Kind = "opamp"
	Regulator  Kind = "regulator"
	Module     Kind = "module"
	Control    Kind = "control"
	Supply     Kind = "supply"
)

// How is what is wrong with a part.
type How string

// What can be wrong. A transistor's open lead breaks both pairs that the lead
// belongs to: on the bench a pair that is open alone cannot be told from that.
const (
	Open     How = "open"
	Shorted  How = "shorted"
	Reversed How = "reversed"
	TenTimes How = "ten_times" // a resistor's value
	Tenth    How = "tenth"

	CollectorOpen         How = "collector_open"
	BaseOpen              How = "base_open"
	EmitterOpen           How = "emitter_open"
	CollectorEmitterShort How = "collector_emitter_short"
	BaseEmitterShort      How = "base_emitter_short"
	CollectorBaseShort    How = "collector_base_short"
	Swapped               How = "collector_emitter_swapped"

	High How = "high" // an op-amp's output, at the end of its reach
	Low  How = "low"

	Zero    How = "zero" // a control voltage
	Doubled How = "doubled"

	Half      How = "half" // the supply's voltage
	QuarterUp How = "quarter_up"
)

// ways lists what can be wrong with a part of each kind.
var ways = map[Kind][]How{
	LED:        {Open, Shorted, Reversed},
	Resistor:   {Open, Shorted, TenTimes, Tenth},
	Transistor: {CollectorOpen, BaseOpen, EmitterOpen, CollectorEmitterShort, BaseEmitterShort, CollectorBaseShort, Swapped},
	Reference:  {Open, Shorted, Reversed},
	MOSFET:     {Open, Shorted},
	Opamp:      {High, Low},
	Regulator:  {Open, Shorted},
	Module:     {Open, Shorted},
	Control:    {Zero, Doubled},
	Supply:     {Half, QuarterUp},
}

// Ways returns what can be wrong with a part of a kind, what fails before what
// is fitted wrongly.
func Ways(k Kind) []How { return slices.Clone(ways[k]) }

// Slip says whether a fault is one of the hand that fitted the part, which a
// build that has worked does not get.
func (h How) Slip() bool {
	switch h {
	case Reversed, TenTimes, Tenth, Swapped:
		return true
	}
	return false
}

// Words says what is wrong with a part that is called name: "sense resistor",
// "one LED".
func (h How) Words(name string) string {
	if words, ok := sentences[h]; ok {
		return name + " " + words
	}
	return name + " " + string(h)
}

var sentences = map[How]string{
	Open:     "open",
	Shorted:  "shorted",
	Reversed: "reversed",
	TenTimes: "ten times too large",
	Tenth:    "ten times too small",

	CollectorOpen:         "with its collector lead open",
	BaseOpen:              "with its base lead open",
	EmitterOpen:           "with its emitter lead open",
	CollectorEmitterShort: "shorted from collector to emitter",
	BaseEmitterShort:      "shorted from base to emitter",
	CollectorBaseShort:    "shorted from collector to base",
	Swapped:               "with collector and emitter swapped",

	High: "with its output stuck high",
	Low:  "with its output stuck low",

	Zero:    "at nothing",
	Doubled: "doubled",

	Half:      "at half its voltage",
	QuarterUp: "a quarter too high",
}
