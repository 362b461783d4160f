package calc_test

import (
	"encoding/json"
	"fmt"
	"os"
	"reflect"
	"slices"
	"strings"
	"testing"

	"lanternbook/calc"
)

// schemaObject is the part of a schema that says what an object has.
type schemaObject struct {
	Properties           map[string]map[string]any `json:"properties"`
	Required             []string                  `json:"required"`
	AdditionalProperties any                       `json:"additionalProperties"`
	OneOf                []map[string]any          `json:"oneOf"`
	Defs                 map[string]schemaObject   `json:"$defs"`
}

func schemaKeys(t *testing.T, name string) schemaObject {
	t.Helper()
	raw, err := os.ReadFile(schemaFile(name))
	if err != nil {
		t.Fatal(err)
	}
	var o schemaObject
	if err := json.Unmarshal(raw, &o); err != nil {
		t.Fatal(err)
	}
	return o
}

// structs lists by name the structs that a type is made of, without the
// spread, which a schema writes out.
func structs(root reflect.Type, into map[string]reflect.Type) {
	for root.Kind() == reflect.Pointer || root.Kind() == reflect.Slice || root.Kind() == reflect.Map {
		root = root.Elem()
	}
	if root.Kind() != reflect.Struct || root == reflect.TypeFor[calc.Spread]() || into[root.Name()] != nil {
		return
	}
	into[root.Name()] = root
	for f := range root.Fields() {
		structs(f.Type, into)
	}
}

// jsonField is one member as the struct's tags declare it.
type jsonField struct {
	owner    string
	key      string
	optional bool // may be left out when written
	required bool // must be there when read
	kind     reflect.Type
}

func jsonFields(s reflect.Type) []jsonField {
	var list []jsonField
	for f := range s.Fields() {
		if f.Anonymous {
			list = append(list, jsonFields(f.Type)...)
			continue
		}
		key, options, _ := strings.Cut(f.Tag.Get("json"), ",")
		list = append(list, jsonField{s.Name(), key, options != "", f.Tag.Get("read") == "required", f.Type})
	}
	return list
}

// The build's schema has the keys of the structs, demands what the reader
// demands, and knows the same limits.
func TestBuildSchemaAgreesWithTypes(t *testing.T) {
	root := schemaKeys(t, "build-1")
	all := map[string]reflect.Type{}
	structs(reflect.TypeFor[calc.Build](), all)
	limited := map[string]bool{}
	for name, s := range all {
		switch name {
		case "Driver", "Part", "Common": // written as one of several; in every part
			continue
		}
		def := root
		if name != "Build" {
			def = root.Defs[name]
		}
		var keys, required []string
		for _, f := range jsonFields(s) {
			keys = append(keys, f.key)
			chooses := f.key == "type" || f.key == "kind" && strings.Contains(driverStructs, name+" ")
			if f.required || chooses {
				required = append(required, f.key)
			}
			property := def.Properties[f.key]
			if text, _ := property["description"].(string); text == "" {
				t.Errorf("%s.%s has no description", name, f.key)
			}
			first, second, ok := calc.LimitsOf(f.owner, f.key)
			if numeric(f.kind) != ok {
				t.Errorf("%s.%s is a number: %v, has limits: %v", f.owner, f.key, numeric(f.kind), ok)
			}
			if ok {
				limited[f.owner+"."+f.key] = true
				sameLimits(t, name+"."+f.key, property, first, second)
			}
		}
		sameKeys(t, name, def, keys, required)
	}
	for _, name := range calc.LimitNames() {
		if !limited[name] {
			t.Errorf("limits of %s are used by no field", name)
		}
	}
	if len(root.Defs)+1+1 != len(all) { // Build is the root, Common is no definition
		t.Errorf("the schema defines %d objects, there are %d structs", len(root.Defs), len(all))
	}
}

const driverStructs = "ResistorDriver RailSink FollowerSink ReferenceSink TwoTransistor OpampSink RegulatorDriver ModuleDriver "

