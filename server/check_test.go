package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lanternbook/calc"
)

// commandLine runs the program with arguments and some standard input.
func commandLine(t *testing.T, stdin string, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	var out, complaints bytes.Buffer
	code = run(t.Context(), args, strings.NewReader(stdin), &out, &complaints)
	return code, out.String(), complaints.String()
}

// written puts a document into a file of its own.
func written(t *testing.T, name, document string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(document), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

// withoutRating is shelfLight with nothing to judge its LEDs' heat by.
func withoutRating(t *testing.T) string {
	t.Helper()
	return strings.Replace(shelfLight(t), `"max_junction": 100, `, "", 1)
}

// exitCase is files to check and the exit code.
type exitCase struct {
	name      string
	documents []string
	code      int
}

func TestCheckExitsByTheWorstOfAllFiles(t *testing.T) {
	good, fails, lacking, broken := shelfLight(t), overstacked(t), withoutRating(t), `{"format": "other"}`
	for _, c := range []exitCase{
		{"one that passes", []string{good}, 0},
		{"one that fails", []string{fails}, 1},
		{"one that cannot be judged", []string{lacking}, 1},
		{"one unreadable", []string{broken}, 2},
		{"good, then failing", []string{good, fails}, 1},
		{"failing, then good", []string{fails, good}, 1},
		{"unreadable, then failing", []string{broken, fails}, 2},
		{"failing, then unreadable", []string{fails, broken}, 2},
	} {
		t.Run(c.name, func(t *testing.T) {
			args := []string{"check"}
			for _, document := range c.documents {
				args = append(args, written(t, "build.json", document))
			}
			if code, stdout, stderr := commandLine(t, "", args...); code != c.code {
				t.Errorf("exit %d, want %d\n%s%s", code, c.code, stdout, stderr)
			}
		})
	}
}

func TestCheckPrintsOneReportALine(t *testing.T) {
	first, second := written(t, "a.json", shelfLight(t)), written(t, "b.json", overstacked(t))
	code, stdout, stderr := commandLine(t, "", "check", "-json", first, second)
	if code != 1 || stderr != "" {
		t.Fatalf("exit %d, %s", code, stderr)
	}
	lines := strings.Split(strings.TrimSuffix(stdout, "\n"), "\n")
	if len(lines) != 2 {
		t.Fatalf("%d lines, want 2:\n%s", len(lines), stdout)
	}
	for i, line := range lines {
		var report calc.Report
		if err := json.Unmarshal([]byte(line), &report); err != nil || report.Format != calc.ReportFormat {
			t.Errorf("line %d is no report: %v", i, err)
		}
		if failed := report.Verdict == calc.Fail; failed != (i == 1) {
			t.Errorf("line %d: verdict %s", i, report.Verdict)
		}
	}
}

func TestCheckTellsPeopleWhatIsWrongAndWhatCuresIt(t *testing.T) {
	file := written(t, "tower.json", overstacked(t))
	_, stdout, _ := commandLine(t, "", "check", file)
	if !strings.HasPrefix(stdout, file+": fail\n") {
		t.Errorf("does not start with the verdict:\n%s", stdout)
	}
	for _, words := range []string{"string A", "cure: ", "\u00a0%, at most "} {
		if !strings.Contains(stdout, words) {
			t.Errorf("does not say %q:\n%s", words, stdout)
		}
	}
	if strings.Contains(stdout, "\n  pass") {
		t.Errorf("lists what passes:\n%s", stdout)
	}
}

// figuresCase is a finding's figures as people are told them.
type figuresCase struct {
	name  string
	found calc.Finding
	want  string
}

func TestFiguresAreWrittenWithTheirLimit(t *testing.T) {
	number := func(v float64) *float64 { return &v }
	for _, c := range []figuresCase{
		{"a least", calc.Finding{Value: number(-0.3), Limit: number(0.3), Unit: "V", Least: true}, " −0.300 V, at least 0.300 V"},
		{"a most", calc.Finding{Value: number(0.021), Limit: number(0.02), Unit: "A"}, " 21.0 mA, at most 20.0 mA"},
		{"percents are counted", calc.Finding{Value: number(12.5), Limit: number(80), Unit: "%"}, " 12.5 %, at most 80.0 %"},
		{"value not known", calc.Finding{Limit: number(150), Unit: "°C"}, ", at most 150 °C"},
		{"limit not known", calc.Finding{Value: number(0.4), Unit: "W"}, " 0.400 W"},
		{"neither", calc.Finding{Unit: "V"}, ""},
	} {
		got := strings.ReplaceAll(figures(c.found), "\u00a0", " ")
		if got != c.want {
			t.Errorf("%s: %q, want %q", c.name, got, c.want)
		}
	}
}

func TestCheckReadsStandardInput(t *testing.T) {
	code, stdout, stderr := commandLine(t, shelfLight(t), "check", "-")
	if code != 0 || !strings.HasPrefix(stdout, "-: ") {
		t.Errorf("exit %d\n%s%s", code, stdout, stderr)
	}
	if code, _, _ := commandLine(t, "{", "check", "-"); code != 2 {
		t.Errorf("half a document: exit %d, want 2", code)
	}
}

func TestCheckNamesEachFaultWithItsFileAndPlace(t *testing.T) {
	broken := strings.NewReplacer(`"max_current": 1}`, `"max_current": true}`, `"part": "amber"`, `"part": "red"`).Replace(shelfLight(t))
	file := written(t, "broken.json", broken)
	code, stdout, stderr := commandLine(t, "", "check", file)
	if code != 2 || stdout != "" {
		t.Errorf("exit %d, %s", code, stdout)
	}
	for _, place := range []string{file + ": /supply/max_current: ", file + ": /strings/0/leds/0/part: "} {
		if !strings.Contains(stderr, place) {
			t.Errorf("does not name %s:\n%s", place, stderr)
		}
	}
	missing := filepath.Join(t.TempDir(), "missing.json")
	code, _, stderr = commandLine(t, "", "check", missing, t.TempDir())
	if code != 2 || strings.Count(stderr, "\n") != 2 || strings.Count(stderr, missing) != 1 {
		t.Errorf("exit %d, %q; want 2 and one sentence each", code, stderr)
	}
}

func TestCheckRefusesWhatIsTooLargeToBeABuild(t *testing.T) {
	code, _, stderr := commandLine(t, shelfLight(t)+strings.Repeat(" ", apiBody), "check", "-")
	if code != 2 || !strings.Contains(stderr, "8 MiB") {
		t.Errorf("exit %d, %s", code, stderr)
	}
}

// usageCase is a command line and what comes of it.
type usageCase struct {
	args   []string
	code   int
	stdout string // words on standard output
	stderr string // words on standard error
}

func TestCommandLine(t *testing.T) {
	for _, c := range []usageCase{
		{[]string{"help"}, 0, "check [-json] FILE...", ""},
		{[]string{"-h"}, 0, "serve [-listen 127.0.0.1:8246] [-data FILE]", ""},
		{[]string{"--help"}, 0, "serve", ""},
		{[]string{"check"}, 2, "", "needs a file"},
		{[]string{"check", "-xml", "a"}, 2, "", "-xml"},
		{[]string{"check", "-h"}, 0, "", "-json"},
		{[]string{"plan"}, 2, "", "no proposals"},
		{[]string{"plan", "-json", "brief.json"}, 2, "", "no proposals"},
		{[]string{"dance"}, 2, "", `no command "dance"`},
		{[]string{"serve", "now"}, 2, "", `no "now"`},
		{[]string{"-port", "8"}, 2, "", "-port"},
	} {
		code, stdout, stderr := commandLine(t, "", c.args...)
		if code != c.code || !strings.Contains(stdout, c.stdout) || !strings.Contains(stderr, c.stderr) {
			t.Errorf("%v: exit %d, want %d\nstdout: %s\nstderr: %s", c.args, code, c.code, stdout, stderr)
		}
		if (c.stdout == "") != (stdout == "") || (c.stderr == "") != (stderr == "") {
			t.Errorf("%v: words on the wrong side\nstdout: %s\nstderr: %s", c.args, stdout, stderr)
		}
	}
}
