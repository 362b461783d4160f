package quantity

import "strings"

// The units that a field may be asked in. Parse returns, and Format takes, the
// number in exactly this unit, but for Percent, where both mean the ratio.
const (
	Number       = ""         // a plain number; "50 %" is read as 0.5
	Percent      = "%"        // a ratio: 0.05 is written "5 %"
	Volt         = "V"        //
	Amp          = "A"        //
	Ohm          = "Ω"        //
	Watt         = "W"        //
	Metre        = "m"        // feet and inches are read too
	SquareMetre  = "m²"       //
	SquareMm     = "mm²"      // the number is in mm²
	Celsius      = "°C"       // degrees Fahrenheit are read too
	Kelvin       = "K"        // a colour temperature, or a difference, which may be written in °C
	Lumen        = "lm"       //
	Candela      = "cd"       //
	Nanometre    = "nm"       // the number is in nm
	Degree       = "°"        // of angle
	ElectronVolt = "eV"       //
	KelvinPerW   = "K/W"      //
	VoltPerK     = "V/K"      //
	OhmPerMetre  = "Ω/m"      //
	PerKelvin    = "1/K"      // written in %/K
	HeatTransfer = "W/(m²·K)" //
)

// spelling is one way to write a unit: lower case, without blanks, brackets
// and dots. The value in the field's unit is (number + zero) · factor · 10^exp;
// a factor of 0 is left out.
type spelling struct {
	text   string
	exp    int
	factor float64
	zero   float64
}

// unit is a unit as a field takes and shows it.
type unit struct {
	name      string
	mark      string     // what Format writes after a prefix; empty is the name
	words     string     // in a sentence: "volts"
	example   string     // a value as one would write it
	spellings []spelling // those that stand for the unit itself
	special   []spelling // those of other units that are converted; they take no prefix
	prefixes  string     // SI prefixes read before a spelling, µ as u
	alone     string     // of those, the ones read without the unit: "4.7k"
	infix     string     // letters read in the place of the decimal point: "4k7", "3V3"
	shown     []int      // powers of ten that Format writes, rising, each with its prefix
	stay      int        // power of ten of the smallest leading digit still written without prefix
	free      bool       // small numbers keep their significant digits instead of ending at 0.00
}

func as(texts ...string) []spelling {
	list := make([]spelling, len(texts))
	for i, t := range texts {
		list[i] = spelling{text: t}
	}
	return list
}

// metrePerFoot is exact by definition (international yard and pound agreement,
// 1959); an inch is a twelfth of it.
const metrePerFoot = 0.3048

