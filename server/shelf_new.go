package main

import (
	"cmp"
	"encoding/json"
	"math"
	"slices"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/store"
	"lanternbook/web"
)

// What a new build starts from.
const (
	startVolts   = 12.0 // [V]
	startLow     = 11.4 // [V] 5 % less
	startHigh    = 12.6 // [V] 5 % more
	startLEDs    = 3    //
	startCurrent = 0.02 // [A] or what the LED is rated for, if that is less
	startBias    = 10e3 // [Ω]
	startWatts   = 0.25 // [W] of both resistors
	usualVBE     = 0.65 // [V] where the transistor does not say. Common practice, no source
	startNeed    = 1.3  // [V] that the driver needs below the LEDs: two junctions
	startRating  = 0.8  // [1] of the LED's greatest current that is not exceeded
	startAmps    = 1.0  // [A] that the supply can give
	leastRating  = 2.0  // [1] times supply and current that the transistor must stand
	startLowest  = 5.0  // [°C]
	startUsual   = 25.0 // [°C]
	startHighest = 40.0 // [°C]
)

// The parts that stand in where the drawer has none that fit.
const (
	spareLEDKey = "generic-white-led"
	spareLED    = `{"type": "led", "name": "White LED, generic",
		"notes": "Typical values of a small white LED, common practice, no source. Replace it by the one you have.",
		"cct": 4000, "test_current": 0.02, "forward_voltage": {"min": 2.8, "typ": 3.1, "max": 3.4},
		"voltage_tempco": -0.003, "max_current": 0.025}`
	spareNPNKey = "generic-npn"
	spareNPN    = `{"type": "npn", "name": "Small NPN transistor, generic",
		"notes": "Typical values of a small silicon transistor, common practice, no source. Replace it by the one you have.",
		"max_collector_emitter_voltage": 40, "max_collector_current": 0.1, "max_power": 0.5, "max_junction": 150,
		"rth_junction_ambient": 250, "hfe": {"min": 100, "typ": 200, "max": 450}, "hfe_at": 0.002,
		"vbe_on": {"volts": {"min": 0.58, "typ": 0.65, "max": 0.72}, "at": 0.002}}`
)

// newBuild returns the document that a new build starts from: a supply of 12 V
// with 5 % either way, and one string of three LEDs with a two-transistor sink.
// Its parts are those of the drawer that fit best, or generic ones.
func newBuild(drawer []store.Part) []byte {
	led := pick(drawer, spareLEDKey, spareLED, ledMerit)
	npn := pick(drawer, spareNPNKey, spareNPN, npnMerit)
	current := startCurrentOf(led.part.LED)
	sense := senseFor(npn.part.Transistor, current)
	document, err := json.MarshalIndent(newDocument{
		Format: calc.BuildFormat, Title: "New build",
		Ambient: limits{startLowest, startUsual, startHighest},
		Supply:  newSupply{Label: "12 V supply", Voltage: limits{startLow, startVolts, startHigh}, MaxCurrent: startAmps},
		Strings: []newString{{
			Label: "A", Quantity: 1, LEDs: []cardStack{{Part: led.key, Quantity: startLEDs}},
			Driver: calc.TwoTransistor{
				Kind: calc.KindTwoTransistor, Pass: npn.key, Sensor: npn.key,
				Bias: startResistor(startBias, 0.05), Sense: startResistor(sense, 0.01),
			},
		}},
		Parts: map[string]json.RawMessage{led.key: led.document, npn.key: npn.document},
	}, "", "  ")
	if err != nil {
		panic(err) // numbers and JSON that was read before: a slip of ours
	}
	return document
}

// newDocument is a build's document as newBuild writes it: in the order in
// which a person reads it, with the parts exactly as they lie in the drawer.
type newDocument struct {
	Format  string                     `json:"format"`
	Title   string                     `json:"title"`
	Ambient limits                     `json:"ambient"` // [°C]
	Supply  newSupply                  `json:"supply"`
	Strings []newString                `json:"strings"`
	Parts   map[string]json.RawMessage `json:"parts"`
}

