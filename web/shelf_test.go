package web_test

import (
	"context"
	"strings"
	"testing"

	"github.com/a-h/templ"

	"lanternbook/web"
)

// rendered is a component's source.
func rendered(t *testing.T, c templ.Component) string {
	t.Helper()
	var b strings.Builder
	if err := c.Render(context.Background(), &b); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestNothingIsTakenForAPass(t *testing.T) {
	for severity, class := range map[string]string{
		"pass": "pass", "tight": "tight", "fail": "fail", "unknown": "unknown", "": "unknown", "PASS": "unknown", "passed": "unknown",
	} {
		v := web.NewVerdict(severity)
		if v.Class != class {
			t.Errorf("%q is shown as %q, want %q", severity, v.Class, class)
		}
		if v.Shape == "" || v.Word == "" {
			t.Errorf("%q is told by colour alone: %+v", severity, v)
		}
	}
}

func TestVerdictsDifferWithoutColour(t *testing.T) {
	shapes, words := map[string]bool{}, map[string]bool{}
	for _, severity := range []string{"pass", "tight", "fail", "unknown"} {
		v := web.NewVerdict(severity)
		shapes[v.Shape], words[v.Word] = true, true
	}
	if len(shapes) != 4 || len(words) != 4 {
		t.Errorf("%d shapes and %d words for four verdicts", len(shapes), len(words))
	}
}

func TestNotice(t *testing.T) {
	if got := rendered(t, web.Notice(nil)); got != "" {
		t.Errorf("no notice is shown as %q", got)
	}
	got := rendered(t, web.Notice(&web.NoticeView{Text: "“<b>” is in the bin.", Action: "/builds/7/restore", Button: "bring it back"}))
	for _, want := range []string{`role="status"`, "“&lt;b&gt;” is in the bin.", `<form method="post" action="/builds/7/restore">`, "bring it back"} {
		if !strings.Contains(got, want) {
			t.Errorf("no %s in %s", want, got)
		}
	}
	if got := rendered(t, web.Notice(&web.NoticeView{Text: "kept"})); strings.Contains(got, "<form") {
		t.Errorf("nothing to take back, and yet a form: %s", got)
	}
}

func TestUnknownFiguresAreSaidToBe(t *testing.T) {
	got := rendered(t, web.Parts(web.PartsView{Groups: []web.PartGroupView{{Type: "led", Title: "LEDs", Heads: []string{"light"}, Rows: []web.PartRowView{
		{ID: "part-x", Name: "x", Href: "/drawer/x", Cells: []web.CellView{{Head: "light"}}},
		{ID: "part-y", Name: "y", Href: "/drawer/y", Cells: []web.CellView{{Head: "light", Text: "3 cd", At: "20 mA"}}},
	}}}}))
	if n := strings.Count(got, "not known"); n != 1 {
		t.Errorf("%d figures are said to be not known, want 1: %s", n, got)
	}
	if !strings.Contains(got, "3 cd") || !strings.Contains(got, "at 20 mA") {
		t.Error("the figure that is known is not shown with what it is stated at")
	}
}
