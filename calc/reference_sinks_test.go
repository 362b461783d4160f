package calc_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"lanternbook/calc/circuit"
	"lanternbook/calc/device"
	"lanternbook/calc/driver"
)

// The simulator's table of sinks: 24 V, LEDs that stand at a fixed 9.3 V, no
// self-heating. Its model cards are in the same folder.
//
// Source: ngspice, reference/simulator_sinks.csv.
const (
	sinkFeed = 24.0           // [V]
	sinkTail = sinkFeed - 9.3 // [V]
	sinkRows = 618            // values in the table
	cardPNP  = "Q3906F Q557P Q327P"
)

// sinkPoint is one circuit of the table at one temperature.
type sinkPoint struct {
	name    string // "sinkE_Q3904F_Vb2_RE68"
	celsius float64
	values  map[string]float64 // by the table's own names and units
}

// sinkPoints gathers the table's rows by circuit and temperature.
func sinkPoints(t *testing.T, kind string) []*sinkPoint {
	t.Helper()
	rows := table(t, "reference/simulator_sinks.csv")
	if len(rows) != sinkRows {
		t.Fatalf("the table has %d rows, want %d", len(rows), sinkRows)
	}
	var points []*sinkPoint
	at := map[string]*sinkPoint{}
	for _, row := range rows {
		if !strings.HasPrefix(row["circuit"], kind+"_") {
			continue
		}
		key := row["circuit"] + " at " + row["temp_c"]
		if at[key] == nil {
			at[key] = &sinkPoint{row["circuit"], number(t, row["temp_c"]), map[string]float64{}}
			points = append(points, at[key])
		}
		at[key].values[row["quantity"]] = number(t, row["value"])
	}
	if len(points) == 0 {
		t.Fatalf("no %s in the table", kind)
	}
	return points
}

// printed is one unit of the sixth digit, which is what the table prints: half
// a unit is its rounding, the other half the simulator's own.
func printed(value float64) float64 {
	return math.Pow(10, math.Floor(math.Log10(math.Abs(value)))-5)
}

// compare checks every value of a point; each must have been computed.
func (p *sinkPoint) compare(t *testing.T, got map[string]float64) {
	t.Helper()
	for _, name := range slices.Sorted(keysOf(p.values)) {
		want := p.values[name]
		value, ok := got[name]
		if !ok {
			t.Errorf("%s: %s is not computed", p.name, name)
			continue
		}
		near(t, p.name+" "+name, value, want, printed(want))
	}
}

// anyLED is there because a string has LEDs; sunk takes it out again.
var anyLED = []driver.LED{{Part: "any", Count: 1, Model: device.LED{Is: 1e-20, N: 2}}}

// sunk solves a string's circuit with the LEDs replaced by their fixed voltage.
func sunk(t *testing.T, a *driver.Assembly, celsius float64) *circuit.Circuit {
	t.Helper()
	a.Start(sinkFeed)
	a.Net.Detach(a.Stack)
	a.Net.Hold(a.Feed, sinkFeed)
	a.Net.Hold(a.Tail, sinkTail)
	a.Net.SetAir(celsius)
	if err := a.Net.Solve(); err != nil {
		t.Fatal(err)
	}
	return a.Net
}

func only(q device.BJT) driver.Transistor { return driver.Transistor{Model: q} }

func ohms(v float64) driver.Resistance { return driver.Resistance{Ohms: v} }

func deviceOf(a *driver.Assembly, role string) driver.Device {
	return a.Devices[slices.IndexFunc(a.Devices, func(d driver.Device) bool { return d.Role == role })]
}

// ohmsIn reads a circuit's name for a resistance: "RE68" is 68 Ω.
func ohmsIn(t *testing.T, name, prefix string) float64 {
	t.Helper()
	for word := range strings.SplitSeq(name, "_") {
		if rest, ok := strings.CutPrefix(word, prefix); ok {
			return number(t, rest)
		}
	}
	t.Fatalf("%s has no %s", name, prefix)
	return 0
}

func TestSinkWithHeldBaseAgreesWithSimulator(t *testing.T) {
	q := cards(t)
	for _, p := range sinkPoints(t, "sinkE") {
		a := driver.ReferenceSink(anyLED, driver.Fixed{
			Reference: driver.Reference{Volts: driver.Range{Min: 2, Typ: 2, Max: 2}}, Bias: ohms(4700),
			NPN: only(q[strings.Split(p.name, "_")[1]]), Sense: ohms(ohmsIn(t, p.name, "RE")),
		})
		net := sunk(t, a, p.celsius)
		across := sinkTail - net.Voltage(a.Sense)
		sink := deviceOf(a, "sink_transistor")
		p.compare(t, map[string]float64{
			"I_LED": a.CollectorCurrent(sink) * 1e3, "IB": a.BaseCurrent(sink) * 1e3,
			"VBE": net.Voltage(a.Base) - net.Voltage(a.Sense), "VCE": across,
			// The table's power leaves out the base's share.
			"P_Q": across * a.CollectorCurrent(sink),
		})
	}
}

