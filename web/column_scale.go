package web

import (
	"math"
	"strconv"
)

// Px is a length or a place in a drawing.
type Px float64 // [px]

// String writes a place as SVG attributes hold it: to a tenth of a pixel.
func (p Px) String() string {
	return strconv.FormatFloat(math.Round(float64(p)*10)/10, 'f', -1, 64)
}

// Scale is the one voltage axis that all columns of a picture share. 0 V is at
// the foot, Top at the upper margin.
type Scale struct {
	Top    float64 // [V]
	Foot   Px      // [px] where 0 V is, counted downwards
	Margin Px      // [px] where Top is
}

// Y returns where a voltage is drawn.
func (s Scale) Y(volts float64) Px {
	return s.Foot - Px(volts/s.Top)*(s.Foot-s.Margin)
}

// Tall returns how tall a difference of voltages is drawn.
func (s Scale) Tall(volts float64) Px {
	return Px(volts/s.Top) * (s.Foot - s.Margin)
}

// Tick is one mark of the axis.
type Tick struct {
	Y    Px
	Text string // "12"
}

// Ticks marks the axis at round voltages, at least least pixels apart.
func (s Scale) Ticks(least Px) []Tick {
	step := roundStep(s.Top * float64(least) / float64(s.Foot-s.Margin))
	var ticks []Tick
	for i := 0; ; i++ {
		v := float64(i) * step
		if v > s.Top*(1+1e-9) {
			return ticks
		}
		ticks = append(ticks, Tick{Y: s.Y(v), Text: strconv.FormatFloat(v, 'g', 4, 64)})
	}
}

// roundStep returns the smallest of 1, 2 and 5 times a power of ten that is at
// least v.
func roundStep(v float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(v)))
	for _, m := range []float64{1, 2, 5} {
		if m*power >= v*(1-1e-9) {
			return m * power
		}
	}
	return 10 * power
}
