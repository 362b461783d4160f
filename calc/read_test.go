package calc_test

import (
	"bytes"
	"errors"
	"reflect"
	"strings"
	"testing"

	jsonpatch "github.com/evanphx/json-patch/v5"

	"lanternbook/calc"
)

// badCase is one change to testdata/documents/every-driver.json, a JSON Patch,
// and the one fault that it must give. bySchema tells whether a JSON Schema
// can see it too.
type badCase struct {
	name     string
	patch    string
	at       string
	says     string
	bySchema bool
}

var badCases = []badCase{
	// Keys.
	{name: "an unknown key at the top", patch: `[{"op":"add","path":"/colour","value":"red"}]`, at: "/colour", says: `the key "colour" is unknown`, bySchema: true},
	{name: "a mistyped key", patch: `[{"op":"move","from":"/supply/max_current","path":"/supply/maxcurrent"}]`, at: "/supply/maxcurrent", says: `perhaps "max_current" is meant`, bySchema: true},
	{name: "a key with letters swapped", patch: `[{"op":"move","from":"/notes","path":"/ntoes"}]`, at: "/ntoes", says: `perhaps "notes" is meant`, bySchema: true},
	{name: "a key in capitals", patch: `[{"op":"move","from":"/notes","path":"/Notes"}]`, at: "/Notes", says: `perhaps "notes" is meant`, bySchema: true},
	{name: "a key that needs escaping", patch: `[{"op":"add","path":"/parts/bc547b/a~1b~0c","value":1}]`, at: "/parts/bc547b/a~1b~0c", says: "is unknown", bySchema: true},
	{name: "an unknown key in a spread", patch: `[{"op":"add","path":"/ambient/mean","value":25}]`, at: "/ambient/mean", says: "is unknown", bySchema: true},
	{name: "an unknown key in a resistor", patch: `[{"op":"add","path":"/strings/0/driver/resistor/power","value":1}]`, at: "/strings/0/driver/resistor/power", says: "is unknown", bySchema: true},
	{name: "a key of another driver", patch: `[{"op":"add","path":"/strings/0/driver/pullup","value":{"ohms":1}}]`, at: "/strings/0/driver/pullup", says: "belongs to a driver of kind follower-sink, not of resistor", bySchema: true},
	{name: "a key of another type of part", patch: `[{"op":"add","path":"/parts/bc547b/luminous_flux","value":5}]`, at: "/parts/bc547b/luminous_flux", says: "belongs to a part of type led, not of npn", bySchema: true},
	{name: "an LED's model in a transistor", patch: `[{"op":"add","path":"/parts/bc557b/model/rs","value":5}]`, at: "/parts/bc557b/model/rs", says: "is unknown", bySchema: true},

	// Missing keys.
	{name: "no format", patch: `[{"op":"remove","path":"/format"}]`, at: "/format", says: "is missing", bySchema: true},
	{name: "no title", patch: `[{"op":"remove","path":"/title"}]`, at: "/title", says: "is missing", bySchema: true},
	{name: "no ambient", patch: `[{"op":"remove","path":"/ambient"}]`, at: "/ambient", says: "is missing", bySchema: true},
	{name: "no supply voltage", patch: `[{"op":"remove","path":"/supply/voltage"}]`, at: "/supply/voltage", says: "is missing", bySchema: true},
	{name: "no max in a spread", patch: `[{"op":"remove","path":"/supply/voltage/max"}]`, at: "/supply/voltage/max", says: "is missing", bySchema: true},
	{name: "no label", patch: `[{"op":"remove","path":"/strings/0/label"}]`, at: "/strings/0/label", says: "is missing", bySchema: true},
	{name: "no driver", patch: `[{"op":"remove","path":"/strings/0/driver"}]`, at: "/strings/0/driver", says: "is missing", bySchema: true},
	{name: "no kind of driver", patch: `[{"op":"remove","path":"/strings/0/driver/kind"}]`, at: "/strings/0/driver/kind", says: "is missing", bySchema: true},
	{name: "no sense resistor", patch: `[{"op":"remove","path":"/strings/1/driver/sense"}]`, at: "/strings/1/driver/sense", says: "is missing", bySchema: true},
	{name: "no ohms", patch: `[{"op":"remove","path":"/strings/1/driver/sense/ohms"}]`, at: "/strings/1/driver/sense/ohms", says: "is missing", bySchema: true},
	{name: "no type of part", patch: `[{"op":"remove","path":"/parts/amber-5mm/type"}]`, at: "/parts/amber-5mm/type", says: "is missing", bySchema: true},
	{name: "no forward voltage", patch: `[{"op":"remove","path":"/parts/amber-5mm/forward_voltage"}]`, at: "/parts/amber-5mm/forward_voltage", says: "is missing", bySchema: true},
	{name: "no saturation current in a model", patch: `[{"op":"remove","path":"/parts/bc557b/model/is"}]`, at: "/parts/bc557b/model/is", says: "is missing", bySchema: true},
	{name: "a sealed enclosure without its area", patch: `[{"op":"remove","path":"/enclosure/surface_area"}]`, at: "/enclosure/surface_area", says: "a sealed enclosure needs it", bySchema: true},
	{name: "a rail without its pull-up", patch: `[{"op":"remove","path":"/rails/0/pullup"}]`, at: "/rails/0/pullup", says: "a rail of kind follower needs it", bySchema: true},

	// Values of another type.
	{name: "a number as text", patch: `[{"op":"replace","path":"/supply/voltage/typ","value":"24"}]`, at: "/supply/voltage/typ", says: "must be a number in volts, not text", bySchema: true},
	{name: "a spread as text", patch: `[{"op":"replace","path":"/supply/voltage","value":"24 V"}]`, at: "/supply/voltage", says: "must be a number in volts, or three as min, typ and max, not text", bySchema: true},
	{name: "a spread as a list", patch: `[{"op":"replace","path":"/supply/voltage","value":[23,24,25]}]`, at: "/supply/voltage", says: "not a list", bySchema: true},
	{name: "amps as text", patch: `[{"op":"replace","path":"/supply/max_current","value":"5 A"}]`, at: "/supply/max_current", says: "must be a number in amps, not text", bySchema: true},
	{name: "null for what is not known", patch: `[{"op":"replace","path":"/supply/max_current","value":null}]`, at: "/supply/max_current", says: "must be a number in amps, not null", bySchema: true},
	{name: "a title of a number", patch: `[{"op":"replace","path":"/title","value":5}]`, at: "/title", says: "must be text, not a number", bySchema: true},
	{name: "tags in one text", patch: `[{"op":"replace","path":"/tags","value":"bench"}]`, at: "/tags", says: "must be a list, not text", bySchema: true},
	{name: "a tag of a number", patch: `[{"op":"replace","path":"/tags/1","value":5}]`, at: "/tags/1", says: "must be text", bySchema: true},
	{name: "strings in an object", patch: `[{"op":"replace","path":"/strings","value":{}}]`, at: "/strings", says: "must be a list, not an object", bySchema: true},
	{name: "a string that is a number", patch: `[{"op":"replace","path":"/strings/0","value":6}]`, at: "/strings/0", says: "must be an object, not a number", bySchema: true},
	{name: "a run that is a text", patch: `[{"op":"add","path":"/runs/-","value":"r9"}]`, at: "/runs/3", says: "must be an object, not text", bySchema: true},
	{name: "parts in a list", patch: `[{"op":"add","path":"/parts/spare","value":[]}]`, at: "/parts/spare", says: "must be an object, not a list", bySchema: true},
	{name: "a kind that is a number", patch: `[{"op":"replace","path":"/strings/0/driver/kind","value":1}]`, at: "/strings/0/driver/kind", says: "must be text", bySchema: true},
	{name: "half an LED", patch: `[{"op":"replace","path":"/strings/0/leds/0/quantity","value":1.5}]`, at: "/strings/0/leds/0/quantity", says: "must be a whole number, not 1.5", bySchema: true},
	{name: "yes for true", patch: `[{"op":"replace","path":"/parts/cc-350/switching","value":"yes"}]`, at: "/parts/cc-350/switching", says: "must be true or false, not text", bySchema: true},
	{name: "a point of three numbers", patch: `[{"op":"replace","path":"/parts/red-5mm/points/1","value":[1,2,3]}]`, at: "/parts/red-5mm/points/1", says: "a list of two numbers, a number in amps and a number in volts", bySchema: true},
	{name: "a point of texts", patch: `[{"op":"replace","path":"/parts/red-5mm/points/1/1","value":"2 V"}]`, at: "/parts/red-5mm/points/1/1", says: "must be a number in volts, not text", bySchema: true},

	// Numbers out of range.
	{name: "more than a float64 holds", patch: `[{"op":"replace","path":"/supply/max_current","value":1e999}]`, at: "/supply/max_current", says: "is too large: must be above 0", bySchema: true},
	{name: "less than a float64 holds", patch: `[{"op":"replace","path":"/supply/source_resistance","value":1e-999}]`, at: "/supply/source_resistance", says: "closer to zero"},
	{name: "no volts", patch: `[{"op":"replace","path":"/supply/voltage","value":0}]`, at: "/supply/voltage", says: "must be above 0\u00a0V and at most 1\u00a0kV, not 0\u00a0V", bySchema: true},
	{name: "negative volts in a spread", patch: `[{"op":"replace","path":"/supply/voltage/min","value":-1}]`, at: "/supply/voltage/min", says: "must be above 0", bySchema: true},
	{name: "mains and more", patch: `[{"op":"replace","path":"/supply/voltage","value":1001}]`, at: "/supply/voltage", says: "at most 1\u00a0kV, not 1.001\u00a0kV", bySchema: true},
	{name: "a spread that falls", patch: `[{"op":"replace","path":"/supply/voltage","value":{"min":24,"typ":23,"max":25}}]`, at: "/supply/voltage", says: "min, typ and max must rise, not be 24 / 23 / 25\u00a0V"},
	{name: "colder than anywhere", patch: `[{"op":"replace","path":"/ambient/min","value":-61}]`, at: "/ambient/min", says: "must be from \u221260\u00a0°C to 200\u00a0°C", bySchema: true},
	{name: "degrees Fahrenheit", patch: `[{"op":"replace","path":"/ambient","value":212}]`, at: "/ambient", says: "not 212\u00a0°C", bySchema: true},
	{name: "milliamps for amps", patch: `[{"op":"replace","path":"/strings/1/wanted/current","value":120}]`, at: "/strings/1/wanted/current", says: "(20 mA is written 0.02)", bySchema: true},
	{name: "percent for a ratio", patch: `[{"op":"replace","path":"/strings/0/driver/resistor/tolerance","value":5}]`, at: "/strings/0/driver/resistor/tolerance", says: "must be from 0 to 0.5, not 5 (5 % is written 0.05)", bySchema: true},
	{name: "no ohms to sense", patch: `[{"op":"replace","path":"/strings/1/driver/sense/ohms","value":0}]`, at: "/strings/1/driver/sense/ohms", says: "must be above 0", bySchema: true},
	{name: "more ohms than there are", patch: `[{"op":"replace","path":"/strings/1/driver/sense/ohms","value":1.1e9}]`, at: "/strings/1/driver/sense/ohms", says: "at most 1\u00a0GΩ", bySchema: true},
	{name: "no LEDs in a stack", patch: `[{"op":"replace","path":"/strings/0/leds/0/quantity","value":0}]`, at: "/strings/0/leds/0/quantity", says: "must be from 1 to 10000, not 0", bySchema: true},
	{name: "too many strings alike", patch: `[{"op":"replace","path":"/strings/0/quantity","value":10001}]`, at: "/strings/0/quantity", says: "must be from 1 to 10000", bySchema: true},
	{name: "a pot turned too far", patch: `[{"op":"replace","path":"/strings/2/driver/control/pot/turn","value":1.01}]`, at: "/strings/2/driver/control/pot/turn", says: "must be from 0 to 1", bySchema: true},
	{name: "a run round the city", patch: `[{"op":"replace","path":"/runs/0/length","value":10001}]`, at: "/runs/0/length", says: "must be from 0\u00a0m to 10\u00a0km", bySchema: true},
	{name: "a negative length", patch: `[{"op":"replace","path":"/runs/0/length","value":-1}]`, at: "/runs/0/length", says: "must be from 0", bySchema: true},
	{name: "an ideality below one half", patch: `[{"op":"replace","path":"/parts/amber-5mm/model/n","value":0.4}]`, at: "/parts/amber-5mm/model/n", says: "must be from 0.5 to 10", bySchema: true},
	{name: "no saturation current", patch: `[{"op":"replace","path":"/parts/amber-5mm/model/is","value":0}]`, at: "/parts/amber-5mm/model/is", says: "must be above 0", bySchema: true},
	{name: "a cooling thermal resistance", patch: `[{"op":"replace","path":"/parts/bc547b/rth_junction_ambient","value":-1}]`, at: "/parts/bc547b/rth_junction_ambient", says: "must be from 0", bySchema: true},
	{name: "a gain of nothing", patch: `[{"op":"replace","path":"/parts/bc547b/hfe/min","value":0}]`, at: "/parts/bc547b/hfe/min", says: "must be above 0", bySchema: true},
	{name: "a derating above all", patch: `[{"op":"replace","path":"/parts/supply-24-60/derating/0/1","value":1.2}]`, at: "/parts/supply-24-60/derating/0/1", says: "must be from 0 to 1", bySchema: true},
	{name: "a loading of more than all", patch: `[{"op":"replace","path":"/limits/loading","value":80}]`, at: "/limits/loading", says: "(5 % is written 0.05)", bySchema: true},

	// One of several.
	{name: "another program's format", patch: `[{"op":"replace","path":"/format","value":"something/1"}]`, at: "/format", says: `must be "lanternbook-build/1"`, bySchema: true},
	{name: "a later format", patch: `[{"op":"replace","path":"/format","value":"lanternbook-build/2"}]`, at: "/format", says: `is version "2" of the build document`, bySchema: true},
	{name: "an unknown kind of driver", patch: `[{"op":"replace","path":"/strings/0/driver/kind","value":"magic"}]`, at: "/strings/0/driver/kind", says: `"magic" is no kind of a driver: it must be one of resistor, rail-sink`, bySchema: true},
	{name: "an unknown type of part", patch: `[{"op":"add","path":"/parts/spare","value":{"type":"lamp"}}]`, at: "/parts/spare/type", says: `"lamp" is no type of a part`, bySchema: true},
	{name: "an unknown kind of rail", patch: `[{"op":"replace","path":"/rails/0/kind","value":"magic"}]`, at: "/rails/0/kind", says: `must be "follower", "reference"`, bySchema: true},
	{name: "what belongs to another kind of rail", patch: `[{"op":"add","path":"/rails/0/bias","value":{"ohms":1000}}]`, at: "/rails/0/bias", says: "does not belong to a rail of kind follower", bySchema: true},
	{name: "an unknown enclosure", patch: `[{"op":"replace","path":"/enclosure/kind","value":"vented"}]`, at: "/enclosure/kind", says: `must be "open" or "sealed"`, bySchema: true},
	{name: "a control of nothing", patch: `[{"op":"replace","path":"/strings/1/driver/control","value":{}}]`, at: "/strings/1/driver/control", says: "must have volts, pot or divider", bySchema: true},
	{name: "a control of two kinds", patch: `[{"op":"add","path":"/strings/2/driver/control/volts","value":2.2}]`, at: "/strings/2/driver/control", says: "must have only one of volts, pot or divider", bySchema: true},
	{name: "ohms without volts", patch: `[{"op":"add","path":"/strings/2/driver/control/ohms","value":500}]`, at: "/strings/2/driver/control/ohms", says: "belongs to volts", bySchema: true},
	{name: "a wish for nothing", patch: `[{"op":"replace","path":"/strings/1/wanted","value":{}}]`, at: "/strings/1/wanted", says: "must have current or luminous_flux", bySchema: true},
	{name: "a wish for two things", patch: `[{"op":"add","path":"/strings/1/wanted/luminous_flux","value":50}]`, at: "/strings/1/wanted", says: "must have only one of current or luminous_flux", bySchema: true},
	{name: "a run of no conductor", patch: `[{"op":"remove","path":"/runs/0/conductor"}]`, at: "/runs/0", says: "must have conductor or ohms_per_metre", bySchema: true},
	{name: "a run of two conductors", patch: `[{"op":"add","path":"/runs/0/ohms_per_metre","value":0.02}]`, at: "/runs/0", says: "must have only one of conductor or ohms_per_metre", bySchema: true},
	{name: "a conductor of an unknown measure", patch: `[{"op":"replace","path":"/runs/0/conductor","value":"0.75 sqin"}]`, at: "/runs/0/conductor", says: "0.75 mm2 or AWG 18", bySchema: true},
	{name: "a conductor as thick as a house", patch: `[{"op":"replace","path":"/runs/0/conductor","value":"5000 mm2"}]`, at: "/runs/0/conductor", says: "0.75 mm2 or AWG 18"},
	{name: "a gauge beyond the table", patch: `[{"op":"replace","path":"/runs/0/conductor","value":"AWG 41"}]`, at: "/runs/0/conductor", says: "from AWG 0000 to AWG 40"},
	{name: "an empty conductor", patch: `[{"op":"replace","path":"/runs/0/conductor","value":""}]`, at: "/runs/0/conductor", says: "must not be empty", bySchema: true},

	// Empty and odd texts and lists.
	{name: "an empty label", patch: `[{"op":"replace","path":"/strings/0/label","value":""}]`, at: "/strings/0/label", says: "must not be empty", bySchema: true},
	{name: "an empty part", patch: `[{"op":"replace","path":"/strings/0/leds/0/part","value":""}]`, at: "/strings/0/leds/0/part", says: "must not be empty", bySchema: true},
	{name: "a part without a key", patch: `[{"op":"add","path":"/parts/","value":{"type":"npn"}}]`, at: "/parts/", says: "needs a key", bySchema: true},
	{name: "a string without LEDs", patch: `[{"op":"replace","path":"/strings/0/leds","value":[]}]`, at: "/strings/0/leds", says: "must have at least one LED", bySchema: true},
	{name: "a control character", patch: `[{"op":"replace","path":"/title","value":"a\u0007b"}]`, at: "/title", says: "control character U+0007"},
	{name: "a text without end", patch: `[{"op":"replace","path":"/notes","value":"` + strings.Repeat("x", 200_001) + `"}]`, at: "/notes", says: "at most 200000", bySchema: true},

	// References.
	{name: "an LED that is not in parts", patch: `[{"op":"replace","path":"/strings/0/leds/0/part","value":"blue"}]`, at: "/strings/0/leds/0/part", says: `there is no part "blue"`},
	{name: "a transistor for an LED", patch: `[{"op":"replace","path":"/strings/0/leds/0/part","value":"bc547b"}]`, at: "/strings/0/leds/0/part", says: `must be a part of type led, and "bc547b" is of type npn`},
	{name: "a PNP for an NPN", patch: `[{"op":"replace","path":"/strings/1/driver/npn","value":"bc557b"}]`, at: "/strings/1/driver/npn", says: "must be a part of type npn"},
	{name: "a follower that is not in parts", patch: `[{"op":"replace","path":"/strings/1/driver/pnp","value":"x"}]`, at: "/strings/1/driver/pnp", says: "there is no part"},
	{name: "a reference sink's transistor", patch: `[{"op":"replace","path":"/strings/4/driver/npn","value":"x"}]`, at: "/strings/4/driver/npn", says: "there is no part"},
	{name: "a limiter's pass transistor", patch: `[{"op":"replace","path":"/strings/5/driver/pass","value":"x"}]`, at: "/strings/5/driver/pass", says: "there is no part"},
	{name: "a limiter's sensor", patch: `[{"op":"replace","path":"/strings/5/driver/sensor","value":"lm317"}]`, at: "/strings/5/driver/sensor", says: "must be a part of type npn"},
	{name: "a rail sink's transistor", patch: `[{"op":"replace","path":"/strings/6/driver/npn","value":"x"}]`, at: "/strings/6/driver/npn", says: "there is no part"},
	{name: "a rail that is not there", patch: `[{"op":"replace","path":"/strings/6/driver/rail","value":"x"}]`, at: "/strings/6/driver/rail", says: `there is no rail "x"`},
	{name: "an op-amp that is a MOSFET", patch: `[{"op":"replace","path":"/strings/7/driver/opamp","value":"2n7000"}]`, at: "/strings/7/driver/opamp", says: "must be a part of type opamp"},
	{name: "a MOSFET that is not in parts", patch: `[{"op":"replace","path":"/strings/7/driver/fet","value":"x"}]`, at: "/strings/7/driver/fet", says: "there is no part"},
	{name: "a regulator that is not in parts", patch: `[{"op":"replace","path":"/strings/8/driver/regulator","value":"x"}]`, at: "/strings/8/driver/regulator", says: "there is no part"},
	{name: "a module that is not in parts", patch: `[{"op":"replace","path":"/strings/9/driver/module","value":"x"}]`, at: "/strings/9/driver/module", says: "there is no part"},
	{name: "a rail's follower", patch: `[{"op":"replace","path":"/rails/0/pnp","value":"bc547b"}]`, at: "/rails/0/pnp", says: "must be a part of type pnp"},
	{name: "a rail's buffer", patch: `[{"op":"replace","path":"/rails/2/npn","value":"x"}]`, at: "/rails/2/npn", says: "there is no part"},
	{name: "a rail's control of nothing", patch: `[{"op":"replace","path":"/rails/0/control","value":{}}]`, at: "/rails/0/control", says: "must have volts, pot or divider", bySchema: true},
	{name: "a string fed by no run", patch: `[{"op":"replace","path":"/strings/0/fed_by","value":"r9"}]`, at: "/strings/0/fed_by", says: `there is no run "r9"`},
	{name: "a rail fed by no run", patch: `[{"op":"replace","path":"/rails/0/fed_by","value":"r9"}]`, at: "/rails/0/fed_by", says: `there is no run "r9"`},
	{name: "a run from no run", patch: `[{"op":"replace","path":"/runs/1/from","value":"r9"}]`, at: "/runs/1/from", says: `there is no run "r9"`},
	{name: "a run from itself", patch: `[{"op":"replace","path":"/runs/2/from","value":"given"}]`, at: "/runs/2/from", says: "leads round in a circle"},
	{name: "two labels alike", patch: `[{"op":"replace","path":"/strings/3/label","value":"pot"}]`, at: "/strings/3/label", says: `"pot" is the label of string 3 already`},
	{name: "two runs alike", patch: `[{"op":"replace","path":"/runs/2/id","value":"far"}]`, at: "/runs/2/id", says: `"far" is the id of run 2 already`},
	{name: "two rails alike", patch: `[{"op":"replace","path":"/rails/1/id","value":"main"}]`, at: "/rails/1/id", says: `"main" is the id of rail 1 already`},
	{name: "a run called supply", patch: `[{"op":"replace","path":"/runs/2/id","value":"supply"}]`, at: "/runs/2/id", says: "the supply itself", bySchema: true},
}

