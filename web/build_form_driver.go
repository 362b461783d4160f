package web

import (
	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// kindWords are the kinds of driver in the trade's words.
var kindWords = []Option{
	{calc.KindResistor, "series resistor"},
	{calc.KindTwoTransistor, "two-transistor limiter"},
	{calc.KindFollowerSink, "sink with a follower, set by a voltage"},
	{calc.KindReferenceSink, "sink on a reference (Zener, diodes)"},
	{calc.KindRailSink, "sink on a shared rail"},
	{calc.KindOpampSink, "op-amp and MOSFET"},
	{calc.KindRegulator, "adjustable regulator"},
	{calc.KindModule, "constant-current module"},
}

// Solved are the kinds of driver that can be computed, and so chosen.
var Solved = []string{calc.KindResistor, calc.KindTwoTransistor, calc.KindFollowerSink, calc.KindReferenceSink}

// driverKinds lists the kinds that can be chosen; one that a build has already
// stays in its list.
func driverKinds(has string) []Option {
	var options []Option
	for _, o := range kindWords {
		chosen := o.Value == has
		for _, kind := range Solved {
			chosen = chosen || o.Value == kind
		}
		if chosen {
			options = append(options, o)
		}
	}
	return options
}

// driverRows are the entries of a driver, by its kind.
func driverRows(b calc.Build, d calc.Driver, at string, drawer []Stock) []EntryRow {
	transistor := func(name, label, key, typ string) EntryRow {
		return oneRow(partEntry(at+"/"+name, label, key, typ, b, drawer))
	}
	switch {
	case d.Resistor != nil:
		return []EntryRow{resistorRow(at+"/resistor", "series resistor", d.Resistor.Resistor)}
	case d.FollowerSink != nil:
		f := d.FollowerSink
		rows := []EntryRow{resistorRow(at+"/sense", "sense resistor", f.Sense)}
		rows = append(rows, controlRows(f.Control, at+"/control")...)
		return append(rows,
			transistor("npn", "sink transistor", f.NPN, calc.TypeNPN),
			transistor("pnp", "follower transistor", f.PNP, calc.TypePNP),
			resistorRow(at+"/pullup", "pull-up", f.Pullup))
	case d.ReferenceSink != nil:
		r := d.ReferenceSink
		return []EntryRow{
			resistorRow(at+"/sense", "sense resistor", r.Sense),
			oneRow(withHint(spreadEntry(at+"/reference/volts", "reference", r.Reference.Volts, quantity.Volt), "at 25 °C; least / usual / most")),
			oneRow(numberEntry(at+"/reference/tempco", "its drift", r.Reference.Tempco, quantity.VoltPerK)),
			oneRow(numberEntry(at+"/reference/ohms", "its slope", r.Reference.Ohms, quantity.Ohm)),
			resistorRow(at+"/bias", "bias resistor", r.Bias),
			transistor("npn", "sink transistor", r.NPN, calc.TypeNPN),
		}
	case d.TwoTransistor != nil:
		t := d.TwoTransistor
		return []EntryRow{
			resistorRow(at+"/sense", "sense resistor", t.Sense),
			resistorRow(at+"/bias", "base feed", t.Bias),
			transistor("pass", "pass transistor", t.Pass, calc.TypeNPN),
			transistor("sensor", "sensing transistor", t.Sensor, calc.TypeNPN),
		}
	}
	return nil
}

// The kinds of control voltage, as the picker names them.
const (
	ControlVolts   = "volts"
	ControlPot     = "pot"
	ControlDivider = "divider"
)

// ControlKind tells which of its three forms a control voltage has.
func ControlKind(c calc.Control) string {
	switch {
	case c.Pot != nil:
		return ControlPot
	case c.Divider != nil:
		return ControlDivider
	}
	return ControlVolts
}

func controlRows(c calc.Control, at string) []EntryRow {
	kind := ControlKind(c)
	rows := []EntryRow{oneRow(choiceEntry(at, "set by", kind, EntryControl, []Option{
		{ControlVolts, "a fixed voltage"}, {ControlPot, "a trimmer across the feed"}, {ControlDivider, "a divider across the feed"},
	}))}
	switch kind {
	case ControlPot:
		return append(rows,
			EntryRow{Label: "trimmer", Entries: []*Entry{
				bareEntry(numberEntry(at+"/pot/ohms", "trimmer, ohms", c.Pot.Ohms, quantity.Ohm)),
				bareEntry(numberEntry(at+"/pot/turn", "trimmer, turned up by", c.Pot.Turn, quantity.Percent)),
			}},
			oneRow(numberEntry(at+"/pot/upper", "fixed, plus side", c.Pot.Upper, quantity.Ohm)),
			oneRow(numberEntry(at+"/pot/lower", "fixed, minus side", c.Pot.Lower, quantity.Ohm)))
	case ControlDivider:
		return append(rows, resistorRow(at+"/divider/upper", "upper resistor", c.Divider.Upper), resistorRow(at+"/divider/lower", "lower resistor", c.Divider.Lower))
	}
	volts := calc.Spread{}
	if c.Volts != nil {
		volts = *c.Volts
	}
	return append(rows,
		oneRow(withHint(spreadEntry(at+"/volts", "control voltage", volts, quantity.Volt), "above the string’s own minus")),
		oneRow(optionalEntry(at+"/ohms", "behind", c.Ohms, quantity.Ohm, "0 Ω")))
}