func sameKeys(t *testing.T, name string, def schemaObject, keys, required []string) {
	t.Helper()
	var have []string
	for key := range def.Properties {
		have = append(have, key)
	}
	slices.Sort(have)
	slices.Sort(keys)
	if !slices.Equal(have, keys) {
		t.Errorf("%s: the schema has %v, the struct %v", name, have, keys)
	}
	slices.Sort(def.Required)
	slices.Sort(required)
	if !slices.Equal(def.Required, required) {
		t.Errorf("%s: the schema demands %v, the reader %v", name, def.Required, required)
	}
	if def.AdditionalProperties != false {
		t.Errorf("%s: the schema lets other keys in", name)
	}
}

// numeric tells whether a field holds numbers.
func numeric(f reflect.Type) bool {
	for f.Kind() == reflect.Pointer || f.Kind() == reflect.Slice || f.Kind() == reflect.Array {
		f = f.Elem()
	}
	return f.Kind() == reflect.Float64 || f.Kind() == reflect.Int || f == reflect.TypeFor[calc.Spread]()
}

// sameLimits holds a property against the reader's limits: those of a number,
// of a spread's four numbers, or of a pair.
func sameLimits(t *testing.T, name string, property map[string]any, first, second calc.Limit) {
	t.Helper()
	one := func(at any, want calc.Limit) {
		t.Helper()
		p, _ := at.(map[string]any)
		least, most := p["minimum"], p["maximum"]
		if want.Above {
			least = p["exclusiveMinimum"]
		}
		if least != want.Least || most != want.Most || want.Above && p["minimum"] != nil {
			t.Errorf("%s: the schema says %v, the reader %+v", name, p, want)
		}
	}
	description, _ := property["description"].(string)
	if first.Unit != "" && second == (calc.Limit{}) && !strings.Contains(description, ", in "+first.Unit) {
		t.Errorf("%s: %q does not name the unit %s", name, description, first.Unit)
	}
	switch {
	case property["anyOf"] != nil:
		choices, _ := property["anyOf"].([]any)
		one(choices[0], first)
		object, _ := choices[1].(map[string]any)
		members, _ := object["properties"].(map[string]any)
		for _, key := range []string{"min", "typ", "max"} {
			one(members[key], first)
		}
	case property["items"] != nil:
		items, _ := property["items"].(map[string]any)
		pair, _ := items["prefixItems"].([]any)
		one(pair[0], first)
		one(pair[1], second)
	default:
		one(property, first)
	}
}

// Each kind of driver and each type of part has its branch in the schema.
func TestBuildSchemaHasAllVariants(t *testing.T) {
	root := schemaKeys(t, "build-1")
	drivers, parts := calc.VariantFields()
	for def, c := range map[string]struct {
		key  string
		want map[string]string
	}{"Driver": {"kind", drivers}, "Part": {"type", parts}} {
		got := map[string]bool{}
		for _, branch := range root.Defs[def].OneOf {
			ref, _ := branch["$ref"].(string)
			property := root.Defs[strings.TrimPrefix(ref, "#/$defs/")].Properties[c.key]
			if name, ok := property["const"].(string); ok {
				got[name] = true
			}
			names, _ := property["enum"].([]any)
			for _, name := range names {
				got[fmt.Sprint(name)] = true
			}
		}
		if len(got) != len(c.want) {
			t.Errorf("%s: the schema has %v, the reader %v", def, got, c.want)
		}
		for name := range c.want {
			if !got[name] {
				t.Errorf("%s: the schema does not know %s", def, name)
			}
		}
	}
}

// The report's schema has the keys of the structs, and demands all that is
// always written.
func TestReportSchemaAgreesWithTypes(t *testing.T) {
	root := schemaKeys(t, "report-1")
	all := map[string]reflect.Type{}
	structs(reflect.TypeFor[calc.Report](), all)
	for name, s := range all {
		def := root
		if name != "Report" {
			def = root.Defs[name]
		}
		var keys, required []string
		for _, f := range jsonFields(s) {
			keys = append(keys, f.key)
			if !f.optional {
				required = append(required, f.key)
			}
			if text, _ := def.Properties[f.key]["description"].(string); text == "" {
				t.Errorf("%s.%s has no description", name, f.key)
			}
		}
		sameKeys(t, name, def, keys, required)
	}
	if len(root.Defs)+1 != len(all) {
		t.Errorf("the schema defines %d objects, there are %d structs", len(root.Defs), len(all))
	}
}
