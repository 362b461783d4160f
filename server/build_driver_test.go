package main

import (
	"math"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// Whatever kind a string has, it can be given any other, and then carries
// about the current that it was built for.
func TestDriverKindsKeepTheCurrent(t *testing.T) {
	document := bench(t)
	before, _, _ := buildOn(t, document)
	for i := range before.Strings {
		for _, kind := range web.DriverKinds() {
			stock := boughtStock(t)
			b, form, d := buildOn(t, document, stock...)
			if b.Strings[i].Driver.Kind == kind {
				continue
			}
			name := b.Strings[i].Label + " becomes " + kind
			faults := formText{form.Strings[i].Driver.Name: kind}.write(d, form, b, stock, nil)
			if len(faults) > 0 {
				t.Errorf("%s: %v", name, faults)
				continue
			}
			after := patched(t, document, d)
			if after.Strings[i].Driver.Kind != kind {
				t.Errorf("%s: it is %s", name, after.Strings[i].Driver.Kind)
			}
			report, err := calc.Check(after)
			if err != nil {
				t.Errorf("%s: %v", name, err)
				continue
			}
			want := builtFor(before, i)
			if kind == calc.KindModule {
				want = 0.02 // what it was bought for
			}
			// E24 steps are 10 % apart; the rest is what the rules of thumb leave out.
			if got := report.Strings[i].Current.Typ; !(math.Abs(got-want) <= 0.25*want) {
				t.Errorf("%s: %v A, built for %v A", name, got, want)
			}
		}
	}
}

func TestDriverKeepsWhatFits(t *testing.T) {
	b, form, d := buildOn(t, bench(t))
	if faults := (formText{form.Strings[0].Driver.Name: calc.KindReferenceSink}).write(d, form, b, nil, nil); len(faults) > 0 {
		t.Fatal(faults)
	}
	after := patched(t, bench(t), d)
	got := after.Strings[0].Driver.ReferenceSink
	if got.NPN != "npn" || got.Sense.Ohms != 110 || got.Sense.Tolerance != 0.01 || got.Bias.Ohms != 6800 {
		t.Errorf("%+v, want the follower's transistor, sense resistor and pull-up", got)
	}
}

// A driver that needs a transistor which nobody has changes nothing, and says
// so beside its field.
func TestDriverWithoutTransistor(t *testing.T) {
	document := shelfLight(t)
	pnp := web.Stock{Key: "bc557b", Document: []byte(`{"type":"pnp","hfe":290,"hfe_at":0.002,"vbe_on":{"volts":0.66,"at":0.002}}`)}
	part, err := calc.ReadPart(pnp.Document)
	if err != nil {
		t.Fatal(err)
	}
	pnp.Part = part
	b, form, d := buildOn(t, document, pnp)
	field := form.Strings[0].Driver.Name
	faults := formText{field: calc.KindFollowerSink}.write(d, form, b, []web.Stock{pnp}, nil)
	if !strings.Contains(faults[field], "npn") || len(d.ops) > 0 {
		t.Errorf("faults %v, patch %+v", faults, d.ops)
	}
	npn := pnp
	npn.Key, npn.Document = "bc547b", []byte(strings.Replace(string(pnp.Document), "pnp", "npn", 1))
	if npn.Part, err = calc.ReadPart(npn.Document); err != nil {
		t.Fatal(err)
	}
	if faults := (formText{field: calc.KindFollowerSink}).write(d, form, b, []web.Stock{pnp, npn}, nil); len(faults) > 0 {
		t.Fatal(faults)
	}
	after := patched(t, document, d)
	if f := after.Strings[0].Driver.FollowerSink; f == nil || f.NPN != "bc547b" || f.PNP != "bc557b" || after.Parts["bc547b"].Type != calc.TypeNPN {
		t.Errorf("driver %+v with parts %v", f, after.Parts)
	}
}

// A control voltage keeps its volts when it is made in another way.
func TestControlKinds(t *testing.T) {
	for _, kind := range []string{web.ControlPot, web.ControlDivider, web.ControlVolts} {
		for i := range 3 { // the strings with a control
			b, form, d := buildOn(t, bench(t))
			var field *web.Entry
			for _, e := range form.Entries() {
				if e.Kind == web.EntryControl && strings.HasPrefix(e.Name, form.Strings[i].At+"/") {
					field = e
				}
			}
			if field.Kept == kind {
				continue
			}
			if faults := (formText{field.Name: kind}).write(d, form, b, nil, nil); len(faults) > 0 {
				t.Fatal(faults)
			}
			after := patched(t, bench(t), d)
			got, want := controlVolts(after.Strings[i].Driver.FollowerSink.Control, 24), controlVolts(b.Strings[i].Driver.FollowerSink.Control, 24)
			if web.ControlKind(after.Strings[i].Driver.FollowerSink.Control) != kind || !(math.Abs(got-want) <= 0.06*want) {
				t.Errorf("string %d by %s: %v V, was %v V", i, kind, got, want)
			}
		}
	}
}

func TestFittedRating(t *testing.T) {
	for _, c := range []struct{ current, ohms, want float64 }{
		{0.02, 110, 0.25}, {0.05, 100, 0.5}, {0.12, 36, 2}, {1, 4.7, 10}, {0, 100, 0.25},
	} {
		if got := fitted(c.ohms, 0.01, c.current)["watts"]; got != c.want {
			t.Errorf("%v A through %v Ω: %v W, want %v W", c.current, c.ohms, got, c.want)
		}
	}
}

// boughtStock is a drawer with one of each part that no string of the bench
// has: op-amp, MOSFET, regulator, module.
func boughtStock(tb testing.TB) []web.Stock {
	tb.Helper()
	var stock []web.Stock
	for key, document := range map[string]string{
		"lm358":  `{"type":"opamp","offset_voltage":0.007,"input_low":0,"input_high":1.5,"output_low":0.02,"output_high":1.5,"supply_current":0.0007}`,
		"2n7000": `{"type":"nmos","gate_threshold":{"min":0.8,"typ":2.1,"max":3},"on_resistance":5,"on_resistance_at":10}`,
		"lm317l": `{"type":"regulator","reference_voltage":{"min":1.2,"typ":1.25,"max":1.3},"adjustment_current":0.00005,"dropout":[[0.1,2]]}`,
		"mod20":  `{"type":"module","current":0.02,"dropout":1.5}`,
	} {
		part, err := calc.ReadPart([]byte(document))
		if err != nil {
			tb.Fatal(err)
		}
		stock = append(stock, web.Stock{Key: key, Part: part, Document: []byte(document)})
	}
	return stock
}

// A rail is added, becomes any other kind at about the same voltage, carries a
// string, and cannot be taken away while it does.
func TestRails(t *testing.T) {
	document := bench(t)
	b, form, d := buildOn(t, document)
	driver := form.Strings[0].Driver.Name
	if faults := (formText{driver: calc.KindRailSink}).write(d, form, b, nil, nil); len(faults) > 0 {
		t.Fatal(faults)
	}
	after := patched(t, document, d)
	if len(after.Rails) != 1 || after.Strings[0].Driver.RailSink.Rail != after.Rails[0].ID {
		t.Fatalf("rails %+v, string on %q", after.Rails, after.Strings[0].Driver.RailSink.Rail)
	}
	raw := applied(t, document, d)
	volts := map[string]float64{}
	for _, kind := range []string{web.RailReference, web.RailBuffered, web.RailFollower} {
		of, fields, edit := buildOn(t, raw)
		if faults := (formText{fields.Rails[0].Kind.Name: kind}).write(edit, fields, of, nil, nil); len(faults) > 0 {
			t.Fatalf("%s: %v", kind, faults)
		}
		next := patched(t, raw, edit)
		report, err := calc.Check(next)
		if err != nil {
			t.Fatalf("%s: %v", kind, err)
		}
		if next.Rails[0].Kind != kind {
			t.Errorf("the rail is %s, want %s", next.Rails[0].Kind, kind)
		}
		volts[kind] = report.Rails[0].Voltage.Typ
	}
	for kind, v := range volts {
		if !(math.Abs(v-volts[web.RailFollower]) < 0.25) {
			t.Errorf("%s stands at %v V, the follower at %v V", kind, v, volts[web.RailFollower])
		}
	}
	b, _, d = buildOn(t, raw)
	if _, err := rowCommand(d, "rail-remove /rails/0", b, nil); err == nil || len(d.ops) > 0 {
		t.Errorf("a rail that carries a string is taken away: %v", err)
	}
}
