package main

import (
	"bytes"
	"errors"
	"fmt"
	"net/http"
	"strings"
	"sync"

	"github.com/go-chi/chi/v5"
	"github.com/santhosh-tekuri/jsonschema/v6"
	"golang.org/x/text/language"
	"golang.org/x/text/message"

	"lanternbook/calc"
	"lanternbook/static"
	"lanternbook/store"
)

// buildSchema is the schema that imports are held against.
const buildSchema = "build-1.json"

// showSchema: GET /schema/{name}.
func (s *server) showSchema(w http.ResponseWriter, r *http.Request) error {
	content, found := static.Schema(chi.URLParam(r, "name"))
	if !found {
		return store.ErrNotFound
	}
	send(w, http.StatusOK, "application/schema+json", content)
	return nil
}

// compiledBuildSchema compiles the embedded schema once. It panics when the
// schema is none, which only a broken build of the program can cause.
var compiledBuildSchema = sync.OnceValue(func() *jsonschema.Schema {
	content, found := static.Schema(buildSchema)
	if !found {
		panic("the schema " + buildSchema + " is not embedded")
	}
	document, err := jsonschema.UnmarshalJSON(bytes.NewReader(content))
	if err != nil {
		panic(err)
	}
	compiler := jsonschema.NewCompiler()
	if err := compiler.AddResource(buildSchema, document); err != nil {
		panic(err)
	}
	return compiler.MustCompile(buildSchema)
})

// matchesSchema holds a document against the published schema: the last net,
// after the strict reader, so that what we take is always what we publish. The
// error is calc.Invalid.
func matchesSchema(document []byte) error {
	value, err := jsonschema.UnmarshalJSON(bytes.NewReader(document))
	if err != nil {
		return calc.Invalid{{Reason: "the document is not JSON"}}
	}
	err = compiledBuildSchema().Validate(value)
	if err == nil {
		return nil
	}
	var mismatch *jsonschema.ValidationError
	if !errors.As(err, &mismatch) {
		return fmt.Errorf("schema %s: %w", buildSchema, err)
	}
	var faults calc.Invalid
	collect(mismatch, &faults)
	return faults.ErrOrNil()
}

// collect gathers the innermost causes: the outer ones only say that something
// inside them is wrong.
func collect(e *jsonschema.ValidationError, faults *calc.Invalid) {
	if len(e.Causes) == 0 {
		reason := e.ErrorKind.LocalizedString(message.NewPrinter(language.English))
		*faults = append(*faults, calc.Fault{At: pointerTo(e.InstanceLocation), Reason: reason})
	}
	for _, cause := range e.Causes {
		collect(cause, faults)
	}
}

// pointerTo writes a place as a JSON Pointer (RFC 6901 section 3).
func pointerTo(path []string) string {
	var b strings.Builder
	for _, step := range path {
		b.WriteString("/" + strings.NewReplacer("~", "~0", "/", "~1").Replace(step))
	}
	return b.String()
}