func TestSinkWithFollowerAgreesWithSimulator(t *testing.T) {
	// The table does not print the pull-up: these are the round values that
	// give its currents and VEB at all temperatures.
	pullups := map[string]float64{"RE50": 10e3, "RE20": 4.7e3}
	q := cards(t)
	for _, p := range sinkPoints(t, "compl") {
		word := strings.Split(p.name, "_")
		re := ohmsIn(t, p.name, "RE")
		a := driver.FollowerSink(anyLED, driver.Follower{
			Control: driver.Control{Volts: driver.Range{Min: 1, Typ: 1, Max: 1}},
			PNP:     only(q[word[1]]), NPN: only(q[word[2]]), Pullup: ohms(pullups[word[3]]), Sense: ohms(re),
		})
		net := sunk(t, a, p.celsius)
		current := a.CollectorCurrent(deviceOf(a, "sink_transistor"))
		got := map[string]float64{
			"I_LED": current * 1e3, "V_RE": net.Voltage(a.Sense),
			"VEB_PNP": net.Voltage(a.Base) - 1, "VBE_NPN": net.Voltage(a.Base) - net.Voltage(a.Sense),
		}
		// The set error is against 1 V over the sense resistor, in percent:
		// its tolerance is a millionth of the current, not of the difference.
		near(t, p.name+" set error", (got["V_RE"]/1-1)*100, p.values["I_set_error_percent"], 1e-4)
		delete(p.values, "I_set_error_percent")
		p.compare(t, got)
	}
}

func TestTwoTransistorLimiterAgreesWithSimulator(t *testing.T) {
	// The base feeds from 24 V that give the table's I_RB at all temperatures.
	feeds := map[string]float64{"RS33": 22e3, "RS6.8": 4.7e3, "RS1.8": 2.2e3}
	q := cards(t)
	for _, p := range sinkPoints(t, "lim2") {
		word := strings.Split(p.name, "_")
		a := driver.TwoTransistor(anyLED, driver.Limiter{
			Pass: only(q[word[1]]), Sensor: only(q[strings.TrimPrefix(word[2], "sense")]),
			Bias: ohms(feeds[word[3]]), Sense: ohms(ohmsIn(t, p.name, "RS")),
		})
		net := sunk(t, a, p.celsius)
		p.compare(t, map[string]float64{
			"I_LED": a.CollectorCurrent(deviceOf(a, "sink_transistor")) * 1e3, "V_sense": net.Voltage(a.Sense),
			"I_RB": a.Current(deviceOf(a, "bias_resistor")) * 1e3, "VCE_Q1": sinkTail - net.Voltage(a.Sense),
		})
	}
}

func TestTransistorAgreesWithSimulator(t *testing.T) {
	// The collector-emitter voltages [V] at which the datasheets state the
	// gains that the table was made for.
	across := map[string]float64{"Q3904F": 1, "Q3906F": 1, "Q337P": 1, "Q327P": 1, "Q139F": 2, "Q547P": 5, "Q557P": 5, "Q2222F": 10}
	q := cards(t)
	for _, p := range sinkPoints(t, "vbe") {
		card := strings.Split(p.name, "_")[1]
		pnp, sign := strings.Contains(cardPNP, card), 1.0
		if pnp {
			sign = -1
		}
		c := circuit.New()
		c.SetAir(p.celsius)
		collector, base := c.Held("collector", sign*across[card]), c.Held("base", sign*p.values["VBE"])
		id := c.BJT(collector, base, circuit.Ground, q[card], pnp, 0)
		if err := c.Solve(); err != nil {
			t.Fatal(err)
		}
		// The VBE is put in as printed: 1 µV of it is 5e-5 of the current.
		ic, ib := c.CollectorCurrent(id)*1e3, c.BaseCurrent(id)*1e3
		near(t, p.name+" IC", ic, p.values["IC"], 5e-5*p.values["IC"])
		near(t, p.name+" IB", ib, p.values["IB"], 5e-5*p.values["IB"])
		near(t, p.name+" hFE", ic/ib, p.values["hFE"], 1e-5*p.values["hFE"])
	}
}
