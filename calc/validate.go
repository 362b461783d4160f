package calc

import (
	"lanternbook/calc/quantity"
)

// figure is what a number in a document may be. The zero figure holds nothing
// but finite numbers to account.
type figure struct {
	unit  string
	least float64 // in unit
	most  float64 // in unit
	above bool    // least itself is not allowed
}

// rule is what a field's numbers may be; second is the other number of a pair.
type rule struct {
	first  figure
	second figure
}

func (f figure) free() bool { return f.least == 0 && f.most == 0 }

// holds tells whether x keeps to the figure; NaN keeps to none.
func (f figure) holds(x float64) bool {
	if f.free() {
		return x-x == 0 // neither NaN nor infinite
	}
	if f.above {
		return x > f.least && x <= f.most
	}
	return x >= f.least && x <= f.most
}

// words says what kind of number is asked: "a number in volts".
func (f figure) words() string {
	if f.unit == quantity.Number {
		return "a plain number"
	}
	return "a number in " + quantity.Words(f.unit)
}

// demand says the limits in a sentence.
func (f figure) demand() string {
	least, most := quantity.Text(f.least, f.unit), quantity.Text(f.most, f.unit)
	switch {
	case f.free():
		return "must be a number within all bounds"
	case f.above:
		return "must be above " + least + " and at most " + most
	}
	return "must be from " + least + " to " + most
}

// refusal says why x is refused, with a hint where a unit's prefix or a
// percent sign is easily forgotten.
func (f figure) refusal(x float64) string {
	said := f.demand() + ", not " + quantity.Text(x, f.unit)
	switch {
	case f.unit == quantity.Amp && x > f.most:
		said += " (20 mA is written 0.02)"
	case f.unit == quantity.Number && f.most <= 1 && x > f.most:
		said += " (5 % is written 0.05)"
	}
	return said
}

func fromTo(unit string, least, most float64) rule {
	return rule{first: figure{unit: unit, least: least, most: most}}
}

func overZero(unit string, most float64) rule {
	return rule{first: figure{unit: unit, most: most, above: true}}
}

func pairOf(x, y rule) rule { return rule{first: x.first, second: y.first} }

// The limits guard against slips of the pen and of the unit, not against
// unusual jobs: what can be built at all is within them. Common practice, no
// source.
var (
	ofRatio      = fromTo(quantity.Number, 0, 1)
	ofQuantity   = fromTo(quantity.Number, 1, 10_000)
	ofIdeality   = fromTo(quantity.Number, 0.5, 10)
	ofExponent   = fromTo(quantity.Number, -50, 50)
	ofGain       = overZero(quantity.Number, 1e6)
	ofVolts      = overZero(quantity.Volt, 1000)
	ofVoltsOr0   = fromTo(quantity.Volt, 0, 1000)
	ofFewVolts   = overZero(quantity.Volt, 100)
	ofRailMargin = fromTo(quantity.Volt, -10, 100) // an op-amp's input may go below its supply
	ofAmps       = overZero(quantity.Amp, 100)
	ofAmpsOr0    = fromTo(quantity.Amp, 0, 100)
	ofSupplyAmps = overZero(quantity.Amp, 1000)
	ofLeakage    = fromTo(quantity.Amp, 0, 1)
	ofKnee       = fromTo(quantity.Amp, 0, 1e6)  // 0 is infinite
	ofEarly      = fromTo(quantity.Volt, 0, 1e6) // 0 is infinite
	ofOhms       = overZero(quantity.Ohm, 1e9)
	ofOhmsOr0    = fromTo(quantity.Ohm, 0, 1e9)
	ofWatts      = overZero(quantity.Watt, 10_000)
	ofAir        = fromTo(quantity.Celsius, -60, 200)
	ofJunction   = overZero(quantity.Celsius, 400)
	ofThermal    = fromTo(quantity.KelvinPerW, 0, 10_000)
	ofTempco     = fromTo(quantity.VoltPerK, -1, 1)
)

