package web_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/web"
)

// places reads the points of a path that is made of M, L and Z alone.
func places(tb testing.TB, path string) [][2]float64 {
	tb.Helper()
	var list [][2]float64
	for _, point := range strings.FieldsFunc(path, func(r rune) bool { return strings.ContainsRune("MLZ", r) }) {
		x, y, found := strings.Cut(point, " ")
		px, errX := strconv.ParseFloat(x, 64)
		py, errY := strconv.ParseFloat(y, 64)
		if !found || errX != nil || errY != nil {
			tb.Fatalf("no place: %q in %q", point, path)
		}
		list = append(list, [2]float64{px, py})
	}
	return list
}

func TestCurveIsToScale(t *testing.T) {
	v, ok := web.NewCurve(web.Curve{
		X: []float64{0, 10, 20}, Y: []float64{2, 3, 4}, Low: []float64{1, 2, 3}, High: []float64{3, 4, 5},
		Dots: [][2]float64{{10, 3}}, Points: [][2]float64{{5, 2.5}, {99, 3}}, Most: 15, MostWords: "15 mA at most",
	})
	if !ok {
		t.Fatal("nothing is drawn")
	}
	line := places(t, v.Line)
	if len(line) != 3 {
		t.Fatalf("%d points drawn, want 3", len(line))
	}
	near(t, "equal steps to the right", line[2][0]-line[1][0], line[1][0]-line[0][0], 0.11)
	near(t, "equal steps up", line[1][1]-line[2][1], line[0][1]-line[1][1], 0.11)
	near(t, "the dot lies on the line", float64(v.Dots[0].Y), line[1][1], 0.06)
	near(t, "the dot's place", float64(v.Dots[0].X), line[1][0], 0.06)
	if len(v.Points) != 1 {
		t.Errorf("%d measured points drawn, want the one inside the axis", len(v.Points))
	}
	near(t, "the greatest value's place", float64(v.End), (line[1][0]+line[2][0])/2, 0.1)
	if v.Ends != "15 mA at most" {
		t.Errorf("it is named %q", v.Ends)
	}
	if n := len(places(t, v.Band)); n != 6 {
		t.Errorf("the band has %d corners, want 6", n)
	}
	texts := ""
	for _, m := range v.X {
		texts += m.Text + " "
	}
	if texts != "0 5 10 15 20 " {
		t.Errorf("marks at %q", texts)
	}
}

func TestCurveInDecades(t *testing.T) {
	v, ok := web.NewCurve(web.Curve{X: []float64{0.01, 0.1, 1, 10}, Y: []float64{0.5, 0.56, 0.62, 0.68}, LogX: true})
	if !ok {
		t.Fatal("nothing is drawn")
	}
	line := places(t, v.Line)
	for i := range 3 {
		near(t, "a decade's width", line[i+1][0]-line[i][0], line[1][0]-line[0][0], 0.11)
	}
	if len(v.X) != 4 || v.X[0].Text != "0.01" || v.X[3].Text != "10" {
		t.Errorf("marks %v", v.X)
	}
}

type noCurveCase struct {
	name  string
	curve web.Curve
}

func TestNoCurve(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []noCurveCase{
		{"nothing", web.Curve{}},
		{"one point", web.Curve{X: []float64{1}, Y: []float64{1}}},
		{"no two lists alike", web.Curve{X: []float64{1, 2}, Y: []float64{1}}},
		{"no width", web.Curve{X: []float64{1, 1}, Y: []float64{1, 2}}},
		{"to the left", web.Curve{X: []float64{2, 1}, Y: []float64{1, 2}}},
		{"a value that is no number", web.Curve{X: []float64{1, 2}, Y: []float64{1, nan}}},
		{"a place that is no number", web.Curve{X: []float64{nan, 2}, Y: []float64{1, 2}}},
		{"without end", web.Curve{X: []float64{1, 2}, Y: []float64{1, inf}}},
		{"a dot without end", web.Curve{X: []float64{1, 2}, Y: []float64{1, 2}, Dots: [][2]float64{{1, inf}}}},
		{"decades from nothing", web.Curve{X: []float64{0, 2}, Y: []float64{1, 2}, LogX: true}},
		{"beyond any figure", web.Curve{X: []float64{0, 1e300}, Y: []float64{1, 2}}},
	} {
		if _, ok := web.NewCurve(c.curve); ok {
			t.Errorf("%s: something is drawn", c.name)
		}
	}
}

// TestCurveStaysInItsFrame: whatever is drawn lies inside the drawing, and its
// axes carry a few marks.
func TestCurveStaysInItsFrame(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(2, 40).Draw(t, "points")
		log := rapid.Bool().Draw(t, "decades")
		c := web.Curve{LogX: log, FromZero: rapid.Bool().Draw(t, "from zero")}
		x := rapid.Float64Range(1e-6, 1e3).Draw(t, "first")
		for range n {
			c.X = append(c.X, x)
			c.Y = append(c.Y, rapid.Float64Range(-1e3, 1e3).Draw(t, "y"))
			x += rapid.Float64Range(1e-6, 1e3).Draw(t, "step")
		}
		v, ok := web.NewCurve(c)
		if !ok {
			t.Fatalf("nothing is drawn of %v, %v", c.X, c.Y)
		}
		for point := range strings.SplitSeq(strings.TrimPrefix(v.Line, "M"), "L") {
			var px, py float64
			if px, py = pair(point); !(px >= 0 && px <= float64(web.CurveWide) && py >= 0 && py <= float64(web.CurveTall)) {
				t.Fatalf("%q lies outside the drawing", point)
			}
		}
		if len(v.Y) < 2 || len(v.Y) > 12 || !log && (len(v.X) < 2 || len(v.X) > 12) {
			t.Fatalf("%d marks to the side, %d up", len(v.X), len(v.Y))
		}
	})
}

// pair reads "12.3 45"; what is none is not a number.
func pair(point string) (x, y float64) {
	left, right, _ := strings.Cut(point, " ")
	x, errX := strconv.ParseFloat(left, 64)
	y, errY := strconv.ParseFloat(right, 64)
	if errX != nil || errY != nil {
		return math.NaN(), math.NaN()
	}
	return x, y
}
