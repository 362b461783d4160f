package calc_test

import (
	"encoding/json"
	"errors"
	"flag"
	"lanternbook/calc/device"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc"
)

// sometimes runs a property fewer times than usual: whole builds with their
// worst cases and remedies take milliseconds each.
func sometimes(t *testing.T, property func(*rapid.T)) {
	t.Helper()
	checks := flag.Lookup("rapid.checks")
	usual := checks.Value.String()
	if usual == checks.DefValue {
		if err := checks.Value.Set("30"); err != nil {
			t.Fatal(err)
		}
		defer func() { _ = checks.Value.Set(usual) }()
	}
	rapid.Check(t, property)
}

// solved checks a build. One that runs away thermally is left out.
func solved(t *rapid.T, b calc.Build) calc.Report {
	r, err := calc.Check(b)
	if _, unsolved := errors.AsType[*calc.Unsolved](err); unsolved {
		t.Skip(err)
	}
	if err != nil {
		document, _ := json.Marshal(b)
		t.Fatalf("%v\n%s", err, document)
	}
	return r
}

// Builds that somebody could have meant are solved, all of them.
func TestPlausibleBuildsAreSolved(t *testing.T) {
	made := recipe{strings: 3, quantity: 4, coupled: true, held: true, tooMany: 1.2, partsOf: drawerParts(t)}.builds()
	for i := range 150 {
		if _, err := calc.Check(made.Example(i)); err != nil {
			t.Errorf("build %d: %v", i, err)
		}
	}
}

// closeTo fails the property unless got is want within a share of it, or floor.
func closeTo(t *rapid.T, name string, got, want, share, floor float64) {
	if diff := math.Abs(got - want); !(diff <= max(share*math.Abs(want), floor)) {
		t.Fatalf("%s = %.10g, want %.10g", name, got, want)
	}
}

func TestPowerInEqualsPowerOut(t *testing.T) {
	made := recipe{strings: 3, quantity: 4, coupled: true, steady: true, tooMany: 1.1, partsOf: drawerParts(t)}.builds()
	sometimes(t, func(t *rapid.T) {
		b := made.Draw(t, "build")
		r := solved(t, b)
		out := r.Supply.Current.Typ * r.Supply.Current.Typ * b.Supply.SourceResistance
		for _, run := range r.Runs {
			out += run.Loss
		}
		for i, s := range r.Strings {
			for _, d := range s.Devices {
				out += float64(s.Quantity*countOf(b.Strings[i], d)) * d.Power.Typ
			}
		}
		closeTo(t, "power out", out, r.Supply.Power.Typ, 1e-6, 1e-12)
	})
}

// countOf is how many parts a device of the report stands for.
func countOf(s calc.String, d calc.DeviceReport) int {
	if d.Role != "led_"+d.Part {
		return 1
	}
	n := 0
	for _, stack := range s.LEDs {
		if stack.Part == d.Part {
			n += stack.Quantity
		}
	}
	return n
}

// Heat is left out: a limiter that warms may well pass less from more volts.
func TestMoreSupplyNeverGivesLessCurrentBelowRegulation(t *testing.T) {
	parts := drawerParts(t)
	for key, p := range parts {
		parts[key] = cold(p)
	}
	made := recipe{strings: 1, held: true, steady: true, tooMany: 1.3, partsOf: parts}.builds()
	sometimes(t, func(t *rapid.T) {
		b := made.Draw(t, "build")
		more := b
		more.Supply.Voltage = calc.Exactly(b.Supply.Voltage.Typ * (1 + rapid.Float64Range(1e-4, 0.2).Draw(t, "more")))
		low, high := solved(t, b).Strings[0], solved(t, more).Strings[0]
		if high.Headroom.Typ >= 0 && high.Kind != calc.KindResistor {
			return
		}
		if !(high.Current.Typ >= low.Current.Typ*(1-1e-6)-1e-12) {
			t.Fatalf("%.9g A from more, %.9g A from less", high.Current.Typ, low.Current.Typ)
		}
	})
}