// changed applies a case's patch to the document that has everything.
func (c badCase) changed(t *testing.T) []byte {
	t.Helper()
	patch, err := jsonpatch.DecodePatch([]byte(c.patch))
	if err != nil {
		t.Fatal(err)
	}
	raw, err := patch.Apply(document(t, "every-driver"))
	if err != nil {
		t.Fatal(err)
	}
	return raw
}

func TestReadRefuses(t *testing.T) {
	for _, c := range badCases {
		t.Run(c.name, func(t *testing.T) {
			b, err := calc.Read(c.changed(t))
			var faults calc.Invalid
			if !errors.As(err, &faults) {
				t.Fatalf("Read returned %v", err)
			}
			if len(faults) != 1 || faults[0].At != c.at || !strings.Contains(faults[0].Reason, c.says) {
				t.Errorf("faults are %v, want one at %s that says %q", faults, c.at, c.says)
			}
			if !reflect.DeepEqual(b, calc.Build{}) {
				t.Error("a refused document gives a build")
			}
		})
	}
}

// rawCase is a text that no patch can make.
type rawCase struct {
	name string
	raw  string
	at   string
	says string
}

func TestReadRefusesTexts(t *testing.T) {
	good := string(document(t, "model-station"))
	cases := []rawCase{
		{name: "nothing", raw: "", says: "the document is not JSON, at line 1, column 1"},
		{name: "a comma too many", raw: "{\n  \"format\": 1,\n}", says: "at line 3, column 1"},
		{name: "something behind", raw: good + "x", says: "is not JSON"},
		{name: "two documents", raw: good + good, says: "is not JSON"},
		{name: "NaN", raw: strings.Replace(good, "\"voltage\": 12", "\"voltage\": NaN", 1), says: "is not JSON"},
		{name: "a leading zero", raw: strings.Replace(good, "\"voltage\": 12", "\"voltage\": 012", 1), says: "is not JSON"},
		{name: "a list", raw: "[]", says: "the document must be an object, not a list"},
		{name: "a byte order mark", raw: "\xef\xbb\xbf" + good, says: "byte order mark"},
		{name: "another encoding", raw: "{\"title\": \"\xe4\"}", says: "is not UTF-8"},
		{name: "half a character", raw: strings.Replace(good, "Model station", `Model \ud800station`, 1), says: "half a character"},
		{name: "nesting without end", raw: strings.Repeat("[", 5000) + strings.Repeat("]", 5000), says: "nested more than 32 levels"},
		{name: "nesting that the decoder refuses", raw: strings.Repeat("[", 200_000), says: "is not JSON"},
		{name: "more than any job needs", raw: `{"notes":"` + strings.Repeat("x", 5<<20) + `"}`, says: "is larger than 4 MB"},
		{name: "a key twice", raw: strings.Replace(good, `"ambient": 22`, `"ambient": 22, "ambient": 23`, 1), at: "/ambient", says: "is given twice"},
		{name: "a part twice", raw: strings.Replace(good, `"parts": {`, `"parts": {"amber-5mm": {"type": "npn"},`, 1), at: "/parts/amber-5mm", says: "is given twice"},
		{name: "a key twice in a spread", raw: strings.Replace(good, `"ambient": 22`, `"ambient": {"min": 20, "typ": 22, "typ": 23, "max": 25}`, 1), at: "/ambient/typ", says: "is given twice"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			_, err := calc.Read([]byte(c.raw))
			var faults calc.Invalid
			if !errors.As(err, &faults) {
				t.Fatalf("Read returned %v", err)
			}
			found := false
			for _, f := range faults {
				found = found || f.At == c.at && strings.Contains(f.Reason, c.says)
			}
			if !found {
				t.Errorf("faults are %v, want one at %q that says %q", faults, c.at, c.says)
			}
		})
	}
}