type limits struct {
	Min float64 `json:"min"` // in the unit of the field
	Typ float64 `json:"typ"` // in the unit of the field
	Max float64 `json:"max"` // in the unit of the field
}

type newSupply struct {
	Label      string  `json:"label"`
	Voltage    limits  `json:"voltage"`     // [V]
	MaxCurrent float64 `json:"max_current"` // [A]
}

type newString struct {
	Label    string             `json:"label"`
	Quantity int                `json:"quantity"`
	LEDs     []cardStack        `json:"leds"`
	Driver   calc.TwoTransistor `json:"driver"`
}

// startResistor is a quarter-watt resistor of so many ohms.
func startResistor(ohms, tolerance float64) calc.Resistor {
	watts := startWatts
	return calc.Resistor{Ohms: ohms, Tolerance: tolerance, Watts: &watts}
}

// candidate is a part that a new build may start with.
type candidate struct {
	key      string
	document json.RawMessage
	part     calc.Part
	merit    int
}

// pick returns the part of the drawer with the most merit, the first by key of
// several; without any, the spare.
func pick(drawer []store.Part, spareKey, spare string, merit func(calc.Part) int) candidate {
	var best []candidate
	for _, p := range drawer {
		part, err := calc.ReadPart(p.Document)
		if err != nil {
			continue // one that no build could use either
		}
		if m := merit(part); m > 0 {
			best = append(best, candidate{p.Key, p.Document, part, m})
		}
	}
	if len(best) > 0 {
		return slices.MinFunc(best, func(a, b candidate) int {
			return cmp.Or(b.merit-a.merit, strings.Compare(a.key, b.key))
		})
	}
	part, err := calc.ReadPart([]byte(spare))
	if err != nil {
		panic(err) // a text of ours
	}
	return candidate{spareKey, json.RawMessage(spare), part, 0}
}

// ledMerit is 0 for a part of which three do not fit, more the more it says:
// white ones first, since most jobs are.
func ledMerit(p calc.Part) int {
	led := p.LED
	if led == nil || startLEDs*led.ForwardVoltage.Max+startNeed > startLow {
		return 0
	}
	return 1 + 8*count(strings.Contains(web.Emitted(*led).Word, "white")) +
		count(led.MaxCurrent != nil, led.MaxJunction != nil, led.RthJunctionAmbient != nil,
			led.Model != nil || len(led.Points) > 1, led.LuminousFlux != nil || led.LuminousIntensity != nil)
}

// npnMerit is 0 for a part that is no NPN or could not stand the job.
func npnMerit(p calc.Part) int {
	q := p.Transistor
	if q == nil || p.Type != calc.TypeNPN {
		return 0
	}
	if v := q.MaxCollectorEmitterVoltage; v != nil && *v < leastRating*startHigh {
		return 0
	}
	if i := q.MaxCollectorCurrent; i != nil && *i < leastRating*startCurrent {
		return 0
	}
	// Power types have little gain and heavy cases: small ones come first.
	return 1 + 8*count(q.MaxPower != nil && *q.MaxPower < 1) +
		count(q.MaxCollectorEmitterVoltage != nil, q.MaxCollectorCurrent != nil, q.MaxJunction != nil,
			q.RthJunctionAmbient != nil, q.HFE != nil, q.VBEOn != nil, q.Model != nil)
}

func count(facts ...bool) int {
	n := 0
	for _, fact := range facts {
		if fact {
			n++
		}
	}
	return n
}

// startCurrentOf is the current in amperes to start an LED with.
func startCurrentOf(led *calc.LED) float64 {
	current := math.Min(startCurrent, led.TestCurrent)
	if led.MaxCurrent != nil {
		current = math.Min(current, startRating**led.MaxCurrent)
	}
	return current
}

// senseFor is the sense resistor in ohms at which a two-transistor sink holds
// no more than current: VBE over current, up to the next value of E24.
func senseFor(sensor *calc.Transistor, current float64) float64 {
	vbe := usualVBE
	if sensor.VBEOn != nil {
		vbe = sensor.VBEOn.Volts.Typ
	}
	_, above := quantity.Nearest("E24", vbe/current)
	return above
}
