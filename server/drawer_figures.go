package main

import (
	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// figureKind is what a field of a part's form holds.
type figureKind int

const (
	ofWords  figureKind = iota // a line of text
	ofLines                    // several
	ofNumber                   // one quantity
	ofSpread                   // least / typical / most
	ofPairs                    // two quantities on each line
	ofChoice                   // yes or no, by two words
)

// figure is one member of a part's document and the field that it is typed in.
type figure struct {
	path    string // of the member, "vbe_on.at" one inside another; also the field's name
	label   string
	kind    figureKind
	unit    string // of quantity; a pair's first
	second  string // a pair's second
	example string // as one would write it
	hint    string
	needed  bool
	tiny    bool   // far below what any prefix reaches: written with an exponent
	scaled  bool   // its values are written with a prefix: a bare number is a slip
	yes, no string // an ofChoice's words
}

// figureGroup is figures that belong together.
type figureGroup struct {
	title   string
	about   string
	folded  bool // shown on demand, for those who have such figures
	figures []figure
}

// partTypes are the types of the drawer in the order in which it shows them.
var partTypes = []string{
	calc.TypeLED, calc.TypeNPN, calc.TypePNP, calc.TypeNMOS, calc.TypeOpamp, calc.TypeRegulator, calc.TypeModule, calc.TypeSupply,
}

// typeWord is what one part of a type is called.
func typeWord(typ string) string {
	switch typ {
	case calc.TypeLED:
		return "LED"
	case calc.TypeNPN:
		return "NPN transistor"
	case calc.TypePNP:
		return "PNP transistor"
	case calc.TypeNMOS:
		return "MOSFET"
	case calc.TypeOpamp:
		return "op-amp"
	}
	return typ
}

// typeWords is what several are called.
func typeWords(typ string) string {
	switch typ {
	case calc.TypeSupply:
		return "supplies"
	}
	return typeWord(typ) + "s"
}

// figuresOf returns the form of a part's type; nil when there is no such type.
func figuresOf(typ string) []figureGroup {
	var own []figureGroup
	switch typ {
	case calc.TypeLED:
		own = ledFigures
	case calc.TypeNPN, calc.TypePNP:
		own = transistorFigures
	case calc.TypeNMOS:
		own = mosfetFigures
	case calc.TypeOpamp:
		own = opampFigures
	case calc.TypeRegulator:
		own = regulatorFigures
	case calc.TypeModule:
		own = moduleFigures
	case calc.TypeSupply:
		own = supplyFigures
	default:
		return nil
	}
	return append(append([]figureGroup{whatItIs(typ)}, own...), whereFrom)
}

// whatItIs names the part. Only a part with legs has an order of them.
func whatItIs(typ string) figureGroup {
	g := figureGroup{title: "What it is", figures: []figure{
		{path: "name", label: "name", example: "BC547B", needed: true},
		{path: "maker_code", label: "maker’s code"},
		{path: "package", label: "package", example: "TO-92"},
	}}
	if typ != calc.TypeModule && typ != calc.TypeSupply {
		g.figures = append(g.figures, figure{path: "pins", label: "pins", example: "C-B-E", hint: "flat or printed side towards you, legs down, from the left"})
	}
	g.figures = append(g.figures, figure{path: "price", label: "price of one", kind: ofNumber, unit: quantity.Number, example: "0.05", hint: "in your own money"})
	return g
}

var whereFrom = figureGroup{title: "Where the figures are from", figures: []figure{
	{path: "notes", label: "notes", kind: ofLines, hint: "Name the datasheet and its page. In two years nobody will remember."},
}}

var ledFigures = []figureGroup{
	{title: "Light", about: "One of colour, wavelength and colour temperature is enough.", figures: []figure{
		{path: "colour", label: "colour", example: "amber", hint: "in a word; the picture takes it"},
		{path: "wavelength", label: "wavelength", kind: ofNumber, unit: quantity.Nanometre, example: "591 nm"},
		{path: "cct", label: "colour temperature", kind: ofNumber, unit: quantity.Kelvin, example: "4000 K"},
		{path: "luminous_flux", label: "flux", kind: ofNumber, unit: quantity.Lumen, example: "26 lm", hint: "at the test current; empty, and no intensity: light stays unknown"},
		{path: "luminous_intensity", label: "intensity", kind: ofNumber, unit: quantity.Candela, example: "3 cd", hint: "with the beam angle, where no flux is given"},
		{path: "beam_angle", label: "beam angle", kind: ofNumber, unit: quantity.Degree, example: "120°", hint: "full angle, to half the intensity"},
		{path: "flux_tempco", label: "flux and heat", kind: ofNumber, unit: quantity.PerKelvin, example: "−0.22 %/K", hint: "empty: heat costs no light", scaled: true},
	}},
	{title: "Volts and current", figures: []figure{
		{path: "test_current", label: "test current", kind: ofNumber, unit: quantity.Amp, example: "20 mA", hint: "at which volts and light are given", needed: true, scaled: true},
		{path: "forward_voltage", label: "forward voltage", kind: ofSpread, unit: quantity.Volt, example: "2.8 / 2.95 / 3.2 V", hint: "least / typical / most, at the test current and 25 °C; a bin narrows it", needed: true},
		{path: "voltage_tempco", label: "volts and heat", kind: ofNumber, unit: quantity.VoltPerK, example: "−2.5 mV/K", hint: "empty: no change with heat", scaled: true},
		{path: "max_current", label: "greatest current", kind: ofNumber, unit: quantity.Amp, example: "30 mA", hint: "empty: the current check stays unknown", scaled: true},
	}},
	ledHeat,
	{title: "Curves", about: "One pair a line.", folded: true, figures: []figure{
		{path: "flux_curve", label: "flux over current", kind: ofPairs, unit: quantity.Number, second: quantity.Number, example: "0.5  0.53", hint: "current over test current, then flux over flux at test; empty: light in proportion to current"},
		{path: "points", label: "measured volts", kind: ofPairs, unit: quantity.Amp, second: quantity.Volt, example: "5 mA  2.71 V", hint: "current, then volts, at 25 °C; two are the least, four make a full curve", scaled: true},
	}},
	{title: "Curve as a model", about: "V = n·VT·ln(1 + I/is) + I·rs at 25 °C. It counts before measured points. Without either the slope is assumed, and every build says so.", folded: true, figures: []figure{
		{path: "model.is", label: "is", kind: ofNumber, unit: quantity.Amp, example: "8.5e-26 A", tiny: true},
		{path: "model.n", label: "n", kind: ofNumber, unit: quantity.Number, example: "2"},
		{path: "model.rs", label: "rs", kind: ofNumber, unit: quantity.Ohm, example: "2.14 Ω"},
	}},
}

var ledHeat = figureGroup{title: "Heat", figures: []figure{
	{path: "max_junction", label: "greatest junction", kind: ofNumber, unit: quantity.Celsius, example: "125 °C", hint: "empty: the junction check stays unknown"},
	{path: "rth_junction_ambient", label: "junction to air", kind: ofNumber, unit: quantity.KelvinPerW, example: "250 K/W", hint: "as mounted; empty: the junction check stays unknown; 0: as cool as the air"},
}}

// powerHeat is Heat with a rated dissipation.
var powerHeat = figureGroup{title: "Heat", figures: append([]figure{
	{path: "max_power", label: "greatest dissipation", kind: ofNumber, unit: quantity.Watt, example: "0.5 W", hint: "in air of 25 °C; empty: the dissipation check stays unknown"},
}, ledHeat.figures...)}

var transistorFigures = []figureGroup{
	{title: "Limits", figures: []figure{
		{path: "max_collector_emitter_voltage", label: "VCE, most", kind: ofNumber, unit: quantity.Volt, example: "45 V", hint: "empty: the check with dark LEDs stays unknown"},
		{path: "max_collector_current", label: "IC, most", kind: ofNumber, unit: quantity.Amp, example: "100 mA", hint: "empty: the current check stays unknown", scaled: true},
		{path: "max_emitter_base_voltage", label: "VEB, most", kind: ofNumber, unit: quantity.Volt, example: "6 V"},
	}},
	{title: "Working figures", figures: []figure{
		{path: "hfe", label: "gain, hFE", kind: ofSpread, unit: quantity.Number, example: "200 / 290 / 450", hint: "least / typical / most; empty: the base drive check stays unknown"},
		{path: "hfe_at", label: "gain is at", kind: ofNumber, unit: quantity.Amp, example: "2 mA", hint: "collector current", scaled: true},
		{path: "vbe_on.volts", label: "VBE", kind: ofSpread, unit: quantity.Volt, example: "0.58 / 0.66 / 0.7 V", hint: "least / typical / most; a positive number for a PNP too"},
		{path: "vbe_on.at", label: "VBE is at", kind: ofNumber, unit: quantity.Amp, example: "2 mA", hint: "collector current", scaled: true},
		{path: "vce_sat.volts", label: "VCE, saturated", kind: ofNumber, unit: quantity.Volt, example: "0.25 V"},
		{path: "vce_sat.ic", label: "saturated at IC", kind: ofNumber, unit: quantity.Amp, example: "10 mA", scaled: true},
		{path: "vce_sat.ib", label: "and IB", kind: ofNumber, unit: quantity.Amp, example: "0.5 mA", scaled: true},
	}},
	powerHeat,
	{title: "Gummel–Poon model", about: "DC parameters at 27 °C by their usual names. Without them the working figures stand in. An empty one is at its usual default.", folded: true, figures: []figure{
		{path: "model.is", label: "is", kind: ofNumber, unit: quantity.Amp, example: "1.8e-14 A", tiny: true},
		{path: "model.bf", label: "bf", kind: ofNumber, example: "400", hint: "empty: 100"},
		{path: "model.nf", label: "nf", kind: ofNumber, hint: "empty: 1"},
		{path: "model.vaf", label: "vaf", kind: ofNumber, unit: quantity.Volt, example: "80 V", hint: "empty or 0: infinite"},
		{path: "model.ikf", label: "ikf", kind: ofNumber, unit: quantity.Amp, example: "80 mA", hint: "empty or 0: infinite", scaled: true},
		{path: "model.ise", label: "ise", kind: ofNumber, unit: quantity.Amp, example: "5e-14 A", hint: "empty: 0", tiny: true},
		{path: "model.ne", label: "ne", kind: ofNumber, hint: "empty: 1.5"},
		{path: "model.br", label: "br", kind: ofNumber, hint: "empty: 1"},
		{path: "model.nr", label: "nr", kind: ofNumber, hint: "empty: 1"},
		{path: "model.var", label: "var", kind: ofNumber, unit: quantity.Volt, hint: "empty or 0: infinite"},
		{path: "model.ikr", label: "ikr", kind: ofNumber, unit: quantity.Amp, hint: "empty or 0: infinite"},
		{path: "model.isc", label: "isc", kind: ofNumber, unit: quantity.Amp, hint: "empty: 0", tiny: true},
		{path: "model.nc", label: "nc", kind: ofNumber, hint: "empty: 2"},
		{path: "model.rb", label: "rb", kind: ofNumber, unit: quantity.Ohm, hint: "empty: 0"},
		{path: "model.irb", label: "irb", kind: ofNumber, unit: quantity.Amp, hint: "empty or 0: infinite"},
		{path: "model.rbm", label: "rbm", kind: ofNumber, unit: quantity.Ohm, hint: "empty: as rb"},
		{path: "model.re", label: "re", kind: ofNumber, unit: quantity.Ohm, hint: "empty: 0"},
		{path: "model.rc", label: "rc", kind: ofNumber, unit: quantity.Ohm, hint: "empty: 0"},
		{path: "model.xti", label: "xti", kind: ofNumber, hint: "empty: 3"},
		{path: "model.eg", label: "eg", kind: ofNumber, unit: quantity.ElectronVolt, hint: "empty: 1.11 eV"},
		{path: "model.xtb", label: "xtb", kind: ofNumber, hint: "empty: 0"},
	}},
}

var mosfetFigures = []figureGroup{
	{title: "Limits", figures: []figure{
		{path: "max_drain_source_voltage", label: "VDS, most", kind: ofNumber, unit: quantity.Volt, example: "60 V"},
		{path: "max_drain_current", label: "ID, most", kind: ofNumber, unit: quantity.Amp, example: "200 mA", scaled: true},
	}},
	{title: "Working figures", figures: []figure{
		{path: "gate_threshold", label: "gate threshold", kind: ofSpread, unit: quantity.Volt, example: "0.8 / 2.1 / 3 V", hint: "least / typical / most"},
		{path: "on_resistance", label: "on-resistance", kind: ofNumber, unit: quantity.Ohm, example: "1.8 Ω"},
		{path: "on_resistance_at", label: "at a gate of", kind: ofNumber, unit: quantity.Volt, example: "4.5 V"},
	}},
	powerHeat,
}

var opampFigures = []figureGroup{
	{title: "Working figures", figures: []figure{
		{path: "offset_voltage", label: "offset", kind: ofNumber, unit: quantity.Volt, example: "7 mV", hint: "the most, either way", scaled: true},
		{path: "input_low", label: "inputs down to", kind: ofNumber, unit: quantity.Volt, example: "0 V", hint: "above the negative supply"},
		{path: "input_high", label: "inputs up to", kind: ofNumber, unit: quantity.Volt, example: "2 V", hint: "below the positive supply"},
		{path: "output_low", label: "output down to", kind: ofNumber, unit: quantity.Volt, example: "20 mV", hint: "above the negative supply"},
		{path: "output_high", label: "output up to", kind: ofNumber, unit: quantity.Volt, example: "2 V", hint: "below the positive supply"},
		{path: "max_supply", label: "supply, most", kind: ofNumber, unit: quantity.Volt, example: "32 V"},
		{path: "supply_current", label: "takes", kind: ofNumber, unit: quantity.Amp, example: "1 mA", scaled: true},
	}},
}

var regulatorFigures = []figureGroup{
	{title: "Working figures", figures: []figure{
		{path: "reference_voltage", label: "reference", kind: ofSpread, unit: quantity.Volt, example: "1.2 / 1.25 / 1.3 V", hint: "least / typical / most"},
		{path: "adjustment_current", label: "adjustment current", kind: ofSpread, unit: quantity.Amp, example: "30 / 50 / 100 µA", hint: "least / typical / most", scaled: true},
		{path: "dropout", label: "drop-out", kind: ofPairs, unit: quantity.Amp, second: quantity.Volt, example: "0.5 A  1.7 V", hint: "one pair a line: current, then the volts it needs", scaled: true},
		{path: "least_load", label: "least load", kind: ofNumber, unit: quantity.Amp, example: "10 mA", scaled: true},
	}},
	{title: "Limits", figures: []figure{
		{path: "max_input_output", label: "in to out, most", kind: ofNumber, unit: quantity.Volt, example: "40 V"},
		{path: "max_current", label: "greatest current", kind: ofNumber, unit: quantity.Amp, example: "1.5 A"},
	}},
	powerHeat,
}

var moduleFigures = []figureGroup{
	{title: "Working figures", figures: []figure{
		{path: "current", label: "current", kind: ofSpread, unit: quantity.Amp, example: "350 mA ±5 %", hint: "least / typical / most", scaled: true},
		{path: "input_voltage", label: "input", kind: ofSpread, unit: quantity.Volt, example: "6 / 24 / 36 V", hint: "its window, with the usual value between"},
		{path: "output_voltage", label: "output", kind: ofSpread, unit: quantity.Volt, example: "3 / 12 / 32 V", hint: "its window, with the usual value between"},
		{path: "dropout", label: "needs above the LEDs", kind: ofNumber, unit: quantity.Volt, example: "2 V"},
		{path: "switching", label: "kind", kind: ofChoice, no: "linear", yes: "switching"},
		{path: "efficiency", label: "efficiency", kind: ofNumber, unit: quantity.Percent, example: "92 %", hint: "of a switching one"},
		{path: "max_power", label: "greatest power", kind: ofNumber, unit: quantity.Watt, example: "12 W"},
	}},
}

var supplyFigures = []figureGroup{
	{title: "Output", figures: []figure{
		{path: "voltage", label: "voltage", kind: ofSpread, unit: quantity.Volt, example: "23.5 / 24 / 24.5 V", hint: "least / typical / most; measure the one you have", needed: true},
		{path: "max_current", label: "rated current", kind: ofNumber, unit: quantity.Amp, example: "2.5 A", hint: "empty: the loading check stays unknown"},
		{path: "source_resistance", label: "source resistance", kind: ofNumber, unit: quantity.Ohm, example: "50 mΩ", hint: "of a battery with its leads; empty: none"},
		{path: "derating", label: "derating", kind: ofPairs, unit: quantity.Celsius, second: quantity.Percent, example: "50 °C  85 %", hint: "one pair a line: air, then the share of the rated current that is left"},
	}},
}
