package calc

import "math"

// fill walks the dial from end to end.
func (d *dialler) fill() error {
	if d.top == 0 {
		if err := d.findTop(); err != nil {
			return err
		}
	}
	steps := (tablePoints - 1) * finer
	for k := range steps + 1 {
		points, err := d.usual(d.top * float64(k) / float64(steps))
		if err != nil {
			return err
		}
		for i := range points {
			d.table.Strings[i].Curve = append(d.table.Strings[i].Curve, points[i])
		}
	}
	rows := make([]row, tablePoints)
	for k := range rows {
		if err := d.row(&rows[k], d.top*float64(k)/(tablePoints-1)); err != nil {
			return err
		}
		for i := range d.lines {
			point := rows[k].points[i]
			point.Control = d.table.Strings[i].Curve[k*finer].Control
			d.table.Strings[i].Points = append(d.table.Strings[i].Points, point)
		}
	}
	for which, limit := range []*DialLimit{&d.table.Usual, &d.table.Cold, &d.table.Hot} {
		var err error
		if *limit, err = d.limit(rows, which); err != nil {
			return err
		}
	}
	return nil
}

// row is the dial at one setting.
type row struct {
	setting float64
	points  []DialPoint
	corners [][3][]float64 // by string: usual, cold and hot, as turns
	left    [3]float64     // [V] least left over of all strings in each of them
}

// place solves, for a rail, the build as a whole at the present setting; with
// far also how far everything may move each string. It says whether there is
// a stable temperature.
func (d *dialler) place(far bool) (bool, error) {
	if d.rail == nil {
		return true, nil
	}
	p := d.p
	inside, err := p.operate(p.build.Supply.Voltage.Typ, p.build.Ambient.Typ)
	if err == nil && far {
		var reaches []reach
		rise, a := inside-p.build.Ambient.Typ, p.build.Ambient
		reaches, err = p.reaches(Spread{Min: a.Min + rise, Typ: inside, Max: a.Max + rise})
		for _, l := range d.lines {
			if err == nil {
				l.reach = reaches[l.index]
			}
		}
	}
	if isRunaway(err) {
		d.restart()
		return false, nil
	}
	return err == nil, err
}

// restart forgets where the search for a solution stood.
func (d *dialler) restart() {
	for _, r := range d.p.rails {
		r.started = false
	}
	for _, l := range d.p.strings {
		l.Net.Restart()
		l.started = false
	}
}

// usual solves the strings typically at a setting.
func (d *dialler) usual(v float64) ([]CurvePoint, error) {
	d.set(v)
	stable, err := d.place(false)
	if err != nil {
		return nil, d.unsolvedDial(v, err)
	}
	out := make([]CurvePoint, len(d.lines))
	for i, l := range d.lines {
		out[i] = CurvePoint{Setting: v, Runaway: !stable}
		if !stable {
			continue
		}
		at := l.reach.at(0, 0)
		if d.rail != nil {
			at.volts, at.ohms = l.Net.Voltage(l.Feed)+l.path*l.Draw(), l.path
		} else {
			err = l.solveAt(at)
		}
		if err == nil {
			point := &out[i]
			point.Current, point.Control = l.Net.LEDCurrent(l.Stack), d.control(l)
			if flux := l.flux(); !math.IsNaN(flux) {
				point.LuminousFlux = &flux
			}
			var left leftOver
			left, err = l.headroom(at.volts, at.ohms)
			point.LeftOver = left.headroom
		}
		if isRunaway(err) {
			out[i], err = CurvePoint{Setting: v, Runaway: true}, nil
			d.restart()
		}
		if err != nil {
			return nil, d.unsolvedDial(v, err)
		}
	}
	return out, nil
}

// control is the voltage at the control that is turned, in volts.
func (d *dialler) control(l *line) float64 {
	if d.rail != nil {
		return d.rail.Net.Voltage(d.rail.Control)
	}
	return l.Net.Voltage(l.Control)
}

// row solves the strings at a setting with their worst cases.
func (d *dialler) row(r *row, v float64) error {
	d.set(v)
	r.setting = v
	r.points, r.corners = make([]DialPoint, len(d.lines)), make([][3][]float64, len(d.lines))
	stable, err := d.place(true)
	if err != nil {
		return d.unsolvedDial(v, err)
	}
	for i, l := range d.lines {
		point := &r.points[i]
		point.Setting, point.Runaway = v, true
		if !stable {
			continue
		}
		w, wrong := l.search(l.reach, nil)
		if wrong != nil {
			return d.unsolvedDial(v, wrong)
		}
		if math.IsNaN(w.Typ[figCurrent]) || math.IsNaN(w.Typ[figHeadroom]) {
			stable = false
			d.restart()
			continue
		}
		l.worst = w
		r.corners[i] = l.days()
		point.Current, point.Headroom = w.span(figCurrent), w.span(figHeadroom)
		if w.fluxKnown && !math.IsNaN(w.Typ[figFlux]) {
			flux := w.span(figFlux)
			point.LuminousFlux = &flux
		}
		point.Runaway = w.runaway != nil
		point.Regulates = w.runaway == nil && point.Headroom.Min >= 0
	}
	for which := range r.left {
		r.left[which] = math.NaN()
		if stable {
			if r.left[which], err = d.left(r, which); err != nil {
				return d.unsolvedDial(v, err)
			}
		}
	}
	return nil
}

