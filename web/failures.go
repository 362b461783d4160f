package web

import (
	"encoding/json"
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// FailuresView tells what one failure does.
type FailuresView struct {
	More    MoreView
	Lead    string
	Rows    []FailureRow
	Cures   bool     // there is any
	Rest    string   // what is not told of; "" for nothing
	Assumed []string // of parts
	Missing []string // ratings
}

// FailureRow is one fault that matters.
type FailureRow struct {
	Where  string
	Href   string // the part; "" for none
	Fault  string
	Comes  string      // what comes of it, in words
	Reads  []PointView // with a meter at the string that has the fault
	Burns  []string
	Others []string // what other strings do
	Cures  []CureView
}

// CureView is an edit that has been tried against the fault.
type CureView struct {
	Text, Gives string
	Action      string // where it is posted to
	Revision    string
	Patch       string // JSON Patch
}

// How much is told at most.
const (
	mostFailures = 40
	mostOver     = 4
	mostOthers   = 4
)

// NewFailuresView shows what a survey found.
func NewFailuresView(in MoreInput, found calc.Failures) FailuresView {
	v := FailuresView{More: newMore(topicFailures, in), Assumed: found.Assumed, Missing: found.Missing}
	if v.More.Unsolved != "" {
		return v
	}
	matter := found.Matter()
	v.Lead = fmt.Sprintf("%d single faults were tried, one at a time, everything else typical. %d of them matter: something leaves its limits, other strings change by more than a tenth, or nobody can tell.",
		found.Tried, len(matter))
	if found.Tried < found.Total {
		v.Lead = fmt.Sprintf("This took too long: %d of %d single faults were tried. %d of those matter.", found.Tried, found.Total, len(matter))
	}
	if len(matter) > mostFailures {
		v.Rest = fmt.Sprintf("These are the worst %d; %d more matter.", mostFailures, len(matter)-mostFailures)
		matter = matter[:mostFailures]
	}
	entries := NewBuildForm(in.Build, nil).Entries()
	for i := range matter {
		f := &matter[i]
		row := FailureRow{Where: f.Where, Href: v.More.link(fieldOf(f.At, entries)), Fault: f.Fault, Comes: comes(f), Reads: failureReads(in.Build, f)}
		for k, o := range f.Over {
			if k == mostOver {
				row.Burns = append(row.Burns, "and "+strconv.Itoa(f.Beyond-mostOver)+" more")
				break
			}
			row.Burns = append(row.Burns, burns(in.Build, f, o))
		}
		row.Others = others(in.Build, f)
		row.Cures = v.More.cures(f.Remedies)
		v.Cures = v.Cures || len(row.Cures) > 0
		v.Rows = append(v.Rows, row)
	}
	return v
}

// comes is what comes of a fault, without what is wrong.
func comes(f *calc.Failure) string {
	text := strings.TrimPrefix(f.Text, f.Where+": ")
	return strings.TrimPrefix(text, f.Fault+": ")
}

// failureReads is what a meter shows with the fault in.
func failureReads(b calc.Build, f *calc.Failure) []PointView {
	var list []PointView
	if f.Voltages != nil {
		list = points(calc.StringReport{Voltages: *f.Voltages})
	}
	for _, led := range f.LEDs {
		name := partName(led.Part, b.Parts[led.Part])
		if led.Each != nil {
			list = append(list, PointView{"each LED", "across " + name, quantity.Format(*led.Each, quantity.Volt, 3)})
		}
		if led.Faulty != nil {
			list = append(list, PointView{"faulty LED", "across the faulty " + name, quantity.Format(*led.Faulty, quantity.Volt, 3)})
		}
	}
	for _, r := range f.Rails {
		if r.Rail >= 0 && r.Rail < len(b.Rails) {
			list = append(list, PointView{"rail " + b.Rails[r.Rail].ID, "was " + quantity.Format(r.Was, quantity.Volt, 3), quantity.Format(r.Volts, quantity.Volt, 3)})
		}
	}
	return list
}

// burns is one part beyond a limit.
func burns(b calc.Build, f *calc.Failure, o calc.Over) string {
	who := RoleWords(b, calc.DeviceReport{Role: o.Role, Part: o.Part})
	if o.Where != f.Where && o.Where != who {
		who = o.Where + ", " + who
	}
	what := o.What
	if what == "power" { // the unit says it
		what = ""
	} else {
		what += " "
	}
	return fmt.Sprintf("%s: %s%s of %s", who, what, findingFigure(o.Value, o.Unit), findingFigure(o.Limit, o.Unit))
}

// others is what strings without a fault of their own do.
func others(b calc.Build, f *calc.Failure) []string {
	var list []string
	for k, c := range f.Others {
		if k == mostOthers {
			return append(list, "and "+strconv.Itoa(len(f.Others)-mostOthers)+" more")
		}
		if c.String < 0 || c.String >= len(b.Strings) {
			continue
		}
		list = append(list, fmt.Sprintf("string %s: %s instead of %s", b.Strings[c.String].Label,
			quantity.Format(c.Current, quantity.Amp, 3), quantity.Format(c.Was, quantity.Amp, 3)))
	}
	return list
}

// cures are remedies as buttons.
func (v MoreView) cures(remedies []calc.Remedy) []CureView {
	var list []CureView
	for _, r := range remedies {
		patch, err := json.Marshal(r.Patch)
		if err != nil {
			continue // a figure that is no number: nothing to be offered
		}
		list = append(list, CureView{Text: r.Text, Gives: r.Gives, Action: v.own(), Revision: v.Revision, Patch: string(patch)})
	}
	return list
}
