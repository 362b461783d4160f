package calc_test

import (
	"strings"
	"testing"

	"lanternbook/calc/device"
	"lanternbook/calc/driver"
	"lanternbook/calc/heat"
	"lanternbook/calc/light"
	"lanternbook/calc/quantity"
	"lanternbook/calc/wiring"
)

// example computes a published worked example, in SI units, with the
// program's own code.
type example struct {
	id  string // row of testdata/published/worked_examples.csv: source, answer, tolerance
	got func(t *testing.T) float64
}

// perUnit turns the table's units into SI.
var perUnit = map[string]float64{
	"ohm": 1, "kohm": 1e3, "A": 1, "mA": 1e-3, "V": 1, "mV": 1e-3, "W": 1, "mW": 1e-3, "K/W": 1, "C": 1,
	"mm2": 1e-6, "ohm/km": 1e-3,
}

// Where a book takes a junction for a fixed voltage, the circuit is solved
// with parts idealised to it: see idealLED and idealNPN.
var examples = []example{
	{"w01", func(*testing.T) float64 { return driver.SeriesResistance(8, 2, 20e-3) }},
	{"w02", func(*testing.T) float64 { return driver.SeriesResistance(10, 1.6, 20e-3) }},
	{"w03", func(t *testing.T) float64 { return seriesCurrent(t, 15, 2, 2200) }},
	{"w04", func(t *testing.T) float64 { return seriesCurrent(t, 50, 2, 2200) }},
	{"w05", func(t *testing.T) float64 { return seriesCurrent(t, 9, 2, 470) }},
	{"w06a", func(*testing.T) float64 { return driver.SeriesResistance(8, 1.8, 16e-3) }},
	{"w06b", func(*testing.T) float64 {
		_, above := quantity.Nearest("E24", driver.SeriesResistance(8, 1.8, 16e-3))
		return above
	}},
	{"w07a", func(t *testing.T) float64 { return checkedSeries(t, 10, ledSpread{1.5, 2.3}, 470, 0).Current.Min }},
	{"w07b", func(t *testing.T) float64 { return checkedSeries(t, 10, ledSpread{1.5, 2.3}, 470, 0).Current.Max }},
	{"w08a", func(t *testing.T) float64 { return seriesCurrent(t, 24, 1.8, 820) - seriesCurrent(t, 24, 3.0, 820) }},
	{"w08b", func(t *testing.T) float64 { return seriesCurrent(t, 5, 1.8, 120) - seriesCurrent(t, 5, 3.0, 120) }},
	// The Zener and diode of the book are further fixed drops of the string.
	{"w09a", func(t *testing.T) float64 { return 40 * seriesCurrent(t, 40, 6+3.3+0.7+4, 1300) }},
	{"w09b", func(t *testing.T) float64 { return seriesPower(t, 40, 6+3.3+0.7, 4, 1300) }},
	{"w10", func(t *testing.T) float64 { return seriesCurrent(t, 20, 2, 1000) }},

	{"w13a", func(*testing.T) float64 { return driver.SenseResistance(15-0.7, 25e-3, 0) }},
	{"w13b", func(*testing.T) float64 { return driver.SenseResistance(15, 25e-3, 0) }},
	{"w14a", func(t *testing.T) float64 { s := solvedSink(t); return s.current }},
	{"w14b", func(t *testing.T) float64 { s := solvedSink(t); return s.across }},
	{"w15a", func(t *testing.T) float64 { return dividerSink(t, 1e9).current }},
	{"w15b", func(t *testing.T) float64 { return dividerSink(t, 1e9).across }},
	{"w16", func(t *testing.T) float64 { s := dividerSink(t, 200); return s.current * (1 + 1.0/200) }},
	{"w73", mirrorResistance},

	{"w20a", func(t *testing.T) float64 { return limiterCurrent(t, 0.6, 3) }},
	{"w20b", func(t *testing.T) float64 { return limiterCurrent(t, 0.7, 3) }},
	{"w21a", func(*testing.T) float64 { return driver.SenseResistance(0.7, 1.5, 0) }},
	{"w21b", func(*testing.T) float64 { return driver.SenseResistance(0.7, 0.7, 0) }},

	// A derating of so many watts a kelvin ends at nothing: 80 W at 0.5 W/K is
	// 160 K above 25 °C.
	{"w33", func(*testing.T) float64 { return heat.Derated(80, 25, 25+80/0.5, 125) }},
	{"w34", func(*testing.T) float64 { return heat.PowerAllowed(200, 40, 0.5+0.6+1.5) }},
	{"w35", func(*testing.T) float64 { return heat.Derated(0.625, 25, 25+0.625/5e-3, 50) }},
	{"w36", func(*testing.T) float64 { return heat.Derated(1, 25, 25+1/5e-3, 70) }},
	{"w37a", func(*testing.T) float64 { return heat.PowerAllowed(150, 30, 1.75+50) }},
	{"w37b", func(*testing.T) float64 { return heat.PowerAllowed(150, 30, 1.75+1+5) }},
	{"w38", func(*testing.T) float64 { return heat.PowerAllowed(175, 25, (175-25)/20.0+1+5) }},
	{"w39a", func(*testing.T) float64 { return heat.PowerAllowed(150, 50, 60) }},
	{"w39b", func(*testing.T) float64 {
		return heat.JunctionTemperature(50, heat.PowerAllowed(150, 50, 60), 60-3)
	}},
	{"w39c", func(*testing.T) float64 { return heat.PowerAllowed(150, 50, 60) / (8 - 5) }},
	{"w40", func(*testing.T) float64 { return heat.SinkResistance(125, 60, 0.8*(12-5), 5+0.6) }},
	{"w41", func(*testing.T) float64 { return heat.SinkResistance(125, 40, 2.92, 2.5+2.0) }},
	{"w42", func(*testing.T) float64 { return heat.SinkResistance(140, 40, 9.8, 2.1) }},
	{"w50", func(*testing.T) float64 { return heat.Derated(0.4, 50, 50+0.4/3.2e-3, 90) }},

	{"w57a", func(*testing.T) float64 { return feeder{metres: 200, perMetre: 2, ohms: 0.3e-3}.drop(200) }},
	{"w58", func(*testing.T) float64 {
		oneSquareMillimetre := 2 * 1.78e-8 / 1e-6
		f := feeder{metres: 250, ohms: oneSquareMillimetre, taps: map[int]float64{40: 30, 100: 40, 150: 100, 250: 50}}
		return f.drop(250) / 10 * 1e-6
	}},
	{"w60a", func(*testing.T) float64 { return 250 - mixedFeeder.drop(500) }},
	{"w60b", func(*testing.T) float64 { return 250 - mixedFeeder.drop(150) }},
	{"w61", func(*testing.T) float64 { return wiring.ResistanceAt(100, 0, 70, 0.0043) }},
	{"w62", func(*testing.T) float64 { return wiring.ResistanceAt(10, 20, 100, 0.004) }},
	{"w63", func(*testing.T) float64 {
		atZero := 200 / wiring.ResistanceAt(1, 0, 20, 0.004)
		return wiring.ResistanceAt(atZero, 0, 90, 0.004)
	}},
	{"w64", func(*testing.T) float64 {
		atZero := 250 / wiring.ResistanceAt(1, 0, 15, 0.00428)
		return wiring.ResistanceAt(atZero, 0, 45, 0.00428)
	}},
	{"w66", func(*testing.T) float64 { c := wiring.AWG(18); return c.At(75) }},
	{"w69a", func(*testing.T) float64 { return batteryVolts(2, 0.02, 5) }},
	{"w69b", func(*testing.T) float64 { return batteryVolts(2, 0.02, 50) }},

	{"w70a", func(t *testing.T) float64 { return checkedSeries(t, 9, ledSpread{}, 39, 0.1).Current.Max }},
	{"w70b", func(t *testing.T) float64 { return checkedSeries(t, 9, ledSpread{}, 39, 0.1).Current.Min }},
	{"w71", func(t *testing.T) float64 {
		return deviceIn(t, checkedSeries(t, 28, ledSpread{}, 28/0.1, 0), "resistor").Power.Typ
	}},
	{"w72", func(*testing.T) float64 {
		led := device.LEDFromPoint(3.0, 0.3)
		led.Tempco = -3e-3
		return led.Voltage(0.3, 125)
	}},
	{"w75", func(*testing.T) float64 { return device.ThermalVoltage(27) }},
}

