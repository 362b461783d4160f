package web

import (
	"fmt"
	"math"
	"strings"

	"lanternbook/calc"
)

// Light is how an LED's light is drawn and named.
type Light struct {
	Fill string // "#d4482f", as printed ink shows the light, calmer than the light itself
	Ink  string // "#fff", what is readable on Fill
	Word string // "red", "warm white"
}

// tint is one entry of a scale of colours: at is a wavelength or a colour
// temperature.
type tint struct {
	at      float64 // [nm] or [K]
	r, g, b float64 // [1] of 255
}

// spectrum is drawn by eye for paper, not computed: a screen can show no
// spectral colour, and neighbours must stay apart when printed small.
var spectrum = []tint{
	{400, 98, 72, 150}, {430, 84, 78, 172}, {450, 66, 84, 182}, {470, 58, 108, 190},
	{490, 56, 148, 186}, {505, 52, 164, 148}, {520, 62, 158, 92}, {540, 100, 170, 76},
	{565, 164, 190, 74}, {580, 222, 192, 68}, {590, 232, 170, 52}, {600, 228, 142, 46},
	{612, 222, 108, 44}, {625, 208, 70, 46}, {645, 186, 48, 44}, {700, 140, 36, 42},
}

// whites runs from candle light to a cold sky, drawn by eye likewise.
var whites = []tint{
	{1800, 236, 184, 104}, {2700, 243, 212, 146}, {3000, 244, 219, 160}, {4000, 245, 232, 190},
	{5000, 240, 238, 214}, {6500, 224, 233, 236}, {10000, 206, 222, 238},
}

// named are the colours that datasheets name, as a wavelength [nm] or a
// colour temperature [K]; the first word found in the text counts, so that
// longer names stand before those they contain. Common practice, no source.
var named = []struct {
	word  string
	nm, k float64
}{
	{"warm white", 0, 2900}, {"neutral white", 0, 4000}, {"cool white", 0, 6000}, {"cold white", 0, 6500},
	{"white", 0, 4200}, {"deep red", 660, 0}, {"far red", 700, 0}, {"hyper red", 650, 0}, {"red-orange", 615, 0},
	{"red", 627, 0}, {"orange", 605, 0}, {"amber", 592, 0}, {"yellow-green", 568, 0}, {"yellow", 582, 0},
	{"lime", 560, 0}, {"cyan", 500, 0}, {"turquoise", 500, 0}, {"green", 525, 0}, {"royal blue", 450, 0},
	{"blue", 470, 0}, {"ultraviolet", 400, 0}, {"uv", 400, 0}, {"violet", 410, 0}, {"purple", 410, 0},
}

// Emitted tells how the light of an LED is drawn and named: by its colour
// temperature, its wavelength, or the name of its colour. An LED that says
// none of them is grey and just "LED".
func Emitted(led calc.LED) Light {
	word := strings.ToLower(strings.TrimSpace(led.Colour))
	switch {
	case led.CCT != nil && *led.CCT > 0:
		return paint(between(whites, *led.CCT), either(word, whiteWord(*led.CCT)))
	case led.Wavelength != nil && *led.Wavelength > 0:
		return paint(between(spectrum, *led.Wavelength), either(word, hueWord(*led.Wavelength)))
	}
	for _, n := range named {
		if strings.Contains(word, n.word) {
			if n.k > 0 {
				return paint(between(whites, n.k), word)
			}
			return paint(between(spectrum, n.nm), word)
		}
	}
	return paint(tint{r: 176, g: 172, b: 162}, either(word, "LED"))
}

func either(word, other string) string {
	if word != "" {
		return word
	}
	return other
}

// whiteWord names a colour temperature. Common practice, no source.
func whiteWord(kelvin float64) string {
	switch {
	case kelvin < 3500:
		return "warm white"
	case kelvin < 5000:
		return "neutral white"
	}
	return "cool white"
}

// hueWord names a wavelength. Common practice, no source.
func hueWord(nm float64) string {
	for _, n := range []struct {
		below float64
		word  string
	}{{400, "ultraviolet"}, {440, "violet"}, {488, "blue"}, {512, "cyan"}, {558, "green"}, {576, "yellow-green"},
		{586, "yellow"}, {600, "amber"}, {612, "orange"}, {645, "red"}, {700, "deep red"}, {760, "far red"}} {
		if nm < n.below {
			return n.word
		}
	}
	return "infrared"
}

// between interpolates in a scale; outside it the nearest end counts.
func between(scale []tint, at float64) tint {
	if at <= scale[0].at {
		return scale[0]
	}
	for i := 1; i < len(scale); i++ {
		if low, high := scale[i-1], scale[i]; at <= high.at {
			share := (at - low.at) / (high.at - low.at)
			return tint{
				r: low.r + share*(high.r-low.r),
				g: low.g + share*(high.g-low.g),
				b: low.b + share*(high.b-low.b),
			}
		}
	}
	return scale[len(scale)-1]
}

// The two inks that can stand on a block.
const (
	darkInk  = "#050402"
	lightInk = "#ffffff"
)

// darkInkLuminance is the relative luminance of darkInk. Nearly black: with
// anything lighter some fills would have no ink of contrast 4.5.
const darkInkLuminance = 0.0012

func paint(t tint, word string) Light {
	ink := lightInk
	y := luminance(t)
	if (y+0.05)/(darkInkLuminance+0.05) > 1.05/(y+0.05) {
		ink = darkInk
	}
	fill := fmt.Sprintf("#%02x%02x%02x", int(math.Round(t.r)), int(math.Round(t.g)), int(math.Round(t.b)))
	return Light{Fill: fill, Ink: ink, Word: word}
}

// luminance returns the relative luminance of a colour, 0 to 1.
//
// Source: WCAG 2.2, definition of relative luminance.
func luminance(t tint) float64 {
	linear := func(c float64) float64 {
		c /= 255
		if c <= 0.04045 {
			return c / 12.92
		}
		return math.Pow((c+0.055)/1.055, 2.4)
	}
	return 0.2126*linear(t.r) + 0.7152*linear(t.g) + 0.0722*linear(t.b)
}
