package web_test

import (
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

// someBuild is three strings with a report that has a finding of each outcome.
func someBuild() (calc.Build, calc.Report) {
	b, r, _ := picture(web.Usual, web.WideFrame, harbourSupply, harbour...)
	number := func(v float64) *float64 { return &v }
	b.Title, b.Supply.Label, b.Supply.MaxCurrent = "Quay", "12 V battery", number(2.5)
	b.Strings[0].Wanted = &calc.Wanted{Current: number(0.034)}
	for i := range r.Strings {
		s := &r.Strings[i]
		s.Current = calc.Range{Min: 0.0331, Typ: 0.0341, Max: 0.0353}
		s.LEDVoltage = calc.Range{Min: 18, Typ: 19.1, Max: 20}
		s.Voltages = calc.Voltages{Feed: 23.55, Tail: 4.41, Sense: number(0.61)}
		s.Devices = []calc.DeviceReport{
			{Role: "pass_transistor", Part: "npn", Power: calc.Range{Min: 0.1, Typ: 0.123, Max: 0.3}, Junction: calc.Range{Min: -10, Typ: 49.6, Max: 116.2}, PowerLimit: number(0.5), JunctionLimit: number(125)},
			{Role: "sense_resistor", Power: calc.Range{Min: 0.02, Typ: 0.0208, Max: 0.022}, Junction: calc.Range{Min: 25, Typ: 25, Max: 25}, PowerLimit: number(0.25)},
		}
	}
	r.Strings[0].LuminousFlux = &calc.Range{Min: 20, Typ: 21.6, Max: 23}
	r.Supply = calc.SupplyReport{
		Current: calc.Range{Min: 0.18, Typ: 0.2, Max: 0.22}, Power: calc.Range{Min: 4.2, Typ: 4.8, Max: 5.4},
		Loading: &calc.Range{Min: 0.072, Typ: 0.08, Max: 0.088}, Efficiency: 0.794, Inside: calc.Range{Min: -10, Typ: 20, Max: 60},
	}
	r.Verdict = calc.Fail
	unknown := func(where, at string) calc.Finding {
		return calc.Finding{Code: "led-junction", Severity: calc.Unknown, Where: where, At: at, Limit: number(125), Unit: "°C", Message: "no thermal resistance", Working: "-", Source: "-"}
	}
	r.Findings = []calc.Finding{
		{Code: "headroom", Severity: calc.Fail, Where: "string B", At: "/strings/1/leds", Value: number(-0.3), Limit: number(0.3), Unit: "V", Least: true,
			Message: "0.30 V short", Working: "23.5 − 0.45 − 22.5 − 0.81", Source: "definition", Remedies: []calc.Remedy{{Text: "one LED fewer", Gives: "2.9 V left over"}}},
		{Code: "wanted", Severity: calc.Tight, Where: "string A", At: "/strings/0/wanted", Value: number(0.0341), Limit: number(0.034), Unit: "A"},
		unknown("string A", "/strings/0/leds"), unknown("string C", "/strings/2/leds"),
		{Code: "supply-loading", Severity: calc.Pass, Where: "supply", At: "/supply/max_current", Value: number(8.8), Limit: number(80), Unit: "%"},
		{Code: "transistor-junction", Severity: calc.Pass, Where: "string A", At: "/strings/0/driver", Value: number(116.2), Limit: number(125), Unit: "°C"},
		{Code: "something-new", Severity: calc.Pass, Where: "build", Value: number(0), Limit: number(0), Unit: "V"},
	}
	return b, r
}

func TestChecksLedger(t *testing.T) {
	b, r := someBuild()
	v := web.NewBuildView(web.BuildInput{Build: b, Report: r}).Checks
	if len(v.Rows) != 3 || len(v.Pass) != 3 || v.Sum != "3 pass" {
		t.Fatalf("%d rows, %d pass, %q", len(v.Rows), len(v.Pass), v.Sum)
	}
	want := []string{
		"Headroom | string B | #f-strings-1-leds-0-part | −0.300\u00a0V | at least 0.3\u00a0V | check-headroom-string-B",
		"What is wanted | string A | #f-strings-0-wanted | 34.1\u00a0mA | 34\u00a0mA wanted | check-wanted-string-A",
		"LED junction | strings A, C | #f-strings-0-leds-0-part | ? | at most 125\u00a0°C | check-led-junction-string-A",
		"Supply loading | supply | #f-supply-max-current | 8.8\u00a0% | at most 80\u00a0% | check-supply-loading-supply",
		"Transistor junction | string A | #f-strings-0-driver-kind | 116\u00a0°C | at most 125\u00a0°C | check-transistor-junction-string-A",
		"Something new | build |  | 0.00\u00a0V | at most 0\u00a0V | check-something-new-build",
	}
	for i, row := range append(v.Rows, v.Pass...) {
		if got := strings.Join([]string{row.What, row.Where, row.Href, row.Value, row.Limit, row.ID}, " | "); got != want[i] {
			t.Errorf("line %d: %s\nwant %s", i, got, want[i])
		}
	}
	if got := v.Rows[0].Remedies[0].Value; got != "0.0" {
		t.Errorf("the remedy is called %q", got)
	}
}

// A bar ends before its mark when a most is kept, beyond it when a least is;
// without a value there is none.
func TestChecksBars(t *testing.T) {
	b, r := someBuild()
	v := web.NewBuildView(web.BuildInput{Build: b, Report: r}).Checks
	short, unknown, loading, nothing := v.Rows[0].Bar, v.Rows[2].Bar, v.Pass[0].Bar, v.Pass[2].Bar
	if short == nil || short.Fill >= short.Limit || short.Fill <= 0 {
		t.Errorf("headroom below its least: %+v", short)
	}
	if unknown != nil || nothing != nil {
		t.Errorf("a bar without a value, or towards 0: %+v, %+v", unknown, nothing)
	}
	near(t, "loading of 8.8 on the way to 80", float64(loading.Fill/loading.Limit), 0.11, 1e-9)
}

func TestVerdictBox(t *testing.T) {
	b, r := someBuild()
	if got := web.NewBuildView(web.BuildInput{Build: b, Report: r}).Verdict; got.Words != "1 fails · 1 tight · 1 unknown" || got.Class != "fail" {
		t.Errorf("%+v", got)
	}
	r.Verdict, r.Findings = calc.Pass, r.Findings[4:]
	if got := web.NewBuildView(web.BuildInput{Build: b, Report: r}).Verdict; got.Words != "all 3 checks pass" || got.Shape != "●" {
		t.Errorf("%+v", got)
	}
}

func TestReadings(t *testing.T) {
	b, r := someBuild()
	v := web.NewBuildView(web.BuildInput{Build: b, Report: r})
	want := []web.ReadingRow{
		{Name: "current", Low: "33.1\u00a0mA", Usual: "34.1\u00a0mA", High: "35.3\u00a0mA"},
		{Name: "light", Low: "20.0\u00a0lm", Usual: "21.6\u00a0lm", High: "23.0\u00a0lm"},
		{Name: "across the LEDs", Low: "18.0\u00a0V", Usual: "19.1\u00a0V", High: "20.0\u00a0V"},
		{Name: "left over", Low: "2.40\u00a0V", Usual: "3.10\u00a0V", High: "4.00\u00a0V", Limit: "at least 0.3\u00a0V"},
		{Name: "pass, BC547B", Low: "0.10\u00a0W", Usual: "0.12\u00a0W", High: "0.30\u00a0W", Limit: "0.5\u00a0W"},
		{Name: "its junction", Low: "−10\u00a0°C", Usual: "50\u00a0°C", High: "116\u00a0°C", Limit: "125\u00a0°C"},
		{Name: "sense resistor", Low: "20\u00a0mW", Usual: "21\u00a0mW", High: "22\u00a0mW", Limit: "0.25\u00a0W"},
	}
	for i, row := range v.Readings[0].Rows {
		if i >= len(want) || row != want[i] {
			t.Errorf("row %d: %+v\nwant %+v", i, row, want[min(i, len(want)-1)])
		}
	}
	if got := v.Readings[1].Rows[1]; got.Words == "" || got.Usual != "" {
		t.Errorf("a light that is not known: %+v", got)
	}
	points := v.Readings[0].Points
	if len(points) != 3 || points[0].Volts != "23.6\u00a0V" || points[2].Name != "sense" {
		t.Errorf("test points %+v", points)
	}
}

func TestBuildHints(t *testing.T) {
	b, r := someBuild()
	suggestions := map[int]calc.Suggestion{0: {
		At: "/strings/0/driver/sense/ohms", Exact: 18.13, Unit: "Ω",
		Choices: []calc.Choice{{Value: 18, Series: "E24", Current: 0.0342}, {Value: 20, Series: "E24", Current: 0.0308}},
	}}
	f := web.NewBuildView(web.BuildInput{Build: b, Report: r, Suggestions: suggestions}).Form
	if got := f.Strings[0].Wanted.Hint; got != "gives 34.1\u00a0mA, 21.6\u00a0lm a string" {
		t.Errorf("hint of what is wanted: %q", got)
	}
	var sense *web.Entry
	for _, e := range f.Entries() {
		if e.Name == "/strings/0/driver/sense/ohms" {
			sense = e
		}
	}
	if len(sense.Offers) != 2 || sense.Offers[0] != (web.Offer{Value: "18\u00a0Ω", Gives: "34.2\u00a0mA · E24"}) || !strings.Contains(sense.Hint, "18.1") {
		t.Errorf("offers %+v, hint %q", sense.Offers, sense.Hint)
	}
}

func TestCautions(t *testing.T) {
	b, r := someBuild()
	has := func(words string) bool {
		return strings.Contains(strings.Join(web.NewBuildView(web.BuildInput{Build: b, Report: r}).Cautions, "\n"), words)
	}
	if !has("battery") || !has("116\u00a0°C") || has("60 V") || has("100 W") || has("look into") {
		t.Error("a 12 V battery with a transistor at 116 °C calls for two cautions")
	}
	bright := 120.0
	b.Parts["white"].LED.LuminousFlux = &bright
	b.Supply.Voltage, b.Supply.Label = calc.Exactly(72), "72 V supply"
	if has("battery") || !has("60 V") || !has("100 W") || !has("look into") {
		t.Error("72 V at 2.5 A and bright LEDs call for other cautions")
	}
}

// A build that could not be solved has a page all the same.
func TestBuildViewUnsolved(t *testing.T) {
	b, _ := someBuild()
	r := calc.Report{Verdict: calc.Unknown, Strings: []calc.StringReport{}, Findings: []calc.Finding{{Code: "unsolved", Severity: calc.Unknown, Where: "string A", Message: "no operating point: it heats until it fails"}}}
	v := web.NewBuildView(web.BuildInput{Build: b, Report: r, Open: 99})
	page := rendered(t, web.BuildPage(v))
	for _, words := range []string{"Nothing can be drawn", "it heats until it fails", `name="/strings/2/driver/sense/ohms"`, `id="string-2" data-string="2" open`} {
		if !strings.Contains(page, words) {
			t.Errorf("the page has no %q", words)
		}
	}
}

// An answer to an edit has none of the fields, unless which there are has
// changed; what is wrong comes as a line of its own.
func TestBuildAnswer(t *testing.T) {
	b, r := someBuild()
	v := web.NewBuildView(web.BuildInput{Build: b, Report: r, Typed: map[string]string{"/title": "x"}, Faults: map[string]string{"/title": "this needs a name"}})
	short := rendered(t, web.BuildAnswer(v, false))
	if strings.Contains(short, `name="/`) {
		t.Error("an answer without fields has fields")
	}
	if !strings.Contains(short, `data-hx-target="#f-title-error" data-hx-swap="textContent">this needs a name</hx-partial>`) {
		t.Error("the line below the title is not sent, or has blanks round it")
	}
	whole := rendered(t, web.BuildAnswer(v, true))
	for _, e := range v.Form.Entries() {
		if !strings.Contains(whole, `name="`+e.Name+`"`) {
			t.Errorf("an answer with all fields has no %s", e.Name)
		}
	}
}

// Which fields there are is one thing, what their lists offer another.
func TestFormShape(t *testing.T) {
	b, _ := someBuild()
	before := web.NewBuildForm(b, nil)
	stock := web.Stock{Key: "green", Part: calc.Part{Type: calc.TypeLED, LED: &calc.LED{Common: calc.Common{Type: calc.TypeLED}}}}
	after := web.NewBuildForm(b, []web.Stock{stock})
	if before.Shape() != after.Shape() || before.Lists() == after.Lists() {
		t.Error("a part in the drawer changes what lists offer, not which fields there are")
	}
	b.Strings = b.Strings[:2]
	if web.NewBuildForm(b, nil).Shape() == before.Shape() {
		t.Error("without a string there are fewer fields")
	}
}
