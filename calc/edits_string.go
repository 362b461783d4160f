package calc

import (
	"fmt"
	"math"

	"lanternbook/calc/quantity"
)

// largestResistor is the most in ohms that an edit fits, as the reader takes
// it.
const largestResistor = 1e9

// fewer takes LEDs away one at a time from the largest stack.
func (l *line) fewer() []attempt {
	k := l.largest()
	stack := l.spec.LEDs[k]
	var out []attempt
	for n := stack.Quantity - 1; n >= 1; n-- {
		out = append(out, l.ledCount(k, n, l.leds1(stack.Quantity-n)+" fewer"))
	}
	return out
}

// more adds one LED to the largest stack.
func (l *line) more() []attempt {
	k := l.largest()
	return []attempt{l.ledCount(k, l.spec.LEDs[k].Quantity+1, "one LED more")}
}

func (l *line) leds1(n int) string {
	if n == 1 {
		return "one LED"
	}
	return fmt.Sprintf("%d LEDs", n)
}

func (l *line) largest() int {
	k := 0
	for j := range l.spec.LEDs {
		if l.spec.LEDs[j].Quantity >= l.spec.LEDs[k].Quantity {
			k = j
		}
	}
	return k
}

func (l *line) ledCount(k, n int, text string) attempt {
	return attempt{
		text:  fmt.Sprintf("%s: %d × %s", text, n, l.build.nameOf(l.spec.LEDs[k].Part)),
		patch: []Operation{replace(l.pointer(fmt.Sprintf("/leds/%d/quantity", k)), n)},
		apply: func(b *Build) { b.Strings[l.index].LEDs[k].Quantity = n },
	}
}

// fewerAtSameCurrent takes one LED away and gives its volts to the resistor.
func (l *line) fewerAtSameCurrent() []attempt {
	k := l.largest()
	n := l.spec.LEDs[k].Quantity - 1
	current := l.Net.LEDCurrent(l.Stack)
	if w := l.spec.Wanted; w != nil && w.Current != nil {
		current = *w.Current
	}
	if n < 1 || !(current > 0) {
		return nil
	}
	volts := 0.0
	for j, led := range l.LEDs {
		count := float64(led.Count)
		if led.Part == l.spec.LEDs[k].Part {
			count--
		}
		volts += count * l.Net.LEDVoltageAt(l.Stack, j, current)
	}
	_, ohms := quantity.Nearest("E24", (l.Net.Voltage(l.Feed)-volts)/current)
	if !(ohms > 0 && ohms <= largestResistor) {
		return nil
	}
	a := l.ledCount(k, n, "one LED fewer")
	a.text += " with " + ohmic(ohms)
	a.patch = append(a.patch, replace(l.pointer("/driver/resistor/ohms"), ohms))
	fewer := a.apply
	a.apply = func(b *Build) {
		fewer(b)
		b.Strings[l.index].Driver.Resistor.Resistor.Ohms = ohms
	}
	return []attempt{a}
}

// setSense is the edit that fits another sense (or series) resistor.
func (l *line) setSense(ohms float64, text string) attempt {
	role := l.Devices[l.SenseAt].Role
	return attempt{
		text:  text,
		patch: []Operation{replace(l.pointer("/driver"+resistorPath(role)+"/ohms"), ohms)},
		apply: func(b *Build) { b.Strings[l.index].resistor(role).Ohms = ohms },
	}
}

// senseUp fits larger sense (or series) resistors of E24 in turn.
func (l *line) senseUp() []attempt {
	if l.SenseAt < 0 {
		return nil
	}
	role := l.Devices[l.SenseAt].Role
	ohms := l.spec.resistor(role).Ohms
	var out []attempt
	for range mostTries {
		_, ohms = quantity.Nearest("E24", ohms*1.01)
		if math.IsNaN(ohms) || ohms > largestResistor {
			break
		}
		out = append(out, l.setSense(ohms, roleWords(role)+" "+ohmic(ohms)))
	}
	return out
}

func roleWords(role string) string {
	switch role {
	case "resistor":
		return "series resistor"
	case "sense_resistor":
		return "sense resistor"
	}
	return role
}

// controlDown lowers the control voltage by steps of a tenth.
func (l *line) controlDown() []attempt {
	f := l.spec.Driver.FollowerSink
	if f == nil || f.Control.Volts == nil {
		return nil
	}
	var out []attempt
	for share := 0.9; share > 0.45; share -= 0.1 {
		out = append(out, l.setControl(scaled(*f.Control.Volts, share), "control "))
	}
	return out
}

