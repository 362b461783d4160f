package calc_test

import (
	"math"
	"os"
	"path/filepath"
	"testing"

	"lanternbook/calc"
)

// Facts of the trade: what a fitter knows of such circuits. Common practice, no
// source; where a test names a scenario, its figures were worked out by hand
// and with another small solver when it was invented, and are meant as a rough
// size.

// drawerPart reads a part of the drawer that a first start finds.
func drawerPart(t testing.TB, key string) calc.Part {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "server", "seed", "parts", key+".json"))
	if err != nil {
		t.Fatal(err)
	}
	p, err := calc.ReadPart(raw)
	if err != nil {
		t.Fatal(key, err)
	}
	return p
}

// demo reads a build that a first start finds.
func demo(t testing.TB, name string) calc.Build {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "server", "seed", "builds", name+".json"))
	if err != nil {
		t.Fatal(err)
	}
	b, err := calc.Read(raw)
	if err != nil {
		t.Fatal(name, err)
	}
	return b
}

// bench is a build of one string at 25 °C on a steady supply.
func bench(t testing.TB, volts float64, leds int, led string, d calc.Driver) calc.Build {
	t.Helper()
	b := calc.Build{
		Format: calc.BuildFormat, Title: "bench", Ambient: calc.Exactly(25),
		Supply:  calc.Supply{Voltage: calc.Exactly(volts)},
		Strings: []calc.String{{Label: "A", Quantity: 1, LEDs: []calc.LEDStack{{Part: led, Quantity: leds}}, Driver: d}},
		Parts:   map[string]calc.Part{led: drawerPart(t, led)},
	}
	for _, key := range transistorsOf(d) {
		b.Parts[key] = drawerPart(t, key)
	}
	return b
}

// transistorsOf lists the parts a driver needs.
func transistorsOf(d calc.Driver) []string {
	switch {
	case d.FollowerSink != nil:
		return []string{d.FollowerSink.PNP, d.FollowerSink.NPN}
	case d.ReferenceSink != nil:
		return []string{d.ReferenceSink.NPN}
	case d.TwoTransistor != nil:
		return []string{d.TwoTransistor.Pass, d.TwoTransistor.Sensor}
	}
	return nil
}

