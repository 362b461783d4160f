package calc

// Usual solves a build with everything typical and returns the report of that
// alone: every range has its typical value at both ends, and there are no
// findings. It returns the errors of Check.
func Usual(b Build) (Report, error) {
	p, err := compile(&b)
	if err != nil {
		return Report{}, err
	}
	r := Report{Format: ReportFormat, Verdict: Unknown, Strings: []StringReport{}, Rails: []RailReport{}, Runs: []RunReport{}, Findings: []Finding{}}
	inside, err := p.operateOrCold()
	if err != nil {
		return Report{}, err
	}
	p.typical(&r, inside)
	for i, l := range p.strings {
		s := &r.Strings[i]
		s.Current, s.LEDVoltage = exactly(l.typ[figCurrent]), exactly(l.typ[figLEDVolts])
	}
	return r, nil
}
