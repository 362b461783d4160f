package calc_test

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"reflect"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc"
)

// absurdBuilds is how many of them are tried; always the same.
const absurdBuilds = 200

// Whatever a document may say without being refused either is solved or it is
// said why not; nothing hangs, and no figure is anything but a number.
func TestAbsurdBuildsAreSolvedOrSayWhy(t *testing.T) {
	made := rapid.Custom(absurdBuild)
	solved := 0
	for i := range absurdBuilds {
		raw, err := json.Marshal(made.Example(i))
		if err != nil {
			t.Fatal(err)
		}
		b, err := calc.Read(raw)
		if err != nil {
			t.Fatalf("build %d is meant to be legal: %v\n%s", i, err, raw)
		}
		r, err := calc.Check(b)
		var unsolved *calc.Unsolved
		switch {
		case err == nil:
			solved++
			if where := notFinite(reflect.ValueOf(r), "report"); where != "" {
				t.Errorf("build %d: %s is not a number\n%s", i, where, raw)
			}
		case !errors.As(err, &unsolved):
			t.Errorf("build %d: %v", i, err)
		case unsolved.String == "" || err.Error() == "":
			t.Errorf("build %d does not say which string: %v", i, err)
		}
	}
	if solved < absurdBuilds/4 {
		t.Errorf("only %d of %d were solved", solved, absurdBuilds)
	}
}

// notFinite returns where a value holds a NaN or an infinity.
func notFinite(v reflect.Value, path string) string {
	switch v.Kind() {
	case reflect.Float64:
		if f := v.Float(); math.IsNaN(f) || math.IsInf(f, 0) {
			return path
		}
	case reflect.Pointer, reflect.Interface:
		if !v.IsNil() {
			return notFinite(v.Elem(), path)
		}
	case reflect.Slice, reflect.Array:
		for i := range v.Len() {
			if where := notFinite(v.Index(i), fmt.Sprintf("%s[%d]", path, i)); where != "" {
				return where
			}
		}
	case reflect.Struct:
		if v.Type() == reflect.TypeFor[calc.Columns]() {
			return "" // the pictures of these figures
		}
		for i := range v.NumField() {
			if where := notFinite(v.Field(i), path+"."+v.Type().Field(i).Name); where != "" {
				return where
			}
		}
	}
	return ""
}

// decades draws a number between two bounds above 0, every decade alike.
func decades(t *rapid.T, name string, low, high float64) float64 {
	v := math.Pow(10, rapid.Float64Range(math.Log10(low), math.Log10(high)).Draw(t, name))
	return min(max(v, low), high)
}

// perhaps draws a number now and then and nothing otherwise.
func perhaps(t *rapid.T, name string, low, high float64) *float64 {
	if !rapid.Bool().Draw(t, name+" given") {
		return nil
	}
	v := decades(t, name, low, high)
	return &v
}

// wide draws a value anywhere between two bounds above 0, with a spread of up
// to a half down and double up.
func wide(t *rapid.T, name string, low, high float64) calc.Spread {
	typ := decades(t, name, low, high)
	if rapid.Bool().Draw(t, name+" steady") {
		return calc.Exactly(typ)
	}
	down, up := rapid.Float64Range(0.5, 1).Draw(t, name+" down"), rapid.Float64Range(1, 2).Draw(t, name+" up")
	return calc.Spread{Min: max(low, typ*down), Typ: typ, Max: min(high, typ*up)}
}

