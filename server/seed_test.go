package main

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/calc/device"
)

func TestSeedFillsShelfAndDrawer(t *testing.T) {
	p := openShop(t)
	if err := p.s.seed(t.Context()); err != nil {
		t.Fatal(err)
	}
	builds, err := p.s.store.Builds(t.Context(), "")
	if err != nil {
		t.Fatal(err)
	}
	if len(builds) != len(seedBuilds) || len(builds) < 3 {
		t.Errorf("%d builds on the shelf, want %d and at least 3", len(builds), len(seedBuilds))
	}
	for _, b := range builds {
		if v := calc.Severity(b.Summary.Verdict); v != calc.Pass && v != calc.Tight && v != calc.Unknown {
			t.Errorf("%s: verdict %q, and nobody would show a build that fails", b.Summary.Title, v)
		}
		if b.Summary.Client == "" || b.Summary.Site == "" || len(b.Summary.Tags) == 0 {
			t.Errorf("%s: no client, site or tag to search for", b.Summary.Title)
		}
	}
	for _, typ := range []string{calc.TypeLED, calc.TypeNPN, calc.TypePNP, calc.TypeNMOS, calc.TypeOpamp, calc.TypeRegulator, calc.TypeSupply} {
		parts, err := p.s.store.Parts(t.Context(), typ)
		if err != nil {
			t.Fatal(err)
		}
		if len(parts) == 0 {
			t.Errorf("no %s in the drawer", typ)
		}
	}
}

func TestSeedingTwiceAddsNothing(t *testing.T) {
	p := openShop(t)
	count := func() (int, int) {
		builds, err := p.s.store.Builds(t.Context(), "")
		if err != nil {
			t.Fatal(err)
		}
		parts, err := p.s.store.Parts(t.Context(), "")
		if err != nil {
			t.Fatal(err)
		}
		return len(builds), len(parts)
	}
	if err := p.s.seed(t.Context()); err != nil {
		t.Fatal(err)
	}
	builds, parts := count()
	if err := p.s.seed(t.Context()); err != nil {
		t.Fatal(err)
	}
	if b, q := count(); b != builds || q != parts {
		t.Errorf("seeding twice makes %d builds and %d parts, want %d and %d", b, q, builds, parts)
	}
	if empty, err := p.s.store.Empty(t.Context()); err != nil || empty {
		t.Errorf("a seeded store is empty (%v), so that the next start would seed again", err)
	}
}

// seedDrawer reads the drawer of a first start by key.
func seedDrawer(t *testing.T) map[string]calc.Part {
	t.Helper()
	parts, err := readSeedParts()
	if err != nil {
		t.Fatal(err)
	}
	drawer := map[string]calc.Part{}
	for _, p := range parts {
		if drawer[p.key], err = calc.ReadPart(p.document); err != nil {
			t.Fatal(p.key, err)
		}
	}
	return drawer
}

func TestSeedBuildsHoldThePartsOfTheDrawer(t *testing.T) {
	parts, err := readSeedParts()
	if err != nil {
		t.Fatal(err)
	}
	drawer := map[string]any{}
	for _, p := range parts {
		var v any
		if err := json.Unmarshal(p.document, &v); err != nil {
			t.Fatal(err)
		}
		drawer[p.key] = v
	}
	for _, name := range seedBuilds {
		document, err := seedFiles.ReadFile("seed/builds/" + name + ".json")
		if err != nil {
			t.Fatal(err)
		}
		var b struct {
			Parts map[string]any `json:"parts"`
		}
		if err := json.Unmarshal(document, &b); err != nil {
			t.Fatal(err)
		}
		if len(b.Parts) == 0 {
			t.Errorf("%s has no parts", name)
		}
		for key, part := range b.Parts {
			if !reflect.DeepEqual(part, drawer[key]) {
				t.Errorf("%s: %s is not the drawer's", name, key)
			}
		}
	}
}

func TestSeedFilesAreAllUsed(t *testing.T) {
	files, err := seedFiles.ReadDir("seed/builds")
	if err != nil {
		t.Fatal(err)
	}
	for _, file := range files {
		if name := strings.TrimSuffix(file.Name(), ".json"); !slices.Contains(seedBuilds, name) {
			t.Errorf("%s is never put on the shelf", name)
		}
	}
}

func TestSeedPartsSayWhereTheirFiguresAreFrom(t *testing.T) {
	for key, p := range seedDrawer(t) {
		notes := common(p).Notes
		if !strings.Contains(notes, "Limits: ") && !strings.Contains(notes, "Figures: ") &&
			!strings.Contains(notes, "common practice, no source") {
			t.Errorf("%s: notes %q name no source", key, notes)
		}
	}
}

