package calc

import (
	"fmt"
	"math"
	"strings"
)

// The judges of this file say of one build with everything at one value what
// the checks say of a build's worst case, without the words. A test holds them
// together.

// runawayCode is the code of the check that only a build without a stable
// temperature has.
const runawayCode = "thermal-runaway"

// judge is one check of one string, rail or supply in the present sample.
type judge struct {
	check    int // index in the result's checks
	severity func() Severity
}

// bench appoints judges; the strings that are copies of one share its checks.
type bench struct {
	s      *sampler
	where  string
	judges []judge
	next   int // index of the next check
}

// appoint finds every check and who judges it.
func (s *sampler) appoint(r *Report) {
	b := &bench{s: s}
	begins := 0
	for i, l := range s.lots {
		if i > 0 && s.lots[i-1].of == l.of {
			b.next = begins
		} else {
			begins = b.next
		}
		b.where, b.judges = l.where(), nil
		b.string(l, &r.Strings[l.of])
		l.judges = b.judges
	}
	b.judges = nil
	for _, rail := range s.plant.rails {
		b.where = rail.name()
		b.rail(rail)
	}
	b.supply()
	s.judges = b.judges
	s.order = make([]Severity, len(s.result.Checks))
}

// add appoints a judge; without one the check cannot be judged.
func (b *bench) add(code, at, name string, severity func() Severity) {
	if b.next == len(b.s.result.Checks) {
		b.s.result.Checks = append(b.s.result.Checks, ScatterCheck{Code: code, Where: b.where, At: at, Name: name, Unknown: severity == nil})
	}
	if severity != nil {
		b.judges = append(b.judges, judge{b.next, severity})
	}
	b.next++
}

// atLeast judges a value against what it must reach and what it should.
func atLeast(value, must, should float64) Severity {
	switch {
	case !(value >= must):
		return Fail
	case value < should:
		return Tight
	}
	return Pass
}

// more is atLeast for a value that must be above the limit.
func more(value, must, should float64) Severity {
	if !(value > must) {
		return Fail
	}
	return atLeast(value, must, should)
}

// within judges a value, or two, against a window.
func within(low, high, least, most float64) Severity {
	if low < least || high > most {
		return Fail
	}
	return Pass
}

// at is a pointer below a string of the build as it was given.
func (l *lot) at(below string) string { return fmt.Sprintf("/strings/%d%s", l.of, below) }

// string appoints those of one string, in the order of checkString.
func (b *bench) string(l *lot, r *StringReport) {
	if l.spec.Driver.Kind == KindResistor {
		typ := r.Current.Typ
		b.add("headroom", l.at("/leds"), "", func() Severity {
			return atMost(swing(l.fig[figCurrent], typ), widestSwing, float64(tightSwing)/widestSwing)
		})
	} else {
		limit := b.s.plant.limitHeadroom()
		b.add("headroom", l.at("/leds"), "", func() Severity { return atLeast(l.fig[figHeadroom], 0, limit) })
		b.drive(l)
		b.bought(l)
	}
	b.wanted(l, r)
	for k := range l.Devices {
		b.device(l, k)
	}
	for _, assumed := range l.assumed {
		part, _, _ := strings.Cut(assumed, ": ")
		b.add("part-data", "/parts/"+escapePointer(part), part, nil)
	}
}

// swing is by how many percent a current is off its typical.
func swing(current, typ float64) float64 {
	if !(typ > 0) {
		return 100
	}
	return 100 * math.Abs(current-typ) / typ
}

// hfe is the gain of the string's transistor in the present sample.
func (l *lot) hfe(of Spread) float64 {
	if l.gain < 0 {
		return of.Typ
	}
	return between(of, l.turned[l.gain])
}

func (b *bench) drive(l *lot) {
	k := l.driveResistor()
	if k < 0 {
		return
	}
	at := l.at("/driver/" + strings.TrimSuffix(l.Devices[k].Role, "_resistor") + "/ohms")
	if h := b.s.build.Parts[l.Devices[l.Holder].Part].Transistor.HFE; h == nil {
		b.add("base-drive", at, "", nil)
	} else {
		b.add("base-drive", at, "", func() Severity {
			need := math.Max(l.fig[figCurrent], l.intended()) / l.hfe(*h)
			return atLeast(l.fig[figDrive], need, ampleDrive*need)
		})
	}
	if l.spec.Driver.Kind == KindReferenceSink {
		b.add("reference-current", at, "", func() Severity { return more(l.fig[figSpare], 0, keepsHolding) })
	}
}

func (b *bench) bought(l *lot) {
	d := &l.spec.Driver
	parts := b.s.build.Parts
	switch {
	case d.OpampSink != nil:
		b.add("gate-drive", l.at("/driver/opamp"), "", func() Severity { return more(l.fig[figSpare], 0, ampleGate) })
		amp := parts[d.OpampSink.Opamp].Opamp
		if amp.InputLow == nil || amp.InputHigh == nil {
			b.add("opamp-input", l.at("/driver/control"), "", nil)
			return
		}
		b.add("opamp-input", l.at("/driver/control"), "", func() Severity {
			v := l.fig[figControl]
			return within(v, v, *amp.InputLow, l.fig[figFeed]-*amp.InputHigh)
		})
	case d.Regulator != nil:
		least := parts[d.Regulator.Regulator].Regulator.LeastLoad
		if least == nil {
			b.add("least-load", l.at("/driver/set"), "", nil)
			return
		}
		b.add("least-load", l.at("/driver/set"), "", func() Severity { return atLeast(l.fig[figCurrent], *least, *least) })
	case d.ModuleInstance != nil:
		part := parts[d.ModuleInstance.Module].Module
		for _, w := range []struct {
			code   string
			window *Spread
			fig    int
		}{{"module-input", part.InputVoltage, figFeed}, {"module-output", part.OutputVoltage, figLEDVolts}} {
			if w.window == nil {
				b.add(w.code, l.at("/driver/module"), "", nil)
				continue
			}
			b.add(w.code, l.at("/driver/module"), "", func() Severity {
				return within(l.fig[w.fig], l.fig[w.fig], w.window.Min, w.window.Max)
			})
		}
	}
}

func (b *bench) wanted(l *lot, r *StringReport) {
	w := l.spec.Wanted
	if w == nil {
		return
	}
	fig, want := figCurrent, 0.0
	switch {
	case w.Current != nil:
		want = *w.Current
	case r.LuminousFlux == nil:
		b.add("wanted", l.at("/wanted"), "", nil)
		return
	default:
		fig, want = figFlux, *w.LuminousFlux
	}
	b.add("wanted", l.at("/wanted"), "", func() Severity {
		off := math.Abs(l.fig[fig]-want) / want
		switch {
		case math.IsNaN(off):
			return Unknown
		case off > farApart:
			return Fail
		case off > seenApart:
			return Tight
		}
		return Pass
	})
}
