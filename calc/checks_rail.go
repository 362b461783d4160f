package calc

import "fmt"

// checkRail verifies a base rail: what it can give against what its strings
// take, and the heat of its parts.
func (b *book) checkRail(r *railLine) {
	report := &b.r.Rails[r.index]
	at := func(below string) string { return fmt.Sprintf("/rails/%d%s", r.index, below) }
	role := "bias_resistor"
	if r.spec.Kind == "follower" {
		role = "pullup_resistor"
	}
	brings := r.worst.Min[railDrive]
	need, known := b.railNeed(r)
	f := Finding{
		Code: "base-drive", Where: r.name(), At: at(resistorPath(role) + "/ohms"), Value: &brings, Unit: "A", Least: true,
		Source: "definition of hFE; margin " + sourcePractice,
	}
	switch {
	case known != "":
		b.missing(f, "gain (hfe)", known)
	default:
		f.Limit = &need
		f.Working = fmt.Sprintf("all its strings' currents over hFE at its lowest add up to %s; brought at the lowest supply: %s", amps(need), amps(brings))
		switch {
		case brings < need:
			f.Severity = Fail
			f.Message = fmt.Sprintf("the rail gets %s and its strings need %s at the lowest gain: all of them fall short", amps(brings), amps(need))
		case brings < ampleDrive*need:
			f.Severity = Tight
			f.Message = fmt.Sprintf("the rail gets %s and its strings need %s at the lowest gain", amps(brings), amps(need))
		default:
			f.Severity = Pass
			f.Message = fmt.Sprintf("the rail gets %s; its strings need %s at the lowest gain", amps(brings), amps(need))
		}
		b.add(f)
	}
	if r.spec.Kind != "follower" {
		spare, least := r.worst.Min[railSpare], keepsHolding
		g := Finding{Code: "reference-current", Where: r.name(), At: at("/bias/ohms"), Value: &spare, Limit: &least, Unit: "A", Least: true,
			Working: fmt.Sprintf("bias − bases = %s in the worst case", amps(spare)), Source: sourcePractice}
		switch {
		case spare <= 0:
			g.Severity, g.Message = Fail, fmt.Sprintf("the bases take %s more than the bias brings: no reference holds that, and the figures of its strings are too good", amps(-spare))
		case spare < least:
			g.Severity, g.Message = Tight, fmt.Sprintf("only %s is left for the reference; low-voltage types go soft below a milliampere", amps(spare))
		default:
			g.Severity, g.Message = Pass, fmt.Sprintf("%s is left for the reference", amps(spare))
		}
		b.add(g)
	}
	for k, d := range r.Devices {
		switch {
		case d.Family() != "":
			b.checkActive(r.name(), at(""), &report.Devices[k], d.Family())
		case d.IsResistor():
			b.checkResistor(r.name(), at(resistorPath(d.Role)), &report.Devices[k], r.spec.resistor(d.Role))
		}
	}
}

// railNeed is what must be brought to the rail in amperes with every gain at
// its lowest; missing names a transistor without a gain.
func (b *book) railNeed(r *railLine) (need float64, missing string) {
	for _, l := range r.lines {
		key := l.Devices[l.Holder].Part
		part := b.p.build.Parts[key].Transistor
		if part.HFE == nil {
			return 0, key
		}
		current := max(b.r.Strings[l.index].Current.Typ, l.intended())
		need += l.quantity * current / part.HFE.Min
	}
	if r.spec.Kind == "buffered-reference" {
		part := b.p.build.Parts[r.spec.NPN].Transistor
		if part.HFE == nil {
			return 0, r.spec.NPN
		}
		need = (need + r.volts/r.spec.Pulldown.Ohms) / part.HFE.Min
	}
	return need, ""
}
