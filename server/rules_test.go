package main

import (
	"bytes"
	"encoding/json"
	"os"
	"os/exec"
	"path"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// These tests hold rules of the whole project that no compiler knows. They
// look at the tracked files alone, so that a note lying about breaks nothing.

// longest is how many lines a file may have before it surely holds two ideas.
const longest = 450

// tracked returns the names of the project's files, from its top.
func tracked(t *testing.T) []string {
	t.Helper()
	cmd := exec.CommandContext(t.Context(), "git", "ls-files", "-z")
	cmd.Dir = ".."
	out, err := cmd.Output()
	if err != nil {
		t.Skipf("not a git checkout: %v", err)
	}
	var names []string
	for name := range strings.SplitSeq(strings.Trim(string(out), "\x00"), "\x00") {
		if _, err := os.Stat(filepath.Join("..", name)); err == nil { // not one just deleted
			names = append(names, name)
		}
	}
	if len(names) == 0 {
		t.Fatal("git lists no files")
	}
	return names
}

func contents(t *testing.T, name string) []byte {
	t.Helper()
	text, err := os.ReadFile(filepath.Join("..", name))
	if err != nil {
		t.Fatal(err)
	}
	return text
}

func TestTopLevelHoldsOnlyWhatBelongsThere(t *testing.T) {
	belongs := []string{"web", "server", "store", "calc", "static", "testdata", "README.md", "DEVELOPERS.md", "go.mod", "go.sum"}
	for _, name := range tracked(t) {
		top, _, _ := strings.Cut(name, "/")
		if !strings.HasPrefix(top, ".") && !slices.Contains(belongs, top) {
			t.Errorf("%s: nothing else belongs at the top level", name)
		}
	}
}

func TestFilesCanBeReadInOneSitting(t *testing.T) {
	for _, name := range tracked(t) {
		generated := strings.HasSuffix(name, "_templ.go")
		if ext := path.Ext(name); generated || ext != ".go" && ext != ".templ" {
			continue
		}
		if lines := bytes.Count(contents(t, name), []byte("\n")); lines > longest {
			t.Errorf("%s has %d lines, more than %d", name, lines, longest)
		}
	}
}

func TestNoPackageRegistryIsNamed(t *testing.T) {
	// written apart, so that this file does not name them either
	hosts := []string{"proxy.golang" + ".org", "sum.golang" + ".org", "registry.npm" + "js", "deb.debian" + ".org"}
	for _, name := range tracked(t) {
		text := contents(t, name)
		for _, host := range hosts {
			if bytes.Contains(text, []byte(host)) {
				t.Errorf("%s names the registry %s", name, host)
			}
		}
	}
}

// inlineCode matches what the Content-Security-Policy forbids in a page: style
// and script that stand in the markup itself.
var inlineCode = regexp.MustCompile(`(?i)<style\b|<script(?:\s[^>]*)?>\s*[^<\s]|\sstyle\s*=|\son[a-z]+\s*=\s*["{]|\s(?:data-)?hx-on[:\-]|javascript:`)

func TestInlineCodeIsRecognised(t *testing.T) {
	inline := []string{`<style>p{}</style>`, `<script>go()</script>`, `<script type="module"> go()</script>`, `<p style="color:red">`,
		`<p style={ s }>`, `<a onclick="go()">`, `<a href="javascript:go()">`, `<p hx-on:click="go()">`, `<p data-hx-on:click="go()">`}
	for _, text := range inline {
		if !inlineCode.MatchString(text) {
			t.Errorf("%s is not recognised", text)
		}
	}
	clean := []string{`<script src="/app.js" defer></script>`, `<link rel="stylesheet" href="/app.css">`, `<p class="one">on = two</p>`, `<svg stroke-width="2">`}
	for _, text := range clean {
		if inlineCode.MatchString(text) {
			t.Errorf("%s is called inline", text)
		}
	}
}

func TestTemplatesHoldNoInlineStyleOrScript(t *testing.T) {
	for _, name := range tracked(t) {
		if path.Ext(name) != ".templ" {
			continue
		}
		for number, line := range strings.Split(string(contents(t, name)), "\n") {
			if found := inlineCode.FindString(line); found != "" {
				t.Errorf("%s:%d: %q is inline code, which the Content-Security-Policy blocks", name, number+1, strings.TrimSpace(found))
			}
		}
	}
}

// pack is what go list tells of a package.
type pack struct {
	ImportPath string
	Imports    []string
}

func TestImportsPointOneWay(t *testing.T) {
	cmd := exec.CommandContext(t.Context(), "go", "list", "-json=ImportPath,Imports", "./...")
	cmd.Dir = ".."
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	seen := 0
	for from := json.NewDecoder(bytes.NewReader(out)); from.More(); {
		var p pack
		if err := from.Decode(&p); err != nil {
			t.Fatal(err)
		}
		seen++
		for _, imported := range p.Imports {
			if why := forbidden(p.ImportPath, imported); why != "" {
				t.Errorf("%s imports %s: %s", p.ImportPath, imported, why)
			}
		}
	}
	if seen < 5 {
		t.Errorf("go list showed %d packages, want all of the project's", seen)
	}
}

// forbidden says why one package must not import another, or nothing.
func forbidden(importer, imported string) string {
	const module = "lanternbook/"
	area := func(p string) string {
		first, _, _ := strings.Cut(strings.TrimPrefix(p, module), "/")
		return first
	}
	if !strings.HasPrefix(imported, module) {
		ours := area(importer) == "calc"
		outside := strings.Contains(strings.SplitN(imported, "/", 2)[0], ".")
		if ours && outside {
			return "calc needs nothing but the standard library"
		}
		return ""
	}
	may := map[string][]string{
		"server": {"web", "store", "calc", "static"},
		"web":    {"web", "calc", "static"},
		"store":  {"store", "calc"},
		"calc":   {"calc"},
		"static": {},
	}
	allowed, known := may[area(importer)]
	if !known {
		return "the package lies in no known area"
	}
	if !slices.Contains(allowed, area(imported)) {
		return "the arrow points the wrong way"
	}
	return ""
}

// direction is one import, and whether the project allows it.
type direction struct {
	importer, imported string
	allowed            bool
}

func TestArrowsThatPointTheWrongWayAreSeen(t *testing.T) {
	for _, d := range []direction{
		{"lanternbook/server", "lanternbook/store", true},
		{"lanternbook/web", "lanternbook/calc/quantity", true},
		{"lanternbook/web", "lanternbook/store", false},
		{"lanternbook/store", "lanternbook/web", false},
		{"lanternbook/calc/heat", "lanternbook/calc/device", true},
		{"lanternbook/calc", "lanternbook/static", false},
		{"lanternbook/calc", "github.com/a-h/templ", false},
		{"lanternbook/calc", "math", true},
		{"lanternbook/web", "lanternbook/server", false},
		{"lanternbook/static", "lanternbook/calc", false},
		{"lanternbook/tools", "lanternbook/calc", false},
	} {
		if got := forbidden(d.importer, d.imported) == ""; got != d.allowed {
			t.Errorf("%s may import %s = %v, want %v", d.importer, d.imported, got, d.allowed)
		}
	}
}
