package calc_test

import (
	"bufio"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// Every source is listed once in SOURCES.md, and every one listed is leaned on
// somewhere: in a comment of this tree or by a published example.
func TestSourcesAreListedAndUsed(t *testing.T) {
	listed := listedSources(t)
	sources := sourceComments(t)
	for _, row := range table(t, "published/worked_examples.csv") {
		sources["worked example "+row["id"]] = row["source"]
	}
	seen := map[string]bool{}
	for where, source := range sources {
		first := true
		for clause := range strings.SplitSeq(source, ";") {
			key := keyOf(listed, strings.TrimSpace(clause))
			if key == "" && first && !strings.HasPrefix(source, "common practice, no source") {
				t.Errorf("%s: %q begins with no key of SOURCES.md", where, source)
			}
			seen[key], first = true, false
		}
	}
	for key := range listed {
		if !seen[key] {
			t.Errorf("nothing leans on the source %q", key)
		}
	}
}

// keyOf returns the listed key that a clause begins with, the longest one.
func keyOf(listed map[string]bool, clause string) string {
	best := ""
	for key := range listed {
		if len(key) > len(best) && strings.HasPrefix(clause, key) {
			best = key
		}
	}
	return best
}

// listedSources reads the keys of SOURCES.md.
func listedSources(t *testing.T) map[string]bool {
	t.Helper()
	text, err := os.ReadFile("SOURCES.md")
	if err != nil {
		t.Fatal(err)
	}
	listed := map[string]bool{}
	for line := range strings.Lines(string(text)) {
		rest, ok := strings.CutPrefix(line, "| `")
		if !ok {
			continue
		}
		key, _, _ := strings.Cut(rest, "`")
		if listed[key] {
			t.Errorf("%q is listed twice", key)
		}
		listed[key] = true
	}
	if len(listed) < 20 {
		t.Fatalf("only %d keys read from SOURCES.md", len(listed))
	}
	return listed
}

var sourceComment = regexp.MustCompile(`^\s*// Source: (.*)$`)

// sourceComments gathers what stands behind "Source:" in the comments of this
// tree, by file and line; the comment's next lines belong to it.
func sourceComments(t *testing.T) map[string]string {
	t.Helper()
	found := map[string]string{}
	err := filepath.WalkDir(".", func(path string, entry fs.DirEntry, err error) error {
		if err != nil || entry.IsDir() || !strings.HasSuffix(path, ".go") {
			return err
		}
		file, err := os.Open(path)
		if err != nil {
			return err
		}
		defer func() { _ = file.Close() }()
		where := ""
		for lines := bufio.NewScanner(file); lines.Scan(); {
			line := lines.Text()
			if m := sourceComment.FindStringSubmatch(line); m != nil {
				where = path + ": " + m[1]
				found[where] = m[1]
				continue
			}
			more, comment := strings.CutPrefix(strings.TrimSpace(line), "//")
			if comment && where != "" && strings.TrimSpace(more) != "" {
				found[where] += " " + strings.TrimSpace(more)
				continue
			}
			where = ""
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return found
}