// rules holds the limits of every number of a document, by the struct that
// declares it and its key.
var rules = map[string]rule{
	"Build.ambient":           ofAir,
	"Enclosure.surface_area":  overZero(quantity.SquareMetre, 1000),
	"Enclosure.heat_transfer": overZero(quantity.HeatTransfer, 1000),

	"Supply.voltage":           ofVolts,
	"Supply.max_current":       ofSupplyAmps,
	"Supply.source_resistance": ofOhmsOr0,

	"Limits.headroom":        fromTo(quantity.Volt, 0, 100),
	"Limits.junction_margin": fromTo(quantity.Kelvin, 0, 200),
	"Limits.loading":         overZero(quantity.Number, 1),

	"String.quantity":      ofQuantity,
	"LEDStack.quantity":    ofQuantity,
	"Wanted.current":       ofAmps,
	"Wanted.luminous_flux": overZero(quantity.Lumen, 1e6),

	"Run.length":         fromTo(quantity.Metre, 0, 10_000),
	"Run.ohms_per_metre": fromTo(quantity.OhmPerMetre, 0, 1000),

	"Resistor.ohms":          ofOhms,
	"Resistor.tolerance":     fromTo(quantity.Number, 0, 0.5),
	"Resistor.watts":         ofWatts,
	"Control.volts":          ofVoltsOr0,
	"Control.ohms":           ofOhmsOr0,
	"Pot.ohms":               ofOhms,
	"Pot.turn":               ofRatio,
	"Pot.upper":              ofOhmsOr0,
	"Pot.lower":              ofOhmsOr0,
	"Reference.volts":        ofVolts,
	"Reference.tempco":       ofTempco,
	"Reference.ohms":         ofOhmsOr0,
	"RailSink.base_resistor": ofOhmsOr0,

	"Common.price": fromTo(quantity.Number, 0, 1e9),

	"LED.wavelength":           fromTo(quantity.Nanometre, 100, 20_000),
	"LED.cct":                  fromTo(quantity.Kelvin, 500, 100_000),
	"LED.test_current":         ofAmps,
	"LED.forward_voltage":      ofFewVolts,
	"LED.voltage_tempco":       ofTempco,
	"LED.luminous_flux":        overZero(quantity.Lumen, 1e6),
	"LED.luminous_intensity":   overZero(quantity.Candela, 1e6),
	"LED.beam_angle":           overZero(quantity.Degree, 360),
	"LED.flux_curve":           pairOf(fromTo(quantity.Number, 0, 1000), fromTo(quantity.Number, 0, 1000)),
	"LED.flux_tempco":          fromTo(quantity.PerKelvin, -1, 1),
	"LED.max_current":          ofAmps,
	"LED.max_junction":         ofJunction,
	"LED.rth_junction_ambient": ofThermal,
	"LED.points":               pairOf(ofAmpsOr0, fromTo(quantity.Volt, 0, 100)),
	"LEDModel.is":              overZero(quantity.Amp, 1),
	"LEDModel.n":               ofIdeality,
	"LEDModel.rs":              fromTo(quantity.Ohm, 0, 1e6),

	"Transistor.max_collector_emitter_voltage": overZero(quantity.Volt, 10_000),
	"Transistor.max_emitter_base_voltage":      ofVolts,
	"Transistor.max_collector_current":         ofSupplyAmps,
	"Transistor.max_power":                     ofWatts,
	"Transistor.max_junction":                  ofJunction,
	"Transistor.rth_junction_ambient":          ofThermal,
	"Transistor.hfe":                           ofGain,
	"Transistor.hfe_at":                        ofSupplyAmps,
	"VBEOn.volts":                              overZero(quantity.Volt, 10),
	"VBEOn.at":                                 ofSupplyAmps,
	"VCESat.volts":                             overZero(quantity.Volt, 100),
	"VCESat.ic":                                ofSupplyAmps,
	"VCESat.ib":                                ofSupplyAmps,

	"GummelPoon.is":  overZero(quantity.Amp, 1),
	"GummelPoon.bf":  ofGain,
	"GummelPoon.nf":  ofIdeality,
	"GummelPoon.vaf": ofEarly,
	"GummelPoon.ikf": ofKnee,
	"GummelPoon.ise": ofLeakage,
	"GummelPoon.ne":  ofIdeality,
	"GummelPoon.br":  ofGain,
	"GummelPoon.nr":  ofIdeality,
	"GummelPoon.var": ofEarly,
	"GummelPoon.ikr": ofKnee,
	"GummelPoon.isc": ofLeakage,
	"GummelPoon.nc":  ofIdeality,
	"GummelPoon.rb":  fromTo(quantity.Ohm, 0, 1e6),
	"GummelPoon.irb": ofKnee,
	"GummelPoon.rbm": fromTo(quantity.Ohm, 0, 1e6),
	"GummelPoon.re":  fromTo(quantity.Ohm, 0, 1e6),
	"GummelPoon.rc":  fromTo(quantity.Ohm, 0, 1e6),
	"GummelPoon.xti": ofExponent,
	"GummelPoon.eg":  overZero(quantity.ElectronVolt, 10),
	"GummelPoon.xtb": ofExponent,

	"MOSFET.max_drain_source_voltage": overZero(quantity.Volt, 10_000),
	"MOSFET.max_drain_current":        ofSupplyAmps,
	"MOSFET.max_power":                ofWatts,
	"MOSFET.max_junction":             ofJunction,
	"MOSFET.rth_junction_ambient":     ofThermal,
	"MOSFET.gate_threshold":           ofFewVolts,
	"MOSFET.on_resistance":            overZero(quantity.Ohm, 1e6),
	"MOSFET.on_resistance_at":         ofFewVolts,

	"Opamp.offset_voltage": fromTo(quantity.Volt, 0, 10),
	"Opamp.input_low":      ofRailMargin,
	"Opamp.input_high":     ofRailMargin,
	"Opamp.output_low":     ofRailMargin,
	"Opamp.output_high":    ofRailMargin,
	"Opamp.max_supply":     ofVolts,
	"Opamp.supply_current": ofAmpsOr0,

	"Regulator.reference_voltage":    ofFewVolts,
	"Regulator.adjustment_current":   ofLeakage,
	"Regulator.dropout":              pairOf(ofAmpsOr0, fromTo(quantity.Volt, 0, 100)),
	"Regulator.least_load":           ofAmpsOr0,
	"Regulator.max_input_output":     ofVolts,
	"Regulator.max_current":          ofAmps,
	"Regulator.max_power":            ofWatts,
	"Regulator.max_junction":         ofJunction,
	"Regulator.rth_junction_ambient": ofThermal,

	"Module.current":        ofAmps,
	"Module.input_voltage":  ofVoltsOr0,
	"Module.output_voltage": ofVoltsOr0,
	"Module.dropout":        fromTo(quantity.Volt, 0, 1000),
	"Module.efficiency":     overZero(quantity.Number, 1),
	"Module.max_power":      ofWatts,

	"SupplyPart.voltage":           ofVolts,
	"SupplyPart.max_current":       ofSupplyAmps,
	"SupplyPart.source_resistance": ofOhmsOr0,
	"SupplyPart.derating":          pairOf(ofAir, ofRatio),
}
