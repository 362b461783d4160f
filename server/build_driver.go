package main

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/web"
)

// What a driver starts with where the one before it says nothing. All common
// practice, no source.
const (
	usualCurrent  = 0.02 // [A] where neither a wish nor an LED says one
	usualSense    = 2.0  // [V] across a sense resistor, but at most
	shareOfSupply = 0.1  // [1] of the supply
	limiterVBE    = 0.62 // [V] at which a two-transistor limiter holds
	sinkVBE       = 0.65 // [V] between a base and the top of its sense resistor
	pullupDrop    = 1.2  // [V] that a pull-up or base feed does not get
	leastBias     = 1e-3 // [A] through a pull-up, base feed or reference
	biasShare     = 0.02 // [1] of the string's current
)

// writeDriver gives a string another kind of driver. What fits the new kind
// stays: the sense resistor, the transistors; the rest is filled in for the
// current that the string was built for.
func writeDriver(d *draft, at, kind string, b calc.Build, drawer []web.Stock) error {
	i, err := stringIndex(at)
	if err != nil || i >= len(b.Strings) {
		return fmt.Errorf("there is no such string")
	}
	old := b.Strings[i].Driver
	s := starter{d: d, b: b, drawer: drawer, old: old, current: builtFor(b, i), supply: b.Supply.Voltage.Typ}
	switch kind {
	case calc.KindResistor:
		return d.set(at, s.resistor(i))
	case calc.KindTwoTransistor:
		return s.write(at, s.twoTransistor, calc.TypeNPN)
	case calc.KindFollowerSink:
		return s.write(at, s.followerSink, calc.TypeNPN, calc.TypePNP)
	case calc.KindReferenceSink:
		return s.write(at, s.referenceSink, calc.TypeNPN)
	case calc.KindRailSink:
		return s.railSink(at)
	case calc.KindOpampSink:
		return s.write(at, s.opampSink, calc.TypeOpamp, calc.TypeNMOS)
	case calc.KindRegulator:
		return s.write(at, s.regulator, calc.TypeRegulator)
	case calc.KindModule:
		return s.write(at, s.module, calc.TypeModule)
	}
	return fmt.Errorf("there is no such kind of driver")
}

// write gives the string a driver that needs a part of each of these types, in
// the order of the maker's arguments.
func (s starter) write(at string, maker func(parts []string) map[string]any, types ...string) error {
	keys, err := s.take(types...)
	if err != nil {
		return err
	}
	return s.d.set(at, maker(keys))
}

// take finds a part of each of these types and copies into the build what it
// does not have yet.
func (s starter) take(types ...string) ([]string, error) {
	for _, typ := range types { // before the first is copied: an edit is made whole or not at all
		if _, _, found := s.find(typ); !found {
			return nil, fmt.Errorf("this needs a part of type %s, and the drawer has none", typ)
		}
	}
	keys := make([]string, len(types))
	for i, typ := range types {
		key, stocked, _ := s.find(typ)
		if stocked {
			var err error
			if key, err = copyPart(s.d, key, s.drawer); err != nil {
				return nil, err
			}
		}
		keys[i] = key
	}
	return keys, nil
}

// stringIndex reads the string's number out of "/strings/3/driver".
func stringIndex(at string) (int, error) {
	parts := pointerTokens(at)
	if len(parts) < 2 {
		return 0, fmt.Errorf("%q is in no string", at)
	}
	return strconv.Atoi(parts[1])
}

// builtFor is the current that a string is meant to carry: the one wanted, else
// what its driver is set to, else what its first LED is measured at. [A]
func builtFor(b calc.Build, i int) float64 {
	s := b.Strings[i]
	if s.Wanted != nil && s.Wanted.Current != nil && *s.Wanted.Current > 0 {
		return *s.Wanted.Current
	}
	volts, sense := 0.0, calc.Resistor{}
	switch d := s.Driver; {
	case d.TwoTransistor != nil:
		volts, sense = limiterVBE, d.TwoTransistor.Sense
	case d.FollowerSink != nil:
		volts, sense = controlVolts(d.FollowerSink.Control, b.Supply.Voltage.Typ), d.FollowerSink.Sense
	case d.ReferenceSink != nil:
		volts, sense = d.ReferenceSink.Reference.Volts.Typ-sinkVBE, d.ReferenceSink.Sense
	case d.OpampSink != nil:
		volts, sense = controlVolts(d.OpampSink.Control, b.Supply.Voltage.Typ), d.OpampSink.Sense
	case d.RailSink != nil:
		volts, sense = railVolts(b, d.RailSink.Rail)-sinkVBE, d.RailSink.Sense
	case d.Regulator != nil:
		volts, sense = regulatorVolts, d.Regulator.Set
	case d.Resistor != nil:
		volts, sense = b.Supply.Voltage.Typ-forwardVolts(b, i), d.Resistor.Resistor
	}
	if volts > 0 && sense.Ohms > 0 {
		return volts / sense.Ohms
	}
	if len(s.LEDs) > 0 {
		if led := b.Parts[s.LEDs[0].Part].LED; led != nil && led.TestCurrent > 0 {
			return led.TestCurrent
		}
	}
	return usualCurrent
}

