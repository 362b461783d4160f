package calc_test

import (
	"encoding/csv"
	"iter"
	"lanternbook/calc"
	"maps"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"lanternbook/calc/device"
)

// near fails unless got lies within tol of want; a NaN never does.
func near(t testing.TB, name string, got, want, tol float64) {
	t.Helper()
	if diff := math.Abs(got - want); !(diff <= tol) {
		t.Errorf("%s = %.9g, want %.9g within %.3g", name, got, want, tol)
	}
}

// table reads a file of testdata by its first line's names.
func table(t testing.TB, name string) []map[string]string {
	t.Helper()
	file, err := os.Open(filepath.Join("..", "testdata", filepath.FromSlash(name)))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = file.Close() }()
	lines, err := csv.NewReader(file).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, line := range lines[1:] {
		row := map[string]string{}
		for k, head := range lines[0] {
			row[head] = line[k]
		}
		rows = append(rows, row)
	}
	return rows
}

// number reads a cell that must hold a number.
func number(t testing.TB, cell string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(cell, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// cards reads the published transistor cards by their short names. An empty
// cell is the usual default, as the simulator took it.
func cards(t testing.TB) map[string]device.BJT {
	t.Helper()
	out := map[string]device.BJT{}
	for _, row := range table(t, "reference/transistor_spice.csv") {
		q := device.BJTDefaults()
		for name, field := range map[string]*float64{
			"is": &q.Is, "bf": &q.Bf, "nf": &q.Nf, "vaf": &q.Vaf, "ikf": &q.Ikf, "ise": &q.Ise, "ne": &q.Ne,
			"br": &q.Br, "nr": &q.Nr, "var": &q.Var, "ikr": &q.Ikr, "isc": &q.Isc, "nc": &q.Nc,
			"rb": &q.Rb, "irb": &q.Irb, "re": &q.Re, "rc": &q.Rc, "xtb": &q.Xtb, "eg": &q.Eg, "xti": &q.Xti,
		} {
			if row[name] != "" {
				*field = number(t, row[name])
			}
		}
		q.Rbm = q.Rb
		if row["rbm"] != "" {
			q.Rbm = number(t, row["rbm"])
		}
		out[row["card"]] = q
	}
	return out
}

// keysOf lists a map's keys.
func keysOf[V any](m map[string]V) iter.Seq[string] { return maps.Keys(m) }

// deviceIn finds the device of a string that plays a role.
func deviceIn(t testing.TB, s calc.StringReport, role string) calc.DeviceReport {
	t.Helper()
	k := slices.IndexFunc(s.Devices, func(d calc.DeviceReport) bool { return d.Role == role })
	if k < 0 {
		t.Fatalf("string %s has no %s", s.Label, role)
	}
	return s.Devices[k]
}
