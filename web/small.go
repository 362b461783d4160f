package web

import (
	"slices"

	"lanternbook/calc"
)

// SmallPicture is the columns of a build drawn small, without words: what
// stands for the build on the shelf.
type SmallPicture struct {
	Wide, Tall Px // of the drawing
	Supply     Px // the supply's line
	Band       Band
	Foot       Px
	Columns    []SmallColumn
	Voice      string // "2 columns on 24 V"
}

// SmallColumn is one string of it.
type SmallColumn struct {
	X, Wide Px
	Blocks  []Block
	Over    *Over // nil when the stack fits
}

// SmallString is what is drawn of one string.
type SmallString struct {
	Column calc.Column
	Lights []Light // of Column.LEDs, in its order
}

const (
	smallTall   Px = 96
	smallMargin Px = 8
	smallColumn Px = 26
	smallGap    Px = 14
)

// NewSmallPicture draws strings on a supply, side by side on one axis.
func NewSmallPicture(supply calc.Range, strings []SmallString, voice string) SmallPicture {
	top := max(supply.Min, supply.Typ, supply.Max)
	for _, s := range strings {
		top = max(top, s.Column.Supply, s.Column.Supply-s.Column.LeftOver)
	}
	if !(top > 0) {
		top = 1
	}
	f := Frame{Block: smallColumn, Height: smallTall, Foot: smallTall - 2, Margin: smallMargin}
	s := Scale{Top: top, Foot: f.Foot, Margin: f.Margin}
	v := SmallPicture{
		Wide: smallGap + Px(max(len(strings), 1))*(smallColumn+smallGap), Tall: smallTall, Foot: f.Foot,
		Supply: s.Y(supply.Typ), Band: Band{Y: s.Y(supply.Max), Tall: s.Tall(supply.Max - supply.Min)}, Voice: voice,
	}
	for i, str := range strings {
		f.Left = smallGap + Px(i)*(smallColumn+smallGap)
		v.Columns = append(v.Columns, smallStack(str, s, f))
	}
	return v
}

// smallStack draws one string: every LED a block, however thin.
func smallStack(str SmallString, s Scale, f Frame) SmallColumn {
	c := str.Column
	v := SmallColumn{X: f.Left, Wide: f.Block}
	top := 0.0
	add := func(kind string, volts float64, fill string) {
		if volts > 0 {
			v.Blocks = append(v.Blocks, Block{Kind: kind, Volts: volts, Fill: fill, Y: s.Y(top + volts), Tall: s.Tall(volts)})
			top += volts
		}
	}
	add("sense", c.Sense, "")
	add("driver", c.Driver, "")
	add("left", c.LeftOver, "")
	for j, led := range slices.Backward(c.LEDs) {
		light := Emitted(calc.LED{})
		if j < len(str.Lights) {
			light = str.Lights[j]
		}
		for range led.Quantity {
			add("led", led.Each, light.Fill)
		}
	}
	add("run", c.Run, "")
	if c.LeftOver < 0 {
		v.Over = over(c, s, f)
	}
	return v
}
