package web_test

import (
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

func TestADrawIsTold(t *testing.T) {
	b, r := someBuild()
	all := &calc.Share{Value: 1, Low: 0.9962, High: 1}
	some := &calc.Share{Value: 0.99996, Low: 0.9981, High: 0.99999}
	d := web.Draw{Revision: 2, Samples: 1000, Seed: 5, Of: b, Result: &calc.ScatterResult{
		Samples: 1000, Builds: *some,
		Checks: []calc.ScatterCheck{
			{Code: "headroom", Where: "string A", Passed: 1000, Holds: all, Ample: all},
			{Code: "led-junction", Where: "string A"},
			{Code: "headroom", Where: "string B", Passed: 990, Tight: 9, Failed: 1, Holds: some, Ample: some},
		},
		Strings: []calc.ScatterString{{Label: "A", Quantity: 2, Current: calc.Distribution{
			Corners: calc.Range{Min: 0.01, Max: 0.03}, Least: 0.012, Mean: 0.02, Most: 0.028, Edges: []float64{0.01, 0.02, 0.03}, Counts: []int{1, 3},
		}}},
	}}
	v := web.NewSpreadView(web.MoreInput{ID: 1, Revision: 3, Build: b, Report: r}, &d)
	if len(v.Lead) != 1 || v.Lead[0] != "Of 1000 builds, 99.9\u00a0% (99.8 to 100.0\u00a0%) fail no check that can be judged." {
		t.Errorf("lead %q", v.Lead)
	}
	if v.Samples != "1000" || v.Seed != "5" || !strings.Contains(v.Old, "revision 2") {
		t.Errorf("%+v", v)
	}
	if len(v.Checks) != 2 || v.Checks[0].Where != "string B" || v.Checks[1].Passes != "not known" || !strings.Contains(v.Sure, "was drawn: 1.") || !strings.Contains(v.Sure, "99.6\u00a0%") {
		t.Errorf("checks %+v, %q", v.Checks, v.Sure)
	}
	h := v.Strings[0].Charts[0]
	if len(h.Bars) != 2 || h.Low != "10.0\u00a0mA" || h.High != "30.0\u00a0mA" {
		t.Fatalf("%+v", h)
	}
	near(t, "the second bar is three times as tall", float64(h.Bars[1].Tall), 3*float64(h.Bars[0].Tall), 1e-9)
	near(t, "the bars stand side by side", float64(h.Bars[0].X+h.Bars[0].Wide), float64(h.Bars[1].X), 1e-9)
	near(t, "the mean is in the middle", float64(h.MeanAt), float64(h.Bars[1].X), 1e-9)
}

func TestARunningDrawShowsHowFarItIs(t *testing.T) {
	b, r := someBuild()
	v := web.NewSpreadView(web.MoreInput{Build: b, Report: r}, &web.Draw{Samples: 1000, Done: 250, Running: true})
	if !v.Running || v.Now != "250 of 1000 builds" || v.Filled != 75 {
		t.Errorf("%+v", v)
	}
}
