// Package wiring answers what a cable does to the volts: conductors, their
// resistance at a temperature, and the tree of runs from the supply.
package wiring

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Conductor is the copper of one wire.
type Conductor struct {
	Area         float64 // [m²]
	OhmsPerMetre float64 // [Ω/m] of one wire at 20 °C
}

// flexible holds the greatest resistance of flexible plain copper, class 5,
// at 20 °C by its nominal area in mm², in Ω/km.
//
// Source: iec60228, table 3.
var flexible = map[float64]float64{
	0.5: 39.0, 0.75: 26.0, 1: 19.5, 1.5: 13.3, 2.5: 7.98, 4: 4.95, 6: 3.30, 10: 1.91,
}

const (
	// copper is the resistivity in Ω·m of annealed copper at 20 °C.
	//
	// Source: iacs, 58 MS/m.
	copper = 1 / 58e6
	// copperTempco is in 1/K at 20 °C.
	//
	// Source: iacs.
	copperTempco = 0.00393
	// stranding is what class 5 copper has above its nominal area's solid
	// resistance, where the standard gives no row.
	//
	// Source: iec60228, ratio of its rows.
	stranding = 1.131
)

// ParseConductor reads "0.75 mm2" (also mm²) or "AWG 18" (00 and 2/0 too).
func ParseConductor(text string) (Conductor, error) {
	t := strings.ToLower(strings.TrimSpace(strings.ReplaceAll(text, "\u00a0", " ")))
	if gauge, ok := strings.CutPrefix(t, "awg"); ok {
		n, err := gaugeNumber(strings.TrimSpace(gauge))
		if err != nil {
			return Conductor{}, fmt.Errorf("%q is no wire gauge: write AWG 18, from AWG 0000 to AWG 40", text)
		}
		return AWG(n), nil
	}
	size, ok := strings.CutSuffix(t, "mm2")
	if !ok {
		size, ok = strings.CutSuffix(t, "mm²")
	}
	mm2, err := strconv.ParseFloat(strings.ReplaceAll(strings.TrimSpace(size), ",", "."), 64)
	if !ok || err != nil || !(mm2 >= 0.01 && mm2 <= 1000) {
		return Conductor{}, fmt.Errorf("%q is no conductor: write 0.75 mm2 or AWG 18", text)
	}
	c := Conductor{Area: mm2 * 1e-6}
	if perKilometre, ok := flexible[mm2]; ok {
		c.OhmsPerMetre = perKilometre / 1000
	} else {
		c.OhmsPerMetre = copper * stranding / c.Area
	}
	return c, nil
}

func gaugeNumber(text string) (int, error) {
	if z, ok := strings.CutSuffix(text, "/0"); ok {
		n, err := strconv.Atoi(z)
		if err != nil || n < 1 || n > 4 {
			return 0, fmt.Errorf("gauge %q", text)
		}
		return 1 - n, nil
	}
	if len(text) > 1 && len(text) <= 4 && strings.Trim(text, "0") == "" {
		return 1 - len(text), nil
	}
	n, err := strconv.Atoi(text)
	if err != nil || n < 0 || n > 40 {
		return 0, fmt.Errorf("gauge %q", text)
	}
	return n, nil
}

// AWG returns solid copper of an American gauge; 00 is −1, 000 is −2.
//
//	d = 0.127 mm · 92^((36−n)/39)
//
// Source: astm-b258 for the diameter, iacs for the resistance.
func AWG(n int) Conductor {
	d := 0.127e-3 * math.Pow(92, float64(36-n)/39)
	area := math.Pi / 4 * d * d
	return Conductor{Area: area, OhmsPerMetre: copper / area}
}

// At returns the resistance in Ω/m of one wire at a temperature in °C.
func (c Conductor) At(celsius float64) float64 {
	return ResistanceAt(c.OhmsPerMetre, 20, celsius, copperTempco)
}

// ResistanceAt returns a resistance at another temperature, tempco in 1/K
// being stated at from:
//
//	R = R0·(1 + α·(T − T0))
//
// Source: bird, ch. 3 ex. 11.
func ResistanceAt(ohms, fromC, toC, tempco float64) float64 {
	return ohms * (1 + tempco*(toC-fromC))
}
