package quantity_test

import (
	"math"
	"strings"
	"testing"

	"lanternbook/calc/quantity"
)

type spreadCase struct {
	name string
	text string
	unit string
	want quantity.Spread
}

func TestParseSpread(t *testing.T) {
	three := quantity.Spread{Min: 23.5, Typ: 24, Max: 24.5}
	led := quantity.Spread{Min: 2.8, Typ: 2.95, Max: 3.2}
	milliamps := quantity.Spread{Min: 0.019, Typ: 0.02, Max: 0.021}
	cases := []spreadCase{
		{name: "blanks", text: "23.5 24 24.5", unit: "V", want: three},
		{name: "dots", text: "23.5..24..24.5", unit: "V", want: three},
		{name: "an ellipsis", text: "23.5 … 24 … 24.5 V", unit: "V", want: three},
		{name: "slashes", text: "2.8/2.95/3.2", unit: "V", want: led},
		{name: "slashes, blanks and a unit", text: "2.8 / 2.95 / 3.2 V", unit: "V", want: led},
		{name: "dashes", text: "2.8-2.95-3.2 V", unit: "V", want: led},
		{name: "dashes with blanks", text: "2.8 – 2.95 – 3.2", unit: "V", want: led},
		{name: "decimal commas", text: "2,8 2,95 3,2", unit: "V", want: led},
		{name: "decimal commas and commas", text: "2,8, 2,95, 3,2 V", unit: "V", want: led},
		{name: "a unit each", text: "2.8 V 2.95 V 3.2 V", unit: "V", want: led},
		{name: "different units", text: "2800 mV / 2.95 V / 3V2", unit: "V", want: led},
		{name: "the last unit for all", text: "19 20 21 mA", unit: "A", want: milliamps},
		{name: "the first unit for all", text: "19 mA 20 21", unit: "A", want: milliamps},
		{name: "a margin in percent", text: "24 ±2 %", unit: "V", want: quantity.Spread{Min: 23.52, Typ: 24, Max: 24.48}},
		{name: "a margin in the unit", text: "24 ± 0.5 V", unit: "V", want: three},
		{name: "a margin as typists write it", text: "24V +/- 500mV", unit: "V", want: three},
		{name: "the unit in front only", text: "24 V ± 0.5", unit: "V", want: three},
		{name: "a margin of a negative value", text: "-2 mV/K ± 10 %", unit: "V/K", want: quantity.Spread{Min: -0.0022, Typ: -0.002, Max: -0.0018}},
		{name: "negative values", text: "-10 20 60", unit: "°C", want: quantity.Spread{Min: -10, Typ: 20, Max: 60}},
		{name: "negative values with real minus signs", text: "−20 / −10 / −5 °C", unit: "°C", want: quantity.Spread{Min: -20, Typ: -10, Max: -5}},
		{name: "Fahrenheit with a margin", text: "77 ± 9 °F", unit: "°C", want: quantity.Spread{Min: 20, Typ: 25, Max: 30}},
		{name: "coefficients", text: "-3/-2/-1 mV/K", unit: "V/K", want: quantity.Spread{Min: -0.003, Typ: -0.002, Max: -0.001}},
		{name: "a share with a margin of its own kind", text: "85 ± 5 %", unit: "%", want: quantity.Spread{Min: 0.8, Typ: 0.85, Max: 0.9}},
		{name: "one number", text: "24", unit: "V", want: quantity.Spread{Min: 24, Typ: 24, Max: 24, Bare: true}},
		{name: "one number with its unit", text: "4k7", unit: "Ω", want: quantity.Spread{Min: 4700, Typ: 4700, Max: 4700, Bare: true}},
		{name: "one negative number", text: "- 5", unit: "°C", want: quantity.Spread{Min: -5, Typ: -5, Max: -5, Bare: true}},
		{name: "three alike are not bare", text: "24 24 24", unit: "V", want: quantity.Spread{Min: 24, Typ: 24, Max: 24}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := quantity.ParseSpread(c.text, c.unit)
			if err != nil {
				t.Fatal(err)
			}
			near(t, "min", got.Min, c.want.Min, 0)
			near(t, "typ", got.Typ, c.want.Typ, 0)
			near(t, "max", got.Max, c.want.Max, 0)
			if got.Bare != c.want.Bare {
				t.Errorf("bare = %v, want %v", got.Bare, c.want.Bare)
			}
		})
	}
}

