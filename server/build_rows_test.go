package main

import (
	"strings"
	"testing"

	"lanternbook/calc"
	"lanternbook/web"
)

type rowCase struct {
	name    string
	command string
	labels  string // of the strings afterwards
	leds    string // of string B, part by part
	runs    string // ids and where they come from
	fed     string // where the strings hang
	moved   string // the name that /strings/1/leds/1/quantity has then; "" when it is gone
}

func TestRowCommand(t *testing.T) {
	const (
		labels = "A B C D E F"
		leds   = "2 white, 3 red"
		runs   = "r1<supply r2<r1 r3<r2"
		fed    = "r1 r2 - - - -"
		at     = "/strings/1/leds/1/quantity"
	)
	cases := []rowCase{
		{name: "add a string", command: "string-add /strings", labels: "A B C D E F G", leds: leds, runs: runs, fed: fed + " -", moved: at},
		{name: "copy a string", command: "string-copy /strings/0", labels: "A G B C D E F", leds: leds, runs: runs, fed: "r1 r1 r2 - - - -", moved: "/strings/2/leds/1/quantity"},
		{name: "remove a string above", command: "string-remove /strings/0", labels: "B C D E F", leds: leds, runs: runs, fed: "r2 - - - -", moved: "/strings/0/leds/1/quantity"},
		{name: "remove the string itself", command: "string-remove /strings/1", labels: "A C D E F", runs: runs, fed: "r1 - - - -"},
		{name: "a string to the left", command: "string-up /strings/1", labels: "B A C D E F", leds: leds, runs: runs, fed: "r2 r1 - - - -", moved: "/strings/0/leds/1/quantity"},
		{name: "a string to the right", command: "string-down /strings/1", labels: "A C B D E F", leds: leds, runs: runs, fed: "r1 - r2 - - -", moved: "/strings/2/leds/1/quantity"},
		{name: "the first string stays first", command: "string-up /strings/0", labels: labels, leds: leds, runs: runs, fed: fed, moved: at},
		{name: "the last string stays last", command: "string-down /strings/5", labels: labels, leds: leds, runs: runs, fed: fed, moved: at},
		{name: "stack another type", command: "stack-add /strings/0", labels: labels, leds: leds, runs: runs, fed: fed, moved: at},
		{name: "a stack up", command: "stack-up /strings/1/leds/1", labels: labels, leds: "3 red, 2 white", runs: runs, fed: fed, moved: "/strings/1/leds/0/quantity"},
		{name: "a stack down", command: "stack-down /strings/1/leds/0", labels: labels, leds: "3 red, 2 white", runs: runs, fed: fed, moved: "/strings/1/leds/0/quantity"},
		{name: "remove a stack", command: "stack-remove /strings/1/leds/0", labels: labels, leds: "3 red", runs: runs, fed: fed, moved: "/strings/1/leds/0/quantity"},
		{name: "one LED more", command: "more /strings/1/leds/0/quantity", labels: labels, leds: "3 white, 3 red", runs: runs, fed: fed, moved: at},
		{name: "one LED fewer", command: "fewer /strings/1/leds/1/quantity", labels: labels, leds: "2 white, 2 red", runs: runs, fed: fed, moved: at},
		{name: "add a run", command: "run-add /strings", labels: labels, leds: leds, runs: runs + " r4<supply", fed: fed, moved: at},
		{name: "remove the run at the supply", command: "run-remove /runs/0", labels: labels, leds: leds, runs: "r2<supply r3<r2", fed: "- r2 - - - -", moved: at},
		{name: "remove a run between others", command: "run-remove /runs/1", labels: labels, leds: leds, runs: "r1<supply r3<r1", fed: "r1 r1 - - - -", moved: at},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			b, _, d := buildOn(t, bench(t))
			move, err := rowCommand(d, c.command, b, nil)
			if err != nil {
				t.Fatal(err)
			}
			after := patched(t, bench(t), d)
			if got := labelsOf(after); got != c.labels {
				t.Errorf("strings %s, want %s", got, c.labels)
			}
			if got := stacksOf(after, "B"); got != c.leds {
				t.Errorf("LEDs %s, want %s", got, c.leds)
			}
			if got := runsOf(after); got != c.runs {
				t.Errorf("runs %s, want %s", got, c.runs)
			}
			if got := fedOf(after); got != c.fed {
				t.Errorf("fed by %s, want %s", got, c.fed)
			}
			got, stays := move(at)
			if !stays {
				got = ""
			}
			if got != c.moved {
				t.Errorf("the field is at %q, want %q", got, c.moved)
			}
		})
	}
}

