package main

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/web"
)

// What a rail and the bought drivers start with. All common practice, no
// source.
const (
	regulatorVolts = 1.25 // [V] between output and adjustment
	railBase       = 470  // [Ω] from the rail to each base: one open LED then hardly loads it
	railBias       = 5e-3 // [A] through a rail's pull-up or bias
	railPulldown   = 3300 // [Ω]
)

// railVolts is about what a rail stands at. [V]
func railVolts(b calc.Build, id string) float64 {
	i := slices.IndexFunc(b.Rails, func(r calc.Rail) bool { return r.ID == id })
	if i < 0 {
		return 0
	}
	switch r := b.Rails[i]; {
	case r.Kind == web.RailFollower && r.Control != nil:
		return controlVolts(*r.Control, b.Supply.Voltage.Typ) + sinkVBE
	case r.Kind == web.RailBuffered && r.Reference != nil:
		return r.Reference.Volts.Typ - sinkVBE
	case r.Reference != nil:
		return r.Reference.Volts.Typ
	}
	return 0
}

// railSink puts the string on the build's first rail, or makes one.
func (s starter) railSink(at string) error {
	npn, err := s.take(calc.TypeNPN)
	if err != nil {
		return err
	}
	id, volts := "", s.senseVolts()+sinkVBE
	if len(s.b.Rails) > 0 {
		id = s.b.Rails[0].ID
		volts = railVolts(s.b, id)
	} else if id, err = addRail(s.d, s.b, s.drawer); err != nil {
		return err
	}
	sense := max(volts-sinkVBE, shareOfSupply)
	return s.d.set(at, map[string]any{
		"kind": calc.KindRailSink, "rail": id, "npn": npn[0], "base_resistor": railBase,
		"sense": s.sense(preferred(sense / s.current)),
	})
}

func (s starter) opampSink(parts []string) map[string]any {
	ohms := s.senseOhms(preferred(s.senseVolts() / s.current))
	return map[string]any{
		"kind": calc.KindOpampSink, "opamp": parts[0], "fet": parts[1], "sense": s.sense(ohms),
		"control": map[string]any{"volts": rounded(ohms * s.current), "ohms": 0},
	}
}

func (s starter) regulator(parts []string) map[string]any {
	return map[string]any{
		"kind": calc.KindRegulator, "regulator": parts[0], "set": fitted(preferred(regulatorVolts/s.current), 0.01, s.current),
	}
}

func (s starter) module(parts []string) map[string]any {
	return map[string]any{"kind": calc.KindModule, "module": parts[0]}
}

// addRail puts a rail at the end, under the next free id: a follower set to the
// usual sense voltage.
func addRail(d *draft, b calc.Build, drawer []web.Stock) (string, error) {
	id := "main"
	for n := 2; slices.ContainsFunc(b.Rails, func(r calc.Rail) bool { return r.ID == id }); n++ {
		id = "rail " + strconv.Itoa(n)
	}
	s := starter{d: d, b: b, drawer: drawer, supply: b.Supply.Voltage.Typ}
	rail, err := s.rail(id, web.RailFollower)
	if err != nil {
		return "", err
	}
	return id, d.insert("/rails/-", rail)
}

// writeRail makes a rail another kind that stands at about the same voltage.
func writeRail(d *draft, at, kind string, b calc.Build, drawer []web.Stock) error {
	_, last := pointerSplit(at)
	i, err := strconv.Atoi(last)
	if err != nil || i >= len(b.Rails) {
		return errNoSuchRow
	}
	s := starter{d: d, b: b, drawer: drawer, supply: b.Supply.Voltage.Typ}
	rail, err := s.rail(b.Rails[i].ID, kind)
	if err != nil {
		return err
	}
	if b.Rails[i].FedBy != "" {
		rail["fed_by"] = b.Rails[i].FedBy
	}
	return d.set(at, rail)
}

// rail is a rail of a kind: at the voltage of the one that has its id, else at
// the usual one.
func (s starter) rail(id, kind string) (map[string]any, error) {
	volts := railVolts(s.b, id)
	if !(volts > 0) {
		volts = s.senseVolts() + sinkVBE
	}
	feed := fitted(preferred(max(s.supply-volts, s.supply/4)/railBias), 0.05, railBias)
	rail := map[string]any{"id": id, "kind": kind}
	held := func(v float64) map[string]any {
		return map[string]any{"volts": rounded(v), "tempco": 0, "ohms": 0}
	}
	switch kind {
	case web.RailFollower:
		pnp, err := s.take(calc.TypePNP)
		if err != nil {
			return nil, err
		}
		rail["pnp"], rail["pullup"] = pnp[0], feed
		rail["control"] = map[string]any{"volts": rounded(volts - sinkVBE), "ohms": 0}
	case web.RailReference:
		rail["reference"], rail["bias"] = held(volts), feed
	default:
		npn, err := s.take(calc.TypeNPN)
		if err != nil {
			return nil, err
		}
		rail["reference"], rail["bias"], rail["npn"] = held(volts+sinkVBE), feed, npn[0]
		rail["pulldown"] = fitted(railPulldown, 0.05, volts/railPulldown)
	}
	return rail, nil
}

// removeRail takes a rail away that no string hangs on.
func removeRail(d *draft, i int, b calc.Build) (renamed, error) {
	if i >= len(b.Rails) {
		return unmoved, errNoSuchRow
	}
	var on []string
	for _, s := range b.Strings {
		if r := s.Driver.RailSink; r != nil && r.Rail == b.Rails[i].ID {
			on = append(on, s.Label)
		}
	}
	if len(on) > 0 {
		return unmoved, calc.Invalid{{
			At:     "/rails/" + strconv.Itoa(i),
			Reason: fmt.Sprintf("%s still hang on rail %s: give them another driver first", strings.Join(on, ", "), b.Rails[i].ID),
		}}
	}
	if len(b.Rails) == 1 {
		return removedAt("/rails", i), d.remove("/rails")
	}
	return removeRow(d, "/rails", i)
}
