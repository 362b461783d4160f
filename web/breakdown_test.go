package web_test

import (
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// broken is a breakdown of string A with figures that are easily added up.
func broken(left float64) web.BreakdownView {
	b, r := someBuild()
	d := calc.HeadroomBreakdown{
		String: "A", Typical: 1, Worst: left, Sentence: "The supply costs most.",
		Items: []calc.BreakdownItem{
			{Culprit: "supply", Name: "supply", Volts: -1, At: "/supply/voltage"},
			{Culprit: "tolerance", Name: "sense resistor", Volts: 0.25, At: "/strings/0/driver/sense/ohms"},
			{Culprit: "gain", Name: "sink gain", Volts: -0.0001, At: "/parts/npn/hfe"},
			{Culprit: "VBE", Name: "sink VBE", Volts: -0.0002, At: "/parts/npn/vbe_on"},
		},
		Usual: calc.Staircase{Supply: 20, Left: 1, Steps: []calc.Step{{Name: "run", Volts: 1, Level: 19}, {Name: "LEDs", Part: "white", Quantity: 6, Volts: 18, Level: 1}}},
		Least: calc.Staircase{Supply: 20, Left: left, Steps: []calc.Step{{Name: "run", Volts: 1, Level: 19}, {Name: "LEDs", Part: "white", Quantity: 6, Volts: 19 - left, Level: left}}},
	}
	return web.NewBreakdownView(web.MoreInput{ID: 1, Revision: 3, Build: b, Report: r}, map[int]calc.HeadroomBreakdown{0: d})
}

func TestStairsHangFromOneAnother(t *testing.T) {
	s := broken(0.5).Strings[0].Usual
	if len(s.Rows) != 4 {
		t.Fatalf("rows %+v", s.Rows)
	}
	feed, run, leds, left := s.Rows[0], s.Rows[1], s.Rows[2], s.Rows[3]
	volt := float64(feed.Wide) / 20
	near(t, "the supply from 0 V", float64(feed.X), float64(s.Zero), 1e-9)
	near(t, "the run ends at the supply", float64(run.X+run.Wide), float64(feed.X+feed.Wide), 1e-9)
	near(t, "the run's volt", float64(run.Wide), volt, 1e-9)
	near(t, "the LEDs end where the run begins", float64(leds.X+leds.Wide), float64(run.X), 1e-9)
	near(t, "the LEDs' volts", float64(leds.Wide), 18*volt, 1e-9)
	near(t, "left over, from 0 V to the LEDs", float64(left.X+left.Wide), float64(leds.X), 1e-9)
	if left.Kind != "left" || left.Figure != "1.00\u00a0V" || !left.Last || run.Last {
		t.Errorf("left over: %+v", left)
	}
}

func TestAShortfallStandsBelowZero(t *testing.T) {
	s := broken(-2).Strings[0]
	short := s.Worst.Rows[3]
	near(t, "ends at 0 V", float64(short.X+short.Wide), float64(s.Worst.Zero), 1e-9)
	if short.Kind != "crossed" || short.Name != "short" || short.Figure != "2.00\u00a0V" {
		t.Errorf("%+v", short)
	}
	if s.Usual.Zero != s.Worst.Zero {
		t.Error("the two staircases stand on different axes")
	}
}

func TestCulpritsAreToldWithTheirSigns(t *testing.T) {
	s := broken(0.5).Strings[0]
	type line struct {
		Name, Volts, Href string
		Gives             bool
	}
	want := []line{
		{"supply", "−1.00\u00a0V", "#f-supply-voltage", false},
		{"sense resistor, tolerance", "+0.250\u00a0V", "#f-strings-0-driver-sense-ohms", true},
		{"2 more, below a millivolt each", "−300\u00a0µV", "", false},
	}
	for i, c := range s.Culprits {
		if got := (line{c.Name, c.Volts, c.Href, c.Gives}); got != want[i] {
			t.Errorf("culprit %d: %+v, want %+v", i, got, want[i])
		}
	}
	if len(s.Culprits) != len(want) || s.Culprits[0].Wide != 4*s.Culprits[1].Wide {
		t.Errorf("%+v", s.Culprits)
	}
	if s.From != "1.00\u00a0V" || s.To != "0.500\u00a0V" || s.Sum != "−0.500\u00a0V" {
		t.Errorf("from %q to %q by %q", s.From, s.To, s.Sum)
	}
}
