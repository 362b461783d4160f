package web

import (
	"math"
	"strconv"
	"strings"
)

// CurveView is a small chart of one figure against another, with labels as
// text and lines as paths.
type CurveView struct {
	Title  string // "Volts against current"
	Voice  string // the curve in a sentence
	Line   string // path
	Band   string // path round the spread; "" when there is none
	X, Y   []MarkView
	XName  string    // "mA"
	YName  string    // "V"
	Dots   []DotView // figures of the datasheet
	Points []DotView // measured
	End    Px        // where the greatest value allowed is
	Ends   string    // what it is: "30 mA at most"; "" when it is not known
	EndsBy string    // anchor of these words
}

// MarkView is a mark of an axis.
type MarkView struct {
	At   Px
	Text string
}

// DotView is a point of the chart.
type DotView struct {
	X, Y  Px
	Voice string
}

// Curve is what a chart is drawn from. X and Y run in the units of the marks.
type Curve struct {
	Title, Voice string
	XName, YName string
	X, Y         []float64
	Low, High    []float64 // the spread round Y; nil when there is none
	Dots         [][2]float64
	DotVoice     string
	Points       [][2]float64
	Most         float64 // [XName] greatest value allowed; 0 when not known
	MostWords    string
	LogX         bool // the x axis in decades
	FromZero     bool // the y axis begins at 0
}

// Measures of a chart.
const (
	CurveWide  Px = 340
	CurveTall  Px = 222
	curveLeft  Px = 46
	curveRight Px = 328
	curveTop   Px = 24
	curveFoot  Px = 186
)

// axis maps values to places.
type axis struct {
	from, to float64
	a, b     Px
	log      bool
}

func (x axis) at(v float64) Px {
	share := (v - x.from) / (x.to - x.from)
	if x.log {
		share = math.Log(v/x.from) / math.Log(x.to/x.from)
	}
	return x.a + Px(share)*(x.b-x.a)
}

// marks are some five round values of the axis; decades of a logarithmic one.
func (x axis) marks() []MarkView {
	var list []MarkView
	if x.log {
		for p := math.Ceil(math.Log10(x.from) - 1e-9); p <= math.Log10(x.to)+1e-9; p++ {
			list = append(list, MarkView{x.at(math.Pow(10, p)), short(math.Pow(10, p))})
		}
		return list
	}
	step := roundStep((x.to - x.from) / 5)
	for i := math.Ceil(x.from/step - 1e-9); i*step <= x.to+step*1e-9; i++ {
		list = append(list, MarkView{x.at(i * step), short(i * step)})
	}
	return list
}

// short writes a mark without the noise of binary fractions.
func short(v float64) string {
	v += 0 // a negative zero becomes zero
	return strings.Replace(strconv.FormatFloat(v, 'g', 6, 64), "-", "−", 1)
}

// NewCurve draws a curve; false when there is nothing finite to draw.
func NewCurve(c Curve) (CurveView, bool) {
	if len(c.X) < 2 || len(c.X) != len(c.Y) {
		return CurveView{}, false
	}
	lowest, highest := math.Inf(1), math.Inf(-1)
	for _, list := range [][]float64{c.Y, c.Low, c.High} {
		for _, y := range list {
			lowest, highest = math.Min(lowest, y), math.Max(highest, y) // NaN makes both NaN
		}
	}
	for _, p := range append(append([][2]float64{}, c.Dots...), c.Points...) {
		lowest, highest = math.Min(lowest, p[1]), math.Max(highest, p[1])
	}
	first, last := c.X[0], c.X[len(c.X)-1]
	if !(highest-lowest < 1e6 && last-first > 0 && last-first < 1e9) || c.LogX && !(first > 0) {
		return CurveView{}, false
	}
	if c.FromZero {
		lowest = math.Min(lowest, 0)
	}
	step := roundStep(math.Max(highest-lowest, 1e-3) / 4)
	lowest, highest = math.Floor(lowest/step+1e-9)*step, math.Ceil(highest/step-1e-9)*step
	if highest <= lowest {
		highest = lowest + step
	}
	x := axis{first, last, curveLeft, curveRight, c.LogX}
	y := axis{lowest, highest, curveFoot, curveTop, false}

	v := CurveView{Title: c.Title, Voice: c.Voice, XName: c.XName, YName: c.YName, X: x.marks(), Y: y.marks()}
	v.Line = "M" + polyline(c.X, c.Y, x, y)
	if len(c.Low) == len(c.X) && len(c.High) == len(c.X) {
		backX, backY := reversed(c.X), reversed(c.Low)
		v.Band = "M" + polyline(c.X, c.High, x, y) + "L" + polyline(backX, backY, x, y) + "Z"
	}
	for _, p := range c.Dots {
		v.Dots = append(v.Dots, DotView{x.at(p[0]), y.at(p[1]), c.DotVoice})
	}
	for _, p := range c.Points {
		if p[0] >= first && p[0] <= last {
			v.Points = append(v.Points, DotView{x.at(p[0]), y.at(p[1]), "measured"})
		}
	}
	if c.Most >= first && c.Most <= last && c.Most > 0 {
		v.End, v.Ends, v.EndsBy = x.at(c.Most), c.MostWords, "start"
		if v.End > (curveLeft+curveRight)/2 {
			v.EndsBy = "end"
		}
	}
	return v, true
}

// polyline is the points of a path without its first letter.
func polyline(xs, ys []float64, x, y axis) string {
	places := make([]string, len(xs))
	for i := range xs {
		places[i] = x.at(xs[i]).String() + " " + y.at(ys[i]).String()
	}
	return strings.Join(places, "L")
}

func reversed(list []float64) []float64 {
	back := make([]float64, len(list))
	for i, v := range list {
		back[len(list)-1-i] = v
	}
	return back
}

// endX is where the words at the end line stand.
func (v CurveView) endX() Px {
	if v.EndsBy == "end" {
		return v.End - 5
	}
	return v.End + 5
}
