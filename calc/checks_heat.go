package calc

import (
	"fmt"
	"strings"

	"lanternbook/calc/heat"
)

// checkHeat verifies currents, voltages and heat of every part of a string.
func (b *book) checkHeat(l *line, s *StringReport) {
	for k, d := range l.Devices {
		switch {
		case d.IsLED():
			b.checkLED(l, s, k)
		case d.Family() != "":
			b.checkActive(l.where(), l.pointer("/driver"), &s.Devices[k], d.Family())
			if k == l.Holder && d.Family() != "module" {
				b.checkHolder(l, s, d.Family())
			}
		case d.IsResistor():
			b.checkResistor(l.where(), l.pointer("/driver"+resistorPath(d.Role)), &s.Devices[k], l.spec.resistor(d.Role))
		}
	}
}

func (b *book) checkLED(l *line, s *StringReport, k int) {
	key := l.Devices[k].Part
	part := b.p.build.Parts[key].LED
	most := s.Current.Max
	f := Finding{Code: "led-current", Where: l.where(), At: l.pointer("/leds"), Value: &most, Limit: part.MaxCurrent, Unit: "A", Source: sourceRating}
	if part.MaxCurrent == nil {
		b.missing(f, "greatest current (max_current)", key)
	} else {
		f.Severity = atMost(most, *part.MaxCurrent, tightRating)
		f.Message = fmt.Sprintf("%s: at most %s of %s", b.p.build.nameOf(key), amps(most), amps(*part.MaxCurrent))
		f.Working = fmt.Sprintf("worst-case string current %s against the rated %s", amps(most), amps(*part.MaxCurrent))
		b.add(f)
	}
	d := &s.Devices[k]
	b.checkJunction(l.where(), l.pointer("/driver"), b.deviceName(d), d, "led-junction", part.MaxJunction, part.RthJunctionAmbient)
}

// checkJunction verifies a device's junction; name is how the message calls it.
func (b *book) checkJunction(where, at, name string, d *DeviceReport, code string, limit, rth *float64) {
	hottest := d.Junction.Max
	f := Finding{Code: code, Where: where, At: at, Value: &hottest, Limit: limit, Unit: "°C",
		Source: "Tj = Tair + Rth · P; franco, ex. 11.14; limit: " + sourceRating}
	switch {
	case rth == nil:
		f.Value = nil
		b.missing(f, "thermal resistance to the air (rth_junction_ambient)", d.Part)
		return
	case limit == nil:
		b.missing(f, "greatest junction temperature (max_junction)", d.Part)
		return
	}
	margin := b.p.limitMargin()
	switch {
	case hottest > *limit:
		f.Severity = Fail
	case hottest > *limit-margin:
		f.Severity = Tight
	default:
		f.Severity = Pass
	}
	f.Message = fmt.Sprintf("%s: junction up to %s of %s", name, celsius(hottest), celsius(*limit))
	f.Working = fmt.Sprintf("air up to %s + %.4g K/W × %s = %s; %.0f K should stay below the rating",
		celsius(b.r.Supply.Inside.Max), *rth, watts(d.Power.Max), celsius(hottest), margin)
	b.add(f)
}

// deviceName names a device in words with its part.
func (b *book) deviceName(d *DeviceReport) string {
	if strings.HasPrefix(d.Role, "led_") {
		return b.p.build.nameOf(d.Part)
	}
	role := strings.ReplaceAll(d.Role, "_", " ")
	if d.Part == "" {
		return role
	}
	return role + " " + b.p.build.nameOf(d.Part)
}

