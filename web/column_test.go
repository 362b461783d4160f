package web_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// near fails unless got is within tol of want; NaN is near nothing.
func near(t *testing.T, name string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %v, want %v within %v", name, got, want, tol)
	}
}

// someString is a string as a report has it: what each part takes is given,
// what is left over makes up the sum.
type someString struct {
	supply, run, driver, sense float64
	leds                       []calc.ColumnLED
	kind                       string
}

func picture(corner string, f web.Frame, supply calc.Spread, strs ...someString) (calc.Build, calc.Report, web.PictureView) {
	cct, red := 4000.0, 627.0
	b := calc.Build{Supply: calc.Supply{Voltage: supply}, Parts: map[string]calc.Part{
		"white": {Type: calc.TypeLED, LED: &calc.LED{Common: calc.Common{Name: "white, small chip, 0.2 W"}, CCT: &cct}},
		"red":   {Type: calc.TypeLED, LED: &calc.LED{Common: calc.Common{Name: "red 5 mm"}, Wavelength: &red}},
		"npn":   {Type: calc.TypeNPN, Transistor: &calc.Transistor{Common: calc.Common{Name: "BC547B"}}},
	}}
	r := calc.Report{}
	for i, s := range strs {
		left := s.supply - s.run - s.driver - s.sense
		str := calc.String{Label: string(rune('A' + i)), Quantity: i + 1, FedBy: "r1"}
		for _, led := range s.leds {
			left -= led.Each * float64(led.Quantity)
			str.LEDs = append(str.LEDs, calc.LEDStack{Part: led.Part, Quantity: led.Quantity})
		}
		if s.kind == calc.KindResistor {
			str.Driver = calc.Driver{Kind: s.kind, Resistor: &calc.ResistorDriver{}}
		} else {
			str.Driver = calc.Driver{Kind: calc.KindTwoTransistor, TwoTransistor: &calc.TwoTransistor{Pass: "npn"}}
		}
		c := calc.Column{Supply: s.supply, Run: s.run, LEDs: s.leds, LeftOver: left, Driver: s.driver, Sense: s.sense, Current: 0.0341, Heat: 0.123}
		b.Strings = append(b.Strings, str)
		r.Strings = append(r.Strings, calc.StringReport{
			Label: str.Label, Quantity: str.Quantity, Kind: str.Driver.Kind,
			Headroom: calc.Range{Min: left - 0.7, Typ: left, Max: left + 0.9},
			Columns:  calc.Columns{Usual: c, Cold: c, Hot: c},
		})
	}
	return b, r, web.NewPicture(b, r, corner, f)
}

// blocksOf lists all blocks of a column from the foot up.
func blocksOf(c web.ColumnView) []web.Block {
	var blocks []web.Block
	for _, p := range c.Parts {
		blocks = append(blocks, p.Blocks...)
	}
	return blocks
}

var harbour = []someString{
	{supply: 23.5, run: 0.45, driver: 0.2, sense: 0.61, leds: []calc.ColumnLED{{Part: "white", Quantity: 6, Each: 3.19}}},
	{supply: 23.5, run: 0.45, driver: 0.2, sense: 0.61, leds: []calc.ColumnLED{{Part: "white", Quantity: 7, Each: 3.22}}},
	{supply: 23.5, run: 0.45, driver: 0.2, sense: 1.96, leds: []calc.ColumnLED{{Part: "white", Quantity: 2, Each: 3.1}, {Part: "red", Quantity: 5, Each: 2.05}}},
}

var harbourSupply = calc.Spread{Min: 23.5, Typ: 24, Max: 24.5}

// frames are all the widths in which a column is drawn.
var frames = []web.Frame{web.FrameFor(1), web.FrameFor(4), web.FrameFor(6), web.FrameFor(9), web.FrameFor(40)}

// Every block is as tall as its voltage on the one scale, stands on the one
// below it, and together they reach the supply, or above it by what is missing.
func TestColumnHeights(t *testing.T) {
	for _, f := range frames {
		_, r, v := picture(web.Usual, f, harbourSupply, harbour...)
		for i, c := range v.Columns {
			name := fmt.Sprintf("%s %s", f.Name, c.Label)
			at := c.Scale.Y(0)
			sum := 0.0
			for _, b := range blocksOf(c) {
				near(t, name+" "+b.Kind+" lower edge", float64(b.Y+b.Tall), float64(at), 1e-9)
				near(t, name+" "+b.Kind+" tall", float64(b.Tall), float64(c.Scale.Tall(b.Volts)), 1e-9)
				at = b.Y
				sum += b.Volts
			}
			col := r.Strings[i].Columns.Usual
			want := col.Supply + max(0, -col.LeftOver)
			near(t, name+" sum", sum, want, 1e-9)
			near(t, name+" top", c.Top, want, 1e-9)
		}
	}
}

