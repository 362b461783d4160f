package web_test

import (
	"context"
	"fmt"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

func TestSmallPicture(t *testing.T) {
	_, r, _ := picture(web.Usual, web.WideFrame, harbourSupply, harbour...)
	var strs []web.SmallString
	for _, s := range r.Strings {
		strs = append(strs, web.SmallString{Column: s.Columns.Usual})
	}
	v := web.NewSmallPicture(calc.Range{Min: 23.5, Typ: 24, Max: 24.5}, strs, "three columns")
	if len(v.Columns) != 3 {
		t.Fatalf("%d columns, want 3", len(v.Columns))
	}
	scale := float64(v.Foot-v.Band.Y) / 24.5 // pixels a volt: the band's upper edge is the supply's highest
	for i, c := range v.Columns {
		at, leds := float64(v.Foot), 0
		for _, b := range c.Blocks {
			near(t, fmt.Sprintf("column %d, lower edge of %s", i, b.Kind), float64(b.Y+b.Tall), at, 1e-9)
			near(t, fmt.Sprintf("column %d, %s tall", i, b.Kind), float64(b.Tall), b.Volts*scale, 1e-9)
			at = float64(b.Y)
			if b.Kind == "led" {
				leds++
			}
		}
		if want := []int{6, 7, 7}[i]; leds != want {
			t.Errorf("column %d has %d LEDs, want %d", i, leds, want)
		}
		if i > 0 && v.Columns[i-1].X+v.Columns[i-1].Wide >= c.X {
			t.Errorf("columns %d and %d overlap", i-1, i)
		}
		if c.X+c.Wide > v.Wide {
			t.Errorf("column %d leaves the drawing", i)
		}
	}
	if v.Columns[0].Over != nil || v.Columns[1].Over == nil {
		t.Error("only the second column is too tall")
	}
	var b strings.Builder
	if err := web.Small(v).Render(context.Background(), &b); err != nil || !strings.Contains(b.String(), `aria-label="three columns"`) {
		t.Errorf("rendered %q, %v", b.String(), err)
	}
}

func TestSmallPictureOfNothing(t *testing.T) {
	v := web.NewSmallPicture(calc.Range{}, nil, "not solved")
	if !(v.Wide > 0) || len(v.Columns) != 0 {
		t.Errorf("%+v", v)
	}
}
