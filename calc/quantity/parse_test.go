package quantity_test

import (
	"math"
	"strings"
	"testing"

	"lanternbook/calc/quantity"
)

type parseCase struct {
	name string
	text string
	unit string
	want float64
}

func TestParse(t *testing.T) {
	cases := []parseCase{
		{name: "k in the place of the point", text: "4k7", unit: "Ω", want: 4700},
		{name: "capital K", text: "4K7", unit: "Ω", want: 4700},
		{name: "decimal comma and a prefix alone", text: "4,7k", unit: "Ω", want: 4700},
		{name: "prefix and unit", text: "4.7 kΩ", unit: "Ω", want: 4700},
		{name: "capital K and the ohm sign U+2126", text: "4.7 K\u2126", unit: "Ω", want: 4700},
		{name: "the word", text: "4.7 kohm", unit: "Ω", want: 4700},
		{name: "a bare number of ohms", text: "4700", unit: "Ω", want: 4700},
		{name: "R for the point", text: "4R7", unit: "Ω", want: 4.7},
		{name: "lower-case r", text: "4r7", unit: "Ω", want: 4.7},
		{name: "R first", text: "R47", unit: "Ω", want: 0.47},
		{name: "zero before R", text: "0R22", unit: "Ω", want: 0.22},
		{name: "R for the unit", text: "110R", unit: "Ω", want: 110},
		{name: "R as a unit after a blank", text: "110 R", unit: "Ω", want: 110},
		{name: "megohms", text: "1M", unit: "Ω", want: 1e6},
		{name: "meg", text: "2.2 Meg", unit: "Ω", want: 2.2e6},
		{name: "milliohms", text: "10 mΩ", unit: "Ω", want: 0.01},
		{name: "L for milliohms", text: "5L", unit: "Ω", want: 0.005},
		{name: "a code with its unit again", text: "4k7 Ω", unit: "Ω", want: 4700},
		{name: "an exponent with a sign", text: "1e+3", unit: "Ω", want: 1000},
		{name: "milliamps", text: "20 mA", unit: "A", want: 0.02},
		{name: "milliamps without a blank", text: "20mA", unit: "A", want: 0.02},
		{name: "milliamps in small letters", text: "20 ma", unit: "A", want: 0.02},
		{name: "m alone", text: "20m", unit: "A", want: 0.02},
		{name: "a leading point", text: ".02", unit: "A", want: 0.02},
		{name: "amps", text: "0.02 A", unit: "A", want: 0.02},
		{name: "a no-break space", text: "20\u00a0mA", unit: "A", want: 0.02},
		{name: "a thin space", text: "20\u202fmA", unit: "A", want: 0.02},
		{name: "the micro sign", text: "5 \u00b5A", unit: "A", want: 5e-6},
		{name: "the Greek mu", text: "5 \u03bcA", unit: "A", want: 5e-6},
		{name: "u for micro", text: "5uA", unit: "A", want: 5e-6},
		{name: "volts with a comma", text: "2,2 V", unit: "V", want: 2.2},
		{name: "V for the point", text: "3V3", unit: "V", want: 3.3},
		{name: "millivolts", text: "650 mV", unit: "V", want: 0.65},
		{name: "a hyphen for minus", text: "-0.3 V", unit: "V", want: -0.3},
		{name: "a real minus", text: "\u22120.30\u00a0V", unit: "V", want: -0.3},
		{name: "a plus", text: "+5", unit: "V", want: 5},
		{name: "blanks round it", text: "  5 V ", unit: "V", want: 5},
		{name: "a comma with three digits that can only be a decimal", text: "0,470", unit: "V", want: 0.47},
		{name: "an exponent", text: "1e-3", unit: "V", want: 0.001},
		{name: "a quarter of a watt", text: "1/4 W", unit: "W", want: 0.25},
		{name: "an eighth, bare", text: "1/8", unit: "W", want: 0.125},
		{name: "one sign for a half", text: "½", unit: "W", want: 0.5},
		{name: "milliwatts", text: "125 mW", unit: "W", want: 0.125},
		{name: "metres", text: "3.5", unit: "m", want: 3.5},
		{name: "metres with the unit", text: "3.5 m", unit: "m", want: 3.5},
		{name: "centimetres", text: "350 cm", unit: "m", want: 3.5},
		{name: "millimetres", text: "40mm", unit: "m", want: 0.04},
		{name: "feet", text: "10 ft", unit: "m", want: 3.048},
		{name: "inches", text: `10"`, unit: "m", want: 0.254},
		{name: "degrees", text: "25 °C", unit: "°C", want: 25},
		{name: "C alone", text: "-20C", unit: "°C", want: -20},
		{name: "one sign for degrees Celsius", text: "40 \u2103", unit: "°C", want: 40},
		{name: "Fahrenheit", text: "77 °F", unit: "°C", want: 25},
		{name: "lumens", text: "26 lm", unit: "lm", want: 26},
		{name: "millicandela", text: "4000 mcd", unit: "cd", want: 4},
		{name: "thermal resistance", text: "230 °C/W", unit: "K/W", want: 230},
		{name: "a temperature coefficient", text: "−2 mV/°C", unit: "V/K", want: -0.002},
		{name: "a flux coefficient", text: "-0.2 %/K", unit: "1/K", want: -0.002},
		{name: "a flux coefficient with its unit", text: "-0.002 1/K", unit: "1/K", want: -0.002},
		{name: "a cable's resistance", text: "24.5 Ω/km", unit: "Ω/m", want: 0.0245},
		{name: "heat transfer", text: "8 W/m²K", unit: "W/(m²·K)", want: 8},
		{name: "square millimetres", text: "0,75 mm2", unit: "mm²", want: 0.75},
		{name: "square centimetres", text: "4000 cm²", unit: "m²", want: 0.4},
		{name: "a colour temperature", text: "4000K", unit: "K", want: 4000},
		{name: "a wavelength", text: "625nm", unit: "nm", want: 625},
		{name: "an angle", text: "120°", unit: "°", want: 120},
		{name: "percent", text: "5 %", unit: "%", want: 0.05},
		{name: "bare percent", text: "5", unit: "%", want: 0.05},
		{name: "a tolerance with its sign", text: "±1 %", unit: "%", want: 0.01},
		{name: "a plain number", text: "1,85", unit: "", want: 1.85},
		{name: "a plain number in percent", text: "50 %", unit: "", want: 0.5},
		{name: "zero is not negative", text: "-0", unit: "V", want: 0},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := quantity.Parse(c.text, c.unit)
			if err != nil {
				t.Fatalf("Parse(%q, %q): %v", c.text, c.unit, err)
			}
			near(t, c.text, got, c.want, 1e-15*math.Abs(c.want)) // the last bit, for feet and Fahrenheit
			if math.Signbit(got) && got == 0 {
				t.Errorf("Parse(%q) is a negative zero", c.text)
			}
		})
	}
}

