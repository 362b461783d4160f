package calc_test

import (
	"encoding/json"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"lanternbook/calc"
)

// document reads one of testdata/documents.
func document(tb testing.TB, name string) []byte {
	tb.Helper()
	raw, err := os.ReadFile(filepath.Join("testdata", "documents", name+".json"))
	if err != nil {
		tb.Fatal(err)
	}
	return raw
}

// documents reads all of testdata/documents by name.
func documents(tb testing.TB) map[string][]byte {
	tb.Helper()
	files, err := filepath.Glob(filepath.Join("testdata", "documents", "*.json"))
	if err != nil || len(files) < 6 {
		tb.Fatalf("found %d documents, %v", len(files), err)
	}
	all := map[string][]byte{}
	for _, file := range files {
		name := strings.TrimSuffix(filepath.Base(file), ".json")
		all[name] = document(tb, name)
	}
	return all
}

// referenceBuilds reads the builds of the simulator's cases by file name.
func referenceBuilds(tb testing.TB) map[string][]byte {
	tb.Helper()
	files, err := filepath.Glob(filepath.Join("..", "testdata", "reference", "operating-points", "*.json"))
	if err != nil || len(files) < 42 {
		tb.Fatalf("found %d cases, %v", len(files), err)
	}
	all := map[string][]byte{}
	for _, file := range files {
		raw, err := os.ReadFile(file)
		if err != nil {
			tb.Fatal(err)
		}
		var c struct {
			Build json.RawMessage `json:"build"`
		}
		if err := json.Unmarshal(raw, &c); err != nil {
			tb.Fatal(err)
		}
		all[filepath.Base(file)] = c.Build
	}
	return all
}

// value decodes JSON into the plain types, so that two texts of one value
// compare equal.
func value(tb testing.TB, raw []byte) any {
	tb.Helper()
	var v any
	if err := json.Unmarshal(raw, &v); err != nil {
		tb.Fatal(err)
	}
	return v
}

// A build that is read and written is the same JSON value.
func TestDocumentsRoundTrip(t *testing.T) {
	for name, raw := range documents(t) {
		t.Run(name, func(t *testing.T) {
			b, err := calc.Read(raw)
			if err != nil {
				t.Fatal(err)
			}
			written, err := json.Marshal(b)
			if err != nil {
				t.Fatal(err)
			}
			if got, want := value(t, written), value(t, raw); !reflect.DeepEqual(got, want) {
				t.Errorf("written as\n%s\nwant\n%s", written, raw)
			}
		})
	}
}

// zerosForNone are the numbers that stand for "none" when they are 0 and are
// left out then.
var zerosForNone = []string{"source_resistance", "tolerance", "tempco", "ohms", "upper", "lower"}

// withoutZeros takes those out of a document, but for a control's ohms, which
// are kept.
func withoutZeros(v any) any {
	switch x := v.(type) {
	case map[string]any:
		for _, key := range zerosForNone {
			_, isControl := x["pot"]
			_, hasTempco := x["volts"].(map[string]any)
			if x[key] == 0.0 && (key != "ohms" || hasTempco && !isControl) {
				delete(x, key)
			}
		}
		for key := range x {
			x[key] = withoutZeros(x[key])
		}
	case []any:
		for i := range x {
			x[i] = withoutZeros(x[i])
		}
	}
	return v
}

// The simulator's builds, of all drivers and rails, are read too, and written
// as the same value but for zeros that stand for "none".
func TestReferenceBuildsRoundTrip(t *testing.T) {
	for name, raw := range referenceBuilds(t) {
		t.Run(name, func(t *testing.T) {
			b, err := calc.Read(raw)
			if err != nil {
				t.Fatal(err)
			}
			written, err := json.Marshal(b)
			if err != nil {
				t.Fatal(err)
			}
			if got, want := withoutZeros(value(t, written)), withoutZeros(value(t, raw)); !reflect.DeepEqual(got, want) {
				t.Errorf("written as\n%s\nwant\n%s", written, raw)
			}
			again, err := calc.Read(written)
			if err != nil || !reflect.DeepEqual(again, b) {
				t.Errorf("read again it is another build: %v", err)
			}
		})
	}
}

