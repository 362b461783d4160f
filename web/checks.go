package web

import (
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// ChecksView is the ledger of checks, worst first.
type ChecksView struct {
	Rows  []CheckView // fail, tight and unknown
	Pass  []CheckView
	Sum   string // "28 pass"
	Count map[calc.Severity]int
	taken map[string]bool // ids given
}

// CheckView is one line of the ledger.
type CheckView struct {
	ID       string // the same for the same check after an edit
	Verdict  VerdictView
	What     string // "Headroom"
	Where    string // "string B"
	Href     string // the field it is about; "" for none
	Value    string // "−0.30 V", "?" when not known
	Limit    string // "at least 0.3 V"; "" when not known
	Bar      *BarView
	Message  string
	Working  string
	Source   string
	Remedies []RemedyView
}

// BarView is a value on its way to a limit.
type BarView struct {
	Fill  Px     // from 0
	Limit Px     // where the limit is
	Voice string // "38 % of the limit"
}

// RemedyView is an edit that has been tried.
type RemedyView struct {
	Text  string
	Gives string
	Value string // which remedy of which finding: "0.2"
}

// barWide is the length of a bar, barLimit where a limit on the way up is.
const (
	barWide  Px = 190
	barLimit Px = 160
	barLeast Px = 56 // where a least is: what is above it is room
)

// codeWords names the checks in the trade's words.
var codeWords = map[string]string{
	"headroom": "Headroom", "base-drive": "Base drive", "reference-current": "Reference current", "wanted": "What is wanted",
	"led-current": "LED current", "led-junction": "LED junction", "transistor-power": "Transistor heat", "transistor-junction": "Transistor junction",
	"transistor-voltage": "Transistor voltage", "transistor-current": "Transistor current", "resistor-power": "Resistor heat",
	"supply-loading": "Supply loading", "extra-low-voltage": "Extra-low voltage", "limited-power": "Limited power",
	"enclosure": "Enclosure", "part-data": "Part’s data", "thermal-runaway": "Runaway heat", "unsolved": "Operating point",
}

// newChecks makes the ledger of a report.
func newChecks(b calc.Build, r calc.Report) ChecksView {
	v := ChecksView{Count: map[calc.Severity]int{}, taken: map[string]bool{}}
	entries := NewBuildForm(b, nil).Entries()
	for i, f := range r.Findings {
		row := checkView(i, f, entries)
		row.ID = checkID(f, v.taken)
		rows := &v.Rows
		if f.Severity == calc.Pass {
			rows = &v.Pass
		}
		if !joined(*rows, row) {
			*rows = append(*rows, row)
			v.Count[f.Severity]++
		}
	}
	v.Sum = strconv.Itoa(len(v.Pass)) + " pass"
	return v
}

// checkID names a check by what it is about, so that an answer finds its line
// again wherever that has moved to.
func checkID(f calc.Finding, taken map[string]bool) string {
	id := "check-" + strings.TrimPrefix(FieldID(f.Code+"-"+f.Where), "f-")
	for n := 2; taken[id]; n++ {
		id = strings.TrimPrefix(FieldID(fmt.Sprintf("check-%s-%s-%d", f.Code, f.Where, n)), "f-")
	}
	taken[id] = true
	return id
}

// joined puts a row's place into one above it that says the very same of
// another string. Rows with remedies stand alone: those are for one string.
func joined(rows []CheckView, row CheckView) bool {
	for i := range rows {
		r := &rows[i]
		if r.Verdict != row.Verdict || r.What != row.What || r.Value != row.Value || r.Limit != row.Limit ||
			r.Message != row.Message || r.Working != row.Working || len(r.Remedies)+len(row.Remedies) > 0 {
			continue
		}
		first, same := strings.CutPrefix(r.Where, "string ")
		next, also := strings.CutPrefix(row.Where, "string ")
		if !also {
			continue
		}
		if same {
			r.Where = "strings " + first
		}
		r.Where += ", " + next
		return true
	}
	return false
}

func checkView(i int, f calc.Finding, entries []*Entry) CheckView {
	v := CheckView{
		Verdict: NewVerdict(string(f.Severity)), What: codeWords[f.Code], Where: f.Where, Href: fieldOf(f.At, entries),
		Value: "?", Message: f.Message, Working: f.Working, Source: f.Source, Bar: bar(f),
	}
	v.Verdict.Word = checkWord(f.Severity)
	if f.Code == "headroom" && f.Unit == "%" {
		v.What = "Current swing"
	}
	if v.What == "" {
		v.What = strings.ToUpper(f.Code[:min(1, len(f.Code))]) + strings.ReplaceAll(f.Code[min(1, len(f.Code)):], "-", " ")
	}
	if f.Value != nil {
		v.Value = findingFigure(*f.Value, f.Unit)
	}
	if f.Limit != nil {
		v.Limit = limitFigure(*f.Limit, f.Unit)
		switch {
		case f.Code == "wanted":
			v.Limit += " wanted"
		case f.Least:
			v.Limit = "at least " + v.Limit
		default:
			v.Limit = "at most " + v.Limit
		}
	}
	for k, remedy := range f.Remedies {
		v.Remedies = append(v.Remedies, RemedyView{Text: remedy.Text, Gives: remedy.Gives, Value: fmt.Sprintf("%d.%d", i, k)})
	}
	return v
}

// checkWord is the outcome of one check.
func checkWord(s calc.Severity) string {
	switch s {
	case calc.Fail:
		return "fail"
	case calc.Tight:
		return "tight"
	case calc.Pass:
		return "pass"
	}
	return "unknown"
}

// findingFigure writes a finding's value or limit. Shares are in percent there,
// temperatures are worth no more than a degree.
func findingFigure(v float64, unit string) string {
	switch unit {
	case "%":
		return quantity.Format(v/100, quantity.Percent, 2)
	case "°C":
		return degrees(v)
	}
	return quantity.Format(v, unit, 3)
}

// limitFigure writes a limit: a round one as it was set, a computed one to
// three digits.
func limitFigure(v float64, unit string) string {
	if unit == "%" || unit == "°C" {
		return findingFigure(v, unit)
	}
	set, computed := quantity.Text(v, unit), quantity.Format(v, unit, 3)
	if len(set) <= len(computed) {
		return set
	}
	return computed
}

// bar draws the value against its limit; nil where one of them is not known or
// the limit is no positive number to be on the way to.
func bar(f calc.Finding) *BarView {
	if f.Value == nil || f.Limit == nil || !(*f.Limit > 0) {
		return nil
	}
	v := BarView{Limit: barLimit}
	if f.Least {
		v.Limit = barLeast
	}
	share := *f.Value / *f.Limit
	v.Fill = min(max(Px(share)*v.Limit, 3), barWide)
	v.Voice = quantity.Format(share, quantity.Percent, 2) + " of the limit"
	return &v
}

// fieldOf is where on the page a finding's pointer leads: to its field, the
// first field below it, or its string.
func fieldOf(at string, entries []*Entry) string {
	if at == "" {
		return ""
	}
	for _, e := range entries {
		if e.Name == at || strings.HasPrefix(e.Name, at+"/") {
			return fieldLink(e.Name)
		}
	}
	if below, in := strings.CutPrefix(at, "/strings/"); in {
		number, _, _ := strings.Cut(below, "/")
		return "#string-" + number
	}
	return ""
}

// verdictBox sums up the outcomes: how many fail, are tight, are unknown.
func verdictBox(r calc.Report, counts map[calc.Severity]int) VerdictBox {
	box := VerdictBox{VerdictView: NewVerdict(string(r.Verdict))}
	var words []string
	for _, s := range []struct {
		severity  calc.Severity
		one, many string
	}{{calc.Fail, "fails", "fail"}, {calc.Tight, "tight", "tight"}, {calc.Unknown, "unknown", "unknown"}} {
		switch n := counts[s.severity]; n {
		case 0:
		case 1:
			words = append(words, "1 "+s.one)
		default:
			words = append(words, strconv.Itoa(n)+" "+s.many)
		}
	}
	if len(words) == 0 {
		words = []string{"all " + strconv.Itoa(counts[calc.Pass]) + " checks pass"}
	}
	box.Words = strings.Join(words, " · ")
	return box
}

// Supply voltages and powers beyond which many codes no longer speak of
// extra-low voltage or a limited supply.
//
// Source: see the checks of package calc that name them.
const (
	touchable  = 60.0  // [V]
	limitedTo  = 100.0 // [W]
	brightFrom = 30.0  // [lm] of one LED. Common practice, no source
	hotFrom    = 60.0  // [°C] that a finger does not stand. Common practice, no source
)

// cautions are the words to the wise that this build calls for.
func cautions(b calc.Build, r calc.Report) []string {
	list := []string{}
	if b.Supply.Voltage.Max > touchable {
		list = append(list, "Above 60 V DC this is no longer the extra-low voltage that many codes let anybody work on: it belongs to a licensed electrician, and the local code decides.")
	}
	if b.Supply.MaxCurrent != nil && b.Supply.Voltage.Typ**b.Supply.MaxCurrent > limitedTo {
		list = append(list, "A supply above 100 W can set a shorted cable on fire before it gives up: fuse each run for its cable.")
	}
	if strings.Contains(strings.ToLower(b.Supply.Label), "batter") {
		list = append(list, "A battery gives hundreds of amps into a short: fuse it at its terminal, before anything else.")
	}
	hottest, brightest := 0.0, 0.0
	for i, s := range r.Strings {
		for _, d := range s.Devices {
			hottest = max(hottest, d.Junction.Max)
		}
		for _, stack := range b.Strings[i].LEDs {
			if led := b.Parts[stack.Part].LED; led != nil && led.LuminousFlux != nil {
				brightest = max(brightest, *led.LuminousFlux)
			}
		}
	}
	if hottest > hotFrom {
		list = append(list, "Parts get up to "+degrees(hottest)+" inside: keep them from fingers, foam and film.")
	}
	if brightest > brightFrom {
		list = append(list, "Do not look into these LEDs from near: they are bright enough to hurt eyes.")
	}
	return list
}