type bareCase struct {
	name string
	text string
	unit string
	bare string
	want float64
}

func TestParseInBareUnit(t *testing.T) {
	cases := []bareCase{
		{name: "a bare number is in the label's unit", text: "20", unit: "A", bare: "mA", want: 0.02},
		{name: "a unit of its own wins", text: "0.02 A", unit: "A", bare: "mA", want: 0.02},
		{name: "so does a letter for the point", text: "1A5", unit: "A", bare: "mA", want: 1.5},
		{name: "millivolts per kelvin", text: "-2", unit: "V/K", bare: "mV/K", want: -0.002},
		{name: "millimetres", text: "40", unit: "m", bare: "mm", want: 0.04},
		{name: "percent per kelvin", text: "-0.2", unit: "1/K", bare: "%/K", want: -0.002},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := quantity.ParseIn(c.text, c.unit, c.bare)
			if err != nil {
				t.Fatal(err)
			}
			if got != c.want {
				t.Errorf("ParseIn(%q, %q, %q) = %v, want %v", c.text, c.unit, c.bare, got, c.want)
			}
		})
	}
}

type refuseCase struct {
	name string
	text string
	unit string
	says string // in the sentence
}

func TestParseRefuses(t *testing.T) {
	cases := []refuseCase{
		{name: "nothing", text: "", unit: "Ω", says: "a value is missing: write ohms, like 4k7"},
		{name: "blanks", text: " \u00a0 ", unit: "V", says: "a value is missing"},
		{name: "another quantity's unit", text: "20 V", unit: "Ω", says: `"20 V" is in volts: write ohms here, like 4k7`},
		{name: "ohms in a field of amps", text: "4k7 Ω", unit: "A", says: `write amps`},
		{name: "an unknown unit", text: "20 furlongs", unit: "m", says: `unknown unit "furlongs"`},
		{name: "rubbish behind", text: "20 mA!", unit: "A", says: `unknown unit "mA!"`},
		{name: "no number", text: "about five", unit: "V", says: `"about five" is not a number`},
		{name: "not a number", text: "NaN", unit: "V", says: "is not a number"},
		{name: "infinity", text: "Inf", unit: "V", says: "is not a number"},
		{name: "infinity with a sign", text: "-inf V", unit: "V", says: "is not a number"},
		{name: "hexadecimal", text: "0x10", unit: "V", says: `unknown unit "x10"`},
		{name: "underlines", text: "1_000", unit: "V", says: "unknown unit"},
		{name: "a comma that may part thousands", text: "1,200", unit: "Ω", says: "can be read as 1.200 or as 1200"},
		{name: "thousands with commas", text: "1,200,000", unit: "Ω", says: "can be read as"},
		{name: "thousands with points", text: "1.200.000", unit: "Ω", says: "without anything between the thousands"},
		{name: "thousands with a gap", text: "1 200", unit: "Ω", says: "without anything between the thousands"},
		{name: "thousands with an apostrophe", text: "1'200", unit: "Ω", says: "without anything between the thousands"},
		{name: "E for R, or an exponent", text: "4E7", unit: "Ω", says: "can be read in two ways"},
		{name: "m for M, or a thousandth", text: "4m7", unit: "Ω", says: "can be read in two ways"},
		{name: "m alone for M, or a thousandth", text: "10m", unit: "Ω", says: "thousandths or millions"},
		{name: "M for m", text: "20 MA", unit: "A", says: "write mA"},
		{name: "a tolerance letter", text: "1R8J", unit: "Ω", says: "write 1R8 here, and for the J a tolerance of 5"},
		{name: "a tolerance letter that looks like a multiplier", text: "27KK", unit: "Ω", says: "write 27K here, and for the K a tolerance of 10"},
		{name: "the scale twice", text: "4k7 kΩ", unit: "Ω", says: "says its scale twice"},
		{name: "a point and a letter", text: "4.7k7", unit: "Ω", says: "unknown unit"},
		{name: "too large", text: "1e400", unit: "V", says: "is too large"},
		{name: "too large by its prefix", text: "1e308 kV", unit: "V", says: "is too large"},
		{name: "too small", text: "1e-400", unit: "V", says: "is too small"},
		{name: "an exponent without end", text: "1e99999", unit: "V", says: "unknown unit"},
		{name: "too long", text: strings.Repeat("9", 100), unit: "V", says: "too long"},
		{name: "not text", text: "5\xff V", unit: "V", says: "not text"},
		{name: "a sign alone", text: "-", unit: "V", says: "is not a number"},
		{name: "a point alone", text: ".", unit: "V", says: "is not a number"},
		{name: "a division by zero", text: "1/0", unit: "W", says: "unknown unit"},
		{name: "a fraction where none is customary", text: "1/4", unit: "V", says: "unknown unit"},
		{name: "a unit that the program does not have", text: "5", unit: "furlong", says: "there is no unit"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := quantity.Parse(c.text, c.unit)
			if err == nil {
				t.Fatalf("Parse(%q, %q) = %v, want an error", c.text, c.unit, got)
			}
			if !strings.Contains(err.Error(), c.says) {
				t.Errorf("Parse(%q, %q): %q does not say %q", c.text, c.unit, err, c.says)
			}
		})
	}
}

