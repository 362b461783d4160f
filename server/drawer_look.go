package main

import (
	"encoding/json"
	"fmt"
	"math"
	"net/http"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
	"lanternbook/web"
)

// lookAtNewPart: POST /drawer/new, sent while somebody types. It answers with
// what the figures amount to and keeps nothing.
func (s *server) lookAtNewPart(w http.ResponseWriter, r *http.Request) error {
	form, base, err := s.sentPart(r)
	if err != nil {
		return err
	}
	form.document(base)
	typed := strings.TrimSpace(r.PostFormValue("key"))
	if reason := keyFault(typed); reason != "" {
		form.faults["key"] = reason
	}
	form.forgiveEmpty()
	key := keyField(form, typed)
	groups := form.groups()
	groups[0].Fields = append(groups[0].Fields, *key)
	return render(w, r, http.StatusOK, web.PartLook(lookAt(form, base), groups, key))
}

// lookAtPart: POST /drawer/{key}/look, the same for a part in the drawer.
func (s *server) lookAtPart(w http.ResponseWriter, r *http.Request) error {
	part, err := s.store.Part(r.Context(), partKey(r))
	if err != nil {
		return err
	}
	if err = r.ParseForm(); err != nil {
		return err
	}
	was, err := readMembers(part.Document)
	if err != nil {
		return fmt.Errorf("part %q: %w", part.Key, err)
	}
	form := typedForm(part.Type, r.PostForm)
	form.document(was)
	form.forgiveEmpty()
	return render(w, r, http.StatusOK, web.PartLook(lookAt(form, was), form.groups(), nil))
}

// forgiveEmpty takes back what is said of fields that nobody has filled yet:
// while somebody still types, they are not wrong.
func (f *partForm) forgiveEmpty() {
	for path := range f.faults {
		if strings.TrimSpace(f.typed[path]) == "" && path != "key" {
			delete(f.faults, path)
		}
	}
}

// lookAt shows what a form amounts to. Figures that cannot be read are left
// out; what the others say is shown all the same.
func lookAt(form partForm, was members) web.LookView {
	part, ok := form.readable(was)
	v := web.LookView{}
	if pins := strings.TrimSpace(form.typed["pins"]); pins != "" {
		v.Pins = pinsOf(pins)
	}
	if form.typ == calc.TypeLED {
		v.Swatch = lightOf(form.words())
	}
	if !ok {
		v.Nothing = nothingYet(form.typ)
		return v
	}
	switch {
	case part.LED != nil:
		v.Curves, v.Facts = lookAtLED(*part.LED)
	case part.Transistor != nil:
		v.Curves, v.Facts = lookAtTransistor(*part.Transistor)
	case len(v.Pins) == 0:
		v.Nothing = "There is nothing to draw of this kind of part."
	}
	return v
}

func nothingYet(typ string) string {
	if typ == calc.TypeLED {
		return "With the test current and the forward voltage its curve is drawn here."
	}
	return "Something typed cannot be read yet; see beside the field."
}

// readable is the part made of those fields that can be read.
func (f partForm) readable(was members) (calc.Part, bool) {
	sound := partForm{typ: f.typ, typed: map[string]string{}, faults: map[string]string{}}
	for path, typed := range f.typed {
		if f.faults[path] == "" {
			sound.typed[path] = typed
		}
	}
	document := sound.document(was)
	part, err := calc.ReadPart(document)
	return part, err == nil
}

// words is the members of an LED that say how it shines, as a document.
func (f partForm) words() []byte {
	m := members{}
	figures := figuresByPath(f.typ)
	for _, path := range []string{"colour", "wavelength", "cct"} {
		if value, err := figures[path].value(f.typed[path]); err == nil {
			m = m.set(path, value)
		}
	}
	typ, _ := json.Marshal(f.typ) // a string: cannot fail
	document, _ := m.set("type", typ).MarshalJSON()
	return document
}

// pinsOf cuts an order of pins such as "C-B-E" or "E, B, C".
func pinsOf(text string) []string {
	return strings.FieldsFunc(text, func(r rune) bool { return strings.ContainsRune("-–, /", r) })
}

const (
	curvePoints = 61   // of a curve
	overTest    = 1.5  // [1] times the test current to where a curve goes that has no greatest current
	past        = 1.15 // [1] times the greatest current to where it goes else
	lookVCE     = 5.0  // [V] at which VBE is shown
	leastShown  = 1e-5 // [A] collector current where that curve begins
	mostShown   = 0.1  // [A] where it ends when the part does not say its greatest
)

