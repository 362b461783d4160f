package calc

import (
	"fmt"
	"math"
	"strings"
)

// Shares at which a check calls a pass tight. Common practice, no source.
const (
	tightRating   = 0.9 // of a rated current or voltage
	tightPower    = 0.8 // of a derated dissipation
	tightResistor = 0.6 // of a resistor's rating
	tightSwing    = 25  // [%] of the typical current
	widestSwing   = 60  // [%] beyond which a resistor holds nothing
	seenApart     = 0.10
	farApart      = 0.25
	ampleDrive    = 1.5  // times the base current needed
	keepsHolding  = 1e-3 // [A] through a reference
)

// checkString verifies one string.
func (b *book) checkString(l *line) {
	s := &b.r.Strings[l.index]
	b.checkRunaway(l)
	if l.spec.Driver.Kind == KindResistor {
		b.checkSwing(l, s)
	} else {
		b.checkHeadroom(l, s)
		b.checkDrive(l, s)
		b.checkBought(l, s)
	}
	b.checkWanted(l, s)
	b.checkHeat(l, s)
	for _, assumed := range l.assumed {
		part, what, _ := strings.Cut(assumed, ": ")
		b.add(Finding{
			Code: "part-data", Severity: Unknown, Where: l.where(), At: "/parts/" + escapePointer(part),
			Message: fmt.Sprintf("%s: assumed %s", b.p.build.nameOf(part), what),
			Working: "The part does not say; every figure of this string stands on the assumption.",
			Source:  sourcePractice,
		})
	}
}

func (b *book) checkRunaway(l *line) {
	err := l.runaway
	when := "with everything typical"
	if err == nil {
		err, when = l.worst.runaway, "in the worst case"
	}
	if err == nil {
		return
	}
	b.add(Finding{
		Code: runawayCode, Severity: Fail, Where: l.where(), At: l.pointer("/driver"),
		Message: "a part finds no stable temperature " + when + ": it heats until it fails",
		Working: "Tj = Tair + Rth · P(Tj) has no solution below 400 °C",
		Source:  "derivation from the thermal resistance",
	})
}

func (b *book) checkHeadroom(l *line, s *StringReport) {
	limit := b.p.limitHeadroom()
	left := s.Headroom.Min
	f := Finding{
		Code: "headroom", Where: l.where(), At: l.pointer("/leds"), Value: &left, Limit: &limit, Unit: "V", Least: true,
		Source: sourceEVA,
	}
	switch {
	case left < 0:
		f.Severity = Fail
		f.Message = fmt.Sprintf("%s short in the worst case; %s left over typically", volts(-left), volts(s.Headroom.Typ))
		if s.Headroom.Typ < 0 {
			f.Message = fmt.Sprintf("%s short in the worst case, %s typically: the string dims", volts(-left), volts(-s.Headroom.Typ))
		}
	case left < limit:
		f.Severity = Tight
		f.Message = fmt.Sprintf("%s left over in the worst case, less than the %s asked for", volts(left), volts(limit))
	default:
		f.Severity = Pass
		f.Message = fmt.Sprintf("%s left over in the worst case", volts(left))
	}
	c := &s.Columns.Cold
	leds := 0.0
	for _, led := range c.LEDs {
		leds += float64(led.Quantity) * led.Each
	}
	f.Working = fmt.Sprintf("supply − run − LEDs − driver = left over: %s − %s − %s − %s = %s (cold, low supply, every part at its worst; the driver's share is what it needs to hold 99 %% of its current)",
		volts(c.Supply), volts(c.Run), volts(leds), volts(c.Driver+c.Sense), volts(c.LeftOver))
	b.add(f)
}

// checkSwing judges a series resistor, which holds nothing, by how far the
// current goes from its typical value.
func (b *book) checkSwing(l *line, s *StringReport) {
	up := 100 * (s.Current.Max - s.Current.Typ) / s.Current.Typ
	down := 100 * (s.Current.Typ - s.Current.Min) / s.Current.Typ
	swing, limit := math.Max(up, down), float64(widestSwing)
	if !(s.Current.Typ > 0) {
		swing = 100
	}
	f := Finding{
		Code: "headroom", Where: l.where(), At: l.pointer("/leds"), Value: &swing, Limit: &limit, Unit: "%",
		Severity: atMost(swing, widestSwing, float64(tightSwing)/widestSwing),
		Message: fmt.Sprintf("%s typically, %s to %s over the corners; %s across the resistor",
			amps(s.Current.Typ), amps(s.Current.Min), amps(s.Current.Max), volts(s.Headroom.Typ)),
		Working: fmt.Sprintf("I = (V − Vf)/R; the current goes %s up and %s down from its typical value, since the resistor keeps only %s of %s",
			percent(up), percent(down), volts(s.Headroom.Typ), volts(s.Voltages.Feed)),
		Source: sourceEVA + "; limits " + sourcePractice,
	}
	b.add(f)
}