// common returns what every part carries.
func common(p calc.Part) calc.Common {
	switch {
	case p.LED != nil:
		return p.LED.Common
	case p.Transistor != nil:
		return p.Transistor.Common
	case p.MOSFET != nil:
		return p.MOSFET.Common
	case p.Opamp != nil:
		return p.Opamp.Common
	case p.Regulator != nil:
		return p.Regulator.Common
	case p.Supply != nil:
		return p.Supply.Common
	}
	return calc.Common{}
}

// publishedKeys maps the drawer's keys to the table of published limits.
var publishedKeys = map[string]string{
	"2n3904": "2N3904", "2n3906": "2N3906", "2n2222a": "2N2222A (TO-18)", "p2n2222a": "P2N2222A (TO-92, onsemi order)",
	"pn2222a": "PN2222A (TO-92)", "bc547b": "BC547B", "bc557b": "BC557B", "bc337-25": "BC337-25", "bc327-25": "BC327-25",
	"bd139-16": "BD139-16", "bd140-16": "BD140-16", "tip31c": "TIP31C", "tip41c": "TIP41C",
	"2n7000": "2N7000", "irlz44n": "IRLZ44N",
}

// The drawer never promises more than the datasheets; where makers differ it
// may promise less.
func TestSeedTransistorsKeepToPublishedLimits(t *testing.T) {
	drawer := seedDrawer(t)
	rows := map[string]map[string]string{}
	for _, row := range publishedTable(t, "transistors.csv") {
		rows[row["part"]] = row
	}
	for key, part := range drawer {
		if part.Transistor == nil && part.MOSFET == nil {
			continue
		}
		row := rows[publishedKeys[key]]
		if row == nil {
			t.Errorf("%s has no row of published limits", key)
			continue
		}
		q := limitsOf(part)
		atMost(t, key+" voltage", q.volts, row["V_max_V"])
		atMost(t, key+" current", q.amperes, row["I_max_A"])
		atMost(t, key+" power", q.watts, row["Ptot_25C_ambient_W"])
		atMost(t, key+" junction", q.celsius, row["Tj_max_C"])
		atLeast(t, key+" thermal resistance", q.perWatt, row["RthJA_K_per_W"])
		if fits := (q.celsius - 25) / q.perWatt; !(math.Abs(fits/q.watts-1) < 0.02) {
			t.Errorf("%s: %g W do not fit %g K/W and %g °C", key, q.watts, q.perWatt, q.celsius)
		}
		pins := row["pin_order_flat_or_printed_side_facing_leads_down_left_to_right"]
		if want := pins[:5]; common(part).Pins != want {
			t.Errorf("%s: pins %s, want %s", key, common(part).Pins, want)
		}
	}
}

// partLimits are what a transistor's datasheet allows.
type partLimits struct{ volts, amperes, watts, celsius, perWatt float64 }

func limitsOf(p calc.Part) partLimits {
	if q := p.MOSFET; q != nil {
		return partLimits{*q.MaxDrainSourceVoltage, *q.MaxDrainCurrent, *q.MaxPower, *q.MaxJunction, *q.RthJunctionAmbient}
	}
	q := p.Transistor
	return partLimits{*q.MaxCollectorEmitterVoltage, *q.MaxCollectorCurrent, *q.MaxPower, *q.MaxJunction, *q.RthJunctionAmbient}
}

// atMost compares with a cell of a table; an empty one says nothing.
func atMost(t *testing.T, name string, got float64, cell string) {
	t.Helper()
	if want, given := cellNumber(t, cell); given && !(got <= want) {
		t.Errorf("%s = %g, published %g at most", name, got, want)
	}
}

func atLeast(t *testing.T, name string, got float64, cell string) {
	t.Helper()
	if want, given := cellNumber(t, cell); given && !(got >= want) {
		t.Errorf("%s = %g, published %g", name, got, want)
	}
}