// lookAtLED is an LED's voltage against its current.
func lookAtLED(led calc.LED) ([]web.CurveView, []web.FactView) {
	most := overTest * led.TestCurrent
	if led.MaxCurrent != nil {
		most = past * math.Max(*led.MaxCurrent, led.TestCurrent)
	}
	currents := make([]float64, curvePoints)
	for i := range currents {
		// Closer together at the foot, where the curve bends.
		share := float64(i) / (curvePoints - 1)
		currents[i] = most * share * share
	}
	volts, assumed := calc.LEDCurve(led, currents)
	scale, name := ampsScale(most)
	c := web.Curve{
		Title: "Volts against current, 25 °C", XName: name, YName: "V",
		Dots: [][2]float64{{led.TestCurrent * scale, led.ForwardVoltage.Typ}}, DotVoice: "typical at the test current",
	}
	for i, v := range volts {
		if currents[i] < most*1e-3 {
			continue // falls away to nothing: not drawn
		}
		c.X, c.Y = append(c.X, currents[i]*scale), append(c.Y, v)
		c.Low = append(c.Low, v+led.ForwardVoltage.Min-led.ForwardVoltage.Typ)
		c.High = append(c.High, v+led.ForwardVoltage.Max-led.ForwardVoltage.Typ)
	}
	for _, p := range led.Points {
		c.Points = append(c.Points, [2]float64{p[0] * scale, p[1]})
	}
	if led.MaxCurrent != nil {
		c.Most, c.MostWords = *led.MaxCurrent*scale, quantity.Text(*led.MaxCurrent, quantity.Amp)+" at most"
	}
	c.Voice = fmt.Sprintf("Forward voltage against current: %s at %s.",
		quantity.Text(led.ForwardVoltage.Typ, quantity.Volt), quantity.Text(led.TestCurrent, quantity.Amp))
	curves := drawn(c)
	if flux, ok := fluxCurve(led); ok {
		curves = append(curves, drawn(flux)...)
	}
	return curves, ledFacts(led, assumed)
}

// fluxCurve is the LED's light against its current, by the datasheet's own
// points.
func fluxCurve(led calc.LED) (web.Curve, bool) {
	if len(led.FluxCurve) < 2 {
		return web.Curve{}, false
	}
	scale, name := ampsScale(led.FluxCurve[len(led.FluxCurve)-1][0] * led.TestCurrent)
	c := web.Curve{
		Title: "Light against current", XName: name, YName: "%", FromZero: true,
		Voice: "Flux as a share of that at the test current, against current.",
		Dots:  [][2]float64{{led.TestCurrent * scale, 100}}, DotVoice: "at the test current",
	}
	if led.FluxCurve[0][0] > 0 {
		c.X, c.Y = []float64{0}, []float64{0}
	}
	for _, p := range led.FluxCurve {
		c.X, c.Y = append(c.X, p[0]*led.TestCurrent*scale), append(c.Y, p[1]*100)
	}
	if led.MaxCurrent != nil {
		c.Most, c.MostWords = *led.MaxCurrent*scale, quantity.Text(*led.MaxCurrent, quantity.Amp)+" at most"
	}
	return c, true
}

func ledFacts(led calc.LED, assumed string) []web.FactView {
	power := led.TestCurrent * led.ForwardVoltage.Typ
	facts := []web.FactView{{Name: "at the test current it takes", Text: quantity.Format(power, quantity.Watt, 3)}}
	if led.LuminousFlux != nil {
		facts = append(facts, web.FactView{Name: "light for that", Text: quantity.Format(*led.LuminousFlux/power, "lm/W", 3)})
	}
	if assumed != "" {
		facts = append(facts, web.FactView{Name: "assumed", Text: assumed})
	}
	return facts
}

// lookAtTransistor is a transistor's VBE against its collector current.
func lookAtTransistor(q calc.Transistor) ([]web.CurveView, []web.FactView) {
	most := mostShown
	if q.MaxCollectorCurrent != nil {
		most = math.Max(*q.MaxCollectorCurrent, 10*leastShown)
	}
	currents := make([]float64, curvePoints)
	for i := range currents {
		currents[i] = leastShown * math.Pow(most/leastShown, float64(i)/(curvePoints-1))
	}
	volts, assumed := calc.VBECurve(q, currents, lookVCE)
	c := web.Curve{Title: "VBE against collector current, 25 °C", XName: "mA", YName: "V", LogX: true}
	for i, v := range volts {
		c.X, c.Y = append(c.X, currents[i]*1e3), append(c.Y, v)
		if q.VBEOn != nil {
			c.Low = append(c.Low, v+q.VBEOn.Volts.Min-q.VBEOn.Volts.Typ)
			c.High = append(c.High, v+q.VBEOn.Volts.Max-q.VBEOn.Volts.Typ)
		}
	}
	if q.VBEOn != nil && q.VBEOn.At >= leastShown && q.VBEOn.At <= most {
		c.Dots, c.DotVoice = [][2]float64{{q.VBEOn.At * 1e3, q.VBEOn.Volts.Typ}}, "typical, by the datasheet"
	}
	middle := math.Sqrt(leastShown * most)
	at, _ := calc.VBECurve(q, []float64{middle}, lookVCE)
	c.Voice = fmt.Sprintf("Base-emitter voltage against collector current: %s at %s.",
		quantity.Format(at[0], quantity.Volt, 3), quantity.Format(middle, quantity.Amp, 2))
	var facts []web.FactView
	if len(assumed) > 0 {
		facts = append(facts, web.FactView{Name: "assumed", Text: strings.Join(assumed, ", ")})
	}
	return drawn(c), facts
}

// drawn is a curve as a list; an empty one when there is nothing to draw.
func drawn(c web.Curve) []web.CurveView {
	v, ok := web.NewCurve(c)
	if !ok {
		return nil
	}
	return []web.CurveView{v}
}

// ampsScale is how many of the named unit make an ampere, for currents up to
// most amperes.
func ampsScale(most float64) (scale float64, name string) {
	switch {
	case most < 1e-3:
		return 1e6, "µA"
	case most < 1:
		return 1e3, "mA"
	}
	return 1, "A"
}
