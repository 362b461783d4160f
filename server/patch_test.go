package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"net/http"
	"strings"
	"testing"

	"lanternbook/calc"
)

// editCase is a patch on a small document and what it makes of it.
type editCase struct {
	name            string
	document, patch string
	want            string
}

func TestPatchesTouchOnlyWhatTheyName(t *testing.T) {
	for _, c := range []editCase{
		{"replace", `{"a":1.50,"b":2e-3}`, `[{"op":"replace","path":"/a","value":7}]`, `{"a":7,"b":2e-3}`},
		{"order of keys stays", `{"z":1,"a":2,"m":3}`, `[{"op":"replace","path":"/a","value":5}]`, `{"z":1,"a":5,"m":3}`},
		{"long numbers stay", `{"a":0.1000000000000000055511151231257827,"b":1}`, `[{"op":"remove","path":"/b"}]`, `{"a":0.1000000000000000055511151231257827}`},
		{"signs of markup stay", `{"a":"<Ω&>","b":1}`, `[{"op":"add","path":"/b","value":"&"}]`, `{"a":"<Ω&>","b":"&"}`},
		{"append", `{"a":[1,2]}`, `[{"op":"add","path":"/a/-","value":3}]`, `{"a":[1,2,3]}`},
		{"key with a slash and a tilde", `{"a/b":1,"m~n":2}`, `[{"op":"replace","path":"/a~1b","value":3},{"op":"remove","path":"/m~0n"}]`, `{"a/b":3}`},
		{"move", `{"a":[1,2,3]}`, `[{"op":"move","from":"/a/2","path":"/a/0"}]`, `{"a":[3,1,2]}`},
		{"copy", `{"a":{"b":1.0}}`, `[{"op":"copy","from":"/a","path":"/c"}]`, `{"a":{"b":1.0},"c":{"b":1.0}}`},
		{"test for an object", `{"a":{"x":[1,"y",true,null],"z":2.50}}`, `[{"op":"test","path":"","value":{"a":{"z":2.5,"x":[1e0,"y",true,null]}}}]`, `{"a":{"x":[1,"y",true,null],"z":2.50}}`},
		{"test after a change", `{"a":1}`, `[{"op":"replace","path":"/a","value":2},{"op":"test","path":"/a","value":2},{"op":"remove","path":"/a"}]`, `{}`},
		{"test that holds", `{"a":1}`, `[{"op":"test","path":"/a","value":1.0},{"op":"add","path":"/b","value":null}]`, `{"a":1,"b":null}`},
	} {
		got, err := applyPatch([]byte(c.document), []byte(c.patch))
		if err != nil || string(got) != c.want {
			t.Errorf("%s: %s, %v; want %s", c.name, got, err, c.want)
		}
	}
}

// misfitCase is a patch that does not fit the document {"a":[1,2],"n":null}.
type misfitCase struct {
	name, patch, at string
}

func TestPatchesThatDoNotFitNameThePlace(t *testing.T) {
	document := []byte(`{"a":[1,2],"n":null}`)
	for _, c := range []misfitCase{
		{"index beyond the end", `[{"op":"add","path":"/a/9","value":1}]`, "/a/9"},
		{"index far beyond the end", `[{"op":"add","path":"/a/1000000000","value":1}]`, "/a/1000000000"},
		{"negative index", `[{"op":"add","path":"/a/-1","value":1}]`, "/a/-1"},
		{"index that is no number", `[{"op":"remove","path":"/a/x"}]`, "/a/x"},
		{"parent missing", `[{"op":"add","path":"/b/c","value":1}]`, "/b/c"},
		{"inside a number", `[{"op":"add","path":"/a/0/c","value":1}]`, "/a/0/c"},
		{"inside null", `[{"op":"add","path":"/n/c","value":1}]`, "/n/c"},
		{"removed before", `[{"op":"remove","path":"/n"},{"op":"remove","path":"/n"}]`, "/n"},
		{"move into itself", `[{"op":"move","from":"/a","path":"/a/0"}]`, "/a/0"},
		{"copy from nowhere", `[{"op":"copy","from":"/x","path":"/y"}]`, "/y"},
	} {
		_, err := applyPatch(document, []byte(c.patch))
		var invalid calc.Invalid
		if !errors.As(err, &invalid) || len(invalid) != 1 || invalid[0].At != c.at || invalid[0].Reason == "" {
			t.Errorf("%s: %#v, want one fault at %s", c.name, err, c.at)
		}
	}
}

