package web_test

import (
	"math"
	"strconv"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

type emittedCase struct {
	name string
	led  calc.LED
	word string
}

func TestEmittedWord(t *testing.T) {
	number := func(v float64) *float64 { return &v }
	cases := []emittedCase{
		{name: "a colour temperature", led: calc.LED{CCT: number(3000)}, word: "warm white"},
		{name: "a colour temperature with a name of its own", led: calc.LED{CCT: number(2200), Colour: "Candle white"}, word: "candle white"},
		{name: "a wavelength", led: calc.LED{Wavelength: number(625)}, word: "red"},
		{name: "a wavelength nobody sees", led: calc.LED{Wavelength: number(850)}, word: "infrared"},
		{name: "a name alone", led: calc.LED{Colour: "amber"}, word: "amber"},
		{name: "nothing known", led: calc.LED{}, word: "LED"},
	}
	for _, c := range cases {
		if got := web.Emitted(c.led).Word; got != c.word {
			t.Errorf("%s: %q, want %q", c.name, got, c.word)
		}
	}
}

func TestEmittedNamesLookLikeTheirWavelength(t *testing.T) {
	number := func(v float64) *float64 { return &v }
	for _, c := range []struct {
		colour string
		led    calc.LED
	}{
		{"red", calc.LED{Wavelength: number(627)}}, {"Deep red", calc.LED{Wavelength: number(660)}},
		{"true green", calc.LED{Wavelength: number(525)}}, {"yellow-green", calc.LED{Wavelength: number(568)}},
		{"ultraviolet", calc.LED{Wavelength: number(400)}}, {"warm white", calc.LED{CCT: number(2900)}},
	} {
		got, want := web.Emitted(calc.LED{Colour: c.colour}).Fill, web.Emitted(c.led).Fill
		if got != want {
			t.Errorf("%s is drawn %s, its wavelength %s", c.colour, got, want)
		}
	}
}

// The words on a block must be readable on every light.
//
// Source: WCAG 2.2, success criterion 1.4.3, 4.5 to 1.
func TestEmittedContrast(t *testing.T) {
	check := func(name string, l web.Light) {
		t.Helper()
		a, b := relative(t, l.Fill), relative(t, l.Ink)
		ratio := (max(a, b) + 0.05) / (min(a, b) + 0.05)
		if !(ratio >= 4.5) {
			t.Errorf("%s: %s on %s has a contrast of %.2f", name, l.Ink, l.Fill, ratio)
		}
	}
	for nm := 380.0; nm < 960; nm += 2.5 {
		check(strconv.FormatFloat(nm, 'g', -1, 64)+" nm", web.Emitted(calc.LED{Wavelength: &nm}))
	}
	for k := 1500.0; k < 12000; k += 100 {
		check(strconv.FormatFloat(k, 'g', -1, 64)+" K", web.Emitted(calc.LED{CCT: &k}))
	}
	check("unknown", web.Emitted(calc.LED{}))
}

// relative is the relative luminance of "#rrggbb" as WCAG 2.2 defines it.
func relative(t *testing.T, hex string) float64 {
	t.Helper()
	rgb, err := strconv.ParseUint(hex[1:], 16, 32)
	if err != nil || len(hex) != 7 {
		t.Fatalf("%q is no colour", hex)
	}
	sum := 0.0
	for i, weight := range []float64{0.0722, 0.7152, 0.2126} {
		c := float64(rgb>>(8*i)&0xff) / 255
		if c <= 0.04045 {
			sum += weight * c / 12.92
		} else {
			sum += weight * math.Pow((c+0.055)/1.055, 2.4)
		}
	}
	return sum
}