// cold is a part that stays at the air's temperature.
func cold(p calc.Part) calc.Part {
	none := 0.0
	switch {
	case p.LED != nil:
		led := *p.LED
		led.RthJunctionAmbient = &none
		p.LED = &led
	case p.Transistor != nil:
		q := *p.Transistor
		q.RthJunctionAmbient = &none
		p.Transistor = &q
	}
	return p
}

func TestOrderOfLEDsInAStringDoesNotMatter(t *testing.T) {
	made := recipe{strings: 2, quantity: 3, coupled: true, held: true, tooMany: 1.1, partsOf: drawerParts(t)}.builds()
	sometimes(t, func(t *rapid.T) {
		b := made.Draw(t, "build")
		other := b
		other.Strings = slices.Clone(b.Strings)
		for i := range other.Strings {
			other.Strings[i].LEDs = slices.Clone(b.Strings[i].LEDs)
			slices.Reverse(other.Strings[i].LEDs)
		}
		got, want := solved(t, other), solved(t, b)
		for i := range want.Strings {
			sameRange(t, "current", got.Strings[i].Current, want.Strings[i].Current, darkAmps)
			sameRange(t, "headroom", got.Strings[i].Headroom, want.Strings[i].Headroom, darkVolt)
			sameRange(t, "LED voltage", got.Strings[i].LEDVoltage, want.Strings[i].LEDVoltage, darkVolt)
		}
		sameRange(t, "supply power", got.Supply.Power, want.Supply.Power, darkWatt)
	})
}

// sameRange compares typical values to the solver's rounding, worst cases to
// that of the search for them: a share of the range that no reading shows. The
// floor is in the unit of the figure.
func sameRange(t *rapid.T, name string, got, want calc.Range, floor float64) {
	const rounding, solver = 3e-4, 1e-7
	reach := rounding*(want.Max-want.Min) + floor
	closeTo(t, name, got.Typ, want.Typ, solver, floor)
	closeTo(t, name+" at least", got.Min, want.Min, solver, reach)
	closeTo(t, name+" at most", got.Max, want.Max, solver, reach)
}

// What no reading shows.
const (
	darkAmps = 1e-9 // [A]
	darkVolt = 1e-4 // [V] across LEDs in the dark
	darkWatt = 1e-8 // [W]
)

func TestTypicalLiesWithinItsWorstCases(t *testing.T) {
	made := recipe{strings: 3, quantity: 4, coupled: true, held: true, tooMany: 1.3, partsOf: drawerParts(t)}.builds()
	sometimes(t, func(t *rapid.T) {
		for name, r := range rangesOf(solved(t, made.Draw(t, "build"))) {
			if !(r.Min <= r.Typ && r.Typ <= r.Max) {
				t.Fatalf("%s: %.9g, %.9g, %.9g", name, r.Min, r.Typ, r.Max)
			}
		}
	})
}

// rangesOf gathers every range of a report by where it stands.
func rangesOf(r calc.Report) map[string]calc.Range {
	all := map[string]calc.Range{
		"supply current": r.Supply.Current, "supply power": r.Supply.Power, "inside": r.Supply.Inside,
	}
	if r.Supply.Loading != nil {
		all["loading"] = *r.Supply.Loading
	}
	for _, s := range r.Strings {
		all[s.Label+" current"], all[s.Label+" LED voltage"], all[s.Label+" headroom"] = s.Current, s.LEDVoltage, s.Headroom
		if s.LuminousFlux != nil {
			all[s.Label+" flux"] = *s.LuminousFlux
		}
		for _, d := range s.Devices {
			role := strings.TrimSuffix(d.Role, reelOf(s.Label))
			all[s.Label+" "+role+" power"], all[s.Label+" "+role+" junction"] = d.Power, d.Junction
		}
	}
	return all
}

