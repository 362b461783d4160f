package main

import (
	"fmt"
	"os"
	"strings"

	"github.com/chromedp/chromedp"
)

// enoughToSee is how many elements with the same fault are shown.
const enoughToSee = 3

// axe looks the page over with axe-core and fails the test on what it calls
// serious or critical. WCAG 2.2 A and AA are what it is asked for.
func (b *tab) axe(page string) {
	b.t.Helper()
	source, err := os.ReadFile("../testdata/axe/axe.min.js")
	if err != nil {
		b.t.Fatal(err)
	}
	if !eval[bool](b, `typeof axe === "object"`) {
		b.do("load axe", chromedp.Evaluate[chromedp.Void](string(source)))
	}
	type violation struct {
		ID     string
		Impact string
		Help   string
		Nodes  []struct {
			HTML   string
			Target []any
			Why    string `json:"failureSummary"`
		}
	}
	found := eval[struct {
		Violations []violation
		Passes     []struct{ ID string }
	}](b, `axe.run({resultTypes: ["violations"]})`)
	if len(found.Passes) == 0 {
		b.t.Errorf("%s: axe passed nothing, so it looked at nothing", page)
	}
	for _, v := range found.Violations {
		var where strings.Builder
		for i, n := range v.Nodes {
			if i == enoughToSee {
				fmt.Fprintf(&where, "\n\tand %d more", len(v.Nodes)-i)
				break
			}
			where.WriteString("\n\t" + n.HTML + "\n\t\t" + strings.ReplaceAll(n.Why, "\n", "\n\t\t"))
		}
		if v.Impact == "serious" || v.Impact == "critical" {
			b.t.Errorf("%s: %s: %s (%s)%s", page, v.Impact, v.Help, v.ID, where.String())
			continue
		}
		b.t.Logf("%s: %s: %s (%s)%s", page, v.Impact, v.Help, v.ID, where.String())
	}
}
