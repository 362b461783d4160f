package quantity_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"lanternbook/calc/quantity"
)

// otherForms are published codes that FormatCode writes otherwise: with zeros
// at the end or before the R, with the letter L, in small letters.
var otherForms = map[string]bool{
	"R300": true, "2k2": true, "0R": true, "0R1": true, "0R22": true, "2R20": true,
	"1K00": true, "10K0": true, "4K70": true, "1L00": true, "K47": true, "5L": true,
}

// Every code of the published table, each row with its source, is read as its
// value; what carries no tolerance letter is read by Parse too, and is what
// FormatCode writes but for the capital K.
func TestPublishedCodes(t *testing.T) {
	for _, row := range published(t, "rkm.csv", 69) {
		want, err := strconv.ParseFloat(row["value"], 64)
		if err != nil || row["source"] == "" {
			t.Fatalf("bad row %v", row)
		}
		code, err := quantity.ParseCode(row["code"])
		if err != nil {
			t.Errorf("ParseCode(%q): %v", row["code"], err)
			continue
		}
		near(t, row["code"], code.Ohms, want, 1e-15*want)
		v, err := quantity.Parse(row["code"], "Ω")
		if code.Toleranced {
			if err == nil || !strings.Contains(err.Error(), "tolerance letter") {
				t.Errorf("Parse(%q) = %v, %v: want the tolerance letter refused", row["code"], v, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("Parse(%q): %v", row["code"], err)
			continue
		}
		near(t, row["code"], v, want, 1e-15*want)
		if got := strings.ToUpper(quantity.FormatCode(want)); got != row["code"] && !otherForms[row["code"]] {
			t.Errorf("FormatCode(%v) = %q, published is %q", want, got, row["code"])
		}
	}
}

func TestPublishedToleranceLetters(t *testing.T) {
	for _, row := range published(t, "rkm_tolerance_letters.csv", 15) {
		percent, err := strconv.ParseFloat(row["tolerance_percent"], 64)
		if err != nil || row["source"] == "" {
			t.Fatalf("bad row %v", row)
		}
		code, err := quantity.ParseCode("4K7" + row["letter"])
		if err != nil {
			t.Errorf("ParseCode with letter %s: %v", row["letter"], err)
			continue
		}
		near(t, "ohms with letter "+row["letter"], code.Ohms, 4700, 0)
		near(t, "tolerance of letter "+row["letter"], code.Tolerance, percent/100, 1e-12)
		if !code.Toleranced {
			t.Errorf("letter %s was not seen", row["letter"])
		}
	}
}

func TestParseCodeRefuses(t *testing.T) {
	for _, text := range []string{"", "K", "R", "47", "4K7Q", "4K7JJ", "4K 7", "4.7K", "-4K7", "4m7", "1E3", strings.Repeat("9", 90) + "K"} {
		if code, err := quantity.ParseCode(text); err == nil {
			t.Errorf("ParseCode(%q) = %v, want an error", text, code)
		}
	}
}

type codeCase struct {
	name string
	ohms float64
	want string
}

func TestFormatCode(t *testing.T) {
	cases := []codeCase{
		{name: "kilohms", ohms: 4700, want: "4k7"},
		{name: "a whole number of kilohms", ohms: 10000, want: "10k"},
		{name: "one kilohm", ohms: 1000, want: "1k0"},
		{name: "ohms", ohms: 110, want: "110R"},
		{name: "three digits of E96", ohms: 6810, want: "6k81"},
		{name: "below one ohm", ohms: 0.22, want: "R22"},
		{name: "a tenth", ohms: 0.1, want: "R10"},
		{name: "a thousandth", ohms: 0.005, want: "R005"},
		{name: "megohms", ohms: 2.2e6, want: "2M2"},
		{name: "a link", ohms: 0, want: "0R0"},
		{name: "more digits than a code has", ohms: 1034.567, want: "1.034567\u00a0kΩ"},
		{name: "negative", ohms: -5, want: "\u22125\u00a0Ω"},
		{name: "not a number", ohms: math.NaN(), want: "?\u00a0Ω"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := quantity.FormatCode(c.ohms); got != c.want {
				t.Errorf("FormatCode(%v) = %q, want %q", c.ohms, got, c.want)
			}
		})
	}
}

// A code that FormatCode writes is read as exactly the value again.
func TestFormatCodeIsReadBack(t *testing.T) {
	for _, series := range []string{"E24", "E96"} {
		for power := -3; power <= 9; power++ {
			for _, m := range quantity.Decade(series) {
				below, _ := quantity.Nearest(series, m*math.Pow10(power))
				text := quantity.FormatCode(below)
				got, err := quantity.Parse(text, "Ω")
				if err != nil || got != below {
					t.Fatalf("FormatCode(%v) = %q, which is read as %v, %v", below, text, got, err)
				}
			}
		}
	}
}