// absurdBuild draws a build from everything that the reader lets through.
func absurdBuild(t *rapid.T) calc.Build {
	b := calc.Build{
		Format: calc.BuildFormat, Title: "absurd", Ambient: calc.Spread{Min: -60, Typ: rapid.Float64Range(-60, 120).Draw(t, "ambient"), Max: 120},
		Supply: calc.Supply{Voltage: wide(t, "supply", 0.01, 1000), MaxCurrent: perhaps(t, "supply current", 1e-3, 1000)},
		Parts:  map[string]calc.Part{"led-a": absurdLED(t), "led-b": absurdLED(t)},
	}
	if rapid.Bool().Draw(t, "source") {
		b.Supply.SourceResistance = decades(t, "source resistance", 1e-3, 1e6)
	}
	if rapid.Bool().Draw(t, "sealed") {
		area, transfer := decades(t, "area", 1e-3, 1000), decades(t, "transfer", 1e-3, 1000)
		b.Enclosure = &calc.Enclosure{Kind: "sealed", SurfaceArea: &area, HeatTransfer: &transfer}
	}
	for _, key := range []string{"npn-a", "npn-b"} {
		b.Parts[key] = absurdTransistor(t, calc.TypeNPN)
	}
	b.Parts["pnp"] = absurdTransistor(t, calc.TypePNP)
	for i := range rapid.IntRange(0, 2).Draw(t, "runs") {
		ohms := decades(t, "ohms per metre", 1e-6, 1000)
		b.Runs = append(b.Runs, calc.Run{
			ID: fmt.Sprintf("r%d", i), From: "supply", Length: decades(t, "length", 1e-3, 10_000), OhmsPerMetre: &ohms,
		})
	}
	for i := range rapid.IntRange(1, 3).Draw(t, "strings") {
		s := calc.String{Label: fmt.Sprintf("S%d", i), Quantity: rapid.SampledFrom([]int{1, 2, 100, 10_000}).Draw(t, "quantity")}
		for _, led := range []string{"led-a", "led-b"}[:rapid.IntRange(1, 2).Draw(t, "types")] {
			s.LEDs = append(s.LEDs, calc.LEDStack{Part: led, Quantity: rapid.SampledFrom([]int{1, 3, 50, 10_000}).Draw(t, "LEDs")})
		}
		if k := rapid.IntRange(0, len(b.Runs)).Draw(t, "fed by"); k < len(b.Runs) {
			s.FedBy = b.Runs[k].ID
		}
		s.Driver = absurdDriver(t)
		b.Strings = append(b.Strings, s)
	}
	return b
}

func absurdLED(t *rapid.T) calc.Part {
	led := calc.LED{
		TestCurrent: decades(t, "test current", 1e-6, 100), ForwardVoltage: wide(t, "forward voltage", 0.01, 100),
		VoltageTempco: rapid.SampledFrom([]float64{0, -0.002, -0.01, 0.001}).Draw(t, "tempco"),
		MaxCurrent:    perhaps(t, "most", 1e-6, 100), MaxJunction: perhaps(t, "junction", 1, 400), RthJunctionAmbient: perhaps(t, "rth", 1e-3, 10_000),
		LuminousFlux: perhaps(t, "flux", 1e-3, 1e6),
	}
	if rapid.Bool().Draw(t, "modelled") {
		led.Model = &calc.LEDModel{Is: decades(t, "is", 1e-60, 1e-6), N: rapid.Float64Range(0.5, 10).Draw(t, "n"), Rs: decades(t, "rs", 1e-6, 1e6)}
	}
	return calc.Part{Type: calc.TypeLED, LED: &led}
}

