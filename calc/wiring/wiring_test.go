package wiring_test

import (
	"encoding/csv"
	"os"
	"strconv"
	"testing"

	"lanternbook/calc/wiring"
)

func near(t *testing.T, name string, got, want, tol float64) {
	t.Helper()
	d := got - want
	if !(d <= tol && d >= -tol) {
		t.Errorf("%s = %.9g, want %.9g (± %.3g)", name, got, want, tol)
	}
}

// table reads a published table of testdata by its column names.
func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/published/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, row := range rows[1:] {
		m := map[string]string{}
		for i, head := range rows[0] {
			m[head] = row[i]
		}
		out = append(out, m)
	}
	return out
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// The handbook prints ohms per 1000 ft to four digits; its table and the
// formula differ by up to 0.04 %.
func TestGaugesAsTheHandbookPrintsThem(t *testing.T) {
	for _, row := range table(t, "wire_awg.csv") {
		n := int(number(t, row["awg"]))
		c := wiring.AWG(n)
		want := number(t, row["ohm_per_km_20C_handbook"])
		near(t, "AWG "+row["awg"], c.OhmsPerMetre*1000, want, 1e-3*want)
		near(t, "area of AWG "+row["awg"], c.Area*1e6, number(t, row["area_mm2"]), 1e-4)
		if hot := row["ohm_per_km_75C_NEC_table8"]; hot != "" {
			near(t, "AWG "+row["awg"]+" at 75 °C", c.At(75)*1000, number(t, hot), 3e-3*number(t, hot))
		}
	}
}

func TestFlexibleCopperAsTheStandardHasIt(t *testing.T) {
	for _, row := range table(t, "wire_iec60228.csv") {
		c, err := wiring.ParseConductor(row["nominal_mm2"] + " mm2")
		if err != nil {
			t.Fatal(err)
		}
		near(t, row["nominal_mm2"]+" mm2", c.OhmsPerMetre*1000, number(t, row["class5_plain_max_ohm_per_km"]), 1e-9)
	}
}

type spelling struct {
	text string
	ohms float64 // per kilometre
	bad  bool
}

func TestParseConductor(t *testing.T) {
	for _, c := range []spelling{
		{text: "0.75 mm2", ohms: 26},
		{text: "0,75 mm²", ohms: 26},
		{text: "0.75mm2", ohms: 26},
		{text: "AWG 18", ohms: wiring.AWG(18).OhmsPerMetre * 1000},
		{text: "awg18", ohms: wiring.AWG(18).OhmsPerMetre * 1000},
		{text: "AWG 0", ohms: wiring.AWG(0).OhmsPerMetre * 1000},
		{text: "AWG 2/0", ohms: wiring.AWG(-1).OhmsPerMetre * 1000},
		{text: "AWG 00", ohms: wiring.AWG(-1).OhmsPerMetre * 1000},
		{text: "0.22 mm2", ohms: 1000.0 / 58 * 1.131 / 0.22},
		{text: "", bad: true}, {text: "0.75", bad: true}, {text: "AWG", bad: true}, {text: "AWG 41", bad: true},
		{text: "AWG -1", bad: true}, {text: "0 mm2", bad: true}, {text: "NaN mm2", bad: true}, {text: "AWG 5/0", bad: true},
	} {
		got, err := wiring.ParseConductor(c.text)
		if (err != nil) != c.bad {
			t.Errorf("ParseConductor(%q): error %v, want one: %v", c.text, err, c.bad)
			continue
		}
		if !c.bad {
			near(t, c.text, got.OhmsPerMetre*1000, c.ohms, 1e-6*c.ohms)
		}
	}
}

// feeder is n equal loads along a line fed from one end.
func feeder(n int, ohms, amperes float64) (tree wiring.Tree, loads []wiring.Load) {
	for i := range n {
		tree.Parent = append(tree.Parent, i-1)
		tree.Ohms = append(tree.Ohms, ohms/float64(n))
		loads = append(loads, wiring.Load{At: i, Current: amperes / float64(n)})
	}
	return tree, loads
}

// Theraja & Theraja, Electrical Technology vol. III, ch. 40, ex. 40.2 (read in
// a notebook that works the book's example): 200 m loaded with 2 A/m, 0.3 Ω/km
// of one wire: 12.0 V at the far end.
func TestUniformlyLoadedFeeder(t *testing.T) {
	const n = 20000
	tree, loads := feeder(n, 0.3e-3*200, 2*200)
	var r wiring.Result
	tree.Solve(250, loads, &r)
	near(t, "drop", 250-r.Volts[n-1], 12.0, 0.05)
	near(t, "current", r.Total, 400, 1e-6)
}

// The same book, ex. 40.9: points of 40, 20, 60 and 30 A at 100, 150, 300 and
// 400 m, 0.1 A/m along 500 m, 0.0005 Ω/m of loop: 236.56 V at 150 m and
// 225.25 V at the far end of 250 V.
func TestMixedLoads(t *testing.T) {
	const n = 5000 // 0.1 m each
	tree, loads := feeder(n, 0.0005*500, 0.1*500)
	for _, p := range []struct{ at, amperes float64 }{{100, 40}, {150, 20}, {300, 60}, {400, 30}} {
		loads = append(loads, wiring.Load{At: int(p.at*n/500) - 1, Current: p.amperes})
	}
	var r wiring.Result
	tree.Solve(250, loads, &r)
	near(t, "at 150 m", r.Volts[150*n/500-1], 236.56, 0.005)
	near(t, "at the far end", r.Volts[n-1], 225.25, 0.005)
}

func TestSlopedLoadsAreResistors(t *testing.T) {
	// A 3 Ω load behind 1 Ω of cable and 0.5 Ω of source, beside a 2 Ω load at
	// the supply: by hand, 4 Ω beside 2 Ω is 4/3 Ω.
	tree := wiring.Tree{Parent: []int{-1}, Ohms: []float64{1}, Source: 0.5}
	loads := []wiring.Load{{At: 0, Slope: 1.0 / 3}, {At: -1, Slope: 0.5}}
	var r wiring.Result
	tree.Solve(11, loads, &r)
	total := 11 / (0.5 + 4.0/3)
	near(t, "total", r.Total, total, 1e-12)
	near(t, "supply", r.Supply, 11-0.5*total, 1e-12)
	near(t, "load", r.Volts[0], (11-0.5*total)*3/4, 1e-12)
	near(t, "path", tree.PathOhms(0), 1.5, 0)
}

// Bird, Electrical Circuit Theory and Technology, 2nd ed., ch. 3 ex. 11 (read
// in a notebook): 10 Ω at 20 °C with 0.004/K is 13.2 Ω at 100 °C.
func TestCopperWarms(t *testing.T) {
	near(t, "R100", wiring.ResistanceAt(10, 20, 100, 0.004), 13.2, 0.05)
}
