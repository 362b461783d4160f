package main

import (
	"context"
	"fmt"
	"testing"

	"lanternbook/calc"
	"lanternbook/store"
)

// drawerOf is parts of the drawer by key and document.
func drawerOf(pairs ...string) []store.Part {
	var parts []store.Part
	for i := 0; i+1 < len(pairs); i += 2 {
		parts = append(parts, store.Part{Key: pairs[i], Document: []byte(pairs[i+1])})
	}
	return parts
}

const (
	redLED   = `{"type": "led", "colour": "red", "test_current": 0.02, "forward_voltage": 2, "max_current": 0.03, "max_junction": 100, "rth_junction_ambient": 300, "luminous_flux": 2}`
	whiteLED = `{"type": "led", "colour": "white", "test_current": 0.06, "forward_voltage": 3, "max_current": 0.09}`
	tallLED  = `{"type": "led", "colour": "white", "test_current": 0.02, "forward_voltage": 3.5, "max_current": 0.03}`
	dimLED   = `{"type": "led", "colour": "white", "test_current": 0.002, "forward_voltage": 2.8}`
	weakLED  = `{"type": "led", "colour": "white", "test_current": 0.02, "forward_voltage": 2.8, "max_current": 0.01}`
	smallNPN = `{"type": "npn", "max_collector_emitter_voltage": 45, "max_collector_current": 0.1, "max_power": 0.5, "vbe_on": {"volts": 0.7, "at": 0.002}}`
	powerNPN = `{"type": "npn", "max_collector_emitter_voltage": 100, "max_collector_current": 6, "max_power": 2, "max_junction": 150, "rth_junction_ambient": 62, "hfe": 60}`
	lowNPN   = `{"type": "npn", "max_collector_emitter_voltage": 20, "max_power": 0.5}`
	aPNP     = `{"type": "pnp", "max_collector_emitter_voltage": 45, "max_power": 0.5}`
	broken   = `{"type": "led", "colour": 5}`
)

type newBuildCase struct {
	name     string
	drawer   []store.Part
	led, npn string
	ohms     float64 // of the sense resistor
}

func TestNewBuildPicksParts(t *testing.T) {
	for _, c := range []newBuildCase{
		{"an empty drawer", nil, "generic-white-led", "generic-npn", 33},
		{"white before red, small before strong", drawerOf("a-red", redLED, "b-white", whiteLED, "c-power", powerNPN, "d-small", smallNPN), "b-white", "d-small", 36},
		{"red where there is no white", drawerOf("red", redLED, "power", powerNPN), "red", "power", 33},
		{"LEDs that do not fit three high are passed over", drawerOf("tall", tallLED, "red", redLED), "red", "generic-npn", 33},
		{"a transistor that cannot stand the supply is passed over", drawerOf("low", lowNPN, "pnp", aPNP), "generic-white-led", "generic-npn", 33},
		{"an LED of little current", drawerOf("dim", dimLED), "dim", "generic-npn", 330},
		{"an LED that must not have what it is tested at", drawerOf("weak", weakLED), "weak", "generic-npn", 82},
		{"a part that cannot be read is passed over", drawerOf("broken", broken, "also", "no JSON"), "generic-white-led", "generic-npn", 33},
		{"of two alike the first by key", drawerOf("z", whiteLED, "m", whiteLED), "m", "generic-npn", 33},
	} {
		t.Run(c.name, func(t *testing.T) {
			b, err := calc.Read(newBuild(c.drawer))
			if err != nil {
				t.Fatal(err)
			}
			s := b.Strings[0]
			sink := s.Driver.TwoTransistor
			if s.LEDs[0].Part != c.led || s.LEDs[0].Quantity != 3 || sink == nil || sink.Pass != c.npn || sink.Sensor != c.npn {
				t.Fatalf("string %+v, driver %+v; want %s and %s", s, sink, c.led, c.npn)
			}
			if sink.Sense.Ohms != c.ohms {
				t.Errorf("sense %v Ω, want %v", sink.Sense.Ohms, c.ohms)
			}
			v := b.Supply.Voltage
			if v.Min != 11.4 || v.Typ != 12 || v.Max != 12.6 {
				t.Errorf("supply %+v, want 12 V with 5 %% either way", v)
			}
			if len(b.Parts) != 2 {
				t.Errorf("%d parts, want the two that are used", len(b.Parts))
			}
			report, err := calc.Check(b)
			if err != nil {
				t.Fatal(err)
			}
			for _, f := range report.Findings {
				if f.Severity == calc.Fail {
					t.Errorf("a new build fails: %s: %s", f.Code, f.Message)
				}
			}
		})
	}
}

func TestNewBuildFromTheSeededDrawer(t *testing.T) {
	p := openShop(t)
	p.stockFromSeed()
	at := p.press("/builds", nil)
	var id int64
	if _, err := fmt.Sscanf(at, "/builds/%d", &id); err != nil {
		t.Fatalf("the new build opens at %q", at)
	}
	b, err := p.s.store.Build(context.Background(), id)
	if err != nil {
		t.Fatal(err)
	}
	if b.Summary.Verdict != string(calc.Pass) {
		t.Errorf("verdict %q, want a start on firm ground; %s", b.Summary.Verdict, b.Document)
	}
	document, err := calc.Read(b.Document)
	if err != nil {
		t.Fatal(err)
	}
	for key := range document.Parts {
		if _, err := p.s.store.Part(context.Background(), key); err != nil {
			t.Errorf("part %q is not of the drawer: %v", key, err)
		}
	}
}