// later are the examples that ask for what no code of ours computes.
var later = map[string]string{
	"LM317 current source": "regulators", "LM317 voltage set": "regulators", "LM317 dissipation": "regulators",
	"fixed regulator as current source": "regulators", "op-amp / reference current source": "op-amp sinks",
	"op-amp / reference current source with PNP booster": "op-amp sinks", "pass transistor": "regulators",
	"wire resistance and drop":           "conductors stand in standard tables, not as resistivity",
	"uniformly loaded feeder, both ends": "runs form a tree", "feeder fed at both ends": "runs form a tree",
	"battery run time": "run time", "fuse sizing": "fuses",
}

// laterRows are single rows of topics that are computed otherwise.
var laterRows = map[string]string{"w65": "no temperature is found from a resistance"}

func TestPublishedExamples(t *testing.T) {
	byID := map[string]func(*testing.T) float64{}
	for _, e := range examples {
		if byID[e.id] != nil {
			t.Errorf("%s stands twice", e.id)
		}
		byID[e.id] = e.got
	}
	for _, row := range table(t, "published/worked_examples.csv") {
		id := row["id"]
		t.Run(id+" "+row["topic"], func(t *testing.T) {
			got := byID[id]
			delete(byID, id)
			why := later[row["topic"]] + laterRows[id]
			switch {
			case got == nil && why == "":
				t.Fatalf("%s (%s) is neither computed nor left out for a reason", id, row["source"])
			case got == nil:
				t.Skip(why)
			case why != "":
				t.Fatalf("%s is computed and left out", id)
			}
			unit := perUnit[row["unit"]]
			if unit == 0 {
				t.Fatalf("unit %q", row["unit"])
			}
			name := row["source"] + ": " + row["asked"] + " [" + row["unit"] + "]"
			near(t, name, got(t)/unit, number(t, row["published"]), number(t, row["tolerance"]))
		})
	}
	for id := range byID {
		t.Errorf("%s is not in the table", id)
	}
}