func TestParseSpreadIn(t *testing.T) {
	got, err := quantity.ParseSpreadIn("19 20 21", "A", "mA")
	if err != nil || got != (quantity.Spread{Min: 0.019, Typ: 0.02, Max: 0.021}) {
		t.Errorf("ParseSpreadIn = %v, %v", got, err)
	}
	got, err = quantity.ParseSpreadIn("20 ± 5 %", "A", "mA")
	if err != nil || got != (quantity.Spread{Min: 0.019, Typ: 0.02, Max: 0.021}) {
		t.Errorf("ParseSpreadIn with a margin = %v, %v", got, err)
	}
}

func TestParseSpreadRefuses(t *testing.T) {
	cases := []refuseCase{
		{name: "nothing", text: "", unit: "V", says: "a value is missing"},
		{name: "two values", text: "2.8-3.6 V", unit: "V", says: "has 2 values: write one, or three"},
		{name: "four values", text: "1 2 3 4", unit: "V", says: "has 4 values"},
		{name: "falling values", text: "24.5 24 23.5", unit: "V", says: "does not rise"},
		{name: "a share of a temperature", text: "25 ± 5 %", unit: "°C", says: "a share of a temperature"},
		{name: "more than all", text: "24 ± 200 %", unit: "V", says: "from 0 to 100 %"},
		{name: "less than nothing", text: "24 ± -1 V", unit: "V", says: "from 0 to 100 %"},
		{name: "another unit", text: "1 2 3 A", unit: "V", says: "is in amps"},
		{name: "a unit behind the margin's", text: "-2 ± 10 % mV/K", unit: "V/K", says: "unknown unit"},
		{name: "a gap", text: "24..", unit: "V", says: "is not a number"},
		{name: "two margins", text: "24 ± 1 ± 2", unit: "V", says: "write ± once"},
		{name: "a margin without a value", text: "± 5 %", unit: "V", says: "is not a number"},
		{name: "too large", text: "1e308 ± 1e308", unit: "V", says: "too large"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := quantity.ParseSpread(c.text, c.unit)
			if err == nil {
				t.Fatalf("ParseSpread(%q, %q) = %v, want an error", c.text, c.unit, got)
			}
			if !strings.Contains(err.Error(), c.says) {
				t.Errorf("ParseSpread(%q, %q): %q does not say %q", c.text, c.unit, err, c.says)
			}
		})
	}
}

func TestFormatSpread(t *testing.T) {
	cases := []spreadCase{
		{name: "one number", text: "24\u00a0V", unit: "V", want: quantity.Spread{Min: 24, Typ: 24, Max: 24, Bare: true}},
		{name: "three", text: "23.5 / 24 / 24.5\u00a0V", unit: "V", want: quantity.Spread{Min: 23.5, Typ: 24, Max: 24.5}},
		{name: "one prefix for three", text: "0.5 / 20 / 2000\u00a0mA", unit: "A", want: quantity.Spread{Min: 0.0005, Typ: 0.02, Max: 2}},
		{name: "through zero", text: "\u221210 / 0 / 40\u00a0°C", unit: "°C", want: quantity.Spread{Min: -10, Max: 40}},
		{name: "plain numbers", text: "200 / 290 / 450", unit: "", want: quantity.Spread{Min: 200, Typ: 290, Max: 450}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := quantity.FormatSpread(c.want, c.unit); got != c.text {
				t.Errorf("FormatSpread(%v, %q) = %q, want %q", c.want, c.unit, got, c.text)
			}
		})
	}
}

func FuzzSpread(f *testing.F) {
	for _, text := range []string{"23.5 24 24.5", "24 ±2 %", "2.8/2.95/3.2 V", "-3/-2/-1 mV/K", "77 ± 9 °F", "24..", "-10 0 40", "1 1/K 2 1/K 3 1/K"} {
		for i := range allUnits {
			f.Add(text, uint8(i))
		}
	}
	f.Fuzz(func(t *testing.T, text string, n uint8) {
		unit := allUnits[int(n)%len(allUnits)]
		s, err := quantity.ParseSpread(text, unit)
		if err != nil {
			return
		}
		if !(s.Min <= s.Typ && s.Typ <= s.Max) || math.IsInf(s.Min, 0) || math.IsInf(s.Max, 0) {
			t.Fatalf("ParseSpread(%q, %q) = %v", text, unit, s)
		}
		again, err := quantity.ParseSpread(quantity.FormatSpread(s, unit), unit)
		if err != nil || again != s {
			t.Fatalf("FormatSpread(%v, %q) = %q, which is read as %v, %v", s, unit, quantity.FormatSpread(s, unit), again, err)
		}
	})
}
