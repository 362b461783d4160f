package calc_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc"
)

// The kinds of driver that can be solved, and the parts that builds are made
// of at random.
var (
	someKinds = []string{calc.KindResistor, calc.KindFollowerSink, calc.KindReferenceSink, calc.KindTwoTransistor}
	someLEDs  = []string{"white-2835", "white-1w", "white-5mm", "red-5mm", "amber-5mm", "green-5mm", "blue-5mm"}
	someNPNs  = []string{"2n3904", "bc547b", "bc337-25", "bd139-16", "p2n2222a", "tip31c"}
	somePNPs  = []string{"2n3906", "bc557b", "bc327-25", "bd140-16"}
)

// What a sink transistor may be heated to if it had all the volts, and the
// part with the best heat path.
const (
	mostRise   = 150.0 // [K]
	coolest    = 62.5  // [K/W]
	coolestNPN = "tip31c"
)

// recipe is what kind of builds to make.
type recipe struct {
	strings  int     // at most
	quantity int     // of a string, at most
	coupled  bool    // with runs and source resistance
	held     bool    // a follower's control may be a voltage, which takes current in
	steady   bool    // supply and ambient without spread
	tooMany  float64 // [1] share of the supply that LEDs may ask for
	partsOf  map[string]calc.Part
}

// drawerParts reads every part that a recipe may use.
func drawerParts(t testing.TB) map[string]calc.Part {
	t.Helper()
	parts := map[string]calc.Part{}
	for _, keys := range [][]string{someLEDs, someNPNs, somePNPs} {
		for _, key := range keys {
			parts[key] = drawerPart(t, key)
		}
	}
	return parts
}

// builds makes builds that somebody could have meant, some of them with too
// many LEDs.
func (r recipe) builds() *rapid.Generator[calc.Build] {
	return rapid.Custom(func(t *rapid.T) calc.Build {
		b := calc.Build{Format: calc.BuildFormat, Title: "made at random", Parts: map[string]calc.Part{}}
		volts := rapid.Float64Range(4, 40).Draw(t, "supply")
		b.Supply.Voltage, b.Ambient = calc.Exactly(volts), calc.Exactly(rapid.Float64Range(-20, 60).Draw(t, "ambient"))
		if !r.steady {
			b.Supply.Voltage = calc.Spread{
				Min: volts * (1 - rapid.Float64Range(0, 0.1).Draw(t, "down")), Typ: volts,
				Max: volts * (1 + rapid.Float64Range(0, 0.1).Draw(t, "up")),
			}
			b.Ambient.Min -= rapid.Float64Range(0, 20).Draw(t, "colder")
			b.Ambient.Max += rapid.Float64Range(0, 20).Draw(t, "hotter")
			b.Ambient.Bare = false
		}
		if r.coupled {
			b.Supply.SourceResistance = rapid.SampledFrom([]float64{0, 0.02, 0.2, 1}).Draw(t, "source resistance")
			for i := range rapid.IntRange(0, 3).Draw(t, "runs") {
				from := "supply"
				if k := rapid.IntRange(0, i).Draw(t, "from"); k < i {
					from = fmt.Sprintf("r%d", k)
				}
				b.Runs = append(b.Runs, calc.Run{
					ID: fmt.Sprintf("r%d", i), From: from, Length: rapid.SampledFrom([]float64{0.1, 1, 5, 15}).Draw(t, "length"),
					Conductor: rapid.SampledFrom([]string{"0.5 mm2", "0.75 mm2", "AWG 24", "1.5 mm2"}).Draw(t, "conductor"),
				})
			}
		}
		for i := range rapid.IntRange(1, r.strings).Draw(t, "strings") {
			b.Strings = append(b.Strings, r.string(t, &b, fmt.Sprintf("S%d", i), volts))
		}
		return b
	})
}

