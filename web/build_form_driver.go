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

// DriverKinds are the kinds of driver that can be chosen.
func DriverKinds() []string {
	var kinds []string
	for _, o := range kindWords {
		kinds = append(kinds, o.Value)
	}
	return kinds
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
		rows := []EntryRow{resistorRow(at+"/sense", "sense resistor", r.Sense)}
		rows = append(rows, referenceRows(r.Reference, at+"/reference")...)
		return append(rows,
			resistorRow(at+"/bias", "bias resistor", r.Bias),
			transistor("npn", "sink transistor", r.NPN, calc.TypeNPN))
	case d.RailSink != nil:
		r := d.RailSink
		return []EntryRow{
			resistorRow(at+"/sense", "sense resistor", r.Sense),
			oneRow(choiceEntry(at+"/rail", "its base on", r.Rail, EntryChoice, railOptions(b))),
			oneRow(withHint(optionalEntry(at+"/base_resistor", "base resistor", r.BaseResistor, quantity.Ohm, "none"), "keeps one open LED from loading the whole rail")),
			transistor("npn", "sink transistor", r.NPN, calc.TypeNPN),
		}
	case d.OpampSink != nil:
		o := d.OpampSink
		rows := []EntryRow{resistorRow(at+"/sense", "sense resistor", o.Sense)}
		rows = append(rows, controlRows(o.Control, at+"/control")...)
		return append(rows,
			transistor("opamp", "op-amp", o.Opamp, calc.TypeOpamp),
			transistor("fet", "MOSFET", o.FET, calc.TypeNMOS))
	case d.Regulator != nil:
		return []EntryRow{
			resistorRow(at+"/set", "set resistor", d.Regulator.Set),
			transistor("regulator", "regulator", d.Regulator.Regulator, calc.TypeRegulator),
		}
	case d.ModuleInstance != nil:
		return []EntryRow{transistor("module", "module", d.ModuleInstance.Module, calc.TypeModule)}
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

// referenceRows are the entries of a reference.
func referenceRows(r calc.Reference, at string) []EntryRow {
	return []EntryRow{
		oneRow(withHint(spreadEntry(at+"/volts", "reference", r.Volts, quantity.Volt), "at 25 °C; least / usual / most")),
		oneRow(numberEntry(at+"/tempco", "its drift", r.Tempco, quantity.VoltPerK)),
		oneRow(numberEntry(at+"/ohms", "its slope", r.Ohms, quantity.Ohm)),
	}
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
