package calc

import "fmt"

// ampleGate is the gate headroom in volts below which it is tight. Common
// practice, no source.
const ampleGate = 0.5

// checkBought verifies what op-amps, regulators and modules ask for besides
// headroom and heat.
func (b *book) checkBought(l *line, s *StringReport) {
	d := &l.spec.Driver
	switch {
	case d.OpampSink != nil:
		b.checkGate(l)
		b.checkInput(l, d.OpampSink.Opamp)
	case d.Regulator != nil:
		b.checkLeastLoad(l, s, d.Regulator.Regulator)
	case d.ModuleInstance != nil:
		b.checkWindows(l, s, d.ModuleInstance.Module)
	}
}

// checkGate verifies that the op-amp's output reaches the gate voltage needed.
func (b *book) checkGate(l *line) {
	spare, least := l.worst.Min[figSpare], ampleGate
	f := Finding{Code: "gate-drive", Where: l.where(), At: l.pointer("/driver/opamp"), Value: &spare, Limit: &least, Unit: "V", Least: true,
		Working: fmt.Sprintf("feed − what the op-amp's output keeps below it − gate = %s in the worst case", volts(spare)), Source: "device equations; margin " + sourcePractice}
	switch {
	case spare <= 0:
		f.Severity, f.Message = Fail, "the op-amp's output cannot lift the gate far enough: the current falls short"
	case spare < least:
		f.Severity, f.Message = Tight, fmt.Sprintf("only %s is left between the gate and what the op-amp's output reaches", volts(spare))
	default:
		f.Severity, f.Message = Pass, fmt.Sprintf("%s is left between the gate and what the op-amp's output reaches", volts(spare))
	}
	b.add(f)
}

// checkInput verifies that the control voltage is within the op-amp's inputs.
func (b *book) checkInput(l *line, key string) {
	part := b.p.build.Parts[key].Opamp
	low, high := l.worst.Min[figControl], l.worst.Max[figControl]
	f := Finding{Code: "opamp-input", Where: l.where(), At: l.pointer("/driver/control"), Value: &high, Unit: "V", Source: sourceRating}
	switch {
	case part.InputLow == nil:
		b.missing(f, "lower end of its inputs (input_low)", key)
		return
	case part.InputHigh == nil:
		b.missing(f, "upper end of its inputs (input_high)", key)
		return
	}
	ceiling := l.worst.Min[figFeed] - *part.InputHigh
	f.Limit = &ceiling
	f.Severity = Pass
	f.Message = fmt.Sprintf("%s: inputs at %s to %s, within %s to %s", b.p.build.nameOf(key), volts(low), volts(high), volts(*part.InputLow), volts(ceiling))
	if low < *part.InputLow || high > ceiling {
		f.Severity = Fail
		f.Message = fmt.Sprintf("%s: inputs at %s to %s, outside %s to %s", b.p.build.nameOf(key), volts(low), volts(high), volts(*part.InputLow), volts(ceiling))
	}
	f.Working = fmt.Sprintf("lowest feed %s − %s = %s", volts(l.worst.Min[figFeed]), volts(*part.InputHigh), volts(ceiling))
	b.add(f)
}

// checkLeastLoad verifies that a regulator carries enough to regulate.
func (b *book) checkLeastLoad(l *line, s *StringReport, key string) {
	part := b.p.build.Parts[key].Regulator
	least := s.Current.Min
	f := Finding{Code: "least-load", Where: l.where(), At: l.pointer("/driver/set"), Value: &least, Limit: part.LeastLoad, Unit: "A", Least: true, Source: sourceRating}
	if part.LeastLoad == nil {
		b.missing(f, "least load (least_load)", key)
		return
	}
	f.Severity = Pass
	f.Message = fmt.Sprintf("%s carries at least %s; it needs %s to regulate", b.p.build.nameOf(key), amps(least), amps(*part.LeastLoad))
	if least < *part.LeastLoad {
		f.Severity = Fail
		f.Message = fmt.Sprintf("%s carries only %s and needs %s to regulate", b.p.build.nameOf(key), amps(least), amps(*part.LeastLoad))
	}
	f.Working = fmt.Sprintf("least worst-case current %s against the least load %s", amps(least), amps(*part.LeastLoad))
	b.add(f)
}

// checkWindows verifies a module's input and output windows.
func (b *book) checkWindows(l *line, s *StringReport, key string) {
	part := b.p.build.Parts[key].Module
	for _, w := range []struct {
		code, what, figure string
		window             *Spread
		low, high          float64
	}{
		{"module-input", "input", "input window (input_voltage)", part.InputVoltage, l.worst.Min[figFeed], l.worst.Max[figFeed]},
		{"module-output", "output", "output window (output_voltage)", part.OutputVoltage, s.LEDVoltage.Min, s.LEDVoltage.Max},
	} {
		high := w.high
		f := Finding{Code: w.code, Where: l.where(), At: l.pointer("/driver/module"), Value: &high, Unit: "V", Source: sourceRating}
		if w.window == nil {
			b.missing(f, w.figure, key)
			continue
		}
		f.Limit = &w.window.Max
		f.Severity, f.Message = Pass, fmt.Sprintf("%s: %s at %s to %s, within %s to %s", b.p.build.nameOf(key), w.what, volts(w.low), volts(w.high), volts(w.window.Min), volts(w.window.Max))
		if w.low < w.window.Min || w.high > w.window.Max {
			f.Severity, f.Message = Fail, fmt.Sprintf("%s: %s at %s to %s, outside %s to %s", b.p.build.nameOf(key), w.what, volts(w.low), volts(w.high), volts(w.window.Min), volts(w.window.Max))
		}
		f.Working = fmt.Sprintf("worst cases %s and %s against the window", volts(w.low), volts(w.high))
		b.add(f)
	}
}