// All faults are told at once, in the order of the document.
func TestReadTellsAllFaults(t *testing.T) {
	_, err := calc.Read([]byte(`{
		"format": "lanternbook-build/1", "titel": "x", "ambient": {"min": 5, "typ": "warm", "max": 900},
		"supply": {"voltage": 24},
		"strings": [{"label": "A", "quantity": 1, "leds": [{"part": "w", "quantity": 1}], "driver": {"kind": "resistor", "resistor": {"ohms": "1k"}}, "fed_by": "r1"}],
		"parts": {"w": {"type": "led", "test_current": 0.02, "forward_voltage": -3}}}`))
	var faults calc.Invalid
	if !errors.As(err, &faults) {
		t.Fatal(err)
	}
	var at []string
	for _, f := range faults {
		at = append(at, f.At)
	}
	want := []string{"/title", "/titel", "/ambient/typ", "/ambient/max", "/strings/0/driver/resistor/ohms", "/strings/0/fed_by", "/parts/w/forward_voltage"}
	if !reflect.DeepEqual(at, want) {
		t.Errorf("faults at %v, want %v", at, want)
	}
}

// A document of another kind gives a hundred faults and a last line, not all.
func TestReadStopsAtManyFaults(t *testing.T) {
	_, err := calc.Read([]byte(`{"strings": [` + strings.Repeat(`5,`, 100_000) + `5]}`))
	var faults calc.Invalid
	if !errors.As(err, &faults) || len(faults) != 101 || !strings.Contains(faults[100].Reason, "may have more faults") {
		t.Errorf("Read gives %d faults, the last %v", len(faults), faults[len(faults)-1])
	}
}