func (l *line) setControl(v Spread, text string) attempt {
	return attempt{
		text:  text + volts(v.Typ),
		patch: []Operation{replace(l.pointer("/driver/control/volts"), v)},
		apply: func(b *Build) { b.Strings[l.index].Driver.FollowerSink.Control.Volts = &v },
	}
}

// lowerSense lets the sense resistor take fewer volts at the same current.
func (l *line) lowerSense() []attempt {
	f := l.spec.Driver.FollowerSink
	if f == nil || f.Control.Volts == nil {
		return nil
	}
	var out []attempt
	for _, share := range []float64{0.7, 0.5, 0.35, 0.25} {
		ohms, _ := quantity.Nearest("E24", f.Sense.Ohms*share)
		if math.IsNaN(ohms) {
			break
		}
		a := l.setControl(scaled(*f.Control.Volts, ohms/f.Sense.Ohms), "control ")
		sense := l.setSense(ohms, "")
		control := a.apply
		a.text += " with sense " + ohmic(ohms)
		a.patch = append(a.patch, sense.patch...)
		a.apply = func(b *Build) { control(b); sense.apply(b) }
		out = append(out, a)
	}
	return out
}

// scaled multiplies a spread, rounded to what can be set.
func scaled(s Spread, by float64) Spread {
	round := func(v float64) float64 {
		step := math.Pow(10, math.Floor(math.Log10(math.Max(math.Abs(v), 1e-9)))-2)
		return math.Round(v*by/step) * step
	}
	tidy := func(v float64) float64 { return math.Round(round(v)*1e9) / 1e9 }
	return Spread{Min: tidy(s.Min), Typ: tidy(s.Typ), Max: tidy(s.Max), Bare: s.Bare}
}

// moreWatts takes the next standard ratings of the resistor at fault.
func (l *line) moreWatts(f *Finding) []attempt {
	var out []attempt
	for _, d := range l.Devices {
		if !d.IsResistor() || l.pointer("/driver"+resistorPath(d.Role)) != f.At {
			continue
		}
		for _, w := range standardWatts {
			if f.Limit != nil && w > *f.Limit {
				out = append(out, attempt{
					text:  quantity.Text(w, "W") + " resistor",
					patch: []Operation{replace(f.At+"/watts", w)},
					apply: func(b *Build) { b.Strings[l.index].resistor(d.Role).Watts = &w },
				})
			}
		}
	}
	return out
}

// moreDrive lowers bias or pull-up along E24.
func (l *line) moreDrive() []attempt {
	k := l.driveResistor()
	if k < 0 {
		return nil
	}
	role := l.Devices[k].Role
	ohms := l.spec.resistor(role).Ohms
	name := "bias "
	if role == "pullup_resistor" {
		name = "pull-up "
	}
	var out []attempt
	for _, share := range []float64{1.2, 1.5, 2, 3, 5, 8, 12, 20} {
		to, _ := quantity.Nearest("E24", ohms/share)
		if math.IsNaN(to) {
			break
		}
		out = append(out, attempt{
			text:  name + ohmic(to),
			patch: []Operation{replace(l.pointer("/driver"+resistorPath(role)+"/ohms"), to)},
			apply: func(b *Build) { b.Strings[l.index].resistor(role).Ohms = to },
		})
	}
	return out
}

// asWanted fits the E24 resistor nearest to what is wanted.
func (p *plant) asWanted(l *line) []attempt {
	s, err := Suggest(*p.build, l.index)
	if err != nil || len(s.Choices) == 0 {
		return nil
	}
	var want float64
	w := l.spec.Wanted
	best, off := -1, math.Inf(1)
	for k, c := range s.Choices {
		got := c.Current
		if w.Current != nil {
			want = *w.Current
		} else {
			want = *w.LuminousFlux
			if c.Flux == nil {
				continue
			}
			got = *c.Flux
		}
		if d := math.Abs(got - want); c.Series == "E24" && d < off {
			best, off = k, d
		}
	}
	if best < 0 {
		return nil
	}
	c := s.Choices[best]
	return []attempt{l.setSense(c.Value, roleWords(l.Devices[l.SenseAt].Role)+" "+ohmic(c.Value))}
}
