package calc

// columns draws every string in three corners: as on a usual day, in the
// corner that leaves least over on a cold day with a low supply, and in the
// one that heats the holding part most on a hot day with a high supply.
func (p *plant) columns(r *Report) error {
	for i, l := range p.strings {
		usual, cold, hot := l.pictured()
		c := &r.Strings[i].Columns
		v := p.build.Supply.Voltage
		for _, at := range []struct {
			to     *Column
			turn   []float64
			supply float64
		}{{&c.Cold, cold, v.Min}, {&c.Hot, hot, v.Max}, {&c.Usual, usual, v.Typ}} {
			column, err := l.column(at.turn, at.supply)
			if isRunaway(err) {
				continue
			}
			if err != nil {
				return err
			}
			*at.to = column
		}
		l.toTypical()
	}
	return nil
}

// pictured are the three corners of the pictures, as turns.
func (l *line) pictured() (usual, cold, hot []float64) {
	n := len(l.Knobs)
	usual, cold, hot = make([]float64, l.turns()), make([]float64, l.turns()), make([]float64, l.turns())
	for k := range n {
		cold[k] = float64(l.worst.Lowest[figHeadroom][k])
		hot[k] = float64(l.worst.Highest[figDevices+2*l.Holder][k])
	}
	cold[n], cold[n+1] = -1, -1
	hot[n], hot[n+1] = 1, 1
	if l.rail != nil {
		cold[n+2] = float64(l.worst.Lowest[figHeadroom][n+2])
		hot[n+2] = float64(l.worst.Highest[figDevices+2*l.Holder][n+2])
	}
	return usual, cold, hot
}

func (l *line) column(turn []float64, supply float64) (Column, error) {
	var w worst
	at, _, err := l.corner(&w, l.reach, turn)
	if err == nil {
		err = w.runaway
	}
	if err != nil {
		return Column{}, err
	}
	c := Column{Supply: supply, Current: l.Net.LEDCurrent(l.Stack), Heat: l.Power(l.Devices[l.Holder])}
	left, err := l.headroom(at.volts, at.ohms)
	if err != nil {
		return Column{}, err
	}
	c.Run = supply - left.feed
	c.Sense = left.sense
	if !l.Devices[l.Holder].IsResistor() {
		c.LeftOver, c.Driver = left.headroom, left.need-left.sense
	}
	for _, stack := range l.spec.LEDs {
		for k := range l.LEDs {
			if l.LEDs[k].Part == stack.Part {
				c.LEDs = append(c.LEDs, ColumnLED{Part: stack.Part, Quantity: stack.Quantity, Each: l.Net.LEDVoltageAt(l.Stack, k, left.full)})
			}
		}
	}
	return c, nil
}
