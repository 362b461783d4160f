package web_test

import (
	"encoding/json"
	"slices"
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// found is a survey with one failure that matters and one that does not.
func found() calc.Failures {
	each, faulty := 3.1, 0.0
	return calc.Failures{
		Tried: 9, Total: 9, Missing: []string{"the rating of the pull-up"},
		All: []calc.Failure{{
			At: "/strings/0/driver/sense", Where: "string A", Fault: "sense resistor shorted", Matters: true,
			Text:     "string A: sense resistor shorted: bright, 380 mA instead of 34.1 mA",
			Voltages: &calc.Voltages{Feed: 23.5, Tail: 0.7}, LEDs: []calc.LEDReading{{Part: "white", Each: &each, Faulty: &faulty}},
			Over:   []calc.Over{{Where: "string A", Role: "pass_transistor", Part: "npn", What: "power", Value: 1.2345678, Limit: 0.5, Unit: "W"}, {Where: "string B", Role: "sense_resistor", What: "current", Value: 0.4, Limit: 0.03, Unit: "A"}},
			Beyond: 2, Others: []calc.Change{{String: 1, Current: 0.01, Was: 0.02}},
			Remedies: []calc.Remedy{{Text: "a base resistor", Gives: "the others stay", Patch: []calc.Operation{{Op: "add", Path: "/strings/0/driver/base_resistor", Value: json.RawMessage("220")}}}},
		}, {At: "/strings/1/leds/0", Where: "string B", Fault: "LED shorted", Text: "string B: LED shorted: its light stays"}},
	}
}

func TestFailuresThatMatterAreTold(t *testing.T) {
	b, r := someBuild()
	v := web.NewFailuresView(web.MoreInput{ID: 4, Revision: 3, Build: b, Report: r}, found())
	if len(v.Rows) != 1 || !v.Cures || !strings.HasPrefix(v.Lead, "9 single faults") || !strings.Contains(v.Lead, "1 of them matter") {
		t.Fatalf("%q, rows %+v", v.Lead, v.Rows)
	}
	row := v.Rows[0]
	if row.Comes != "bright, 380 mA instead of 34.1 mA" || row.Fault != "sense resistor shorted" || row.Href != "#f-strings-0-driver-sense-ohms" {
		t.Errorf("%q comes of %q, at %q", row.Comes, row.Fault, row.Href)
	}
	if got, want := row.Burns, []string{"pass, BC547B: 1.23\u00a0W of 0.500\u00a0W", "string B, sense resistor: current 400\u00a0mA of 30.0\u00a0mA"}; !slices.Equal(got, want) {
		t.Errorf("burns %q, want %q", got, want)
	}
	if got, want := row.Others, []string{"string B: 10.0\u00a0mA instead of 20.0\u00a0mA"}; !slices.Equal(got, want) {
		t.Errorf("others %q, want %q", got, want)
	}
	var reads []string
	for _, p := range row.Reads {
		reads = append(reads, p.Name+" "+p.Volts)
	}
	if want := []string{"feed 23.5\u00a0V", "tail 0.700\u00a0V", "each LED 3.10\u00a0V", "faulty LED 0.00\u00a0V"}; !slices.Equal(reads, want) {
		t.Errorf("reads %q, want %q", reads, want)
	}
	c := row.Cures[0]
	if c.Patch != `[{"op":"add","path":"/strings/0/driver/base_resistor","value":220}]` || c.Action != "/builds/4/more/failures" || c.Revision != "3" {
		t.Errorf("cure %+v", c)
	}
}

func TestAStoppedSurveyIsToldAsSuch(t *testing.T) {
	b, r := someBuild()
	f := found()
	f.Total = 100
	v := web.NewFailuresView(web.MoreInput{Build: b, Report: r}, f)
	if !strings.Contains(v.Lead, "9 of 100") {
		t.Errorf("%q", v.Lead)
	}
}

func TestManyFailuresAreCutShort(t *testing.T) {
	b, r := someBuild()
	f := found()
	f.All = slices.Repeat(f.All[:1], 55)
	v := web.NewFailuresView(web.MoreInput{Build: b, Report: r}, f)
	if len(v.Rows) != 40 || !strings.Contains(v.Rest, "15 more") {
		t.Errorf("%d rows, %q", len(v.Rows), v.Rest)
	}
}