// days are the corners of a dial as turns: a usual day, and with every part at
// its worst for what is left over a cold one with a low supply and a hot one
// with a high supply.
func (l *line) days() [3][]float64 {
	n := len(l.Knobs)
	cold, hot := l.lowestHeadroom(), l.lowestHeadroom()
	cold[n], cold[n+1] = -1, -1
	hot[n], hot[n+1] = 1, 1
	return [3][]float64{make([]float64, l.turns()), cold, hot}
}

// span is a figure's worst cases as a range.
func (w *worst) span(f int) Range { return Range{Min: w.Min[f], Typ: w.Typ[f], Max: w.Max[f]} }

// left is the least that any string leaves over in one of a row's corners at
// the present setting, in volts; NaN where one has no stable temperature.
func (d *dialler) left(r *row, which int) (float64, error) {
	least := math.Inf(1)
	for i, l := range d.lines {
		var w worst
		at, ok, err := l.corner(&w, l.reach, r.corners[i][which])
		var left leftOver
		if ok {
			left, err = l.headroom(at.volts, at.ohms)
		}
		if !ok && err == nil || isRunaway(err) {
			l.toTypical()
			d.restart()
			return math.NaN(), nil
		}
		if err != nil {
			return 0, err
		}
		least = math.Min(least, left.headroom)
		l.toTypical()
	}
	return least, nil
}

const (
	// onTheEdge is how near in volts what is left over comes to nothing at a
	// limit.
	onTheEdge = 1e-4
	// limitPatience is how often a limit is drawn in.
	limitPatience = 40
)

// limit finds the highest setting that still regulates in a corner, between
// the rows where that ends, by regula falsi in its Illinois form.
//
// Source: dowell-jarratt (1971), from memory.
func (d *dialler) limit(rows []row, which int) (DialLimit, error) {
	if !(rows[0].left[which] >= 0) {
		return DialLimit{None: true}, nil
	}
	k := 1
	for k < len(rows) && rows[k].left[which] >= 0 {
		k++
	}
	if k == len(rows) {
		last, err := d.told(rows[k-1].setting)
		last.Whole = true
		return last, err
	}
	low, high := rows[k-1].setting, rows[k].setting
	atLow, atHigh := rows[k-1].left[which], rows[k].left[which]
	kept := 0 // which end stayed at the last step
	for range limitPatience {
		v := (low + high) / 2
		if !math.IsNaN(atHigh) {
			v = low + (high-low)*atLow/(atLow-atHigh)
		}
		if !(v > low && v < high) {
			break
		}
		d.set(v)
		stable, err := d.place(true)
		left := math.NaN()
		if err == nil && stable {
			left, err = d.left(&rows[k-1], which)
		}
		switch {
		case err != nil:
			return DialLimit{}, d.unsolvedDial(v, err)
		case math.Abs(left) < onTheEdge:
			return d.told(v)
		case left > 0:
			low, atLow = v, left
			if kept > 0 {
				atHigh /= 2
			}
			kept = 1
		default:
			high, atHigh = v, left
			if kept < 0 {
				atLow /= 2
			}
			kept = -1
		}
	}
	return d.told(low)
}

// told is a limit with what a meter reads there.
func (d *dialler) told(v float64) (DialLimit, error) {
	points, err := d.usual(v)
	if err != nil {
		return DialLimit{}, err
	}
	return DialLimit{Setting: v, Control: points[0].Control}, nil
}

const (
	// beyond is how far past the highest setting that regulates a voltage's
	// dial goes.
	beyond = 1.25
	// topPatience is how often the range that holds that setting is halved.
	topPatience = 24
)

// findTop ends a voltage's dial above the build's own setting and above what
// still regulates typically, at a figure whose steps are round; the supply is
// the most.
func (d *dialler) findTop() error {
	most := d.p.build.Supply.Voltage.Typ
	low, high := 0.0, most
	for range topPatience {
		mid := (low + high) / 2
		points, err := d.usual(mid)
		if err != nil {
			return err
		}
		holds := true
		for _, point := range points {
			holds = holds && !point.Runaway && point.LeftOver >= 0
		}
		if holds {
			low = mid
		} else {
			high = mid
		}
	}
	d.top = math.Min(most, (tablePoints-1)*roundUp(beyond*math.Max(low, d.table.Setting)/(tablePoints-1)))
	if d.top < d.table.Setting {
		d.top = d.table.Setting
	}
	return nil
}

// roundUp returns the next figure of few digits.
func roundUp(v float64) float64 {
	if !(v > 0) {
		return 1
	}
	decade := math.Pow(10, math.Floor(math.Log10(v)))
	for _, m := range []float64{1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 6, 8} {
		if m*decade >= v*(1-1e-9) {
			return m * decade
		}
	}
	return 10 * decade
}