// forwardVolts is what the LEDs of a string take at their test currents. [V]
func forwardVolts(b calc.Build, i int) float64 {
	sum := 0.0
	for _, stack := range b.Strings[i].LEDs {
		if led := b.Parts[stack.Part].LED; led != nil {
			sum += led.ForwardVoltage.Typ * float64(stack.Quantity)
		}
	}
	return sum
}

// controlVolts is about what a control voltage is on a supply, both in volts.
func controlVolts(c calc.Control, supply float64) float64 {
	switch {
	case c.Volts != nil:
		return c.Volts.Typ
	case c.Pot != nil:
		if sum := c.Pot.Upper + c.Pot.Ohms + c.Pot.Lower; sum > 0 {
			return supply * (c.Pot.Lower + c.Pot.Turn*c.Pot.Ohms) / sum
		}
	case c.Divider != nil:
		if sum := c.Divider.Upper.Ohms + c.Divider.Lower.Ohms; sum > 0 {
			return supply * c.Divider.Lower.Ohms / sum
		}
	}
	return 0
}

// starter makes drivers for one string.
type starter struct {
	d       *draft
	b       calc.Build
	drawer  []web.Stock
	old     calc.Driver
	current float64 // [A]
	supply  float64 // [V]
}

func (s starter) resistor(i int) map[string]any {
	drop := s.supply - forwardVolts(s.b, i)
	if !(drop > 0) { // too many LEDs: the least drop that still limits anything
		drop = s.supply * shareOfSupply
	}
	ohms := preferred(drop / s.current)
	return map[string]any{"kind": calc.KindResistor, "resistor": fitted(ohms, 0.05, s.current)}
}

func (s starter) twoTransistor(transistors []string) map[string]any {
	return map[string]any{
		"kind": calc.KindTwoTransistor, "pass": transistors[0], "sensor": transistors[0],
		"bias": s.feed(), "sense": s.sense(preferred(limiterVBE / s.current)),
	}
}

func (s starter) followerSink(transistors []string) map[string]any {
	ohms := s.senseOhms(preferred(s.senseVolts() / s.current))
	return map[string]any{
		"kind": calc.KindFollowerSink, "npn": transistors[0], "pnp": transistors[1],
		"pullup": s.feed(), "sense": s.sense(ohms),
		"control": map[string]any{"volts": rounded(ohms * s.current), "ohms": 0},
	}
}

func (s starter) referenceSink(transistors []string) map[string]any {
	ohms := s.senseOhms(preferred(s.senseVolts() / s.current))
	return map[string]any{
		"kind": calc.KindReferenceSink, "npn": transistors[0], "bias": s.feed(), "sense": s.sense(ohms),
		"reference": map[string]any{"volts": rounded(ohms*s.current + sinkVBE), "tempco": 0, "ohms": 0},
	}
}

// senseVolts is what a sense resistor is given on this supply. [V]
func (s starter) senseVolts() float64 { return min(usualSense, shareOfSupply*s.supply) }

// senseOhms keeps the sense resistor of a sink whose set voltage can follow it,
// and takes another where there was none. [Ω]
func (s starter) senseOhms(otherwise float64) float64 {
	switch {
	case s.old.FollowerSink != nil:
		return s.old.FollowerSink.Sense.Ohms
	case s.old.ReferenceSink != nil:
		return s.old.ReferenceSink.Sense.Ohms
	case s.old.OpampSink != nil:
		return s.old.OpampSink.Sense.Ohms
	}
	return otherwise
}

