package calc

import (
	"fmt"

	"lanternbook/calc/driver"
	"lanternbook/calc/heat"
)

// device appoints those of one part of a string, in the order of checkHeat.
func (b *bench) device(l *lot, k int) {
	d := l.Devices[k]
	name := b.name(d)
	power, junction := figDevices+2*k, figDevices+2*k+1
	fig := func(f int) func() float64 { return func() float64 { return l.fig[f] } }
	switch {
	case d.IsLED():
		part := b.s.build.Parts[d.Part].LED
		b.rating("led-current", l.at("/leds"), name, part.MaxCurrent, fig(figCurrent))
		b.junction("led-junction", l.at("/driver"), name, part.MaxJunction, part.RthJunctionAmbient, fig(junction))
	case d.Family() != "":
		b.active(l.at("/driver"), name, d, fig(power), fig(junction))
		if k == l.Holder && d.Family() != "module" {
			rated := ratingsOf(b.s.build.Parts[d.Part])
			b.rating(d.Family()+"-voltage", l.at("/driver"), name, rated.volts, func() float64 { return b.s.volts })
			b.rating(d.Family()+"-current", l.at("/driver"), name, rated.amps, fig(figCurrent))
		}
	case d.IsResistor():
		b.resistor(l.at("/driver"+resistorPath(d.Role)), name, l.spec.resistor(d.Role), fig(power))
	}
}

// name names a part as the findings do.
func (b *bench) name(d driver.Device) string {
	return (&book{p: b.s.plant}).deviceName(&DeviceReport{Role: d.Role, Part: d.Part})
}

func (b *bench) rating(code, at, name string, limit *float64, value func() float64) {
	if limit == nil {
		b.add(code, at, name, nil)
		return
	}
	b.add(code, at, name, func() Severity { return atMost(value(), *limit, tightRating) })
}

func (b *bench) junction(code, at, name string, limit, rth *float64, celsius func() float64) {
	if limit == nil || rth == nil {
		b.add(code, at, name, nil)
		return
	}
	margin := b.s.plant.limitMargin()
	b.add(code, at, name, func() Severity { return atLeast(*limit-celsius(), 0, margin) })
}

func (b *bench) active(at, name string, d driver.Device, power, celsius func() float64) {
	rated := ratingsOf(b.s.build.Parts[d.Part])
	family := d.Family()
	switch {
	case rated.power == nil, rated.junction == nil && family != "module":
		b.add(family+"-power", at, name, nil)
	default:
		b.add(family+"-power", at, name, func() Severity {
			limit := *rated.power
			if rated.junction != nil {
				limit = heat.Derated(limit, 25, *rated.junction, b.s.inside)
			}
			return atMost(power(), limit, tightPower)
		})
	}
	if family != "module" {
		b.junction(family+"-junction", at, name, rated.junction, rated.rth, celsius)
	}
}

func (b *bench) resistor(at, name string, r *Resistor, power func() float64) {
	switch {
	case r == nil: // a pot's track is judged with the pot
	case r.Watts == nil:
		b.add("resistor-power", at, name, nil)
	default:
		b.add("resistor-power", at, name, func() Severity { return atMost(power(), *r.Watts, tightResistor) })
	}
}

// rail appoints those of a base rail, in the order of checkRail.
func (b *bench) rail(r *railLine) {
	at := func(below string) string { return fmt.Sprintf("/rails/%d%s", r.index, below) }
	fig := make([]float64, r.figures())
	read := func(f int) func() float64 {
		return func() float64 {
			r.collect(fig)
			return fig[f]
		}
	}
	path := "/bias/ohms"
	if r.spec.Kind == "follower" {
		path = "/pullup/ohms"
	}
	brings := read(railDrive)
	if !b.knownGains(r) {
		b.add("base-drive", at(path), "", nil)
	} else {
		b.add("base-drive", at(path), "", func() Severity {
			need := b.railNeed(r)
			return atLeast(brings(), need, ampleDrive*need)
		})
	}
	if r.spec.Kind != "follower" {
		spare := read(railSpare)
		b.add("reference-current", at("/bias/ohms"), "", func() Severity { return more(spare(), 0, keepsHolding) })
	}
	for k, d := range r.Devices {
		name := b.name(d)
		switch {
		case d.Family() != "":
			b.active(at(""), name, d, read(railDevices+2*k), read(railDevices+2*k+1))
		case d.IsResistor():
			b.resistor(at(resistorPath(d.Role)), name, r.spec.resistor(d.Role), read(railDevices+2*k))
		}
	}
}

// knownGains says whether the gain of every transistor is given that loads
// the rail's drive.
func (b *bench) knownGains(r *railLine) bool {
	parts := b.s.build.Parts
	for _, l := range r.lines {
		if parts[l.Devices[l.Holder].Part].Transistor.HFE == nil {
			return false
		}
	}
	return r.spec.Kind != "buffered-reference" || parts[r.spec.NPN].Transistor.HFE != nil
}

// railNeed is what must be brought to the rail in amperes in the present
// sample.
func (b *bench) railNeed(r *railLine) float64 {
	parts := b.s.build.Parts
	need := 0.0
	for _, line := range r.lines {
		l := b.s.lots[line.index]
		need += max(l.fig[figCurrent], l.intended()) / l.hfe(*parts[l.Devices[l.Holder].Part].Transistor.HFE)
	}
	if r.spec.Kind == "buffered-reference" {
		gain := *parts[r.spec.NPN].Transistor.HFE
		hfe := gain.Typ
		for k, knob := range r.Knobs {
			if knob.Culprit == driver.Gain {
				hfe = between(gain, r.turned[k])
			}
		}
		need = (need + r.volts/r.spec.Pulldown.Ohms) / hfe
	}
	return need
}

// supply appoints those of the supply, in the order of checkSupply.
func (b *bench) supply() {
	s := &b.s.build.Supply
	b.where = "supply"
	if s.MaxCurrent == nil || !(*s.MaxCurrent > 0) {
		b.add("supply-loading", "/supply/max_current", "", nil)
	} else {
		limit := 100 * b.s.plant.limitLoading()
		b.add("supply-loading", "/supply/max_current", "", func() Severity {
			return atMost(100*b.s.plant.result.Total / *s.MaxCurrent, 100, limit/100)
		})
	}
	if e := b.s.build.Enclosure; e != nil && e.Kind == "sealed" && (e.SurfaceArea == nil || e.HeatTransfer == nil) {
		b.where = "enclosure"
		b.add("enclosure", "/enclosure", "", nil)
		b.where = "supply"
	}
	b.add("extra-low-voltage", "/supply/voltage", "", func() Severity { return atMost(b.s.volts, extraLow, dryTouch/extraLow) })
	if s.MaxCurrent != nil {
		rating := s.Voltage.Typ * *s.MaxCurrent
		b.add("limited-power", "/supply/max_current", "", func() Severity {
			if rating > limitedPower {
				return Tight
			}
			return Pass
		})
	}
}
