package calc

import "lanternbook/calc/device"

// LEDCurve returns an LED's forward voltages in volts at currents in amperes,
// its junction held at 25 °C, from what Check would take: its model, else its
// measured points, else its one datasheet figure. assumed says in words what
// had to be assumed; it is empty when nothing had.
func LEDCurve(part LED, currents []float64) (volts []float64, assumed string) {
	led, assumed := ledModel(&part)
	for _, current := range currents {
		volts = append(volts, led.Voltage(current, device.RatedC))
	}
	return volts, assumed
}

// VBECurve returns a transistor's base-emitter voltages in volts, positive for
// a PNP too, at collector currents in amperes above 0, its junction held at
// 25 °C and its collector vce volts above its emitter, from what Check would
// take: its model, else its working figures. assumed says in words what had to
// be assumed.
func VBECurve(part Transistor, currents []float64, vce float64) (volts []float64, assumed []string) {
	l := &line{}
	model := l.transistor(&Build{Parts: map[string]Part{"": {Transistor: &part}}}, "").Model
	at := model.At(device.RatedC)
	for _, current := range currents {
		volts = append(volts, baseEmitter(&model, &at, current, vce))
	}
	for _, a := range l.assumed {
		assumed = append(assumed, a[len(": "):])
	}
	return volts, assumed
}

const (
	highestVBE = 1.5 // [V] inner, beyond any silicon junction
	halvings   = 60  // of it: to the last bit of a float64
)

// baseEmitter finds the inner base-emitter voltage at which the collector
// current flows, by halving, and adds the drops across rb and re.
func baseEmitter(model *device.BJT, at *device.BJTAt, current, vce float64) float64 {
	var c device.BJTCurrents
	inner := vce - current*(model.Rc+model.Re) // the base's share in re moves it by less than a part in the gain
	low, high := 0.0, highestVBE
	for range halvings {
		vbe := (low + high) / 2
		if c = at.Currents(vbe, vbe-inner); c.Ic < current {
			low = vbe
		} else {
			high = vbe
		}
	}
	return high + c.Ib*model.BaseResistance(c.Ib, c.BaseChargeFactor) + (current+c.Ib)*model.Re
}