// A circle of runs is told at each of its runs, and what hangs on it is not.
func TestReadFindsCircles(t *testing.T) {
	c := badCase{patch: `[{"op":"replace","path":"/runs/0/from","value":"far"},{"op":"replace","path":"/runs/0/id","value":"near"},{"op":"replace","path":"/runs/1/from","value":"near"},{"op":"replace","path":"/runs/2/from","value":"far"},{"op":"replace","path":"/strings/0/fed_by","value":"far"},{"op":"replace","path":"/strings/1/fed_by","value":"far"},{"op":"replace","path":"/rails/0/fed_by","value":"far"}]`}
	_, err := calc.Read(c.changed(t))
	want := calc.Invalid{
		{At: "/runs/0/from", Reason: "leads round in a circle and never to the supply"},
		{At: "/runs/1/from", Reason: "leads round in a circle and never to the supply"},
	}
	if !reflect.DeepEqual(err, want) {
		t.Errorf("faults are %v, want %v", err, want)
	}
}

// A whole number may be written with a point or an exponent, as JSON knows no
// difference.
func TestReadTakesWholeNumbersHoweverWritten(t *testing.T) {
	raw := bytes.Replace(document(t, "model-station"), []byte(`"quantity": 6`), []byte(`"quantity": 0.6e1`), 1)
	b, err := calc.Read(raw)
	if err != nil || b.Strings[0].Quantity != 6 {
		t.Errorf("Read = %v, %v", b.Strings, err)
	}
}

func FuzzRead(f *testing.F) {
	for _, raw := range documents(f) {
		f.Add(raw)
	}
	f.Add([]byte(`{"strings":[{"driver":{"kind":"resistor","kind":"module"}}],"parts":{"":null}}`))
	f.Fuzz(func(t *testing.T, raw []byte) {
		b, err := calc.Read(raw)
		var faults calc.Invalid
		if err != nil && (!errors.As(err, &faults) || len(faults) == 0) {
			t.Fatalf("the error is %v", err)
		}
		if err == nil && b.Format != calc.BuildFormat {
			t.Fatalf("read as %v", b)
		}
	})
}
