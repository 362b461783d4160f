package calc_test

import (
	"errors"
	"math"
	"testing"

	"lanternbook/calc"
)

func dial(tb testing.TB, b calc.Build, where string) calc.DialTable {
	tb.Helper()
	d, err := calc.Dial(b, where)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// withPot is four strings alike on 24 V, their follower's base on a pot across
// the feed.
func withPot(turn float64) calc.Build {
	b := threeStrings()
	b.Strings = b.Strings[:1]
	f := *b.Strings[0].Driver.FollowerSink
	f.Control = calc.Control{Pot: &calc.Pot{Ohms: 10000, Turn: turn, Upper: 22000}}
	b.Strings[0].Driver.FollowerSink = &f
	return b
}

// followerRail is three strings of two kinds on a rail that a follower drives
// from a pot or a voltage, over cable.
func followerRail(control calc.Control) calc.Build {
	b := threeStrings()
	sink := func(ohms float64) calc.Driver {
		return calc.Driver{Kind: calc.KindRailSink, RailSink: &calc.RailSink{Rail: "main", NPN: "npn", Sense: calc.Resistor{Ohms: ohms, Tolerance: 0.01, Watts: ptr(0.25)}}}
	}
	for i := range b.Strings {
		b.Strings[i].Driver = sink(110)
	}
	b.Strings[2].Driver = sink(220)
	b.Runs = append(b.Runs, calc.Run{ID: "r2", From: "r1", Length: 20, Conductor: "0.75 mm2"})
	b.Strings[1].FedBy = "r2"
	b.Rails = []calc.Rail{{ID: "main", Kind: "follower", FedBy: "r1", Control: &control, PNP: "pnp", Pullup: &calc.Resistor{Ohms: 2700, Tolerance: 0.05, Watts: ptr(0.5)}}}
	return b
}

func railWithPot(turn float64) calc.Build {
	return followerRail(calc.Control{Pot: &calc.Pot{Ohms: 10000, Turn: turn, Upper: 22000}})
}

func railWithVolts(volts float64) calc.Build {
	v := calc.Spread{Min: volts * 0.98, Typ: volts, Max: volts * 1.02}
	return followerRail(calc.Control{Volts: &v})
}

func withVolts(volts float64) calc.Build {
	b := withPot(0)
	v := calc.Spread{Min: volts * 0.98, Typ: volts, Max: volts * 1.02}
	b.Strings[0].Driver.FollowerSink.Control = calc.Control{Volts: &v}
	return b
}

type dialCase struct {
	name    string
	build   func(setting float64) calc.Build
	setting float64
	where   string
	at      string
	by      string
	strings int
	stands  int // strings of the first kind
	tol     float64
}

var dialCases = []dialCase{
	{"a pot of one string", withPot, 0.4, "/strings/0", "/strings/0/driver/control/pot/turn", "turn", 1, 4, 1e-6},
	{"a voltage of one string", withVolts, 2.2, "/strings/0", "/strings/0/driver/control/volts", "volts", 1, 4, 1e-6},
	{"a rail's pot", railWithPot, 0.4, "/rails/0", "/rails/0/control/pot/turn", "turn", 2, 8, 1e-5},
	{"a rail's voltage", railWithVolts, 2.2, "/rails/0", "/rails/0/control/volts", "volts", 2, 8, 1e-5},
}

// Every row of the table is what a check of the build set so would say.
func TestDialRowsAreChecks(t *testing.T) {
	for _, c := range dialCases {
		d := dial(t, c.build(c.setting), c.where)
		if d.At != c.at || d.By != c.by || d.Setting != c.setting || len(d.Strings) != c.strings || d.Strings[0].Stands != c.stands {
			t.Errorf("%s: %s %s %v, %d strings, %+v", c.name, d.At, d.By, d.Setting, len(d.Strings), d.Strings[0].Stands)
		}
		for _, s := range d.Strings {
			if len(s.Points) != 21 || len(s.Curve) != 101 || s.Points[0].Setting != 0 {
				t.Fatalf("%s: %d rows, %d points from %v", c.name, len(s.Points), len(s.Curve), s.Points[0].Setting)
			}
			for _, k := range []int{2, 7, 9, 14} {
				row := s.Points[k]
				r := check(t, c.build(row.Setting))
				want := r.Strings[s.Index]
				near(t, c.name+": control", row.Control, s.Curve[5*k].Control, 0)
				sameRow(t, c.name+": current", row.Current, want.Current, c.tol)
				sameRow(t, c.name+": headroom", row.Headroom, want.Headroom, 100*c.tol)
				sameRow(t, c.name+": flux", *row.LuminousFlux, *want.LuminousFlux, 1000*c.tol)
				near(t, c.name+": curve", s.Curve[5*k].Current, want.Current.Typ, c.tol)
				near(t, c.name+": curve's headroom", s.Curve[5*k].LeftOver, want.Headroom.Typ, 100*c.tol)
				if row.Regulates != want.Regulates {
					t.Errorf("%s: regulates at %v: %v", c.name, row.Setting, row.Regulates)
				}
				if at := want.Voltages.Control; at != nil {
					near(t, c.name+": control", row.Control, *at, 1e-4)
				}
			}
		}
	}
}

// sameRow compares ranges; the worst cases lie behind others' worst cases,
// which a dial of one string takes from the build's own setting.
func sameRow(t *testing.T, name string, got, want calc.Range, tol float64) {
	t.Helper()
	near(t, name, got.Typ, want.Typ, tol)
	near(t, "least "+name, got.Min, want.Min, tol)
	near(t, "most "+name, got.Max, want.Max, tol)
}

type dayCase struct {
	name string
	at   func(d calc.DialTable) calc.DialLimit
	day  func(b *calc.Build)
	left func(h calc.Range) float64
}

// At the limits found nothing is left over on such a day.
func TestDialLimitsAreWhereNothingIsLeft(t *testing.T) {
	days := []dayCase{
		{"usual", func(d calc.DialTable) calc.DialLimit { return d.Usual }, func(*calc.Build) {},
			func(h calc.Range) float64 { return h.Typ }},
		{"cold", func(d calc.DialTable) calc.DialLimit { return d.Cold }, func(b *calc.Build) {
			b.Supply.Voltage, b.Ambient = calc.Exactly(b.Supply.Voltage.Min), calc.Exactly(b.Ambient.Min)
		}, func(h calc.Range) float64 { return h.Min }},
		{"hot", func(d calc.DialTable) calc.DialLimit { return d.Hot }, func(b *calc.Build) {
			b.Supply.Voltage, b.Ambient = calc.Exactly(b.Supply.Voltage.Max), calc.Exactly(b.Ambient.Max)
		}, func(h calc.Range) float64 { return h.Min }},
	}
	for _, c := range dialCases {
		d := dial(t, c.build(c.setting), c.where)
		for _, day := range days {
			l := day.at(d)
			if l.None || l.Whole {
				t.Errorf("%s, %s: %+v", c.name, day.name, l)
				continue
			}
			least := math.Inf(1)
			b := c.build(l.Setting)
			day.day(&b)
			for _, s := range check(t, b).Strings {
				least = min(least, day.left(s.Headroom))
			}
			// What the others draw at their worst is taken for the whole spread.
			near(t, c.name+", left over, "+day.name, least, 0, 0.03)
		}
		if !(d.Cold.Setting < d.Usual.Setting && d.Cold.Setting < d.Hot.Setting) {
			t.Errorf("%s: regulates up to %v cold, %v usually, %v hot", c.name, d.Cold.Setting, d.Usual.Setting, d.Hot.Setting)
		}
	}
}

func TestDialThatRegulatesToItsEnd(t *testing.T) {
	b := withPot(0.4)
	b.Strings[0].LEDs[0].Quantity = 2
	d := dial(t, b, "/strings/0")
	if !d.Cold.Whole || d.Cold.Setting != 1 || !(d.Cold.Control > 4) {
		t.Errorf("two LEDs: %+v", d.Cold)
	}
	b.Strings[0].LEDs[0].Quantity = 12
	d = dial(t, b, "/strings/0")
	if !d.Cold.None {
		t.Errorf("twelve LEDs: %+v", d.Cold)
	}
}

type undialled struct {
	name, where string
	build       calc.Build
}

func TestDialRefuses(t *testing.T) {
	divided := withPot(0)
	divided.Strings[0].Driver.FollowerSink.Control = calc.Control{Divider: &calc.Divider{Upper: calc.Resistor{Ohms: 9e3}, Lower: calc.Resistor{Ohms: 1e3}}}
	for _, c := range []undialled{
		{"a limiter has no control", "/strings/1", threeStrings()},
		{"no such string", "/strings/3", threeStrings()},
		{"no such rail", "/rails/0", threeStrings()},
		{"no pointer", "string A", threeStrings()},
		{"a fixed divider", "/strings/0", divided},
		{"a string on a rail", "/strings/0", railWithPot(0.4)},
		{"a reference rail", "/rails/0", fourOnARail(true, 0)},
	} {
		var faults calc.Invalid
		if _, err := calc.Dial(c.build, c.where); !errors.As(err, &faults) {
			t.Errorf("%s: error %v, want Invalid", c.name, err)
		}
	}
}

// A control across the feed follows it: with the divider's share s and the
// sense resistor R, the sense voltage comes back to s·V and the current to
// s·V/R. The transistors are kept cold, since their heat adds to that; what
// the pull-up brings more through the follower moves its junction by
// VT/(V − base) and its base current's drop in the divider.
func TestControlFollowsSupply(t *testing.T) {
	b := withPot(0.4)
	b.Runs, b.Strings[0].FedBy = nil, ""
	npn, pnp := cool(b.Parts["npn"]), cool(b.Parts["pnp"])
	b.Parts = map[string]calc.Part{"white": b.Parts["white"], "npn": npn, "pnp": pnp}
	f := check(t, b).Strings[0].ControlFollowsSupply
	if f == nil {
		t.Fatal("the report does not say that the current follows the supply")
	}
	share, parallel := 4000.0/32000, 4000.0*28000/32000
	want := share + 0.0257/(24-3.65) + parallel/6800/291
	near(t, "per volt", f.PerVolt, want/110*290/291, 0.02*want/110)
	for _, end := range []struct {
		name  string
		volts float64
		got   float64
	}{{"at the lowest", 23.5, f.AtLowest}, {"at the highest", 24.5, f.AtHighest}} {
		set := withPot(0.4)
		set.Runs, set.Strings[0].FedBy = nil, ""
		set.Parts = b.Parts
		set.Supply.Voltage = calc.Exactly(end.volts)
		near(t, end.name, end.got, check(t, set).Strings[0].Current.Typ, 1e-7)
	}
	near(t, "swing", f.Swing, 1/24.0, 0.002)

	for i, s := range check(t, threeStrings()).Strings {
		if s.ControlFollowsSupply != nil {
			t.Errorf("string %d has a control of its own and is said to follow", i)
		}
	}
	for i, s := range check(t, railWithPot(0.4)).Strings {
		if f := s.ControlFollowsSupply; f == nil || !(f.Swing > 0.02) {
			t.Errorf("string %d hangs on a rail with a pot: %+v", i, f)
		}
	}
}

// cool is a transistor that stays at the air's temperature.
func cool(p calc.Part) calc.Part {
	q := *p.Transistor
	q.RthJunctionAmbient = ptr(0)
	p.Transistor = &q
	return p
}
