package main

import (
	"encoding/json"
	"errors"
	"net/http"
	"sort"
	"strings"

	jsonpatch "github.com/evanphx/json-patch/v5"

	"lanternbook/calc"
)

const (
	// maxOperations bounds the work of one patch. An edit by hand is one or
	// two; a program that does more to a build had better send a new one.
	maxOperations = 1000
	// maxCopied bounds the bytes that a patch may add by "copy", which could
	// otherwise double a document with every operation.
	maxCopied = apiBody
)

// applyPatch returns the document that a JSON Patch (RFC 6902) makes of this
// one. Values that the patch does not touch keep the very text they had, so
// that no number is rounded. A patch that is no patch is a refusal with status
// 400, one whose test does not hold 409, and one that does not fit the document
// calc.Invalid with the path at fault.
func applyPatch(document, patch []byte) ([]byte, error) {
	operations, err := readPatch(patch)
	if err != nil {
		return nil, err
	}
	for len(operations) > 0 {
		n := 1
		testing := operations[0].Kind() == "test"
		for n < len(operations) && (operations[n].Kind() == "test") == testing {
			n++
		}
		if testing {
			err = holds(document, operations[:n])
		} else {
			document, err = edit(document, operations[:n])
		}
		if err != nil {
			return nil, err
		}
		operations = operations[n:]
	}
	return document, nil
}

// edit applies operations that are no tests.
func edit(document []byte, operations jsonpatch.Patch) ([]byte, error) {
	options := &jsonpatch.ApplyOptions{AccumulatedCopySizeLimit: maxCopied}
	changed, err := operations.ApplyWithOptions(document, options)
	if err == nil && len(changed) > apiBody {
		return nil, refuse(http.StatusRequestEntityTooLarge, "The build would get too large",
			"A build's document may have at most %d MiB.", apiBody>>20)
	}
	if err == nil {
		return changed, nil
	}
	// Which operation was it? The first n apply up to it and fail from it on.
	at := sort.Search(len(operations), func(n int) bool {
		_, failed := operations[:n+1].ApplyWithOptions(document, options)
		return failed != nil
	})
	return nil, patchFault(operations, at, err)
}

// patchFault puts into words why an operation does not apply.
func patchFault(operations jsonpatch.Patch, at int, cause error) error {
	if at >= len(operations) { // it applies after all, but its result cannot be written
		return calc.Invalid{{Reason: "the patch leaves no document"}}
	}
	op := operations[at]
	path, _ := op.Path() // readPatch has seen to it that there is one
	fault := calc.Fault{At: path}
	var tooLarge *jsonpatch.AccumulatedCopySizeError
	switch {
	case errors.As(cause, &tooLarge):
		fault.Reason = "the patch copies too much"
	case errors.Is(cause, jsonpatch.ErrInvalidIndex):
		fault.Reason = "the list has no such place to " + op.Kind()
	case errors.Is(cause, jsonpatch.ErrMissing):
		fault.Reason = "there is nothing here to " + op.Kind()
		if op.Kind() == "add" {
			fault.Reason = "there is nothing to add to: what would hold it is missing"
		}
		if from, err := op.From(); err == nil {
			fault.Reason = "cannot " + op.Kind() + " from " + from + " to here: one of the two places is missing"
		}
	default:
		fault.Reason = "cannot " + op.Kind() + " here"
	}
	return calc.Invalid{fault}
}

// readPatch reads a patch and sees that every operation has what RFC 6902
// section 4 asks of it, which the library does in part only.
func readPatch(patch []byte) (jsonpatch.Patch, error) {
	malformed := func(format string, args ...any) error {
		return refuse(http.StatusBadRequest, "This is not a JSON Patch", format, args...)
	}
	var operations []map[string]json.RawMessage
	if err := json.Unmarshal(patch, &operations); err != nil || operations == nil {
		return nil, malformed("A patch is a list of operations, as RFC 6902 has it.")
	}
	if len(operations) > maxOperations {
		return nil, malformed("A patch may have at most %d operations.", maxOperations)
	}
	for i, op := range operations {
		kind, ok := text(op["op"])
		if !ok {
			return nil, malformed("Operation %d has no \"op\".", i)
		}
		if !isPointer(op["path"]) {
			return nil, malformed("Operation %d has no \"path\" that is a JSON Pointer.", i)
		}
		switch kind {
		case "add", "replace", "test":
			if _, ok := op["value"]; !ok {
				return nil, malformed("Operation %d has no \"value\".", i)
			}
		case "move", "copy":
			if !isPointer(op["from"]) {
				return nil, malformed("Operation %d has no \"from\" that is a JSON Pointer.", i)
			}
		case "remove":
		default:
			return nil, malformed("Operation %d: there is no operation %q.", i, kind)
		}
	}
	read, err := jsonpatch.DecodePatch(patch)
	if err != nil {
		return nil, malformed("A patch is a list of operations, as RFC 6902 has it.")
	}
	return read, nil
}

// text returns a JSON string's value.
func text(raw json.RawMessage) (string, bool) {
	var s *string
	if len(raw) == 0 || json.Unmarshal(raw, &s) != nil || s == nil {
		return "", false
	}
	return *s, true
}

// isPointer tells whether a value is a string that is a JSON Pointer (RFC 6901).
func isPointer(raw json.RawMessage) bool {
	s, ok := text(raw)
	return ok && (s == "" || strings.HasPrefix(s, "/"))
}