// intended is the current in amperes that the driver's own design equation
// gives, whether or not it is reached.
func (l *line) intended() float64 {
	const vbe = 0.65
	d := &l.spec.Driver
	switch {
	case d.FollowerSink != nil && d.FollowerSink.Control.Volts != nil:
		return d.FollowerSink.Control.Volts.Typ / d.FollowerSink.Sense.Ohms
	case d.ReferenceSink != nil:
		return math.Max(0, d.ReferenceSink.Reference.Volts.Typ-vbe) / d.ReferenceSink.Sense.Ohms
	case d.RailSink != nil:
		return math.Max(0, l.rail.volts-vbe) / d.RailSink.Sense.Ohms
	case d.TwoTransistor != nil:
		return vbe / d.TwoTransistor.Sense.Ohms
	}
	return 0
}

// checkDrive verifies that the base gets its current at the lowest gain, and
// that a reference keeps enough to hold.
func (b *book) checkDrive(l *line, s *StringReport) {
	k := l.driveResistor()
	if k < 0 {
		return // its base hangs on a rail, which is judged there
	}
	holder := l.Devices[l.Holder]
	role := l.Devices[k].Role
	path := l.pointer("/driver/" + strings.TrimSuffix(role, "_resistor") + "/ohms")
	brings := l.worst.Min[figDrive]
	f := Finding{
		Code: "base-drive", Where: l.where(), At: path, Value: &brings, Unit: "A", Least: true,
		Source: "definition of hFE; margin " + sourcePractice,
	}
	part := b.p.build.Parts[holder.Part].Transistor
	if part.HFE == nil {
		b.missing(f, "gain (hfe)", holder.Part)
	} else {
		current := math.Max(s.Current.Typ, l.intended())
		need := current / part.HFE.Min
		f.Limit = &need
		switch {
		case brings < need:
			f.Severity = Fail
			f.Message = fmt.Sprintf("the base gets %s and needs %s at the lowest gain: the current falls short", amps(brings), amps(need))
		case brings < ampleDrive*need:
			f.Severity = Tight
			f.Message = fmt.Sprintf("the base gets %s and needs %s at the lowest gain", amps(brings), amps(need))
		default:
			f.Severity = Pass
			f.Message = fmt.Sprintf("the base gets %s; %s is needed at the lowest gain", amps(brings), amps(need))
		}
		f.Working = fmt.Sprintf("needed = I / hFE at its lowest = %s / %.3g = %s; brought through the %s at the lowest supply: %s",
			amps(current), part.HFE.Min, amps(need), strings.ReplaceAll(role, "_", " "), amps(brings))
		b.add(f)
	}
	if l.spec.Driver.Kind != KindReferenceSink {
		return
	}
	spare, least := l.worst.Min[figSpare], keepsHolding
	g := Finding{
		Code: "reference-current", Where: l.where(), At: path, Value: &spare, Limit: &least, Unit: "A", Least: true,
		Working: fmt.Sprintf("bias − base = %s in the worst case", amps(spare)), Source: sourcePractice,
	}
	switch {
	case spare <= 0:
		g.Severity, g.Message = Fail, fmt.Sprintf("the base takes %s more than the bias brings: no reference holds that, and the figures of this string are too good", amps(-spare))
	case spare < least:
		g.Severity, g.Message = Tight, fmt.Sprintf("only %s is left for the reference; low-voltage types go soft below a milliampere", amps(spare))
	default:
		g.Severity, g.Message = Pass, fmt.Sprintf("%s is left for the reference", amps(spare))
	}
	b.add(g)
}

// checkWanted compares the typical current or light with what was asked for.
func (b *book) checkWanted(l *line, s *StringReport) {
	w := l.spec.Wanted
	if w == nil {
		return
	}
	f := Finding{Code: "wanted", Where: l.where(), At: l.pointer("/wanted"), Source: "10 to 15 % is seen side by side; " + sourcePractice}
	var got, want float64
	var text func(float64) string
	switch {
	case w.Current != nil:
		got, want, text, f.Unit = s.Current.Typ, *w.Current, amps, "A"
	case s.LuminousFlux == nil:
		f.Unit, f.Limit = "lm", w.LuminousFlux
		b.missing(f, "light that is known at this current", "an LED of "+l.where())
		return
	default:
		got, want, f.Unit = s.LuminousFlux.Typ, *w.LuminousFlux, "lm"
		text = func(v float64) string { return fmt.Sprintf("%.3g\u00a0lm", v) }
	}
	f.Value, f.Limit = &got, &want
	off := math.Abs(got-want) / want
	switch {
	case off > farApart:
		f.Severity = Fail
	case off > seenApart:
		f.Severity = Tight
	default:
		f.Severity = Pass
	}
	f.Least = got < want
	f.Message = fmt.Sprintf("%s, wanted %s", text(got), text(want))
	f.Working = fmt.Sprintf("|%s − %s| / %s = %s", text(got), text(want), text(want), percent(100*off))
	b.add(f)
}

// escapePointer writes a key as a JSON Pointer's token (RFC 6901).
func escapePointer(key string) string {
	return strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
}