func TestRowCommandRefuses(t *testing.T) {
	for _, text := range []string{"string-remove /strings/9", "stack-remove /strings/0/leds/4", "run-remove /runs/9", "more /title/x", "more /title", "explode /strings/0", "stack-add /strings/9", "string-copy /strings/9", ""} {
		b, _, d := buildOn(t, bench(t))
		if _, err := rowCommand(d, text, b, nil); err == nil {
			t.Errorf("%q went through: %+v", text, d.ops)
		}
	}
}

// One LED is the least that a stack can have.
func TestRowFewerStopsAtOne(t *testing.T) {
	b, _, d := buildOn(t, bench(t))
	for range 5 {
		if _, err := rowCommand(d, "fewer /strings/1/leds/0/quantity", b, nil); err != nil {
			t.Fatal(err)
		}
	}
	if got := stacksOf(patched(t, bench(t), d), "B"); got != "1 white, 3 red" {
		t.Errorf("LEDs %s", got)
	}
}

// Another type comes from the build, else from the drawer, else it is the same.
func TestRowStackAnotherType(t *testing.T) {
	amber := web.Stock{Key: "amber", Document: []byte(`{"type":"led","test_current":0.02,"forward_voltage":2.1}`)}
	part, err := calc.ReadPart(amber.Document)
	if err != nil {
		t.Fatal(err)
	}
	amber.Part = part
	for _, c := range []struct {
		name, at string
		drawer   []web.Stock
		label    string
		want     string
	}{
		{"of the build", "/strings/0", []web.Stock{amber}, "A", "6 white, 1 red"},
		{"of the drawer", "/strings/1", []web.Stock{amber}, "B", "2 white, 3 red, 1 amber"},
		{"of nowhere", "/strings/1", nil, "B", "2 white, 3 red, 1 red"},
	} {
		b, _, d := buildOn(t, bench(t), c.drawer...)
		if _, err := rowCommand(d, "stack-add "+c.at, b, c.drawer); err != nil {
			t.Fatal(err)
		}
		if got := stacksOf(patched(t, bench(t), d), c.label); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}

// A copy is a string of its own: changing it leaves the first as it was.
func TestRowCopyIsItsOwn(t *testing.T) {
	b, _, d := buildOn(t, bench(t))
	if _, err := rowCommand(d, "string-copy /strings/0", b, nil); err != nil {
		t.Fatal(err)
	}
	if err := d.set("/strings/1/leds/0/quantity", 3); err != nil {
		t.Fatal(err)
	}
	after := patched(t, bench(t), d)
	if got := stacksOf(after, "A") + " and " + stacksOf(after, "G"); got != "6 white and 3 white" {
		t.Errorf("LEDs %s", got)
	}
}

// patched is what the draft's patch makes of the document, read strictly.
func patched(tb testing.TB, document string, d *draft) calc.Build {
	tb.Helper()
	b, err := calc.Read([]byte(applied(tb, document, d)))
	if err != nil {
		tb.Fatal(err)
	}
	return b
}

// applied is the document that a draft makes.
func applied(tb testing.TB, document string, d *draft) string {
	tb.Helper()
	patch, err := d.patch()
	if err != nil {
		tb.Fatal(err)
	}
	after, err := applyPatch([]byte(document), patch)
	if err != nil {
		tb.Fatalf("patch %s: %v", patch, err)
	}
	tree, err := decodeTree(after)
	if err != nil || !sameJSON(tree, d.tree) {
		tb.Fatalf("patch %s makes another document than the draft has: %v", patch, err)
	}
	return string(after)
}

func labelsOf(b calc.Build) string {
	var words []string
	for _, s := range b.Strings {
		words = append(words, s.Label)
	}
	return strings.Join(words, " ")
}

func stacksOf(b calc.Build, label string) string {
	var words []string
	for _, s := range b.Strings {
		for _, stack := range s.LEDs {
			if s.Label == label {
				words = append(words, plural(stack.Quantity, stack.Part, stack.Part))
			}
		}
	}
	return strings.Join(words, ", ")
}

func runsOf(b calc.Build) string {
	var words []string
	for _, r := range b.Runs {
		words = append(words, r.ID+"<"+r.From)
	}
	return strings.Join(words, " ")
}

func fedOf(b calc.Build) string {
	var words []string
	for _, s := range b.Strings {
		if s.FedBy == "" {
			s.FedBy = "-"
		}
		words = append(words, s.FedBy)
	}
	return strings.Join(words, " ")
}
