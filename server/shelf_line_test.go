package main

import "testing"

type lineCase struct {
	name     string
	document string
	pointer  string
	line     int // 0 is none
}

func TestLineOf(t *testing.T) {
	const build = "{\n  \"title\": \"x\",\n  \"strings\": [\n    {\"label\": \"A\"},\n    {\"label\": \"B\",\n     \"driver\": {\"kind\":\n        \"magic\"}}\n  ],\n  \"a/b\": 1,\n  \"c~d\": 2\n}"
	for _, c := range []lineCase{
		{"a member", build, "/title", 2},
		{"an element", build, "/strings/1", 5},
		{"a value that stands on a line below its key", build, "/strings/1/driver/kind", 7},
		{"a key with a slash", build, "/a~1b", 9},
		{"a key with a tilde", build, "/c~0d", 10},
		{"the document itself", build, "", 0},
		{"a value that is missing", build, "/supply", 0},
		{"an index beyond the end", build, "/strings/2", 0},
		{"a member of no object", build, "/title/x", 0},
		{"no JSON at all", "hello", "/title", 0},
		{"JSON that breaks off after it", "{\"title\":\n 1, \"x\": [", "/title", 2},
		{"JSON that breaks off before it", "{\"x\": [", "/title", 0},
		{"nothing", "", "/title", 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			got, found := lineOf([]byte(c.document), c.pointer)
			if got != c.line || found != (c.line > 0) {
				t.Errorf("lineOf(%q) = %d, %v, want line %d", c.pointer, got, found, c.line)
			}
		})
	}
}
