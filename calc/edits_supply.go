package calc

import (
	"fmt"
	"slices"

	"lanternbook/calc/quantity"
)

// otherVoltage takes the next standard supplies up or down, their spread in
// proportion.
func (p *plant) otherVoltage(way int) []attempt {
	v := p.build.Supply.Voltage
	list := slices.Clone(standardVolts)
	if way < 0 {
		slices.Reverse(list)
	}
	var out []attempt
	for _, next := range list {
		if float64(way)*(next-v.Typ) <= 0.05*v.Typ || next > dryTouch {
			continue
		}
		to := scaled(v, next/v.Typ)
		to.Typ = next
		out = append(out, attempt{
			text:  quantity.Text(next, "V") + " supply",
			patch: []Operation{replace("/supply/voltage", to)},
			apply: func(b *Build) { b.Supply.Voltage = to },
		})
	}
	return out
}

// largerSupply takes the next standard current ratings.
func (p *plant) largerSupply() []attempt {
	var out []attempt
	for _, rating := range standardAmps {
		if m := p.build.Supply.MaxCurrent; m != nil && rating > *m {
			out = append(out, attempt{
				text:  quantity.Text(rating, "A") + " supply",
				patch: []Operation{replace("/supply/max_current", rating)},
				apply: func(b *Build) { b.Supply.MaxCurrent = &rating },
			})
		}
	}
	return out
}

// thickerRun takes the next conductors for the run on the string's way that
// loses most.
func (p *plant) thickerRun(l *line) []attempt {
	worst, most := -1, 0.0
	for k := l.run; k >= 0; k = p.tree.Parent[k] {
		if drop := p.tree.Ohms[k] * p.result.Current[k]; drop > most && !p.wires[k].given {
			worst, most = k, drop
		}
	}
	if worst < 0 {
		return nil
	}
	i := p.runOf[worst]
	var out []attempt
	for _, area := range standardArea {
		if area*1e-6 <= p.wires[worst].Area*1.01 {
			continue
		}
		name := fmt.Sprintf("%g mm2", area)
		out = append(out, attempt{
			text:  fmt.Sprintf("%g mm² for run %s", area, p.build.Runs[i].ID),
			patch: []Operation{replace(fmt.Sprintf("/runs/%d/conductor", i), name)},
			apply: func(b *Build) { b.Runs[i].Conductor = name },
		})
	}
	return out
}