// sense is a sense resistor: as exact and as large as the old one where there
// was one.
func (s starter) sense(ohms float64) map[string]any {
	r := fitted(ohms, 0.01, s.current)
	var old *calc.Resistor
	switch {
	case s.old.FollowerSink != nil:
		old = &s.old.FollowerSink.Sense
	case s.old.ReferenceSink != nil:
		old = &s.old.ReferenceSink.Sense
	case s.old.TwoTransistor != nil:
		old = &s.old.TwoTransistor.Sense
	case s.old.RailSink != nil:
		old = &s.old.RailSink.Sense
	case s.old.OpampSink != nil:
		old = &s.old.OpampSink.Sense
	}
	if old != nil {
		r["tolerance"] = old.Tolerance
		if old.Watts != nil {
			r["watts"] = *old.Watts
		}
	}
	return r
}

// feed is the resistor from the string's feed that brings a base or a reference
// its current.
func (s starter) feed() map[string]any {
	switch {
	case s.old.FollowerSink != nil:
		return resistorValue(s.old.FollowerSink.Pullup)
	case s.old.ReferenceSink != nil:
		return resistorValue(s.old.ReferenceSink.Bias)
	case s.old.TwoTransistor != nil:
		return resistorValue(s.old.TwoTransistor.Bias)
	}
	current := max(leastBias, biasShare*s.current)
	volts := max(s.supply-s.senseVolts()-pullupDrop, s.supply/2)
	return fitted(preferred(volts/current), 0.05, current)
}

// find returns the key of a transistor of this type: the string's own, else one
// that the build has, else one of the drawer, which must be copied.
func (s starter) find(typ string) (key string, stocked, found bool) {
	if d := s.old; typ == calc.TypeNPN {
		switch {
		case d.FollowerSink != nil:
			return d.FollowerSink.NPN, false, true
		case d.ReferenceSink != nil:
			return d.ReferenceSink.NPN, false, true
		case d.TwoTransistor != nil:
			return d.TwoTransistor.Pass, false, true
		case d.RailSink != nil:
			return d.RailSink.NPN, false, true
		}
	}
	for _, key := range slices.Sorted(maps.Keys(s.b.Parts)) {
		if s.b.Parts[key].Type == typ {
			return key, false, true
		}
	}
	for _, stock := range s.drawer {
		if stock.Part.Type == typ {
			return stock.Key, true, true
		}
	}
	return "", false, false
}

// fitted is a resistor of the smallest usual rating that this current loads to
// a half at most. [Ω], [1], [A]
func fitted(ohms, tolerance, current float64) map[string]any {
	watts := 0.25
	for _, rating := range []float64{0.25, 0.5, 1, 2, 3, 5, 10, 25} {
		watts = rating
		if rating*(1+1e-9) >= 2*current*current*ohms { // rounding must not double it
			break
		}
	}
	return map[string]any{"ohms": ohms, "tolerance": tolerance, "watts": watts}
}

func resistorValue(r calc.Resistor) map[string]any {
	value := map[string]any{"ohms": r.Ohms, "tolerance": r.Tolerance}
	if r.Watts != nil {
		value["watts"] = *r.Watts
	}
	return value
}

// preferred is the E24 value nearest to v, by ratio. [Ω]
func preferred(v float64) float64 {
	below, above := quantity.Nearest("E24", v)
	if v/below <= above/v {
		return below
	}
	return above
}

// rounded keeps three digits of a set voltage. [V]
func rounded(v float64) float64 {
	if !(v > 0) {
		return 0
	}
	scale := math.Pow10(2 - int(math.Floor(math.Log10(v))))
	return math.Round(v*scale) / scale
}

// writeControl gives a control voltage another form that makes about the same
// volts on this supply. [V]
func writeControl(d *draft, at, kind string, supply float64) error {
	var c calc.Control
	old, has := d.get(at)
	if has {
		if err := fromTree(old, &c); err != nil {
			return err
		}
	}
	volts := controlVolts(c, supply)
	share := 0.1
	if supply > 0 && volts > 0 {
		share = min(max(rounded(volts/supply), 0.01), 0.99)
	}
	switch kind {
	case web.ControlPot:
		return d.set(at, map[string]any{"pot": map[string]any{"ohms": 10000, "turn": share, "upper": 0, "lower": 0}})
	case web.ControlDivider:
		lower := preferred(share * 10000)
		return d.set(at, map[string]any{"divider": map[string]any{
			"upper": fitted(preferred(lower*(1-share)/share), 0.01, 0), "lower": fitted(lower, 0.01, 0),
		}})
	}
	return d.set(at, map[string]any{"volts": rounded(share * supply), "ohms": 0})
}
