package calc_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"maps"
	"os"
	"path/filepath"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"

	"lanternbook/calc"
)

// schemaFile is where a schema stands in the source.
func schemaFile(name string) string {
	return filepath.Join("..", "static", "schema", name+".json")
}

// schema compiles a published schema; the compiler itself checks that it is
// one of draft 2020-12.
func schema(tb testing.TB, name string) *jsonschema.Schema {
	tb.Helper()
	raw, err := os.ReadFile(schemaFile(name))
	if err != nil {
		tb.Fatal(err)
	}
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(raw))
	if err != nil {
		tb.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	const at = "http://127.0.0.1/schema/"
	if err = c.AddResource(at+name+".json", doc); err != nil {
		tb.Fatal(err)
	}
	s, err := c.Compile(at + name + ".json")
	if err != nil {
		tb.Fatal(err)
	}
	return s
}

// validate holds a document against a schema.
func validate(tb testing.TB, s *jsonschema.Schema, raw []byte) error {
	tb.Helper()
	doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(raw))
	if err != nil {
		tb.Fatal(err)
	}
	return s.Validate(doc)
}

// What the reader takes, the schema takes.
func TestSchemaTakesGoodDocuments(t *testing.T) {
	s := schema(t, "build-1")
	for name, raw := range documents(t) {
		if err := validate(t, s, raw); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	for name, raw := range referenceBuilds(t) {
		if err := validate(t, s, raw); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// What the reader refuses, the schema refuses, wherever a schema can see it;
// what it cannot see it takes, so that the table says the truth.
func TestSchemaRefusesBadDocuments(t *testing.T) {
	s := schema(t, "build-1")
	for _, c := range badCases {
		t.Run(c.name, func(t *testing.T) {
			err := validate(t, s, c.changed(t))
			if (err != nil) != c.bySchema {
				t.Errorf("refused by the schema: %v, want %v (%v)", err != nil, c.bySchema, err)
			}
		})
	}
}

// Every report that Check makes keeps to the report's schema.
func TestReportsKeepToSchema(t *testing.T) {
	s := schema(t, "report-1")
	all := documents(t)
	maps.Copy(all, referenceBuilds(t))
	checked := 0
	for name, raw := range all {
		b, err := calc.Read(raw)
		if err != nil {
			t.Fatal(err)
		}
		r, err := calc.Check(b)
		if _, refused := errors.AsType[calc.Invalid](err); refused {
			continue // a kind that cannot be solved yet
		}
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		checked++
		report, err := json.Marshal(r)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if err := validate(t, s, report); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	if checked < 36 {
		t.Errorf("%d reports were checked, want those of all builds that can be solved", checked)
	}
}

// An empty report is none: the schema does not take everything.
func TestReportSchemaRefuses(t *testing.T) {
	s := schema(t, "report-1")
	for _, raw := range []string{
		`{}`,
		`{"format":"lanternbook-report/1","verdict":"good","strings":[],"rails":[],"supply":{"current":{"min":0,"typ":0,"max":0},"power":{"min":0,"typ":0,"max":0},"efficiency":0,"inside":{"min":0,"typ":0,"max":0}},"runs":[],"findings":[]}`,
		`{"format":"lanternbook-report/1","verdict":"pass","strings":null,"rails":[],"supply":{"current":{"min":0,"typ":0,"max":0},"power":{"min":0,"typ":0,"max":0},"efficiency":0,"inside":{"min":0,"typ":0,"max":0}},"runs":[],"findings":[]}`,
	} {
		if validate(t, s, []byte(raw)) == nil {
			t.Errorf("the schema takes %s", raw)
		}
	}
	least := `{"format":"lanternbook-report/1","verdict":"pass","strings":[],"rails":[],"supply":{"current":{"min":0,"typ":0,"max":0},"power":{"min":0,"typ":0,"max":0},"efficiency":0,"inside":{"min":0,"typ":0,"max":0}},"runs":[],"findings":[]}`
	if err := validate(t, s, []byte(least)); err != nil {
		t.Error(err)
	}
}