// What is read lands in the right fields: one check of every kind of value.
func TestReadFillsTheBuild(t *testing.T) {
	b, err := calc.Read(document(t, "every-driver"))
	if err != nil {
		t.Fatal(err)
	}
	near(t, "supply min", b.Supply.Voltage.Min, 23.9, 0)
	near(t, "supply max", b.Supply.Voltage.Max, 24.1, 0)
	near(t, "enclosure area", *b.Enclosure.SurfaceArea, 0.4, 0)
	if b.Supply.Voltage.Bare || len(b.Tags) != 2 || b.Tags[1] != "comparison" {
		t.Errorf("supply %v, tags %v", b.Supply.Voltage, b.Tags)
	}
	follower := b.Strings[1]
	if follower.Quantity != 2 || follower.FedBy != "bench" || follower.Driver.Kind != calc.KindFollowerSink {
		t.Errorf("string %v", follower)
	}
	near(t, "control ohms", *follower.Driver.FollowerSink.Control.Ohms, 500, 0)
	near(t, "sense tolerance", follower.Driver.FollowerSink.Sense.Tolerance, 0.01, 0)
	if c := b.Strings[7].Driver.OpampSink.Control.Volts; *c != calc.Exactly(0.3) {
		t.Errorf("a bare number is read as %v", *c)
	}
	near(t, "base resistor", *b.Strings[6].Driver.RailSink.BaseResistor, 470, 0)
	near(t, "points", b.Parts["red-5mm"].LED.Points[1][1], 1.83, 0)
	near(t, "gain", b.Parts["bc547b"].Transistor.HFE.Max, 450, 0)
	near(t, "reverse Early voltage", *b.Parts["bc557b"].Transistor.Model.Var, 8, 0)
	if m := b.Parts["cc-350"].Module; !m.Switching || m.Name != "Constant current 350 mA" {
		t.Errorf("module %v", m)
	}
	if b.Parts["bc557b"].Type != calc.TypePNP || b.Parts["bc557b"].Transistor.Type != calc.TypePNP {
		t.Errorf("part type %q", b.Parts["bc557b"].Type)
	}
}

func TestReadPart(t *testing.T) {
	p, err := calc.ReadPart([]byte(`{"type": "led", "test_current": 0.02, "forward_voltage": 2.1, "price": 0.05}`))
	if err != nil || p.Type != calc.TypeLED || p.LED.ForwardVoltage != calc.Exactly(2.1) || *p.LED.Price != 0.05 {
		t.Errorf("ReadPart = %v, %v", p, err)
	}
	_, err = calc.ReadPart([]byte(`{"type": "led", "test_current": "20 mA", "forward_voltage": {"min": 2, "typ": 1, "max": 3}, "hfe": 200}`))
	want := calc.Invalid{
		{At: "/test_current", Reason: "must be a number in amps, not text"},
		{At: "/forward_voltage", Reason: "min, typ and max must rise, not be 2 / 1 / 3\u00a0V"},
		{At: "/hfe", Reason: `the key "hfe" belongs to a part of type npn, not of led`},
	}
	if !reflect.DeepEqual(err, want) {
		t.Errorf("ReadPart: %v, want %v", err, want)
	}
	if _, err := calc.ReadPart([]byte(`5`)); err == nil || err.Error() != "the part must be an object, not a number" {
		t.Errorf("ReadPart(5): %v", err)
	}
}

// The pairs of MarshalJSON and UnmarshalJSON stand alone as well.
func TestMarshalPairs(t *testing.T) {
	for _, text := range []string{`24`, `0`, `{"min":1,"typ":2,"max":3}`, `{"min":2,"typ":2,"max":2}`} {
		var s calc.Spread
		if err := json.Unmarshal([]byte(text), &s); err != nil {
			t.Fatal(err)
		}
		if got, err := json.Marshal(s); err != nil || string(got) != text {
			t.Errorf("%s is written as %s, %v", text, got, err)
		}
	}
	var s calc.Spread
	if err := json.Unmarshal([]byte(`{"min":1,"typ":2}`), &s); err == nil {
		t.Error("a spread without max is read")
	}
	d := calc.Driver{Kind: calc.KindResistor, Resistor: &calc.ResistorDriver{Resistor: calc.Resistor{Ohms: 120}}}
	raw, err := json.Marshal(d)
	if err != nil || string(raw) != `{"kind":"resistor","resistor":{"ohms":120}}` {
		t.Errorf("the driver is written as %s, %v", raw, err)
	}
	if d.Resistor.Kind != "" {
		t.Error("writing a driver changes it")
	}
	var again calc.Driver
	if err := json.Unmarshal(raw, &again); err != nil || again.Kind != calc.KindResistor || again.Resistor.Resistor.Ohms != 120 {
		t.Errorf("the driver is read as %v, %v", again, err)
	}
	if raw, err := json.Marshal(calc.Driver{Kind: calc.KindModule}); err == nil {
		t.Errorf("a driver without its fields is written as %s", raw)
	}
	if raw, err := json.Marshal(calc.Part{Type: "lamp"}); err == nil {
		t.Errorf("a part of an unknown type is written as %s", raw)
	}
}
