package web

import (
	"strconv"

	"lanternbook/calc"
)

// MoreView is the frame round one of a build's further sections: those that
// take long enough to be worked out only when somebody looks.
type MoreView struct {
	Topic    string // the last part of its address: "breakdown"
	Title    string
	ID       string // the build's
	Build    string // the build's title
	Revision string // what the figures are of
	Unsolved string // why there are no figures; "" when there are
	base     string // what goes before "#field": "" on the build's own page
}

// MoreInput is what any further section is made of.
type MoreInput struct {
	ID, Revision int64
	Build        calc.Build
	Report       calc.Report // without strings when the build could not be solved
	Own          bool        // it is a page of its own
}

// moreTitles are the further sections in the order of the page.
var moreTitles = []Option{
	{topicBreakdown, "Who takes the headroom"},
	{topicDial, "What turning it gives"},
	{topicSpread, "How many of them will pass"},
	{topicFailures, "What one failure does"},
}

// The further sections, as an address names them.
const (
	topicBreakdown = "breakdown"
	topicDial      = "dial"
	topicFailures  = "failures"
	topicSpread    = "spread"
)

func newMore(topic string, in MoreInput) MoreView {
	id := strconv.FormatInt(in.ID, 10)
	v := MoreView{Topic: topic, ID: id, Build: in.Build.Title, Revision: strconv.FormatInt(in.Revision, 10)}
	for _, t := range moreTitles {
		if t.Value == topic {
			v.Title = t.Text
		}
	}
	if in.Own {
		v.base = v.page()
	}
	if len(in.Report.Strings) != len(in.Build.Strings) || len(in.Build.Strings) == 0 {
		v.Unsolved = unsolvedWords(in.Build, in.Report)
	}
	return v
}

// page is the address of the build's page.
func (v MoreView) page() string { return "/builds/" + v.ID }

// own is the address of the section as a page of its own.
func (v MoreView) own() string { return v.page() + "/more/" + v.Topic }

// link leads to a field of the build's page; "" to none.
func (v MoreView) link(field string) string {
	if field == "" {
		return ""
	}
	return v.base + field
}

// mores are the further sections of a build's page, folded away.
func (v BuildView) mores() []MoreView {
	var list []MoreView
	for _, t := range moreTitles {
		list = append(list, MoreView{Topic: t.Value, Title: t.Text, ID: v.ID})
	}
	return list
}
