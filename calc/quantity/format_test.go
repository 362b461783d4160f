package quantity_test

import (
	"math"
	"testing"

	"lanternbook/calc/quantity"
)

type formatCase struct {
	name   string
	v      float64
	unit   string
	digits int
	want   string
}

func TestFormat(t *testing.T) {
	cases := []formatCase{
		{name: "kilohms", v: 4700, unit: "Ω", digits: 3, want: "4.70\u00a0kΩ"},
		{name: "milliamps", v: 0.02, unit: "A", digits: 3, want: "20.0\u00a0mA"},
		{name: "a negative voltage", v: -0.3, unit: "V", digits: 2, want: "\u22120.30\u00a0V"},
		{name: "rounding up to the next prefix", v: 0.99996, unit: "A", digits: 3, want: "1.00\u00a0A"},
		{name: "rounding up within a prefix", v: 0.0099996, unit: "A", digits: 3, want: "10.0\u00a0mA"},
		{name: "tenths of a volt need no prefix", v: 0.65, unit: "V", digits: 3, want: "0.650\u00a0V"},
		{name: "hundredths do", v: 0.065, unit: "V", digits: 3, want: "65.0\u00a0mV"},
		{name: "microamps", v: 4.2e-6, unit: "A", digits: 2, want: "4.2\u00a0µA"},
		{name: "tenths of an ohm", v: 0.22, unit: "Ω", digits: 2, want: "0.22\u00a0Ω"},
		{name: "digits that no zero replaces", v: 1234, unit: "lm", digits: 2, want: "1200\u00a0lm"},
		{name: "zero", v: 0, unit: "V", digits: 3, want: "0.00\u00a0V"},
		{name: "negative zero", v: math.Copysign(0, -1), unit: "V", digits: 3, want: "0.00\u00a0V"},
		{name: "too small to show is no negative zero", v: -1e-20, unit: "V", digits: 3, want: "0.00\u00a0V"},
		{name: "the last digit of the smallest prefix", v: -0.006e-6, unit: "V", digits: 3, want: "\u22120.01\u00a0µV"},
		{name: "a temperature near zero", v: -0.0004, unit: "°C", digits: 3, want: "0.00\u00a0°C"},
		{name: "a temperature", v: 41.26, unit: "°C", digits: 3, want: "41.3\u00a0°C"},
		{name: "percent", v: 0.745, unit: "%", digits: 2, want: "74\u00a0%"},
		{name: "less than a percent", v: 0.0005, unit: "%", digits: 2, want: "0.1\u00a0%"},
		{name: "a coefficient", v: -0.002, unit: "V/K", digits: 2, want: "\u22122.0\u00a0mV/K"},
		{name: "a share per kelvin", v: -0.002, unit: "1/K", digits: 2, want: "\u22120.2\u00a0%/K"},
		{name: "an angle", v: 120, unit: "°", digits: 3, want: "120°"},
		{name: "a plain number", v: 1.85, unit: "", digits: 3, want: "1.85"},
		{name: "a small plain number", v: 0.00012345, unit: "", digits: 3, want: "0.000123"},
		{name: "a tiny plain number", v: 4e-19, unit: "", digits: 2, want: "4.0e-19"},
		{name: "a huge number", v: 1e300, unit: "V", digits: 2, want: "1.0e+300\u00a0V"},
		{name: "no digits asked is one", v: 4700, unit: "Ω", digits: 0, want: "5\u00a0kΩ"},
		{name: "not a number", v: math.NaN(), unit: "A", digits: 3, want: "?\u00a0A"},
		{name: "a unit of the caller's own", v: 4.2, unit: "Wh", digits: 2, want: "4.2\u00a0Wh"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := quantity.Format(c.v, c.unit, c.digits); got != c.want {
				t.Errorf("Format(%v, %q, %d) = %q, want %q", c.v, c.unit, c.digits, got, c.want)
			}
		})
	}
}

type textCase struct {
	name string
	v    float64
	unit string
	want string
}

func TestText(t *testing.T) {
	cases := []textCase{
		{name: "ohms", v: 110, unit: "Ω", want: "110\u00a0Ω"},
		{name: "kilohms", v: 4700, unit: "Ω", want: "4.7\u00a0kΩ"},
		{name: "milliamps", v: 0.0196, unit: "A", want: "19.6\u00a0mA"},
		{name: "volts", v: 2.2, unit: "V", want: "2.2\u00a0V"},
		{name: "a rating", v: 0.25, unit: "W", want: "0.25\u00a0W"},
		{name: "a tolerance", v: 0.05, unit: "%", want: "5\u00a0%"},
		{name: "half a percent", v: 0.005, unit: "%", want: "0.5\u00a0%"},
		{name: "zero", v: 0, unit: "V", want: "0\u00a0V"},
		{name: "no tolerance", v: 0, unit: "%", want: "0\u00a0%"},
		{name: "a saturation current", v: 8e-21, unit: "A", want: "8e-21\u00a0A"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := quantity.Text(c.v, c.unit); got != c.want {
				t.Errorf("Text(%v, %q) = %q, want %q", c.v, c.unit, got, c.want)
			}
		})
	}
}

// What Format writes is read as the value to half its last digit, and what
// Text writes as exactly the value.
func FuzzFormat(f *testing.F) {
	for i := range allUnits {
		for _, v := range []float64{0, 1, -0.3, 0.99996, 4700, 1e-12, 123456789, 1e300, 5e-324, 999.9999, math.MaxFloat64, math.NaN()} {
			f.Add(v, uint8(i), uint8(3))
		}
	}
	f.Fuzz(func(t *testing.T, v float64, n, digits uint8) {
		unit, d := allUnits[int(n)%len(allUnits)], 1+int(digits)%15
		text := quantity.Format(v, unit, d)
		if !(math.Abs(v) < 1e300) { // beyond, the last digit may round up past the largest number
			return
		}
		got, err := quantity.Parse(text, unit)
		if err != nil {
			t.Fatalf("Format(%v, %q, %d) = %q: %v", v, unit, d, text, err)
		}
		// Half a unit of the last digit, or of the last decimal place of the
		// smallest prefix of any unit, which is 1 where there are no prefixes.
		half := math.Max(0.5*math.Pow10(1-d)*math.Abs(v), 0.5*math.Pow10(1-d))
		near(t, text, got, v, half*(1+1e-12))
		exact := quantity.Text(v, unit)
		again, err := quantity.Parse(exact, unit)
		if err != nil || again != v {
			t.Fatalf("Text(%v, %q) = %q, which is read as %v, %v", v, unit, exact, again, err)
		}
	})
}
