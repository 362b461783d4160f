package web

import (
	"fmt"
	"math"
	"strconv"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// BreakdownView tells where each string's headroom goes.
type BreakdownView struct {
	More    MoreView
	Strings []StringBreakdown
	Rest    string // which strings are not told of; "" when all are
}

// StringBreakdown is one string's way from the supply to what is left over.
type StringBreakdown struct {
	Name, Times string
	Href        string
	Sentence    string
	Usual       StairsView
	Worst       StairsView
	Culprits    []CulpritView
	From, To    string // what is left over usually and at worst
	Sum         string // the difference
}

// CulpritView is what one value moves of what is left over.
type CulpritView struct {
	Name  string
	Href  string // the field; "" for none
	Volts string // "−0.50 V"
	Wide  Px     // of its bar
	Gives bool   // it adds to what is left over
}

// Widths of a culprit's bar, and from where on it is told by name.
const (
	culpritWide = Px(130)
	told        = 0.001 // [V]
)

// NewBreakdownView shows the breakdowns of some strings of a build, by index.
func NewBreakdownView(in MoreInput, of map[int]calc.HeadroomBreakdown) BreakdownView {
	v := BreakdownView{More: newMore(topicBreakdown, in)}
	entries := NewBuildForm(in.Build, nil).Entries()
	for i, str := range in.Build.Strings {
		d, known := of[i]
		if !known {
			continue
		}
		one := StringBreakdown{
			Name: "String " + str.Label, Times: "× " + strconv.Itoa(str.Quantity), Href: v.More.link("#string-" + strconv.Itoa(i)),
			Sentence: d.Sentence, From: quantity.Format(d.Typical, quantity.Volt, 3), To: quantity.Format(d.Worst, quantity.Volt, 3),
			Sum: signed(d.Worst - d.Typical),
		}
		s := stairScale(d)
		one.Usual = stairs("usual day", in.Build, i, d.Usual, s)
		one.Worst = stairs("worst case", in.Build, i, d.Least, s)
		one.Culprits = culprits(v.More, d.Items, entries)
		v.Strings = append(v.Strings, one)
	}
	if n := len(in.Build.Strings); len(v.Strings) < n && v.More.Unsolved == "" {
		v.Rest = fmt.Sprintf("These are the %d of %d strings with the least left over.", len(v.Strings), n)
	}
	return v
}

// culprits lists the shares, the largest first; those that no meter shows are
// put together.
func culprits(m MoreView, items []calc.BreakdownItem, entries []*Entry) []CulpritView {
	var list []CulpritView
	small, sum := 0, 0.0
	for _, it := range items {
		if !(math.Abs(it.Volts) >= told) {
			small, sum = small+1, sum+it.Volts
			continue
		}
		name := it.Name
		if it.Culprit == "tolerance" {
			name += ", tolerance"
		}
		list = append(list, CulpritView{
			Name: name, Href: m.link(fieldOf(it.At, entries)), Volts: signed(it.Volts), Gives: it.Volts > 0,
			Wide: max(culpritWide*Px(math.Abs(it.Volts)/math.Abs(items[0].Volts)), 1),
		})
	}
	if small > 0 {
		list = append(list, CulpritView{Name: strconv.Itoa(small) + " more, below a millivolt each", Volts: signed(sum), Gives: sum > 0})
	}
	return list
}

// signed writes a change of volts with its sign.
func signed(v float64) string {
	text := quantity.Format(v, quantity.Volt, 3)
	if v > 0 {
		return "+" + text
	}
	return text
}
