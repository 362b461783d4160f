package calc

import "fmt"

const (
	// dryTouch and extraLow are the DC voltages up to which many codes let
	// live parts be touched when dry, and call a circuit extra-low voltage.
	//
	// Source: iec61140, as quoted in the trade; limits belong to the local code.
	dryTouch = 60.0  // [V]
	extraLow = 120.0 // [V]
	// limitedPower is the rating up to which many codes treat a supply as
	// limited.
	//
	// Source: nfpa70, chapter 9 table 11(B), from memory.
	limitedPower = 100.0 // [VA]
)

// checkSupply verifies the load on the supply and says the cautions.
func (b *book) checkSupply() {
	s := &b.p.build.Supply
	f := Finding{Code: "supply-loading", Where: "supply", At: "/supply/max_current", Unit: "%", Source: sourcePractice}
	limit := 100 * b.p.limitLoading()
	f.Limit = &limit
	if b.r.Supply.Loading == nil {
		b.missing(f, "rated current (max_current)", "the supply")
	} else {
		loading := 100 * b.r.Supply.Loading.Max
		f.Value = &loading
		switch {
		case loading > 100:
			f.Severity = Fail
		case loading > limit:
			f.Severity = Tight
		default:
			f.Severity = Pass
		}
		f.Message = fmt.Sprintf("up to %s of the rated %s", percent(loading), amps(*s.MaxCurrent))
		f.Working = fmt.Sprintf("all strings with their drivers' own share draw up to %s: %s / %s = %s",
			amps(b.r.Supply.Current.Max), amps(b.r.Supply.Current.Max), amps(*s.MaxCurrent), percent(loading))
		b.add(f)
	}
	if e := b.p.build.Enclosure; e != nil && e.Kind == "sealed" && (e.SurfaceArea == nil || e.HeatTransfer == nil) {
		b.missing(Finding{Code: "enclosure", Where: "enclosure", At: "/enclosure", Unit: "°C", Source: "rise = P / (A · h)",
			Working: "Without both figures the air inside is taken as the ambient."}, "surface area and heat transfer", "the sealed enclosure")
	}

	highest, touch := s.Voltage.Max, dryTouch
	g := Finding{Code: "extra-low-voltage", Where: "supply", At: "/supply/voltage", Value: &highest, Limit: &touch, Unit: "V",
		Working: fmt.Sprintf("highest supply %s against 60 V DC (dry) and 120 V DC", volts(highest)),
		Source:  "IEC 61140, 60 V and 120 V ripple-free DC; the local code and the licensed person decide"}
	switch {
	case highest > extraLow:
		g.Severity, g.Message = Fail, "beyond extra-low voltage: this work belongs to a licensed electrician"
	case highest > dryTouch:
		g.Severity, g.Message = Tight, "above the 60 V DC that many codes let be touched: ask the local code and a licensed electrician"
	default:
		g.Severity, g.Message = Pass, "extra-low voltage; the mains side belongs to a licensed electrician"
	}
	b.add(g)

	if s.MaxCurrent == nil {
		return
	}
	rating, most := s.Voltage.Typ**s.MaxCurrent, limitedPower
	h := Finding{Code: "limited-power", Where: "supply", At: "/supply/max_current", Value: &rating, Limit: &most, Unit: "VA",
		Severity: Pass, Message: "within the 100 VA many codes set for limited-power work",
		Working: fmt.Sprintf("%s × %s = %.3g VA", volts(s.Voltage.Typ), amps(*s.MaxCurrent), rating),
		Source:  "NFPA 70, chapter 9 table 11(B), from memory; the local code and the licensed person decide"}
	if rating > limitedPower {
		h.Severity, h.Message = Tight, "the supply can give more than the 100 VA many codes set for limited-power work: fuse every branch, and ask the local code"
	}
	b.add(h)
}