// Thermal voltages computed independently of this project.
func TestThermalVoltageAgreesWithTable(t *testing.T) {
	count := 0
	for _, row := range table(t, "published/constants.csv") {
		if row["symbol"] != "Vt" {
			continue
		}
		celsius, ok := celsiusIn(t, row["name"])
		if !ok {
			continue
		}
		count++
		near(t, row["name"], device.ThermalVoltage(celsius)*1e3, number(t, row["value"]), 1e-6)
	}
	if count != 11 {
		t.Errorf("%d thermal voltages, want 11", count)
	}
}

// The forward voltage falls and the power with it: 0.90 W cold, 0.81 W hot.
//
// Source: khanna, eq. 14.1-14.3.
func TestHotLEDTakesLessPower(t *testing.T) {
	led := device.LEDFromPoint(3.0, 0.3)
	led.Tempco = -3e-3
	near(t, "cold", 0.3*led.Voltage(0.3, 25), 0.90, 0.005)
	near(t, "hot", 0.3*led.Voltage(0.3, 125), 0.81, 0.005)
}

// The flux of a lamp of so many candela and degrees.
func TestFluxOfIntensityAgreesWithTable(t *testing.T) {
	count := 0
	for _, row := range table(t, "published/photometry.csv") {
		angle, ok := strings.CutPrefix(row["id"], "ph05_")
		if !ok {
			continue
		}
		count++
		near(t, row["inputs"], light.FluxOfIntensity(1, number(t, angle)), number(t, row["answer"]), number(t, row["tolerance"]))
	}
	if count != 3 {
		t.Errorf("%d rows, want 3", count)
	}
}