var allUnits = []string{"", "%", "V", "A", "Ω", "W", "m", "m²", "mm²", "°C", "K", "lm", "cd", "nm", "°", "eV", "K/W", "V/K", "Ω/m", "1/K", "W/(m²·K)"}

func FuzzParse(f *testing.F) {
	for _, text := range []string{"4k7", "20 mA", "2,2 V", "R47", "1/4 W", "±5 %", "−0.30 V", "1e-3", "4E7", "1,200", "77 °F", "27KK", "10'", "-0.002 1/K", "8 W/m²K"} {
		for i := range allUnits {
			f.Add(text, uint8(i))
		}
	}
	f.Fuzz(func(t *testing.T, text string, n uint8) {
		unit := allUnits[int(n)%len(allUnits)]
		v, err := quantity.Parse(text, unit)
		if math.IsNaN(v) || math.IsInf(v, 0) {
			t.Fatalf("Parse(%q, %q) = %v", text, unit, v)
		}
		if err != nil {
			if v != 0 || err.Error() == "" {
				t.Fatalf("Parse(%q, %q) = %v with error %q", text, unit, v, err)
			}
			return
		}
		again, err := quantity.Parse(quantity.Text(v, unit), unit)
		if err != nil || again != v {
			t.Fatalf("Text(%v, %q) = %q, which is read as %v, %v", v, unit, quantity.Text(v, unit), again, err)
		}
	})
}