func TestTestsThatDoNotHold(t *testing.T) {
	document := []byte(`{"a":[1,{"b":null}],"n":null,"s":"1","t":true}`)
	for _, test := range []string{
		`"path":"/a/0","value":2`,
		`"path":"/a/0","value":"1"`,
		`"path":"/a/0","value":null`,
		`"path":"/a/00","value":1`,
		`"path":"/a/-","value":1`,
		`"path":"/a/2","value":null`,
		`"path":"/a","value":[1]`,
		`"path":"/a","value":{"0":1}`,
		`"path":"/a/1","value":{}`,
		`"path":"/a/1","value":{"c":null}`,
		`"path":"/a/1","value":[null]`,
		`"path":"/missing","value":null`,
		`"path":"/n/x","value":null`,
		`"path":"/s","value":1`,
		`"path":"/t","value":false`,
		`"path":"/n","value":false`,
	} {
		_, err := applyPatch(document, []byte(`[{"op":"test",`+test+`}]`))
		var told *refusal
		if !errors.As(err, &told) || told.status != http.StatusConflict || len(told.faults) != 1 {
			t.Errorf("%s: %v, want a conflict", test, err)
		}
	}
}

func TestPatchesHaveLimits(t *testing.T) {
	doubling := `[{"op":"add","path":"/a","value":{"x":"` + strings.Repeat("x", 1<<20) + `"}}`
	for i := range 12 {
		doubling += fmt.Sprintf(`,{"op":"copy","from":"/a","path":"/a/c%d"}`, i)
	}
	_, err := applyPatch([]byte(`{}`), []byte(doubling+`]`))
	var invalid calc.Invalid
	if !errors.As(err, &invalid) || !strings.Contains(invalid.Error(), "copies too much") {
		t.Errorf("doubling twelve times: %.200v", err)
	}

	large := []byte(`{"a":"` + strings.Repeat("x", apiBody/2) + `"}`)
	_, err = applyPatch(large, []byte(`[{"op":"copy","from":"/a","path":"/b"}]`))
	var told *refusal
	if !errors.As(err, &told) || told.status != http.StatusRequestEntityTooLarge {
		t.Errorf("a document beyond 8 MiB: %.200v", err)
	}

	many := `[` + strings.Repeat(`{"op":"test","path":"","value":{}},`, maxOperations) + `{"op":"test","path":"","value":{}}]`
	_, err = applyPatch([]byte(`{}`), []byte(many))
	if !errors.As(err, &told) || told.status != http.StatusBadRequest {
		t.Errorf("%d operations: %.200v", maxOperations+1, err)
	}
}

// FuzzApplyPatch: whatever is sent, there is no panic, and what comes out is
// JSON.
func FuzzApplyPatch(f *testing.F) {
	for _, patch := range []string{
		`[]`, `[null]`, `[{}]`, `[{"op":null,"path":null}]`,
		`[{"op":"add","path":"","value":null}]`, `[{"op":"replace","path":"","value":3}]`, `[{"op":"replace","path":"","value":null}]`,
		`[{"op":"remove","path":""}]`, `[{"op":"test","path":"/n","value":null}]`, `[{"op":"test","path":"/a","value":null}]`,
		`[{"op":"move","from":"","path":"/a"}]`, `[{"op":"copy","from":"/n","path":"/m"},{"op":"add","path":"/m/x","value":1}]`,
		`[{"op":"add","path":"/n","value":null},{"op":"replace","path":"/n/x","value":1}]`, `[{"op":"test","path":"","value":null}]`,
		`[{"op":"add","path":"/a/-","value":[]},{"op":"move","from":"/a/2","path":"/n"}]`, `[{"op":"copy","from":"/a/-","path":"/x"}]`,
	} {
		f.Add(`{"a":[1,{"b":"c"}],"n":null}`, patch)
	}
	f.Add(`[1,2]`, `[{"op":"remove","path":"/0"}]`)
	f.Fuzz(func(t *testing.T, document, patch string) {
		if !json.Valid([]byte(document)) {
			t.Skip()
		}
		got, err := applyPatch([]byte(document), []byte(patch))
		if err == nil && !json.Valid(got) {
			t.Errorf("%s on %s makes %s", patch, document, got)
		}
	})
}
