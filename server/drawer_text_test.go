package main

import (
	"encoding/json"
	"reflect"
	"strings"
	"testing"

	"lanternbook/calc/quantity"
)

type parseCase struct {
	name  string
	path  string // of the figure
	typ   string
	typed string
	want  string // JSON
	fault string // a part of the sentence
}

func TestFiguresAsTyped(t *testing.T) {
	for _, c := range []parseCase{
		{"a current with its prefix", "test_current", "led", "20 mA", "0.02", ""},
		{"a decimal comma", "forward_voltage", "led", "2,8 / 2,95 / 3,2 V", `{"min":2.8,"typ":2.95,"max":3.2}`, ""},
		{"a spread written with slashes alone", "forward_voltage", "led", "2.8/2.95/3.2", `{"min":2.8,"typ":2.95,"max":3.2}`, ""},
		{"a spread of one number", "forward_voltage", "led", "3V3", "3.3", ""},
		{"a spread in percent", "current", "module", "350 mA ±5 %", `{"min":0.3325,"typ":0.35,"max":0.3675}`, ""},
		{"a bare number where a prefix is usual", "test_current", "led", "20", "", "has no unit: write it like 20 mA"},
		{"a bare number with a comma", "max_current", "led", "0,02", "", "has no unit"},
		{"a bare spread where a prefix is usual", "current", "module", "340 350 360", "", "has no unit"},
		{"a bare zero is no slip", "voltage_tempco", "led", "0", "0", ""},
		{"a bare number where none is usual", "max_junction", "led", "125", "125", ""},
		{"a small letter code", "source_resistance", "supply", "R05", "0.05", ""},
		{"percent", "efficiency", "module", "92 %", "0.92", ""},
		{"percent per kelvin", "flux_tempco", "led", "-0.22 %/K", "-0.0022", ""},
		{"an angle", "beam_angle", "led", "120°", "120", ""},
		{"a model's exponent", "model.is", "led", "8.5e-26 A", "8.5e-26", ""},
		{"words", "name", "led", "White <b>", `"White \u003cb\u003e"`, ""},
		{"yes", "switching", "module", "switching", "true", ""},
		{"letters where a number belongs", "max_junction", "led", "hot", "", "degrees Celsius"},
		{"another unit", "max_junction", "led", "5 V", "", "degrees Celsius"},
		{"pairs", "flux_curve", "led", "0.5 0.53\n1 1", "[[0.5,0.53],[1,1]]", ""},
		{"pairs with blank lines and a browser's line ends", "flux_curve", "led", "\r\n0.5  0.53\r\n\r\n1\t1\r\n", "[[0.5,0.53],[1,1]]", ""},
		{"pairs with decimal commas", "flux_curve", "led", "0,5 0,53\n1; 1", "[[0.5,0.53],[1,1]]", ""},
		{"pairs with units", "points", "led", "5 mA 2.71 V\n10mA, 2,8 V\n15 mA / 2.85 V", "[[0.005,2.71],[0.01,2.8],[0.015,2.85]]", ""},
		{"pairs of degrees and percent", "derating", "supply", "40 °C 100 %\n−10 °C | 50 %", "[[40,1],[-10,0.5]]", ""},
		{"a line of three", "flux_curve", "led", "1 1\n2 2 2", "", "line 2: write two values"},
		{"a line of one", "points", "led", "5 mA", "", "line 1: write two values, like 5 mA  2.71 V"},
		{"a bare current in a pair", "points", "led", "5 2.71 V", "", `line 1: "5" has no unit`},
		{"a second value of another unit", "points", "led", "5 mA 2.71 A", "", "line 1:"},
	} {
		t.Run(c.name, func(t *testing.T) {
			value, err := figuresByPath(c.typ)[c.path].value(c.typed)
			if c.fault != "" {
				if err == nil || !strings.Contains(err.Error(), c.fault) {
					t.Fatalf("%q: %s, %v; want a fault with %q", c.typed, value, err, c.fault)
				}
				return
			}
			if err != nil || string(value) != c.want {
				t.Errorf("%q is %s, %v; want %s", c.typed, value, err, c.want)
			}
		})
	}
}

func TestExamplesCanBeTyped(t *testing.T) {
	for _, typ := range partTypes {
		for path, fig := range figuresByPath(typ) {
			if fig.example == "" {
				continue
			}
			value, err := fig.value(fig.example)
			if err != nil || value == nil {
				t.Errorf("%s of %s: its own example %q: %s, %v", path, typ, fig.example, value, err)
				continue
			}
			again, err := fig.value(fig.text(value))
			if err != nil || string(again) != string(value) {
				t.Errorf("%s of %s: %s is shown as %q, which is %s, %v", path, typ, value, fig.text(value), again, err)
			}
		}
	}
}

type wrongKindCase struct {
	kind figureKind
	raw  string
}

func TestValuesOfAnotherKindShowAsNothing(t *testing.T) {
	for _, c := range []wrongKindCase{
		{ofNumber, `"20 mA"`}, {ofNumber, `{}`}, {ofSpread, `{"min": 1, "max": 2}`}, {ofSpread, `"3"`},
		{ofPairs, `[1, 2]`}, {ofPairs, `{}`}, {ofChoice, `"yes"`}, {ofWords, `5`}, {ofLines, `[]`},
	} {
		f := figure{kind: c.kind, unit: quantity.Amp, second: quantity.Volt, yes: "yes"}
		if got := f.text(json.RawMessage(c.raw)); got != "" {
			t.Errorf("%s as kind %d shows as %q", c.raw, c.kind, got)
		}
	}
}

type valuesCase struct {
	line string
	want []string
}

func TestValuesOfALine(t *testing.T) {
	for _, c := range []valuesCase{
		{"5 mA 2.71 V", []string{"5 mA", "2.71 V"}},
		{"5 mA  2.71 V", []string{"5 mA", "2.71 V"}},
		{"0,05 0,055", []string{"0,05", "0,055"}},
		{"−10 °C; 50 %", []string{"−10 °C", "50 %"}},
		{".5 .53", []string{".5", ".53"}},
		{"1 1 1", []string{"1", "1", "1"}},
		{"mA 5", []string{"mA", "5"}},
		{"", nil},
		{";;", nil},
	} {
		if got := valuesOf(c.line); !reflect.DeepEqual(got, c.want) {
			t.Errorf("valuesOf(%q) = %q, want %q", c.line, got, c.want)
		}
	}
}
