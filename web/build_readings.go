package web

import (
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// ReadingView is a table of figures: of one string, or of the supply.
type ReadingView struct {
	Name   string // "String A"
	Times  string // "× 4"
	Rows   []ReadingRow
	Points []PointView // where a meter goes, on a usual day
}

// ReadingRow is one figure with its worst cases.
type ReadingRow struct {
	Name  string
	Low   string
	Usual string
	High  string
	Limit string // "" where none is known or none applies
	Words string // in the place of figures
}

// PointView is a place to put a meter's tip, and what it reads there.
type PointView struct {
	Name  string // "sense"
	Where string // "top of the sense resistor"
	Volts string
}

// ranged is a row for a range in one unit.
func ranged(name string, r calc.Range, unit string, digits int) ReadingRow {
	return ReadingRow{
		Name: name, Low: quantity.Format(r.Min, unit, digits), Usual: quantity.Format(r.Typ, unit, digits), High: quantity.Format(r.Max, unit, digits),
	}
}

// stringReading is every figure of string i.
func stringReading(b calc.Build, r calc.Report, i int) ReadingView {
	s := r.Strings[i]
	v := ReadingView{Name: "String " + s.Label, Times: "× " + strconv.Itoa(s.Quantity)}
	current := ranged("current", s.Current, quantity.Amp, 3)
	if most := ledLimit(b, i); most != nil {
		current.Limit = quantity.Text(*most, quantity.Amp)
	}
	v.Rows = append(v.Rows, current)
	if s.LuminousFlux != nil {
		v.Rows = append(v.Rows, ranged("light", *s.LuminousFlux, quantity.Lumen, 3))
	} else {
		v.Rows = append(v.Rows, ReadingRow{Name: "light", Words: "not known: an LED says no flux"})
	}
	v.Rows = append(v.Rows, ranged("across the LEDs", s.LEDVoltage, quantity.Volt, 3), leftRow(b, s))
	for _, d := range s.Devices {
		v.Rows = append(v.Rows, deviceRows(b, d)...)
	}
	v.Points = points(s)
	return v
}

// railReading is every figure of rail i.
func railReading(b calc.Build, r calc.Report, i int) ReadingView {
	rail := r.Rails[i]
	v := ReadingView{Name: "Rail " + rail.ID, Rows: []ReadingRow{ranged("rail", rail.Voltage, quantity.Volt, 3)}}
	for _, d := range rail.Devices {
		v.Rows = append(v.Rows, deviceRows(b, d)...)
	}
	return v
}

func leftRow(b calc.Build, s calc.StringReport) ReadingRow {
	if s.Kind == calc.KindResistor {
		return ranged("across the resistor", s.Headroom, quantity.Volt, 3)
	}
	row := ranged("left over", s.Headroom, quantity.Volt, 3)
	limit := calc.DefaultHeadroom
	if b.Limits != nil && b.Limits.Headroom != nil {
		limit = *b.Limits.Headroom
	}
	row.Limit = "at least " + quantity.Text(limit, quantity.Volt)
	return row
}

// ledLimit is the least of the greatest currents of a string's LEDs. [A]
func ledLimit(b calc.Build, i int) *float64 {
	var least *float64
	for _, stack := range b.Strings[i].LEDs {
		if led := b.Parts[stack.Part].LED; led != nil && led.MaxCurrent != nil && (least == nil || *led.MaxCurrent < *least) {
			least = led.MaxCurrent
		}
	}
	return least
}

// deviceRows are a part's power and, unless it is a resistor, its junction.
func deviceRows(b calc.Build, d calc.DeviceReport) []ReadingRow {
	name := RoleWords(b, d)
	power := ranged(name, d.Power, quantity.Watt, 2)
	if d.PowerLimit != nil {
		power.Limit = quantity.Text(*d.PowerLimit, quantity.Watt)
	}
	if d.Part == "" {
		return []ReadingRow{power}
	}
	junction := ReadingRow{Name: "its junction", Low: degrees(d.Junction.Min), Usual: degrees(d.Junction.Typ), High: degrees(d.Junction.Max)}
	if d.JunctionLimit != nil {
		junction.Limit = degrees(*d.JunctionLimit)
	}
	return []ReadingRow{power, junction}
}

// degrees writes a temperature to the degree, which is more than is known.
func degrees(c float64) string {
	return strings.Replace(fmt.Sprintf("%.0f\u00a0°C", c), "-", "−", 1)
}

// RoleWords says what a device is in the string, with its part.
func RoleWords(b calc.Build, d calc.DeviceReport) string {
	role := map[string]string{
		"sink_transistor": "sink", "pass_transistor": "pass", "follower_transistor": "follower", "sensor_transistor": "sensing",
		"resistor": "series resistor", "sense_resistor": "sense resistor", "pullup_resistor": "pull-up", "bias_resistor": "bias resistor",
		"upper_resistor": "upper resistor", "lower_resistor": "lower resistor", "set_resistor": "set resistor",
		"fet": "MOSFET", "regulator": "regulator", "module": "module", "opamp": "op-amp",
	}[d.Role]
	if strings.HasPrefix(d.Role, "led_") {
		role = "each LED"
	}
	if role == "" {
		role = strings.ReplaceAll(d.Role, "_", " ")
	}
	if d.Part == "" {
		return role
	}
	return role + ", " + partName(d.Part, b.Parts[d.Part])
}

// points lists where a meter goes, each against the string's own minus.
func points(s calc.StringReport) []PointView {
	list := []PointView{{"feed", "the string’s plus end", figureOf(s.Voltages.Feed)}, {"tail", "lower end of its LEDs", figureOf(s.Voltages.Tail)}}
	for _, p := range []struct {
		name, where string
		volts       *float64
	}{
		{"control", "what sets the current", s.Voltages.Control},
		{"base", "base of the transistor that carries the current", s.Voltages.Base},
		{"sense", "top of the sense resistor", s.Voltages.Sense},
	} {
		if p.volts != nil {
			list = append(list, PointView{p.name, p.where, figureOf(*p.volts)})
		}
	}
	return list
}

func figureOf(v float64) string { return quantity.Format(v, quantity.Volt, 3) }

// supplyReading is the load as the supply sees it, with the runs.
func supplyReading(b calc.Build, r calc.Report) ReadingView {
	s := r.Supply
	v := ReadingView{Name: "Supply", Times: b.Supply.Label}
	current := ranged("current", s.Current, quantity.Amp, 3)
	if b.Supply.MaxCurrent != nil {
		current.Limit = quantity.Text(*b.Supply.MaxCurrent, quantity.Amp)
	}
	v.Rows = append(v.Rows, current, ranged("power", s.Power, quantity.Watt, 3))
	if s.Loading != nil {
		v.Rows = append(v.Rows, ranged("of its rating", *s.Loading, quantity.Percent, 2))
	}
	v.Rows = append(v.Rows,
		ReadingRow{Name: "reaches the LEDs", Usual: quantity.Format(s.Efficiency, quantity.Percent, 2)},
		ReadingRow{Name: "air round the parts", Low: degrees(s.Inside.Min), Usual: degrees(s.Inside.Typ), High: degrees(s.Inside.Max)})
	for _, run := range r.Runs {
		v.Rows = append(v.Rows, ReadingRow{
			Name:  "run " + run.ID,
			Usual: quantity.Format(run.Current, quantity.Amp, 3), High: quantity.Format(run.Drop, quantity.Volt, 2) + " lost",
		})
	}
	return v
}