// string makes one string and adds the parts it needs.
func (r recipe) string(t *rapid.T, b *calc.Build, label string, volts float64) calc.String {
	s := calc.String{Label: label, Quantity: rapid.IntRange(1, max(1, r.quantity)).Draw(t, "quantity")}
	most, left := math.Inf(1), volts*rapid.Float64Range(0.3, max(1, r.tooMany)).Draw(t, "share for LEDs")
	for len(s.LEDs) == 0 || (len(s.LEDs) < 3 && rapid.Bool().Draw(t, "another")) {
		key := rapid.SampledFrom(someLEDs).Draw(t, "LED")
		led := r.partsOf[key].LED
		count := max(1, int(left*rapid.Float64Range(0.2, 1).Draw(t, "share")/led.ForwardVoltage.Typ))
		s.LEDs = append(s.LEDs, calc.LEDStack{Part: key, Quantity: count})
		left -= float64(count) * led.ForwardVoltage.Typ
		most = min(most, *led.MaxCurrent)
		b.Parts[key] = r.partsOf[key]
	}
	if n := len(b.Runs); n > 0 {
		if k := rapid.IntRange(0, n).Draw(t, "fed by"); k < n {
			s.FedBy = b.Runs[k].ID
		}
	}
	// No hotter than a good heat path allows: what runs away has no solution.
	most = min(most, mostRise/(volts*coolest))
	s.Driver = r.driver(t, volts, most*rapid.Float64Range(0.05, 0.9).Draw(t, "current"))
	for _, key := range transistorsOf(s.Driver) {
		b.Parts[key] = r.partsOf[key]
	}
	return s
}

// driver makes a driver for about that current in amperes.
func (r recipe) driver(t *rapid.T, volts, current float64) calc.Driver {
	resistor := func(ohms float64) calc.Resistor {
		watts := rapid.SampledFrom([]float64{0.25, 0.5, 1, 2}).Draw(t, "watts")
		return calc.Resistor{Ohms: max(0.1, ohms), Tolerance: rapid.SampledFrom([]float64{0, 0.01, 0.05}).Draw(t, "tolerance"), Watts: &watts}
	}
	npn := func() string {
		key := rapid.SampledFrom(someNPNs).Draw(t, "NPN")
		if rth := r.partsOf[key].Transistor.RthJunctionAmbient; *rth*volts*current > mostRise {
			return coolestNPN
		}
		return key
	}
	base := current/50 + rapid.Float64Range(0.2e-3, 2e-3).Draw(t, "base drive") // [A]
	kind := rapid.SampledFrom(someKinds).Draw(t, "kind")
	switch kind {
	case calc.KindResistor:
		return calc.Driver{Kind: kind, Resistor: &calc.ResistorDriver{
			Kind: kind, Resistor: resistor(volts * rapid.Float64Range(0.1, 0.5).Draw(t, "across") / current),
		}}
	case calc.KindFollowerSink:
		set := rapid.Float64Range(0.3, volts/4).Draw(t, "control")
		control := calc.Control{Divider: &calc.Divider{Upper: resistor(4700 * (volts - set) / set), Lower: resistor(4700)}}
		if r.held && rapid.Bool().Draw(t, "held") {
			v := calc.Spread{Min: set * 0.97, Typ: set, Max: set * 1.03}
			behind := rapid.SampledFrom([]float64{0, 500}).Draw(t, "behind")
			control = calc.Control{Volts: &v, Ohms: &behind}
		}
		return calc.Driver{Kind: kind, FollowerSink: &calc.FollowerSink{
			Kind: kind, Control: control, PNP: rapid.SampledFrom(somePNPs).Draw(t, "PNP"), NPN: npn(),
			Pullup: resistor((volts - set - 0.65) / base), Sense: resistor(set / current),
		}}
	case calc.KindReferenceSink:
		set := rapid.Float64Range(1.2, max(1.3, volts/3)).Draw(t, "reference")
		return calc.Driver{Kind: kind, ReferenceSink: &calc.ReferenceSink{
			Kind: kind,
			Reference: calc.Reference{
				Volts:  calc.Spread{Min: set * 0.98, Typ: set, Max: set * 1.02},
				Tempco: rapid.Float64Range(-3e-3, 3e-3).Draw(t, "tempco"), Ohms: rapid.Float64Range(0, 20).Draw(t, "slope"),
			},
			Bias: resistor((volts - set) / (base + 1e-3)), NPN: npn(), Sense: resistor((set - 0.65) / current),
		}}
	default:
		return calc.Driver{Kind: kind, TwoTransistor: &calc.TwoTransistor{
			Kind: kind, Pass: npn(), Sensor: npn(), Bias: resistor((volts - 1.3) / base), Sense: resistor(0.65 / current),
		}}
	}
}