func cellNumber(t *testing.T, cell string) (v float64, given bool) {
	t.Helper()
	if cell == "" {
		return 0, false
	}
	v, err := strconv.ParseFloat(cell, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v, true
}

func publishedTable(t *testing.T, name string) []map[string]string {
	t.Helper()
	return readTable(t, "published", name)
}

// readTable reads a file of testdata by its first line's names.
func readTable(t *testing.T, folder, name string) []map[string]string {
	t.Helper()
	file, err := os.Open(filepath.Join("..", "testdata", folder, name))
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

// A model that does not give the datasheet's own point would show one number
// in the drawer and compute with another.
func TestSeedLEDModelsMeetTheirTestPoint(t *testing.T) {
	for key, part := range seedDrawer(t) {
		if led := part.LED; led != nil {
			m := device.LED{Is: led.Model.Is, N: led.Model.N, Rs: led.Model.Rs}
			if got := m.Voltage(led.TestCurrent, device.RatedC); !(math.Abs(got-led.ForwardVoltage.Typ) < 1e-3) {
				t.Errorf("%s: the model gives %.4f V at the test current, want %.4f V", key, got, led.ForwardVoltage.Typ)
			}
		}
	}
}

// seedCards maps the drawer's keys to the published model cards.
var seedCards = map[string]string{
	"2n3904": "Q3904F", "2n3906": "Q3906F", "2n2222a": "Q2222F", "p2n2222a": "Q2222F", "pn2222a": "Q2222F",
	"bc547b": "Q547P", "bc557b": "Q557P", "bc337-25": "Q337P", "bc327-25": "Q327P", "bd139-16": "Q139F",
}

func TestSeedTransistorModelsAreThePublishedCards(t *testing.T) {
	cards := map[string]map[string]string{}
	for _, row := range readTable(t, "reference", "transistor_spice.csv") {
		cards[row["card"]] = row
	}
	drawer := seedDrawer(t)
	for key, part := range drawer {
		if part.Transistor == nil {
			continue
		}
		card := cards[seedCards[key]]
		if (card == nil) != (part.Transistor.Model == nil) {
			t.Errorf("%s: a card is known: %v, a model is given: %v", key, card != nil, part.Transistor.Model != nil)
			continue
		}
		if card == nil {
			continue
		}
		text, err := json.Marshal(part.Transistor.Model)
		if err != nil {
			t.Fatal(err)
		}
		var model map[string]float64
		if err := json.Unmarshal(text, &model); err != nil {
			t.Fatal(err)
		}
		for name, cell := range card {
			want, given := 0.0, false
			if name != "card" && name != "part" && name != "type" && name != "origin" && name != "note" {
				want, given = cellNumber(t, cell)
			}
			if got, ok := model[name]; ok != given || got != want {
				t.Errorf("%s: %s is %g, the card says %q", key, name, got, cell)
			}
		}
	}
}

// The simulator's gain and VBE of each card lie within what the drawer says of
// its part, so that worst cases are worst.
func TestSeedWindowsHoldTheirModels(t *testing.T) {
	drawer := seedDrawer(t)
	count := 0
	for _, row := range readTable(t, "reference", "simulator_sinks.csv") {
		word := strings.Split(row["circuit"], "_")
		if word[0] != "vbe" || row["temp_c"] != "25" || (row["quantity"] != "VBE" && row["quantity"] != "hFE") {
			continue
		}
		milliamperes, _ := cellNumber(t, strings.TrimSuffix(word[2], "mA"))
		for key, part := range drawer {
			q := part.Transistor
			if q == nil || seedCards[key] != word[1] {
				continue
			}
			at, window := *q.HFEAt, *q.HFE
			if row["quantity"] == "VBE" {
				at, window = q.VBEOn.At, q.VBEOn.Volts
			}
			if math.Abs(at*1e3-milliamperes) > 1e-9 {
				continue
			}
			count++
			if v, _ := cellNumber(t, row["value"]); !(v >= window.Min && v <= window.Max) {
				t.Errorf("%s: %s of the model is %g, the drawer says %g to %g", key, row["quantity"], v, window.Min, window.Max)
			}
		}
	}
	if want := 2 * len(seedCards); count != want {
		t.Errorf("%d figures compared, want %d", count, want)
	}
}

func TestSeedFluxCurvesRiseThroughTheTestPoint(t *testing.T) {
	for key, part := range seedDrawer(t) {
		if part.LED == nil {
			continue
		}
		curve := part.LED.FluxCurve
		if !slices.Contains(curve, [2]float64{1, 1}) {
			t.Errorf("%s: the flux curve misses the test point", key)
		}
		for i := 1; i < len(curve); i++ {
			if !(curve[i][0] > curve[i-1][0] && curve[i][1] > curve[i-1][1]) {
				t.Errorf("%s: the flux curve does not rise at %v", key, curve[i])
			}
		}
		last := curve[len(curve)-1][0] * part.LED.TestCurrent
		if most := *part.LED.MaxCurrent; !(last >= most*0.999) {
			t.Errorf("%s: the flux curve ends at %g A, below the limit of %g A", key, last, most)
		}
	}
}
