package main

import (
	"encoding/json"
	"testing"

	"pgregory.net/rapid"
)

type draftCase struct {
	name  string
	doc   string
	edit  func(d *draft) error
	patch string
	after string
}

func TestDraft(t *testing.T) {
	cases := []draftCase{
		{
			name: "a value is replaced", doc: `{"a":{"b":1}}`,
			edit:  func(d *draft) error { return d.set("/a/b", 2.5) },
			patch: `[{"op":"replace","path":"/a/b","value":2.5}]`, after: `{"a":{"b":2.5}}`,
		},
		{
			name: "the same number in other digits is no change", doc: `{"a":2.20}`,
			edit:  func(d *draft) error { return d.set("/a", 2.2) },
			patch: `[]`, after: `{"a":2.20}`,
		},
		{
			name: "a missing value is added", doc: `{}`,
			edit:  func(d *draft) error { return d.set("/a", "") },
			patch: `[{"op":"add","path":"/a","value":""}]`, after: `{"a":""}`,
		},
		{
			name: "zero is a value", doc: `{"a":1}`,
			edit:  func(d *draft) error { return d.set("/a", 0) },
			patch: `[{"op":"replace","path":"/a","value":0}]`, after: `{"a":0}`,
		},
		{
			name: "missing objects are made on the way, once", doc: `{}`,
			edit: func(d *draft) error {
				if err := d.set("/limits/headroom", 1); err != nil {
					return err
				}
				return d.set("/limits/loading", 0.5)
			},
			patch: `[{"op":"add","path":"/limits","value":{}},{"op":"add","path":"/limits/headroom","value":1},{"op":"add","path":"/limits/loading","value":0.5}]`,
			after: `{"limits":{"headroom":1,"loading":0.5}}`,
		},
		{
			name: "into the middle of a list", doc: `{"a":[1,2]}`,
			edit:  func(d *draft) error { return d.insert("/a/1", 9) },
			patch: `[{"op":"add","path":"/a/1","value":9}]`, after: `{"a":[1,9,2]}`,
		},
		{
			name: "to the end of a list", doc: `{"a":[1]}`,
			edit:  func(d *draft) error { return d.insert("/a/-", 9) },
			patch: `[{"op":"add","path":"/a/-","value":9}]`, after: `{"a":[1,9]}`,
		},
		{
			name: "into a list that is missing", doc: `{}`,
			edit:  func(d *draft) error { return d.insert("/a/-", 9) },
			patch: `[{"op":"add","path":"/a","value":[9]}]`, after: `{"a":[9]}`,
		},
		{
			name: "out of a list", doc: `{"a":[1,2,3]}`,
			edit:  func(d *draft) error { return d.remove("/a/1") },
			patch: `[{"op":"remove","path":"/a/1"}]`, after: `{"a":[1,3]}`,
		},
		{
			name: "what is not there need not be removed", doc: `{"a":1}`,
			edit:  func(d *draft) error { return d.remove("/b/c") },
			patch: `[]`, after: `{"a":1}`,
		},
		{
			name: "keys with a slash and a tilde", doc: `{"a/b":{"c~d":1}}`,
			edit:  func(d *draft) error { return d.set("/"+pointerEscape("a/b")+"/"+pointerEscape("c~d"), 2) },
			patch: `[{"op":"replace","path":"/a~1b/c~0d","value":2}]`, after: `{"a/b":{"c~d":2}}`,
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			d, err := newDraft([]byte(c.doc))
			if err != nil {
				t.Fatal(err)
			}
			if err = c.edit(d); err != nil {
				t.Fatal(err)
			}
			patch, err := d.patch()
			if err != nil || string(patch) != c.patch {
				t.Errorf("patch %s, %v\nwant %s", patch, err, c.patch)
			}
			after, err := json.Marshal(d.tree)
			if err != nil || string(after) != c.after {
				t.Errorf("document %s, %v, want %s", after, err, c.after)
			}
		})
	}
}

func TestDraftRefusesWhatHasNoPlace(t *testing.T) {
	for _, at := range []string{"/a/7", "/a/-1", "/a/x/y", "/s/t"} {
		d, err := newDraft([]byte(`{"a":[1,2],"s":"text"}`))
		if err != nil {
			t.Fatal(err)
		}
		if err := d.insert(at, 1); err == nil {
			t.Errorf("insert at %s went through: %v", at, d.tree)
		}
	}
}

// The patch that a draft gathers makes of the document what the draft became.
func TestDraftPatchMakesTheTree(t *testing.T) {
	places := []string{"/a", "/b/c", "/list/0", "/list/1", "/list/2", "/list/-", "/list/0/x", "/b"}
	rapid.Check(t, func(t *rapid.T) {
		document := []byte(`{"a":1,"b":{"c":2},"list":[{"x":1},{"x":2},{"x":3}]}`)
		d, err := newDraft(document)
		if err != nil {
			t.Fatal(err)
		}
		for range rapid.IntRange(1, 6).Draw(t, "edits") {
			at := rapid.SampledFrom(places).Draw(t, "at")
			value := map[string]any{"x": rapid.IntRange(0, 9).Draw(t, "value")}
			switch rapid.IntRange(0, 2).Draw(t, "kind") {
			case 0:
				_ = d.set(at, value) // a place that is not there changes nothing, and that is what is tested
			case 1:
				_ = d.insert(at, value)
			case 2:
				_ = d.remove(at)
			}
		}
		patch, err := d.patch()
		if err != nil {
			t.Fatal(err)
		}
		got, err := applyPatch(document, patch)
		if err != nil {
			t.Fatalf("patch %s: %v", patch, err)
		}
		tree, err := decodeTree(got)
		if err != nil || !sameJSON(tree, d.tree) {
			t.Fatalf("patch %s makes %s, the draft is %v", patch, got, d.tree)
		}
	})
}