func absurdTransistor(t *rapid.T, typ string) calc.Part {
	q := calc.Transistor{
		MaxCollectorEmitterVoltage: perhaps(t, "VCE", 1, 10_000), MaxCollectorCurrent: perhaps(t, "IC", 1e-6, 1000),
		MaxPower: perhaps(t, "power", 1e-3, 10_000), MaxJunction: perhaps(t, "junction", 1, 400),
		RthJunctionAmbient: perhaps(t, "rth", 1e-3, 10_000),
	}
	if rapid.Bool().Draw(t, "gain given") {
		hfe := wide(t, "hfe", 1e-3, 1e6)
		q.HFE = &hfe
	}
	if rapid.Bool().Draw(t, "VBE given") {
		q.VBEOn = &calc.VBEOn{Volts: wide(t, "VBE", 0.01, 10), At: decades(t, "at", 1e-9, 1000)}
	}
	if rapid.Bool().Draw(t, "modelled") {
		is := decades(t, "is", 1e-30, 1e-6)
		q.Model = &calc.GummelPoon{
			Is: &is, Bf: perhaps(t, "bf", 1e-3, 1e6), Br: perhaps(t, "br", 1e-3, 1e6), Nf: perhaps(t, "nf", 0.8, 2), Nr: perhaps(t, "nr", 0.8, 2),
			Vaf: perhaps(t, "vaf", 1e-3, 1e6), Var: perhaps(t, "var", 1e-3, 1e6), Ikf: perhaps(t, "ikf", 1e-9, 1e6), Ikr: perhaps(t, "ikr", 1e-9, 1e6),
			Ise: perhaps(t, "ise", 1e-30, 1e-6), Ne: perhaps(t, "ne", 0.8, 4), Isc: perhaps(t, "isc", 1e-30, 1e-6), Nc: perhaps(t, "nc", 0.8, 4),
			Rb: perhaps(t, "rb", 1e-3, 1e6), Re: perhaps(t, "re", 1e-3, 1e6), Rc: perhaps(t, "rc", 1e-3, 1e6),
			Eg: perhaps(t, "eg", 0.5, 2), Xti: perhaps(t, "xti", 0.1, 10), Xtb: perhaps(t, "xtb", 0.1, 3),
		}
	}
	return calc.Part{Type: typ, Transistor: &q}
}

func absurdDriver(t *rapid.T) calc.Driver {
	resistor := func(name string) calc.Resistor {
		return calc.Resistor{
			Ohms: decades(t, name, 1e-3, 1e9), Tolerance: rapid.SampledFrom([]float64{0, 0.05, 0.5}).Draw(t, "tolerance"), Watts: perhaps(t, "watts", 1e-3, 10_000),
		}
	}
	kind := rapid.SampledFrom(someKinds).Draw(t, "kind")
	switch kind {
	case calc.KindResistor:
		return calc.Driver{Kind: kind, Resistor: &calc.ResistorDriver{Kind: kind, Resistor: resistor("series")}}
	case calc.KindFollowerSink:
		var control calc.Control
		switch rapid.IntRange(0, 2).Draw(t, "control") {
		case 0:
			v := wide(t, "control volts", 1e-3, 1000)
			control.Volts = &v
		case 1:
			control.Pot = &calc.Pot{
				Ohms: decades(t, "pot", 1e-3, 1e9), Turn: rapid.SampledFrom([]float64{0, 0.5, 1}).Draw(t, "turn"),
				Upper: decades(t, "upper", 1e-3, 1e9), Lower: decades(t, "lower", 1e-3, 1e9),
			}
		default:
			control.Divider = &calc.Divider{Upper: resistor("upper"), Lower: resistor("lower")}
		}
		return calc.Driver{Kind: kind, FollowerSink: &calc.FollowerSink{
			Kind: kind, Control: control, PNP: "pnp", NPN: "npn-a", Pullup: resistor("pull-up"), Sense: resistor("sense"),
		}}
	case calc.KindReferenceSink:
		return calc.Driver{Kind: kind, ReferenceSink: &calc.ReferenceSink{
			Kind: kind, NPN: "npn-a", Bias: resistor("bias"), Sense: resistor("sense"),
			Reference: calc.Reference{
				Volts:  wide(t, "reference volts", 1e-3, 1000),
				Tempco: rapid.SampledFrom([]float64{0, -1, 1}).Draw(t, "tempco"), Ohms: decades(t, "slope", 1e-3, 1e9),
			},
		}}
	default:
		return calc.Driver{Kind: kind, TwoTransistor: &calc.TwoTransistor{
			Kind: kind, Pass: "npn-a", Sensor: "npn-b", Bias: resistor("bias"), Sense: resistor("sense"),
		}}
	}
}