func check(t testing.TB, b calc.Build) calc.Report {
	t.Helper()
	r, err := calc.Check(b)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// follower is a sink with a PNP follower and a sense resistor of 1 kΩ.
func follower(control, pullup float64) calc.Driver {
	const sense = 1000
	v := calc.Exactly(control)
	return calc.Driver{Kind: calc.KindFollowerSink, FollowerSink: &calc.FollowerSink{
		Kind: calc.KindFollowerSink, Control: calc.Control{Volts: &v}, PNP: "bc557b", NPN: "bc547b",
		Pullup: calc.Resistor{Ohms: pullup}, Sense: calc.Resistor{Ohms: sense},
	}}
}

func ballast(ohms, tolerance float64) calc.Driver {
	return calc.Driver{Kind: calc.KindResistor, Resistor: &calc.ResistorDriver{
		Kind: calc.KindResistor, Resistor: calc.Resistor{Ohms: ohms, Tolerance: tolerance},
	}}
}

func limiter(pass, sensor string, bias, sense float64) calc.Driver {
	return calc.Driver{Kind: calc.KindTwoTransistor, TwoTransistor: &calc.TwoTransistor{
		Kind: calc.KindTwoTransistor, Pass: pass, Sensor: sensor,
		Bias: calc.Resistor{Ohms: bias}, Sense: calc.Resistor{Ohms: sense},
	}}
}

// roughly is near within a share of what is wanted.
func roughly(t testing.TB, name string, got, want, share float64) {
	t.Helper()
	near(t, name, got, want, math.Abs(share*want))
}

func TestFollowerSinkPassesSetVoltageOverSenseResistance(t *testing.T) {
	for _, c := range []struct{ control, want float64 }{{1, 1e-3}, {2, 2e-3}} {
		r := check(t, bench(t, 10, 1, "red-5mm", follower(c.control, 10e3)))
		roughly(t, "current", r.Strings[0].Current.Typ, c.want, 0.05)
	}
}

func TestFollowersEmitterSitsOneJunctionAboveItsBase(t *testing.T) {
	v := check(t, bench(t, 10, 1, "red-5mm", follower(1, 10e3))).Strings[0].Voltages
	near(t, "emitter above base", *v.Base-*v.Control, 0.6, 0.06)
}

func TestTwoRedLEDsAreOneTooManyForSevenVoltsOfControlOnTen(t *testing.T) {
	const wanted = 7e-3
	one := check(t, bench(t, 10, 1, "red-5mm", follower(7, 1000))).Strings[0]
	two := check(t, bench(t, 10, 2, "red-5mm", follower(7, 1000))).Strings[0]
	roughly(t, "with one LED", one.Current.Typ, wanted, 0.03)
	if !one.Regulates {
		t.Error("with one LED the string should regulate")
	}
	if !(two.Current.Typ < 0.93*wanted) || two.Regulates || !(two.Headroom.Typ < 0) {
		t.Errorf("with two LEDs %.2f mA and headroom %.2f V, want it to fall short", two.Current.Typ*1e3, two.Headroom.Typ)
	}
}

func TestFiveVoltsWithLittleDropAreGoodForAboutThreeVoltsOfControl(t *testing.T) {
	good := 0.0
	for control := 1.0; control < 4.5; control += 0.1 {
		s := check(t, bench(t, 5, 1, "red-5mm", follower(control, 2200))).Strings[0]
		if s.Current.Typ > 0.95*control/1000 {
			good = control
		}
	}
	near(t, "the last control voltage that is followed", good, 3, 0.3)
}

// Twelve volts, three white LEDs, 150 Ω, 20 mA: what the meter reads when
// something is wrong.
func TestThreeWhitesOnTwelveVoltsWithAResistor(t *testing.T) {
	for _, c := range []struct {
		name              string
		volts, ohms, want float64
		leds              int
	}{
		{"healthy", 12, 150, 20e-3, 3},
		{"one LED shorted", 12, 150, 37.6e-3, 2},
		{"resistor ten times too big", 12, 1500, 2.5e-3, 3},
		{"resistor ten times too small", 12, 15, 83e-3, 3},
		{"flat battery", 10.8, 150, 13.5e-3, 3},
		{"charging battery", 14.4, 150, 33e-3, 3},
		{"bad joint of 33 ohms", 12, 150 + 33, 17e-3, 3},
	} {
		t.Run(c.name, func(t *testing.T) {
			b := bench(t, c.volts, c.leds, "white-5mm", ballast(c.ohms, 0))
			// 3.0 V at 20 mA, 3.18 V at 37.6 mA, 2.74 V at 2.5 mA.
			white := *b.Parts["white-5mm"].LED
			white.ForwardVoltage = calc.Exactly(3)
			white.Model = &calc.LEDModel{Is: 20e-3 / math.Exp((3-20e-3*8)/(2.2*0.025693)), N: 2.2, Rs: 8}
			white.VoltageTempco = 0
			b.Parts["white-5mm"] = calc.Part{Type: calc.TypeLED, LED: &white}
			roughly(t, "current", check(t, b).Strings[0].Current.Typ, c.want, 0.03)
		})
	}
}

// Twenty-four volts, six white LEDs, two transistors, 11 Ω, base feed 4.7 kΩ:
// the reading across the sense resistor tells what is wrong.
func TestSixWhitesOnTwoTransistors(t *testing.T) {
	for _, c := range []struct {
		name              string
		volts, bias, ohms float64
		leds              int
		sense, current    float64 // [V], [A]
		tail              float64 // [V]
		share             float64 // [1] tolerance
	}{
		{"healthy", 24, 4700, 11, 6, 0.656, 59.6e-3, 6.3, 0.05},
		{"one LED shorted: the transistor takes its volts", 24, 4700, 11, 5, 0.656, 59.6e-3, 9.3, 0.05},
		{"two LEDs shorted", 24, 4700, 11, 4, 0.656, 59.6e-3, 12.2, 0.05},
		{"sense resistor twice as big: the volts stay, the current halves", 24, 4700, 22, 6, 0.657, 29.9e-3, 6.9, 0.05},
		{"supply just enough", 19, 4700, 11, 6, 0.648, 58.9e-3, 1.3, 0.05},
		// Without headroom it is the LEDs' own slope that decides.
		{"supply too low: collector and sense come together", 18, 4700, 11, 6, 0.54, 49e-3, 0.57, 0.1},
		{"supply too high: light normal", 30, 4700, 11, 6, 0.663, 60.3e-3, 12.3, 0.05},
	} {
		t.Run(c.name, func(t *testing.T) {
			s := check(t, bench(t, c.volts, c.leds, "white-2835", limiter("bc337-25", "bc337-25", c.bias, c.ohms))).Strings[0]
			roughly(t, "sense", *s.Voltages.Sense, c.sense, c.share)
			roughly(t, "current", s.Current.Typ, c.current, c.share)
			near(t, "collector", s.Voltages.Tail, c.tail, 0.2)
		})
	}
}

func TestLimiterDriftsDownWithHeat(t *testing.T) {
	b := bench(t, 24, 6, "white-2835", limiter("bc337-25", "bc337-25", 4700, 11))
	cold := check(t, b).Strings[0].Current.Typ
	b.Ambient = calc.Exactly(65)
	hot := check(t, b).Strings[0].Current.Typ
	// −2 mV/K of 650 mV: 40 K take about an eighth.
	roughly(t, "hot over cold", hot/cold, 0.88, 0.03)
}
