package calc

import (
	"fmt"
	"math"

	"lanternbook/calc/quantity"
)

// Suggestion is the setting that gives a string the current or light wanted.
type Suggestion struct {
	At      string   // JSON Pointer of the resistor's ohms
	Exact   float64  // [Ω]
	Unit    string   // "Ω"
	Choices []Choice // preferred values next to Exact, with what each gives

	// ControlAt is the JSON Pointer of the control voltage that gives the same
	// with the resistor as it is; empty where the driver has none.
	ControlAt    string
	ControlVolts float64 // [V]
}

// Choice is a preferred value and what it gives.
type Choice struct {
	Value    float64  // [Ω]
	Series   string   // "E24" or "E96"
	Current  float64  // [A] typical
	Flux     *float64 // [lm] of the string; nil when not known
	Headroom float64  // [V] left over typically
}

const (
	// leastSense and mostSense are the resistors in ohms between which a
	// setting is looked for.
	leastSense, mostSense = 1e-2, 1e7
	// closeEnough is the share by which a setting found may miss.
	closeEnough = 1e-6
)

// Suggest finds the sense (or series) resistor, and where there is one the
// control voltage, with which string i gives the current or light it is wanted
// to. A wanted current is met at the typical point. Without a wish, or where
// no setting reaches it, it returns a Suggestion without choices.
func Suggest(b Build, i int) (Suggestion, error) {
	if i < 0 || i >= len(b.Strings) || b.Strings[i].Wanted == nil {
		return Suggestion{}, nil
	}
	p, err := compile(&b)
	if err != nil {
		return Suggestion{}, err
	}
	for _, l := range p.strings {
		l.turned = make([]float64, len(l.Knobs))
	}
	inside, err := p.operate(b.Supply.Voltage.Typ, b.Ambient.Typ)
	if err != nil {
		return Suggestion{}, err
	}
	l := p.strings[i]
	if l.SenseAt < 0 {
		return Suggestion{}, nil
	}
	t := tuner{l: l, at: corner{volts: l.Net.Voltage(l.Feed) + l.path*l.Draw(), ohms: l.path, ambient: b.Ambient.Typ, inside: inside}}
	if l.rail != nil {
		t.at.rail = l.rail.volts
	}
	w := b.Strings[i].Wanted
	t.light = w.Current == nil
	if t.light {
		t.want = *w.LuminousFlux
	} else {
		t.want = *w.Current
	}
	role := l.Devices[l.SenseAt].Role
	s := Suggestion{At: l.pointer("/driver" + resistorPath(role) + "/ohms"), Unit: "Ω"}
	if exact, ok := t.find(leastSense, mostSense, t.setOhms); ok {
		s.Exact = exact
		seen := map[float64]bool{}
		for _, series := range []string{"E24", "E96"} {
			below, above := quantity.Nearest(series, exact)
			for _, v := range []float64{below, above} {
				if !seen[v] && !math.IsNaN(v) {
					seen[v] = true
					if c, ok := t.choice(v, series); ok {
						s.Choices = append(s.Choices, c)
					}
				}
			}
		}
	}
	t.setOhms(l.spec.resistor(role).Ohms)
	if c := l.spec.control(); c != nil && c.Volts != nil {
		most := b.Supply.Voltage.Typ
		if v, ok := t.find(1e-3, most, func(v float64) { l.Net.Hold(l.Source, v) }); ok {
			s.ControlAt, s.ControlVolts = l.pointer("/driver/control/volts"), v
		}
	}
	return s, nil
}

// control is the string's own control, nil where its driver has none.
func (s *String) control() *Control {
	switch {
	case s.Driver.FollowerSink != nil:
		return &s.Driver.FollowerSink.Control
	case s.Driver.OpampSink != nil:
		return &s.Driver.OpampSink.Control
	}
	return nil
}

// tuner turns one setting until the string gives what is wanted.
type tuner struct {
	l     *line
	at    corner
	want  float64
	light bool
}

func (t *tuner) setOhms(v float64) { t.l.SetSense(v) }

// gives returns the string's current or light at the setting it stands at.
func (t *tuner) gives() (float64, bool) {
	if err := t.l.solveAt(t.at); err != nil {
		return 0, false
	}
	if t.light {
		v := t.l.flux()
		return v, !math.IsNaN(v)
	}
	return t.l.Net.LEDCurrent(t.l.Stack), true
}

// find halves the logarithm of the setting until it gives what is wanted. The
// answer goes one way with the setting; from which end is seen first.
func (t *tuner) find(low, high float64, set func(float64)) (float64, bool) {
	end := func(v float64) (float64, bool) { set(v); return t.gives() }
	atHigh, okHigh := end(high)
	if !okHigh && t.light {
		// Above the last point of a flux curve nothing is known: that is more
		// light than wanted, not less.
		atHigh, okHigh = math.Inf(1), true
	}
	atLow, okLow := end(low)
	if !okLow {
		atLow = math.Inf(1)
	}
	if !okHigh || (atLow-t.want)*(atHigh-t.want) > 0 {
		return 0, false
	}
	rises := atHigh > atLow
	for range 60 {
		mid := math.Sqrt(low * high)
		v, ok := end(mid)
		if !ok {
			v = math.Inf(1)
		}
		if math.Abs(v-t.want) < closeEnough*t.want {
			return mid, true
		}
		if (v < t.want) == rises {
			low = mid
		} else {
			high = mid
		}
	}
	mid := math.Sqrt(low * high)
	v, ok := end(mid)
	return mid, ok && math.Abs(v-t.want) < 1e-2*t.want
}

func (t *tuner) choice(ohms float64, series string) (Choice, bool) {
	t.setOhms(ohms)
	if err := t.l.solveAt(t.at); err != nil {
		return Choice{}, false
	}
	c := Choice{Value: ohms, Series: series, Current: t.l.Net.LEDCurrent(t.l.Stack)}
	if flux := t.l.flux(); !math.IsNaN(flux) {
		c.Flux = &flux
	}
	left, err := t.l.headroom(t.at.volts, t.at.ohms)
	c.Headroom = left.headroom
	return c, err == nil
}

// String names a choice: "16 Ω gives 38.1 mA".
func (c Choice) String() string {
	return fmt.Sprintf("%s gives %s", quantity.Text(c.Value, "Ω"), amps(c.Current))
}
