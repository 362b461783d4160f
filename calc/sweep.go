package calc

// SweepPoint is a string at one supply voltage of a sweep.
type SweepPoint struct {
	Supply  float64 // [V] the supply's own voltage
	Current float64 // [A] through the LEDs
	Tail    float64 // [V] lower end of the LEDs
	Heat    float64 // [W] in the part that holds the current
}

// Sweep solves string i at evenly spaced supply voltages from first to last in
// volts, everything typical, the other strings left out and the string behind
// its own share of the cable. It fills out, which says how many points, and
// returns *Unsolved at the first that has no solution.
func Sweep(b Build, i int, first, last float64, out []SweepPoint) error {
	p, err := compile(&b)
	if err != nil {
		return err
	}
	p.heatWires(b.Ambient.Typ)
	l := p.strings[i]
	l.Net.SetAir(b.Ambient.Typ)
	return l.sweep(first, last, out)
}

func (l *line) sweep(first, last float64, out []SweepPoint) error {
	step := 0.0
	if len(out) > 1 {
		step = (last - first) / float64(len(out)-1)
	}
	for k := range out {
		supply := first + step*float64(k)
		if k > 0 {
			l.Net.Advance()
		}
		if err := l.behindOf(supply, l.path, 0); err != nil {
			return err
		}
		out[k] = SweepPoint{
			Supply: supply, Current: l.Net.LEDCurrent(l.Stack), Tail: l.Net.Voltage(l.Tail),
			Heat: l.Power(l.Devices[l.Holder]),
		}
	}
	return nil
}