func TestQuantityIsSoManyStrings(t *testing.T) {
	for _, coupled := range []bool{false, true} {
		made := recipe{strings: 1, coupled: coupled, held: true, tooMany: 1.2, partsOf: drawerParts(t)}.builds()
		sometimes(t, func(t *rapid.T) {
			b := made.Draw(t, "build")
			n := rapid.IntRange(2, 5).Draw(t, "n")
			single := b.Strings[0]
			apart := b
			apart.Strings = nil
			for i := range n {
				s := single
				s.Label = string(rune('A' + i))
				s.Quantity = 1
				apart.Strings = append(apart.Strings, s)
			}
			b.Strings = []calc.String{single}
			b.Strings[0].Quantity = n
			together, each := solved(t, b), solved(t, apart)
			closeTo(t, "supply current", together.Supply.Current.Typ, each.Supply.Current.Typ, 1e-7, 1e-12)
			closeTo(t, "efficiency", together.Supply.Efficiency, each.Supply.Efficiency, 1e-7, 1e-12)
			for _, s := range each.Strings {
				closeTo(t, "current", together.Strings[0].Current.Typ, s.Current.Typ, 1e-7, 1e-12)
				if !coupled { // strings behind one cable may each be at another corner
					sameRange(t, "current", together.Strings[0].Current, s.Current, darkAmps)
					sameRange(t, "headroom", together.Strings[0].Headroom, s.Headroom, darkVolt)
				}
			}
		})
	}
}

// However the parts of a build fall within their limits, no figure lies beyond
// its worst case by more than the search for it leaves out. The builds are
// always the same ones: near a change of regime there are rare corners that
// the ends of the spreads miss by more.
func TestWorstCaseIsNotBeatenBySamples(t *testing.T) {
	const (
		builds, samples = 25, 20
		alone, coupled  = 0.02, 0.05 // [1] of a range, left out by the search
	)
	for _, shared := range []bool{false, true} {
		rounding := alone
		if shared { // what the strings do to each other is searched for one string at a time
			rounding = coupled
		}
		made := recipe{strings: 2, quantity: 2, coupled: shared, held: true, tooMany: 1.2, partsOf: drawerParts(t)}.builds()
		many := rapid.Custom(func(t *rapid.T) []calc.Build {
			b := made.Draw(t, "build")
			out := []calc.Build{b}
			for range samples {
				out = append(out, sampled(t, b))
			}
			return out
		})
		for i := range builds {
			drawn := many.Example(i)
			worst := rangesOf(check(t, drawn[0]))
			for _, sample := range drawn[1:] {
				got := rangesOf(check(t, sample))
				for name, r := range worst {
					if name == "supply power" || name == "loading" { // of a sampled supply voltage
						continue
					}
					if v := got[name].Typ; !(outside(name, v, r, drawn[0].Ambient.Min) <= rounding*(r.Max-r.Min)) {
						t.Errorf("build %d, %s: %.9g lies outside %.9g to %.9g", i, name, v, r.Min, r.Max)
					}
				}
			}
		}
	}
}

// outside says by how much a value lies outside its worst case. Currents and
// volts go one way with nearly every spread, so that the ends hold. A part's
// own heat, and with it the light, may be greatest in between: where it matches
// what feeds it, or just before a string falls out of regulation. There the
// ends alone come within a fifth, and only the greatest counts.
func outside(name string, v float64, r calc.Range, coldest float64) float64 {
	const heat, nothing = 0.2, 1e-7 // [1], [A] or [W]
	switch {
	case strings.HasSuffix(name, " power"), strings.HasSuffix(name, " flux"):
		return v - r.Max - heat*max(-r.Min, r.Max) - nothing
	case strings.HasSuffix(name, " junction"):
		return v - r.Max - heat*(r.Max-coldest) - nothing
	}
	if strings.HasSuffix(name, " current") {
		return max(r.Min-v, v-r.Max) - 1e-6*math.Abs(r.Typ) - nothing
	}
	return max(r.Min-v, v-r.Max) - darkVolt
}

// reelOf marks a string's own copy of an LED.
func reelOf(label string) string { return " of " + label }

