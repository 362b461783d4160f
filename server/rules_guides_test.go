package main

import (
	"bytes"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

var (
	// linked matches the target of a Markdown link to a file of ours.
	linked = regexp.MustCompile(`\]\(([^):]+)\)`)
	// namedFile matches a file or folder of ours named in code type.
	namedFile = regexp.MustCompile("`((?:calc|server|web|store|static|testdata|\\.ci)/[\\w./-]+)`")
	// namedTest matches a test, benchmark or fuzz target named anywhere.
	namedTest = regexp.MustCompile(`\b(?:Test|Benchmark|Fuzz)[A-Z]\w+`)
)

// What the guides point at is there: a reader who follows them never ends up
// nowhere.
func TestGuidesNameWhatExists(t *testing.T) {
	names := tracked(t)
	var tests []byte
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") {
			tests = append(tests, contents(t, name)...)
		}
	}
	for _, guide := range []string{"README.md", "DEVELOPERS.md"} {
		if !slices.Contains(names, guide) {
			t.Errorf("%s is not there", guide)
			continue
		}
		text := contents(t, guide)
		files := append(linked.FindAllSubmatch(text, -1), namedFile.FindAllSubmatch(text, -1)...)
		if len(files) == 0 {
			t.Errorf("%s names no file: the patterns of this test are wrong", guide)
		}
		for _, match := range files {
			if _, err := os.Stat(filepath.Join("..", string(match[1]))); err != nil {
				t.Errorf("%s names %s: %v", guide, match[1], err)
			}
		}
		for _, test := range namedTest.FindAll(text, -1) {
			if !bytes.Contains(tests, []byte("\nfunc "+string(test)+"(")) {
				t.Errorf("%s names %s, which is no test", guide, test)
			}
		}
	}
}
