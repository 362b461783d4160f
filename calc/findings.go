package calc

import (
	"fmt"
	"sort"

	"lanternbook/calc/quantity"
)

// Limits that stand where the build gives none. Common practice, no source.
const (
	DefaultHeadroom       = 0.3  // [V] least left over in the worst case
	DefaultJunctionMargin = 10.0 // [K] below the rated junction temperature
	DefaultLoading        = 0.8  // [1] of the supply's rated current
)

// Sources that findings name.
const (
	sourceEVA      = "device equations; worst case by extreme value analysis, ECSS-Q-HB-30-01A"
	sourceRating   = "the part's rating, as stated in the build"
	sourcePractice = "common practice, no source"
)

// book gathers the findings of a build.
type book struct {
	p *plant
	r *Report
}

// findings verifies the build and sorts the outcome, worst first.
func (p *plant) findings(r *Report) {
	b := &book{p, r}
	r.Findings = []Finding{}
	for _, l := range p.strings {
		b.checkString(l)
	}
	for _, rail := range p.rails {
		b.checkRail(rail)
	}
	b.checkSupply()
	sort.SliceStable(r.Findings, func(i, k int) bool {
		return rank(r.Findings[i].Severity) < rank(r.Findings[k].Severity)
	})
	r.Verdict = Pass
	if len(r.Findings) > 0 {
		r.Verdict = r.Findings[0].Severity
	}
}

// rank orders severities, worst first.
func rank(s Severity) int {
	switch s {
	case Fail:
		return 0
	case Tight:
		return 1
	case Unknown:
		return 2
	}
	return 3
}

// add keeps a finding.
func (b *book) add(f Finding) {
	f.Remedies = []Remedy{}
	b.r.Findings = append(b.r.Findings, f)
}

// missing keeps an unknown finding that says which figure is not given.
func (b *book) missing(f Finding, figure, whose string) {
	f.Severity = Unknown
	f.Message = fmt.Sprintf("cannot tell: %s has no %s", b.p.build.nameOf(whose), figure)
	if f.Working == "" {
		f.Working = "The figure is not in the build; fill it in at the part or resistor."
	}
	b.add(f)
}

// atMost judges a value against a most, tight above a share of it.
func atMost(value, limit, tightAbove float64) Severity {
	switch {
	case !(value <= limit):
		return Fail
	case value > limit*tightAbove:
		return Tight
	}
	return Pass
}

// where names a string in a finding.
func (l *line) where() string { return "string " + l.spec.Label }

// at is the JSON Pointer of the string, with a path below it.
func (l *line) pointer(below string) string { return fmt.Sprintf("/strings/%d%s", l.index, below) }

// Texts of figures as the findings write them.
func volts(v float64) string   { return quantity.Format(v, "V", 3) }
func amps(v float64) string    { return quantity.Format(v, "A", 3) }
func watts(v float64) string   { return quantity.Format(v, "W", 3) }
func ohmic(v float64) string   { return quantity.Format(v, "Ω", 3) }
func celsius(v float64) string { return fmt.Sprintf("%.0f\u00a0°C", v) }
func percent(v float64) string { return fmt.Sprintf("%.0f\u00a0%%", v) }

func (p *plant) limitHeadroom() float64 {
	if l := p.build.Limits; l != nil && l.Headroom != nil {
		return *l.Headroom
	}
	return DefaultHeadroom
}

func (p *plant) limitMargin() float64 {
	if l := p.build.Limits; l != nil && l.JunctionMargin != nil {
		return *l.JunctionMargin
	}
	return DefaultJunctionMargin
}

func (p *plant) limitLoading() float64 {
	if l := p.build.Limits; l != nil && l.Loading != nil {
		return *l.Loading
	}
	return DefaultLoading
}