// sampled is a build with everything at one value within its limits.
func sampled(t *rapid.T, b calc.Build) calc.Build {
	pick := func(s calc.Spread) calc.Spread {
		if rapid.Bool().Draw(t, "at an end") {
			return calc.Exactly(rapid.SampledFrom([]float64{s.Min, s.Max}).Draw(t, "end"))
		}
		return calc.Exactly(s.Min + (s.Max-s.Min)*rapid.Float64Range(0, 1).Draw(t, "within"))
	}
	resistor := func(r calc.Resistor) calc.Resistor {
		r.Ohms *= pick(calc.Spread{Min: 1 - r.Tolerance, Typ: 1, Max: 1 + r.Tolerance}).Typ
		r.Tolerance = 0
		return r
	}
	b.Supply.Voltage, b.Ambient = pick(b.Supply.Voltage), pick(b.Ambient)
	b.Parts, b.Strings = maps.Clone(b.Parts), slices.Clone(b.Strings)
	for _, key := range slices.Sorted(maps.Keys(b.Parts)) {
		if q := b.Parts[key].Transistor; q != nil {
			b.Parts[key] = calc.Part{Type: b.Parts[key].Type, Transistor: sampledTransistor(*q, pick)}
		}
	}
	for i := range b.Strings {
		s := &b.Strings[i]
		// A reel for every string, since strings may hold different ones.
		s.LEDs = slices.Clone(s.LEDs)
		for k := range s.LEDs {
			key := s.LEDs[k].Part + reelOf(s.Label)
			if _, ok := b.Parts[key]; !ok {
				led := *b.Parts[s.LEDs[k].Part].LED
				v := pick(led.ForwardVoltage)
				model := *led.Model
				model.Is *= math.Exp(-(v.Typ - led.ForwardVoltage.Typ) / (model.N * device.ThermalVoltage(device.RatedC)))
				led.ForwardVoltage, led.Model = v, &model
				b.Parts[key] = calc.Part{Type: calc.TypeLED, LED: &led}
			}
			s.LEDs[k].Part = key
		}
		d := &s.Driver
		switch {
		case d.Resistor != nil:
			r := *d.Resistor
			r.Resistor = resistor(r.Resistor)
			d.Resistor = &r
		case d.FollowerSink != nil:
			f := *d.FollowerSink
			f.Pullup, f.Sense = resistor(f.Pullup), resistor(f.Sense)
			if f.Control.Volts != nil {
				v := pick(*f.Control.Volts)
				f.Control.Volts = &v
			} else {
				f.Control.Divider = &calc.Divider{Upper: resistor(f.Control.Divider.Upper), Lower: resistor(f.Control.Divider.Lower)}
			}
			d.FollowerSink = &f
		case d.ReferenceSink != nil:
			f := *d.ReferenceSink
			f.Reference.Volts, f.Bias, f.Sense = pick(f.Reference.Volts), resistor(f.Bias), resistor(f.Sense)
			d.ReferenceSink = &f
		case d.TwoTransistor != nil:
			f := *d.TwoTransistor
			f.Bias, f.Sense = resistor(f.Bias), resistor(f.Sense)
			d.TwoTransistor = &f
		}
	}
	return b
}

// sampledTransistor is one transistor of its kind: its gain and its VBE at one
// value within their limits, at every current.
func sampledTransistor(q calc.Transistor, pick func(calc.Spread) calc.Spread) *calc.Transistor {
	if q.Model == nil { // its whole model follows from the typical figures
		return &q
	}
	hfe, vbe := pick(*q.HFE), pick(q.VBEOn.Volts)
	gain, higher := hfe.Typ/q.HFE.Typ, vbe.Typ-q.VBEOn.Volts.Typ
	q.HFE, q.VBEOn = &hfe, &calc.VBEOn{Volts: vbe, At: q.VBEOn.At}
	m := *q.Model
	shift := func(emission float64) float64 {
		return math.Exp(-higher / (emission * device.ThermalVoltage(device.NominalC)))
	}
	is, bf := *m.Is*shift(orElse(m.Nf, 1)), *m.Bf*gain
	m.Is, m.Bf = &is, &bf
	if m.Ise != nil {
		ise := *m.Ise * shift(orElse(m.Ne, 1.5)) / gain
		m.Ise = &ise
	}
	q.Model = &m
	return &q
}

func orElse(v *float64, usual float64) float64 {
	if v == nil {
		return usual
	}
	return *v
}