func TestColumnOrder(t *testing.T) {
	_, _, v := picture(web.Usual, web.WideFrame, harbourSupply, harbour...)
	var kinds []string
	for _, b := range blocksOf(v.Columns[2]) {
		kinds = append(kinds, b.Kind+" "+b.Name)
	}
	got := strings.Join(kinds, ", ")
	want := "sense sense, driver , left left over, led red, led red, led red, led red, led red, led neutral white, led neutral white, run "
	if got != want {
		t.Errorf("from the foot up: %s\nwant %s", got, want)
	}
}

func TestColumnOvershoot(t *testing.T) {
	_, _, v := picture(web.Cold, web.WideFrame, harbourSupply, harbour...)
	if v.Columns[0].Over != nil {
		t.Error("string A fits and is drawn as too tall")
	}
	over := v.Columns[1].Over
	if over == nil {
		t.Fatal("string B is 0.3 V short and is not drawn as too tall")
	}
	near(t, "short by", over.Volts, 0.3, 1e-9)
	near(t, "lower edge of what is too much", float64(over.Y+over.Tall), float64(v.Supply), 1e-9)
	near(t, "tall", float64(over.Tall), float64(v.Scale.Tall(0.3)), 1e-9)
	if want := "0.30\u00a0V short"; over.Text != want || v.Columns[1].Left != want {
		t.Errorf("flag %q, words %q, want %q", over.Text, v.Columns[1].Left, want)
	}
	if got := v.Columns[1].Outcome; got != "fail" {
		t.Errorf("outcome %q, want fail", got)
	}
	if over.Y-27 < 0 {
		t.Errorf("the flag begins at %v, above the drawing", over.Y-27)
	}
}

// The words in a block stay inside it, and notes keep clear of one another.
func TestColumnWordsDoNotOverlap(t *testing.T) {
	many := someString{supply: 48, run: 0.05, driver: 0.05, sense: 0.3, leds: []calc.ColumnLED{{Part: "red", Quantity: 1, Each: 1.9}, {Part: "white", Quantity: 1, Each: 0.2}, {Part: "red", Quantity: 20, Each: 2.1}}}
	tiny := someString{supply: 48, run: 0.02, driver: 0.01, sense: 0.02, leds: []calc.ColumnLED{{Part: "red", Quantity: 1, Each: 0.1}, {Part: "white", Quantity: 1, Each: 0.1}, {Part: "red", Quantity: 2, Each: 0.1}}}
	for _, f := range frames {
		_, _, v := picture(web.Usual, f, calc.Spread{Min: 46, Typ: 48, Max: 60}, many, tiny, harbour[1])
		for _, c := range v.Columns {
			for _, b := range blocksOf(c) {
				if b.Figure == "" && b.Name == "" {
					continue
				}
				if b.Name != "" && (b.NameY-11 < b.Y || b.NameY > b.Y+b.Tall) {
					t.Errorf("%s %s: name of %s at %v leaves its block %v to %v", f.Name, c.Label, b.Kind, b.NameY, b.Y, b.Y+b.Tall)
				}
				if b.FigY-11 < b.Y || b.FigY > b.Y+b.Tall {
					t.Errorf("%s %s: figure of %s at %v leaves its block %v to %v", f.Name, c.Label, b.Kind, b.FigY, b.Y, b.Y+b.Tall)
				}
				if b.Stack && b.Name != "" && b.FigY-b.NameY < 14 {
					t.Errorf("%s %s: name and figure of %s lie on one another", f.Name, c.Label, b.Kind)
				}
			}
			for i, n := range c.Notes {
				if n.Y < 10 || n.Y > f.Height {
					t.Errorf("%s %s: note %q at %v leaves the drawing", f.Name, c.Label, n.Text, n.Y)
				}
				if i > 0 && c.Notes[i-1].Y-n.Y < 15-1e-9 {
					t.Errorf("%s %s: notes %q and %q are %v apart", f.Name, c.Label, c.Notes[i-1].Text, n.Text, c.Notes[i-1].Y-n.Y)
				}
			}
		}
	}
}

// As many columns as stand side by side fill the page and do not overflow it.
func TestFrameFor(t *testing.T) {
	for n := 1; n <= 12; n++ {
		f := web.FrameFor(n)
		if total := f.Width * web.Px(n); total > 724 {
			t.Errorf("%d columns are %v wide", n, total)
		}
		if f.Left+f.Block > f.Width || f.Block < 40 {
			t.Errorf("%d columns: block of %v from %v in %v", n, f.Block, f.Left, f.Width)
		}
	}
	if web.FrameFor(13).Width != web.FrameFor(300).Width {
		t.Error("columns go on shrinking where the picture scrolls")
	}
}