// checkActive verifies the heat of a transistor, regulator or module of a
// string or a rail; family is what its codes begin with.
func (b *book) checkActive(where, at string, d *DeviceReport, family string) {
	rated := ratingsOf(b.p.build.Parts[d.Part])
	name := b.deviceName(d)
	most := d.Power.Max
	air := b.r.Supply.Inside.Max
	f := Finding{Code: family + "-power", Where: where, At: at, Value: &most, Unit: "W",
		Source: "linear derating; malvino, ex. 12-14; limit: " + sourceRating}
	switch {
	case rated.power == nil:
		b.missing(f, "rated dissipation (max_power)", d.Part)
	case rated.junction == nil && family != "module":
		b.missing(f, "greatest junction temperature (max_junction)", d.Part)
	default:
		limit := *rated.power
		f.Working = fmt.Sprintf("worst case %s against the rated %s", watts(most), watts(limit))
		if rated.junction != nil {
			limit = heat.Derated(*rated.power, 25, *rated.junction, air)
			f.Working = fmt.Sprintf("%s at 25 °C falls to nothing at %s: at %s it is %s", watts(*rated.power), celsius(*rated.junction), celsius(air), watts(limit))
		}
		f.Limit = &limit
		f.Severity = atMost(most, limit, tightPower)
		f.Message = fmt.Sprintf("%s: up to %s of the %s allowed in air of %s", name, watts(most), watts(limit), celsius(air))
		b.add(f)
	}
	if family != "module" {
		b.checkJunction(where, at, name, d, family+"-junction", rated.junction, rated.rth)
	}
}

// checkHolder verifies the ratings of the part that holds the current.
func (b *book) checkHolder(l *line, s *StringReport, family string) {
	d := &s.Devices[l.Holder]
	rated := ratingsOf(b.p.build.Parts[d.Part])
	name := b.deviceName(d)
	volt, ampere := "collector-emitter rating (max_collector_emitter_voltage)", "collector current rating (max_collector_current)"
	switch l.spec.Driver.Kind {
	case KindOpampSink:
		volt, ampere = "drain-source rating (max_drain_source_voltage)", "drain current rating (max_drain_current)"
	case KindRegulator:
		volt, ampere = "input-output rating (max_input_output)", "current rating (max_current)"
	}
	b.checkRating(l, family+"-voltage", rated.volts, b.p.build.Supply.Voltage.Max, "V", volts,
		name+" with the LEDs dark", d.Part, volt,
		"with the LEDs dark or shorted nothing but this part stands against the supply at its highest")
	b.checkRating(l, family+"-current", rated.amps, s.Current.Max, "A", amps,
		name, d.Part, ampere, "worst-case string current")
}

func (b *book) checkRating(l *line, code string, limit *float64, value float64, unit string, text func(float64) string, name, part, figure, working string) {
	f := Finding{Code: code, Where: l.where(), At: l.pointer("/driver"), Value: &value, Limit: limit, Unit: unit, Source: sourceRating}
	if limit == nil {
		b.missing(f, figure, part)
		return
	}
	f.Severity = atMost(value, *limit, tightRating)
	f.Message = fmt.Sprintf("%s: up to %s of %s", name, text(value), text(*limit))
	f.Working = fmt.Sprintf("%s: %s against %s", working, text(value), text(*limit))
	b.add(f)
}

// checkResistor verifies a fitted resistor's dissipation; at points to it.
func (b *book) checkResistor(where, at string, d *DeviceReport, r *Resistor) {
	if r == nil {
		return // a pot's track is judged with the pot
	}
	name := strings.ReplaceAll(d.Role, "_", " ")
	most := d.Power.Max
	f := Finding{Code: "resistor-power", Where: where, At: at, Value: &most, Limit: r.Watts, Unit: "W",
		Source: "P = V²/R; 60 % of the rating, " + sourcePractice}
	if r.Watts == nil {
		b.missing(f, "rating (watts)", "the "+name)
		return
	}
	f.Severity = atMost(most, *r.Watts, tightResistor)
	f.Message = fmt.Sprintf("%s %s: up to %s of %s", name, ohmic(r.Ohms), watts(most), watts(*r.Watts))
	f.Working = fmt.Sprintf("worst case %s is %s of the rating %s", watts(most), percent(100*most / *r.Watts), watts(*r.Watts))
	b.add(f)
}

// resistorPath is where a resistor stands below its driver or rail.
func resistorPath(role string) string {
	switch role {
	case "resistor":
		return "/resistor"
	case "upper_resistor", "lower_resistor":
		return "/control/divider/" + strings.TrimSuffix(role, "_resistor")
	}
	return "/" + strings.TrimSuffix(role, "_resistor")
}
