package web

import (
	"math"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// StairsView is a staircase: every row is what one part takes of the supply's
// voltage, hung where the row above has left off; the last is what remains.
type StairsView struct {
	Name   string // "usual day"
	Voice  string // all of it in a sentence
	Wide   Px
	Tall   Px
	Foot   Px // below the last row
	Zero   Px // where 0 V is
	Supply Px
	Ticks  []MarkView
	Rows   []StairRow
}

// StairRow is one step.
type StairRow struct {
	Kind   string // "feed", "run", "led", "driver", "sense", "left", "crossed": the class that fills it
	Name   string
	Figure string // "19.14 V"
	Fill   string // "" where the class says it
	X, Y   Px
	Wide   Px
	Drop   Px // where the line to the next row stands
	Last   bool
}

// Measures of a staircase.
const (
	stairWide  Px = 346
	stairLeft  Px = 104
	stairWords Px = stairLeft - 10 // room for a step's name
	stairRight Px = 276
	stairEach  Px = 26 // from row to row
	stairBar   Px = 19
)

// stairScale is the axis that both staircases of a string share.
func stairScale(d calc.HeadroomBreakdown) axis {
	return axis{
		from: min(0, d.Usual.Left, d.Least.Left), to: max(d.Usual.Supply, d.Least.Supply, 1e-3),
		a: stairLeft, b: stairRight,
	}
}

// stairs draws the staircase of string i.
func stairs(name string, b calc.Build, i int, s calc.Staircase, x axis) StairsView {
	v := StairsView{Name: name, Wide: stairWide, Zero: x.at(0), Supply: x.at(s.Supply)}
	said := []string{"supply " + quantity.Format(s.Supply, quantity.Volt, 3)}
	add := func(kind, name, fill string, from, to, drop float64) {
		row := StairRow{Kind: kind, Name: shorten(name, stairWords), Figure: quantity.Format(math.Abs(to-from), quantity.Volt, 3), Fill: fill,
			X: x.at(min(from, to)), Y: Px(len(v.Rows)) * stairEach, Drop: x.at(drop)}
		row.Wide = max(x.at(max(from, to))-row.X, 1)
		v.Rows = append(v.Rows, row)
	}
	add("feed", "supply", "", 0, s.Supply, s.Supply)
	for _, step := range s.Steps {
		kind, words, fill := step.Name, step.Name, ""
		if step.Part != "" {
			light := Light{Word: step.Part}
			if led := b.Parts[step.Part].LED; led != nil {
				light = Emitted(*led)
			}
			times := strconv.Itoa(step.Quantity) + " × "
			kind, words, fill = "led", times+light.Word, light.Fill
			if wordsWide(words) > stairWords { // "cool white" is at least "white"
				words = times + light.Word[strings.LastIndexByte(light.Word, ' ')+1:]
			}
		}
		add(kind, words, fill, step.Level, step.Level+step.Volts, step.Level)
		said = append(said, words+" "+quantity.Format(step.Volts, quantity.Volt, 3))
	}
	left, kind := "left over", "left"
	switch {
	case b.Strings[i].Driver.Kind == calc.KindResistor:
		left, kind = "series resistor", "sense"
	case s.Left < 0:
		left, kind = "short", "crossed"
	}
	add(kind, left, "", 0, s.Left, 0)
	said = append(said, left+" "+quantity.Format(math.Abs(s.Left), quantity.Volt, 3))
	v.Rows[len(v.Rows)-1].Last = true
	v.Foot = Px(len(v.Rows))*stairEach - (stairEach - stairBar) + 4
	v.Tall = v.Foot + 20
	v.Ticks = x.marks()
	v.Voice = "On a " + name + ": " + strings.Join(said, ", ")
	return v
}

// down is the line from a row to the next.
func (r StairRow) down() string {
	return "M" + r.Drop.String() + " " + (r.Y + stairBar).String() + "v" + (stairEach - stairBar).String()
}

// upright is a line over all rows.
func (v StairsView) upright(x Px) string { return "M" + x.String() + " 0V" + v.Foot.String() }