// units lists what Parse and Format know. A reader of resistances meets the
// ohm's many spellings: U+03A9, the letter R of IEC 60062 and "ohm"; the sign
// U+2126 is turned into U+03A9 before.
var units = []unit{
	{name: Number, words: "a plain number", example: "5", spellings: as(""), special: []spelling{{text: "%", exp: -2}}, shown: []int{0}, free: true},
	{name: Percent, words: "percent", example: "5 %", spellings: []spelling{{text: "%", exp: -2}, {text: "percent", exp: -2}}, shown: []int{-2}},
	{name: Volt, words: "volts", example: "2.2 V", spellings: as("v", "volt", "volts"), prefixes: "numk", alone: "umk", infix: "Vv", shown: []int{-6, -3, 0, 3}, stay: -1},
	{name: Amp, words: "amps", example: "20 mA", spellings: as("a", "amp", "amps", "ampere", "amperes"), prefixes: "fpnumk", alone: "num", infix: "Aa", shown: []int{-9, -6, -3, 0, 3}},
	{name: Ohm, words: "ohms", example: "4k7 or 4.7 kΩ", spellings: as("ω", "ohm", "ohms", "r"), prefixes: "umkMGT", alone: "ukMGTL", infix: "RrKkMGTL", shown: []int{-3, 0, 3, 6, 9}, stay: -1,
		special: []spelling{{text: "meg", exp: 6}, {text: "megohm", exp: 6}, {text: "megohms", exp: 6}, {text: "megω", exp: 6}}},
	{name: Watt, words: "watts", example: "0.25 W or 1/4 W", spellings: as("w", "watt", "watts"), prefixes: "numk", alone: "umk", infix: "Ww", shown: []int{-6, -3, 0, 3}, stay: -1},
	{name: Metre, words: "metres", example: "3.5 m", spellings: as("m", "metre", "metres", "meter", "meters"), prefixes: "umck", shown: []int{-3, 0, 3}, stay: -1,
		special: []spelling{{text: "ft", factor: metrePerFoot}, {text: "foot", factor: metrePerFoot}, {text: "feet", factor: metrePerFoot}, {text: "'", factor: metrePerFoot},
			{text: "in", factor: metrePerFoot / 12}, {text: "inch", factor: metrePerFoot / 12}, {text: "inches", factor: metrePerFoot / 12}, {text: `"`, factor: metrePerFoot / 12}}},
	{name: SquareMetre, words: "square metres", example: "0.4 m²", spellings: as("m2", "sqm"), shown: []int{0},
		special: []spelling{{text: "dm2", exp: -2}, {text: "cm2", exp: -4}, {text: "mm2", exp: -6}}},
	{name: SquareMm, words: "square millimetres", example: "0.75 mm²", spellings: as("mm2", "sqmm"), shown: []int{0}},
	{name: Celsius, words: "degrees Celsius", example: "25 °C", spellings: as("°c", "c", "degc"), shown: []int{0},
		special: []spelling{{text: "°f", zero: -32, factor: 5. / 9}, {text: "f", zero: -32, factor: 5. / 9}, {text: "degf", zero: -32, factor: 5. / 9}}},
	{name: Kelvin, words: "kelvins", example: "4000 K", spellings: as("k", "kelvin", "kelvins"), special: as("°c", "c", "degc"), shown: []int{0}},
	{name: Lumen, words: "lumens", example: "26 lm", spellings: as("lm", "lumen", "lumens"), prefixes: "mk", shown: []int{0}},
	{name: Candela, words: "candelas", example: "1.2 cd", spellings: as("cd", "candela", "candelas"), prefixes: "umk", shown: []int{-3, 0}},
	{name: Nanometre, words: "nanometres", example: "625 nm", spellings: as("nm"), shown: []int{0}},
	{name: Degree, words: "degrees", example: "120°", spellings: as("°", "deg", "degree", "degrees"), shown: []int{0}},
	{name: ElectronVolt, words: "electronvolts", example: "1.11 eV", spellings: as("ev"), prefixes: "m", shown: []int{0}},
	{name: KelvinPerW, words: "kelvins per watt", example: "230 K/W", spellings: as("k/w", "°c/w", "c/w", "degc/w"), shown: []int{0}},
	{name: VoltPerK, words: "volts per kelvin", example: "-2 mV/K", spellings: as("v/k", "v/°c", "v/c", "v/degc"), prefixes: "um", shown: []int{-6, -3, 0}},
	{name: OhmPerMetre, words: "ohms per metre", example: "0.025 Ω/m", spellings: as("ω/m", "ohm/m", "ohms/m", "r/m"), prefixes: "um", shown: []int{-3, 0},
		special: []spelling{{text: "ω/km", exp: -3}, {text: "ohm/km", exp: -3}, {text: "ohms/km", exp: -3}, {text: "r/km", exp: -3}}},
	{name: PerKelvin, mark: "%/K", words: "a share per kelvin", example: "-0.2 %/K", spellings: as("1/k", "/k", "/°c", "1/°c", "/c", "1/c"), shown: []int{-2},
		special: []spelling{{text: "%/k", exp: -2}, {text: "%/°c", exp: -2}, {text: "%/c", exp: -2}, {text: "ppm/k", exp: -6}, {text: "ppm/°c", exp: -6}, {text: "ppm/c", exp: -6}}},
	{name: HeatTransfer, words: "watts per square metre and kelvin", example: "8 W/(m²·K)", spellings: as("w/m2k", "w/m2/k"), shown: []int{0}},
}

func lookup(name string) (unit, bool) {
	for _, u := range units {
		if u.name == name {
			return u, true
		}
	}
	return unit{}, false
}

// tens is the power of ten of each prefix letter. L is IEC 60062's letter for
// a thousandth, R and the units' own letters stand for one.
var tens = map[byte]int{
	'f': -15, 'p': -12, 'n': -9, 'u': -6, 'm': -3, 'L': -3, 'c': -2,
	'R': 0, 'r': 0, 'V': 0, 'v': 0, 'A': 0, 'a': 0, 'W': 0, 'w': 0,
	'k': 3, 'K': 3, 'M': 6, 'G': 9, 'T': 12,
}

// squeeze takes out of a unit what people write in different ways.
var squeeze = strings.NewReplacer(" ", "", "(", "", ")", "", "·", "", "⋅", "", "*", "", "^", "", "²", "2")

// resolve finds the spelling that suffix is for this unit. An empty suffix is
// for the caller to give a meaning.
func (u unit) resolve(suffix string) (spelling, bool) {
	flat := squeeze.Replace(suffix)
	small := strings.ToLower(flat)
	for _, list := range [][]spelling{u.spellings, u.special} {
		for _, s := range list {
			if s.text == small {
				return s, true
			}
		}
	}
	if flat == "" {
		return spelling{}, false
	}
	letter := flat[0]
	if letter == 'K' {
		letter = 'k'
	}
	if len(flat) == 1 && strings.IndexByte(u.alone, letter) >= 0 {
		return spelling{text: flat, exp: tens[letter]}, true
	}
	if strings.IndexByte(u.prefixes, letter) >= 0 {
		for _, s := range u.spellings {
			if s.text == strings.ToLower(flat[1:]) {
				s.exp += tens[letter]
				return s, true
			}
		}
	}
	return spelling{}, false
}

// Words returns what a unit is called in a sentence, "volts", and the name
// itself where it is none of this package's.
func Words(name string) string {
	if u, ok := lookup(name); ok {
		return u.words
	}
	return name
}
