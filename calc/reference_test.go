package calc_test

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lanternbook/calc"
)

// referenceCase is a build with its solution by an independent circuit
// simulator.
//
// Source: ngspice, reference/operating-points.
type referenceCase struct {
	Mode   string          `json:"mode"`
	Build  json.RawMessage `json:"build"`
	Expect struct {
		Strings []expectedString `json:"strings"`
		Rails   []expectedRail   `json:"rails"`
	} `json:"expect"`
}

// expectedString is one string's solution; powers and junctions are by role
// and of one single device.
type expectedString struct {
	Label    string             `json:"label"`
	Current  float64            `json:"current"`  // [A]
	Voltages map[string]float64 `json:"voltages"` // [V]
	Power    map[string]float64 `json:"power"`    // [W]
	Junction map[string]float64 `json:"junction"` // [°C]
}

// expectedRail is one base rail's solution.
type expectedRail struct {
	ID      string  `json:"id"`
	Voltage float64 `json:"voltage"` // [V]
}

// How near the simulator the engine must come.
const (
	currentShare, currentFloor = 1e-3, 1e-6 // [1], [A]
	powerShare, powerFloor     = 1e-3, 1e-5 // [1], [W]
	voltsNear                  = 2e-3       // [V]
	junctionNear               = 0.1        // [°C]
)

// referenceCount is how many cases there are of each mode, so that none gets
// lost.
var referenceCount = map[string]int{"plain": 15, "hotcold": 6, "thermal": 6, "runs": 9, "rail": 6}

func TestOperatingPointsAgreeWithSimulator(t *testing.T) {
	files, err := filepath.Glob(filepath.Join("..", "testdata", "reference", "operating-points", "*.json"))
	if err != nil {
		t.Fatal(err)
	}
	seen := map[string]int{}
	for _, file := range files {
		raw, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		var c referenceCase
		if err := json.Unmarshal(raw, &c); err != nil {
			t.Fatal(file, err)
		}
		seen[c.Mode]++
		t.Run(strings.TrimSuffix(filepath.Base(file), ".json"), func(t *testing.T) {
			b, err := calc.Read(c.Build)
			if err != nil {
				t.Fatal(err)
			}
			r, err := calc.Check(b)
			if err != nil {
				t.Fatal(err)
			}
			c.compare(t, r)
		})
	}
	for mode, want := range referenceCount {
		if seen[mode] != want {
			t.Errorf("%d cases of mode %s, want %d", seen[mode], mode, want)
		}
	}
}

// compare holds every figure of the case against the report's typical one.
func (c *referenceCase) compare(t *testing.T, r calc.Report) {
	t.Helper()
	if len(r.Strings) != len(c.Expect.Strings) || len(r.Rails) != len(c.Expect.Rails) {
		t.Fatalf("%d strings and %d rails, want %d and %d", len(r.Strings), len(r.Rails), len(c.Expect.Strings), len(c.Expect.Rails))
	}
	for i, want := range c.Expect.Strings {
		got := r.Strings[i]
		if got.Label != want.Label {
			t.Fatalf("string %q, want %q", got.Label, want.Label)
		}
		near(t, "current of "+want.Label, got.Current.Typ, want.Current, math.Max(currentShare*want.Current, currentFloor))
		for _, point := range slices.Sorted(keysOf(want.Voltages)) {
			near(t, point+" of "+want.Label, voltageAt(got.Voltages, point), want.Voltages[point], voltsNear)
		}
		for _, role := range slices.Sorted(keysOf(want.Power)) {
			watts := want.Power[role]
			near(t, role+" power of "+want.Label, deviceIn(t, got, role).Power.Typ, watts, math.Max(powerShare*watts, powerFloor))
		}
		for _, role := range slices.Sorted(keysOf(want.Junction)) {
			near(t, role+" junction of "+want.Label, deviceIn(t, got, role).Junction.Typ, want.Junction[role], junctionNear)
		}
	}
	for i, want := range c.Expect.Rails {
		near(t, "rail "+want.ID, r.Rails[i].Voltage.Typ, want.Voltage, voltsNear)
	}
}

// voltageAt returns a point's voltage, NaN where the string has no such point.
func voltageAt(v calc.Voltages, point string) float64 {
	at := map[string]*float64{"feed": &v.Feed, "tail": &v.Tail, "control": v.Control, "base": v.Base, "sense": v.Sense}[point]
	if at == nil {
		return math.NaN()
	}
	return *at
}
