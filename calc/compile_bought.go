package calc

import (
	"sort"

	"lanternbook/calc/driver"
)

// Figures that stand in for ones a datasheet in the build does not give; each
// is named by an unknown finding. Common practice, no source.
const (
	assumedOffset     = 5e-3  // [V] of an op-amp
	assumedOutputHigh = 1.5   // [V] below its supply
	assumedOutputLow  = 0.05  // [V] above the return
	assumedQuiescent  = 1e-3  // [A]
	assumedAdjust     = 50e-6 // [A] of a regulator
	assumedDropout    = 2.0   // [V] of a regulator or a linear module
)

// stated returns a figure of a part, or what is assumed for it, which is then
// named.
func (l *line) stated(v *float64, assumed float64, part, what string) float64 {
	if v != nil {
		return *v
	}
	l.assumed = append(l.assumed, part+": "+what)
	return assumed
}

// lacks says that a part cannot be solved for want of a figure.
func lacks(part, figure string) error {
	return Invalid{{"/parts/" + escapePointer(part), "needs " + figure + " before a string with it can be solved"}}
}

func (l *line) assembleOpamp(b *Build, leds []driver.LED, f *OpampSink) error {
	amp, fet := b.Parts[f.Opamp].Opamp, b.Parts[f.FET].MOSFET
	switch {
	case fet.GateThreshold == nil:
		return lacks(f.FET, "its gate threshold (gate_threshold)")
	case fet.OnResistance == nil || fet.OnResistanceAt == nil:
		return lacks(f.FET, "its on-resistance and the gate voltage it holds at (on_resistance, on_resistance_at)")
	}
	o := driver.Opamp{
		Control: control(f.Control), Part: f.Opamp, Sense: resistance(f.Sense),
		Offset:    l.stated(amp.OffsetVoltage, assumedOffset, f.Opamp, "an offset of 5 mV"),
		Low:       l.stated(amp.OutputLow, assumedOutputLow, f.Opamp, "an output down to 50 mV"),
		High:      l.stated(amp.OutputHigh, assumedOutputHigh, f.Opamp, "an output up to 1.5 V below its supply"),
		Quiescent: l.stated(amp.SupplyCurrent, assumedQuiescent, f.Opamp, "a supply current of 1 mA"),
		FET: driver.FET{
			Part: f.FET, Threshold: limits(*fet.GateThreshold), OnResistance: *fet.OnResistance, OnAt: *fet.OnResistanceAt,
		},
	}
	if fet.RthJunctionAmbient != nil {
		o.FET.Rth = *fet.RthJunctionAmbient
	}
	l.Assembly = driver.OpampSink(leds, o)
	return nil
}

func (l *line) assembleRegulator(b *Build, leds []driver.LED, f *RegulatorDriver) error {
	part := b.Parts[f.Regulator].Regulator
	if part.ReferenceVoltage == nil {
		return lacks(f.Regulator, "its reference voltage (reference_voltage)")
	}
	r := driver.Regulated{
		Part: f.Regulator, Reference: limits(*part.ReferenceVoltage), Set: resistance(f.Set),
		Dropout: append([][2]float64(nil), part.Dropout...),
	}
	sort.Slice(r.Dropout, func(i, k int) bool { return r.Dropout[i][0] < r.Dropout[k][0] })
	if part.AdjustmentCurrent != nil {
		r.Adjust = limits(*part.AdjustmentCurrent)
	} else {
		typ := l.stated(nil, assumedAdjust, f.Regulator, "an adjustment current of 50 µA")
		r.Adjust = driver.Range{Min: typ, Typ: typ, Max: typ}
	}
	if len(r.Dropout) == 0 {
		r.Dropout = [][2]float64{{0, l.stated(nil, assumedDropout, f.Regulator, "a dropout of 2 V")}}
	}
	if part.RthJunctionAmbient != nil {
		r.Rth = *part.RthJunctionAmbient
	}
	l.Assembly = driver.Regulator(leds, r)
	return nil
}

func (l *line) assembleModule(b *Build, leds []driver.LED, f *ModuleDriver) error {
	part := b.Parts[f.Module].Module
	if part.Current == nil {
		return lacks(f.Module, "its current (current)")
	}
	m := driver.Bought{Part: f.Module, Current: limits(*part.Current)}
	m.Dropout = l.stated(part.Dropout, assumedDropout, f.Module, "a dropout of 2 V")
	if part.Switching {
		if part.Efficiency == nil {
			return lacks(f.Module, "its efficiency (efficiency)")
		}
		m.Efficiency = *part.Efficiency
	}
	l.Assembly = driver.Module(leds, m)
	return nil
}
