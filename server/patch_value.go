package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"net/http"
	"strconv"
	"strings"

	jsonpatch "github.com/evanphx/json-patch/v5"

	"lanternbook/calc"
)

// holds tells whether "test" operations find what they name. The library's own
// test compares numbers by their spelling, and would say that 24.0 is not 24;
// RFC 6902 section 4.6 compares what they stand for.
func holds(document []byte, tests jsonpatch.Patch) error {
	whole, err := decodeExactly(document)
	if err != nil {
		return calc.Invalid{{Reason: "the document is not JSON"}}
	}
	for _, op := range tests {
		path, _ := op.Path() // readPatch has seen to it that there is one
		want := any(nil)
		if raw := op["value"]; raw != nil { // null is kept as nil
			if want, err = decodeExactly(*raw); err != nil {
				return calc.Invalid{{At: path, Reason: "the value to test for is not JSON"}}
			}
		}
		got, found := valueAt(whole, path)
		if !found || !sameValue(got, want) {
			return &refusal{
				status: http.StatusConflict,
				title:  "A test in the patch does not hold",
				detail: fmt.Sprintf("The value at %q is another one.", path),
				faults: calc.Invalid{{At: path, Reason: "the value is not the one that the patch tests for"}},
			}
		}
	}
	return nil
}

// decodeExactly reads one JSON value and keeps numbers as they are spelled.
func decodeExactly(raw []byte) (any, error) {
	var v any
	d := json.NewDecoder(bytes.NewReader(raw))
	d.UseNumber()
	err := d.Decode(&v)
	return v, err
}

// valueAt follows a JSON Pointer (RFC 6901) into a decoded value.
func valueAt(v any, pointer string) (any, bool) {
	if pointer == "" {
		return v, true
	}
	for step := range strings.SplitSeq(pointer[1:], "/") {
		step = strings.NewReplacer("~1", "/", "~0", "~").Replace(step)
		switch within := v.(type) {
		case map[string]any:
			next, found := within[step]
			if !found {
				return nil, false
			}
			v = next
		case []any:
			i, err := strconv.Atoi(step)
			if err != nil || i < 0 || i >= len(within) || strconv.Itoa(i) != step {
				return nil, false
			}
			v = within[i]
		default:
			return nil, false
		}
	}
	return v, true
}

// sameValue compares decoded JSON as RFC 6902 section 4.6 has it: keys in any
// order, numbers by their value.
func sameValue(a, b any) bool {
	switch a := a.(type) {
	case map[string]any:
		b, is := b.(map[string]any)
		if !is || len(a) != len(b) {
			return false
		}
		for key, value := range a {
			other, found := b[key]
			if !found || !sameValue(value, other) {
				return false
			}
		}
		return true
	case []any:
		b, is := b.([]any)
		if !is || len(a) != len(b) {
			return false
		}
		for i := range a {
			if !sameValue(a[i], b[i]) {
				return false
			}
		}
		return true
	case json.Number:
		b, is := b.(json.Number)
		return is && sameNumber(a, b)
	}
	return a == b // null, true, false and text
}

// sameNumber compares by value, to the 17 digits that matter to a build.
func sameNumber(a, b json.Number) bool {
	x, errX := a.Float64()
	y, errY := b.Float64()
	return a == b || errX == nil && errY == nil && x == y
}