func TestColumnMergesThinLEDs(t *testing.T) {
	long := someString{supply: 48, run: 0.1, driver: 0.2, sense: 1, leds: []calc.ColumnLED{{Part: "red", Quantity: 20, Each: 2.1}}}
	_, _, v := picture(web.Usual, web.WideFrame, calc.Exactly(48), long)
	var leds []web.Block
	for _, b := range blocksOf(v.Columns[0]) {
		if b.Kind == "led" {
			leds = append(leds, b)
		}
	}
	if len(leds) != 20 {
		t.Errorf("2.1 V on a 48 V axis is tall enough for its name: %d blocks, want 20", len(leds))
	}
	_, _, v = picture(web.Usual, web.WideFrame, calc.Exactly(60), long)
	leds = nil
	for _, b := range blocksOf(v.Columns[0]) {
		if b.Kind == "led" {
			leds = append(leds, b)
		}
	}
	if len(leds) != 1 || len(leds[0].Ticks) != 19 || leds[0].Figure != "20 × 2.10" || leds[0].Name != "red" {
		t.Fatalf("on a 60 V axis: %d blocks, first %+v, want one of 20 with 19 marks", len(leds), leds[0])
	}
	for i, y := range leds[0].Ticks {
		near(t, "mark", float64(leds[0].Y+leds[0].Tall-y), float64(v.Scale.Tall(2.1*float64(i+1))), 1e-9)
	}
}

func TestColumnLinksToItsFields(t *testing.T) {
	_, _, v := picture(web.Usual, web.WideFrame, harbourSupply, harbour...)
	var got []string
	for _, p := range v.Columns[0].Parts {
		got = append(got, p.Href)
	}
	if want := "6 × white, small chip, 0.2 W, 3.19\u00a0V each, 19.1\u00a0V together"; v.Columns[0].Parts[3].Voice != want {
		t.Errorf("the LEDs say %q, want %q", v.Columns[0].Parts[3].Voice, want)
	}
	want := "#f-strings-0-driver-sense-ohms #f-strings-0-driver-pass #string-0 #f-strings-0-leds-0-quantity #f-strings-0-fed-by"
	if strings.Join(got, " ") != want {
		t.Errorf("links %v, want %s", got, want)
	}
}

func TestColumnWords(t *testing.T) {
	b, r, _ := picture(web.Usual, web.WideFrame, harbourSupply, harbour...)
	wanted := 0.034
	b.Strings[0].Wanted = &calc.Wanted{Current: &wanted}
	c := web.NewPicture(b, r, web.Usual, web.WideFrame).Columns[0]
	for _, words := range []struct{ name, got, want string }{
		{"current", c.Current, "34.1\u00a0mA"},
		{"wanted", c.Wanted, "wanted 34\u00a0mA"},
		{"left over", c.Left, "3.10\u00a0V left over"},
		{"heat", c.Heat, "0.12\u00a0W in BC547B"},
		{"times", c.Times, "×\u00a01"},
		{"outcome", c.Outcome, "pass"},
		{"voice", c.Voice, "String A, 1 alike: 34.1\u00a0mA, 3.10\u00a0V left over; left over 2.4\u00a0V to 4.0\u00a0V in the worst case"},
	} {
		if words.got != words.want {
			t.Errorf("%s: %q, want %q", words.name, words.got, words.want)
		}
	}
}

func TestPictureAxis(t *testing.T) {
	_, _, v := picture(web.Cold, web.WideFrame, harbourSupply, harbour...)
	near(t, "top of the axis", v.Scale.Top, 24.5, 0)
	near(t, "supply", float64(v.Supply), float64(v.Scale.Y(23.5)), 1e-9)
	near(t, "band", float64(v.Band.Tall), float64(v.Scale.Tall(1)), 1e-9)
	if v.Words != "supply 23.5 to 24.5 V, drawn at 23.5\u00a0V" {
		t.Errorf("words %q", v.Words)
	}
	for i, tick := range v.Ticks {
		if i > 0 && v.Ticks[i-1].Y-tick.Y < 30 {
			t.Errorf("marks %s and %s are %v apart", v.Ticks[i-1].Text, tick.Text, v.Ticks[i-1].Y-tick.Y)
		}
	}
	if v.Ticks[0].Text != "0" || len(v.Ticks) < 5 {
		t.Errorf("marks %+v", v.Ticks)
	}
}

// A build without a string, and one whose figures are all 0, still draw.
func TestPictureOfNothing(t *testing.T) {
	_, _, v := picture(web.Usual, web.WideFrame, calc.Exactly(0))
	if len(v.Ticks) == 0 || !(v.Scale.Top > 0) {
		t.Errorf("no axis: %+v", v.Scale)
	}
	_, _, v = picture(web.Hot, web.FrameFor(12), calc.Exactly(0), someString{})
	if len(v.Columns) != 1 {
		t.Errorf("%d columns, want 1", len(v.Columns))
	}
}
