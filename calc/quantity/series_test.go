package quantity_test

import (
	"math"
	"strconv"
	"testing"

	"lanternbook/calc/quantity"
)

// The published table holds every value of the six series, each row with its
// source (IEC 60063:2015).
func TestPublishedSeries(t *testing.T) {
	seen := map[string]int{}
	for _, row := range published(t, "e_series.csv", 189) {
		want, err := strconv.ParseFloat(row["value_1_to_10"], 64)
		if err != nil || row["source"] == "" {
			t.Fatalf("bad row %v", row)
		}
		decade := quantity.Decade(row["series"])
		i := seen[row["series"]]
		seen[row["series"]]++
		if i >= len(decade) || decade[i] != want {
			t.Errorf("%s value %d: want %v, series is %v", row["series"], i, want, decade)
		}
	}
	for series, n := range seen {
		if got := len(quantity.Decade(series)); got != n || "E"+strconv.Itoa(n) != series {
			t.Errorf("%s has %d values, published are %d", series, got, n)
		}
	}
}

type nearestCase struct {
	name   string
	series string
	v      float64
	below  float64
	above  float64
}

func TestNearest(t *testing.T) {
	cases := []nearestCase{
		{name: "between two", series: "E24", v: 112, below: 110, above: 120},
		{name: "a preferred number itself", series: "E24", v: 110, below: 110, above: 110},
		{name: "one as a formula rounds it", series: "E24", v: 110.00000000001, below: 110, above: 110},
		{name: "one as a formula rounds it down", series: "E24", v: 109.99999999999, below: 110, above: 110},
		{name: "close to one, not it", series: "E96", v: 110.001, below: 110, above: 113},
		{name: "across the decade", series: "E24", v: 95, below: 91, above: 100},
		{name: "just below a decade", series: "E3", v: 999.9999, below: 470, above: 1000},
		{name: "at a decade", series: "E96", v: 1000, below: 1000, above: 1000},
		{name: "below one", series: "E24", v: 0.23, below: 0.22, above: 0.24},
		{name: "milliohms", series: "E12", v: 0.0048, below: 0.0047, above: 0.0056},
		{name: "megohms", series: "E6", v: 5e6, below: 4.7e6, above: 6.8e6},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			below, above := quantity.Nearest(c.series, c.v)
			if below != c.below || above != c.above {
				t.Errorf("Nearest(%s, %v) = %v, %v, want %v, %v", c.series, c.v, below, above, c.below, c.above)
			}
		})
	}
	for _, v := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if below, above := quantity.Nearest("E24", v); !math.IsNaN(below) || !math.IsNaN(above) {
			t.Errorf("Nearest(E24, %v) = %v, %v, want NaN", v, below, above)
		}
	}
	if below, above := quantity.Nearest("E7", 5); !math.IsNaN(below) || !math.IsNaN(above) {
		t.Errorf("Nearest(E7, 5) = %v, %v, want NaN", below, above)
	}
}

// Neighbours enclose the value and leave no preferred number between them.
func TestNearestEncloses(t *testing.T) {
	for _, series := range []string{"E3", "E6", "E12", "E24", "E48", "E96"} {
		step := 0.0 // the widest step of the series, as a ratio
		decade := append(quantity.Decade(series), 10)
		for i := 1; i < len(decade); i++ {
			step = math.Max(step, decade[i]/decade[i-1])
		}
		for v := 1e-3; v < 1e9; v *= 1.0137 {
			below, above := quantity.Nearest(series, v)
			if !(below <= v && v <= above && above/below <= step*(1+1e-12)) {
				t.Fatalf("Nearest(%s, %v) = %v, %v", series, v, below, above)
			}
		}
	}
}
