package main

import (
	"context"
	"encoding/json"
	"fmt"
	"net/http"
	"net/url"
	"reflect"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/calc"
)

// TestEveryMemberHasAField holds the forms against the types of the document.
func TestEveryMemberHasAField(t *testing.T) {
	for typ, of := range map[string]reflect.Type{
		calc.TypeLED: reflect.TypeFor[calc.LED](), calc.TypeNPN: reflect.TypeFor[calc.Transistor](), calc.TypePNP: reflect.TypeFor[calc.Transistor](),
		calc.TypeNMOS: reflect.TypeFor[calc.MOSFET](), calc.TypeOpamp: reflect.TypeFor[calc.Opamp](), calc.TypeRegulator: reflect.TypeFor[calc.Regulator](),
		calc.TypeModule: reflect.TypeFor[calc.Module](), calc.TypeSupply: reflect.TypeFor[calc.SupplyPart](),
	} {
		legal := membersOf(of, "")
		for path := range figuresByPath(typ) {
			if !slices.Contains(legal, path) {
				t.Errorf("the form of %s has a field %q that its document has not", typ, path)
			}
		}
		for _, path := range legal {
			without := typ == calc.TypeModule || typ == calc.TypeSupply // these have no legs
			if _, has := figuresByPath(typ)[path]; !has && path != "type" && (!without || path != "pins") {
				t.Errorf("the form of %s has no field for %q", typ, path)
			}
		}
	}
}

// membersOf lists the paths of a type's members; a spread is one.
func membersOf(of reflect.Type, above string) []string {
	var paths []string
	for f := range of.Fields() {
		key, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		inner := f.Type
		if inner.Kind() == reflect.Pointer {
			inner = inner.Elem()
		}
		switch {
		case f.Anonymous:
			paths = append(paths, membersOf(inner, above)...)
		case inner.Kind() == reflect.Struct && inner != reflect.TypeFor[calc.Spread]():
			paths = append(paths, membersOf(inner, above+key+".")...)
		default:
			paths = append(paths, above+key)
		}
	}
	return paths
}

// TestPostedUnchangedNothingChanges sends every seeded part's form as it came.
func TestPostedUnchangedNothingChanges(t *testing.T) {
	p := openShop(t)
	p.stockFromSeed()
	parts, err := p.s.store.Parts(context.Background(), "")
	if err != nil {
		t.Fatal(err)
	}
	for _, part := range parts {
		t.Run(part.Key, func(t *testing.T) {
			fields := fieldsOf(t, p.get(partAddress(part.Key)))
			a := p.post(partAddress(part.Key), fields)
			a.wantStatus(t, http.StatusSeeOther)
			kept, err := p.s.store.Part(context.Background(), part.Key)
			if err != nil {
				t.Fatal(err)
			}
			wantJSON(t, string(kept.Document), string(part.Document))
		})
	}
}

type formEditCase struct {
	name  string
	typ   string
	was   string
	typed url.Values
	want  string
}

func TestFormKeepsWhatItDoesNotTouch(t *testing.T) {
	const led = `{"price": 1e-1, "type": "led", "name": "n", "notes": "line\nnext ", "forward_voltage": 3.10, "test_current": 2.0e-2, "model": {"rs": 1, "is": 1e-18, "n": 2}, "points": [], "maker_code": ""}`
	for _, c := range []formEditCase{
		{"nothing touched, odd spelling stays", "led", led, nil,
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":2.0e-2,"model":{"rs": 1, "is": 1e-18, "n": 2},"points":[],"maker_code":""}`},
		{"one figure changed", "led", led, url.Values{"test_current": {"30 mA"}},
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":0.03,"model":{"rs": 1, "is": 1e-18, "n": 2},"points":[],"maker_code":""}`},
		{"the same value in another spelling is an edit", "led", led, url.Values{"test_current": {"0,02 A"}},
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":0.02,"model":{"rs": 1, "is": 1e-18, "n": 2},"points":[],"maker_code":""}`},
		{"one figure inside a model", "led", led, url.Values{"model.n": {"2.5"}},
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":2.0e-2,"model":{"rs":1,"is":1e-18,"n":2.5},"points":[],"maker_code":""}`},
		{"a model emptied is gone", "led", led, url.Values{"model.n": {""}, "model.is": {" "}, "model.rs": {""}},
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":2.0e-2,"points":[],"maker_code":""}`},
		{"a figure emptied is gone", "led", led, url.Values{"price": {""}},
			`{"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":2.0e-2,"model":{"rs": 1, "is": 1e-18, "n": 2},"points":[],"maker_code":""}`},
		{"a figure added stands last", "led", led, url.Values{"max_current": {"30 mA"}},
			`{"price":1e-1,"type":"led","name":"n","notes":"line\nnext ","forward_voltage":3.10,"test_current":2.0e-2,"model":{"rs": 1, "is": 1e-18, "n": 2},"points":[],"maker_code":"","max_current":0.03}`},
		{"an object is made for its first figure", "npn", `{"type": "npn"}`, url.Values{"name": {"x"}, "vbe_on.volts": {"0.6/0.65/0.7"}, "vbe_on.at": {"2 mA"}},
			`{"type":"npn","name":"x","vbe_on":{"volts":{"min":0.6,"typ":0.65,"max":0.7},"at":0.002}}`},
		{"a new part", "opamp", "", url.Values{"name": {"LM358"}, "offset_voltage": {"9 mV"}},
			`{"type":"opamp","name":"LM358","offset_voltage":0.009}`},
		{"no turns yes into nothing", "module", `{"type": "module", "name": "m", "switching": true}`, url.Values{"switching": {""}},
			`{"type":"module","name":"m"}`},
		{"no stays no", "module", `{"type": "module", "name": "m", "switching": false}`, nil,
			`{"type":"module","name":"m","switching":false}`},
	} {
		t.Run(c.name, func(t *testing.T) {
			var was members
			if c.was != "" {
				var err error
				if was, err = readMembers([]byte(c.was)); err != nil {
					t.Fatal(err)
				}
			}
			form := formOf(c.typ, was)
			for path, typed := range c.typed {
				form.typed[path] = typed[0]
			}
			got := form.document(was)
			if string(got) != c.want {
				t.Errorf("\n got %s\nwant %s", got, c.want)
			}
			if !form.sound() {
				t.Errorf("faults %v, %v", form.faults, form.other)
			}
		})
	}
}

func TestFormKeepsMembersItDoesNotKnow(t *testing.T) {
	was, err := readMembers([]byte(`{"type": "npn", "name": "x", "colour_of_the_drawer": {"a": [1, 2.50]}}`))
	if err != nil {
		t.Fatal(err)
	}
	form := formOf("npn", was)
	form.typed["name"] = "y"
	got := form.document(was)
	if want := `{"type":"npn","name":"y","colour_of_the_drawer":{"a": [1, 2.50]}}`; string(got) != want {
		t.Errorf("\n got %s\nwant %s", got, want)
	}
	// This reader does not know the member either, and its complaint belongs to no field.
	if len(form.other) != 1 || !strings.Contains(form.other[0], "colour_of_the_drawer") {
		t.Errorf("what is wrong: %q", form.other)
	}
}

type besideCase struct {
	name  string
	typ   string
	typed url.Values
	field string
	words string
}

func TestFaultsStandBesideTheirField(t *testing.T) {
	led := func(path, typed string) url.Values {
		v := url.Values{"name": {"x"}, "test_current": {"20 mA"}, "forward_voltage": {"3 V"}}
		v.Set(path, typed)
		return v
	}
	npn := func(path, typed string) url.Values { return url.Values{"name": {"x"}, path: {typed}} }
	for _, c := range []besideCase{
		{"no name", "led", led("name", " "), "name", "is needed, like BC547B"},
		{"no forward voltage", "led", led("forward_voltage", ""), "forward_voltage", "is needed, like 2.8 / 2.95 / 3.2 V"},
		{"cannot be read", "led", led("max_junction", "warm"), "max_junction", "degrees Celsius"},
		{"out of range", "led", led("test_current", "0 A"), "test_current", "must be above 0"},
		{"beyond the most, where a document's writer would get a hint", "led", led("test_current", "200 A"), "test_current", "at most 100"},
		{"out of range in a spread", "led", led("forward_voltage", "0 / 2 / 3 V"), "forward_voltage", "must be above 0"},
		{"falling spread", "led", led("forward_voltage", "3 / 2 / 1 V"), "forward_voltage", "does not rise"},
		{"half an object, the other half missing", "npn", npn("vbe_on.volts", "0.65 V"), "vbe_on.at", "missing"},
		{"a model without its first figure", "npn", npn("model.bf", "200"), "model.is", "missing"},
		{"out of range inside an object", "npn", npn("model.bf", "-5"), "model.bf", "must be above 0"},
	} {
		t.Run(c.name, func(t *testing.T) {
			form := typedForm(c.typ, c.typed)
			form.document(nil)
			if !strings.Contains(form.faults[c.field], c.words) {
				t.Errorf("beside %s stands %q, want %q; all: %v, %v", c.field, form.faults[c.field], c.words, form.faults, form.other)
			}
			if strings.Contains(form.faults[c.field], "is written") {
				t.Errorf("%q tells how to write it in a document", form.faults[c.field])
			}
		})
	}
}

// TestWhateverIsTyped: no text makes the form panic, lose it or accept what the
// strict reader refuses.
func TestWhateverIsTyped(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		typ := rapid.SampledFrom(partTypes).Draw(t, "type")
		sent := url.Values{}
		for path := range figuresByPath(typ) {
			if text := rapid.OneOf(rapid.Just(""), rapid.SampledFrom([]string{"5", "20 mA", "3 V", "1/2/3 V", "1 1\n2 2", "−1", "1e400", "NaN", "0"}), rapid.String()).Draw(t, path); text != "" {
				sent.Set(path, text)
			}
		}
		form := typedForm(typ, sent)
		document := form.document(nil)
		for path := range figuresByPath(typ) {
			if form.typed[path] != plainLines(sent.Get(path)) {
				t.Fatalf("%s was typed %q and is now %q", path, sent.Get(path), form.typed[path])
			}
		}
		if form.sound() {
			if _, err := calc.ReadPart(document); err != nil {
				t.Fatalf("accepted %s: %v", document, err)
			}
			again := formOf(typ, mustMembers(t, document))
			if got := again.document(mustMembers(t, document)); string(got) != string(document) || !again.sound() {
				t.Fatalf("shown again and sent unchanged, %s became %s: %v", document, got, again.faults)
			}
		}
		if _, err := json.Marshal(form.groups()); err != nil {
			t.Fatal(err)
		}
	})
}

func mustMembers(t interface{ Fatal(...any) }, document []byte) members {
	m, err := readMembers(document)
	if err != nil {
		t.Fatal(fmt.Sprintf("%v in %s", err, document))
	}
	return m
}

type membersCase struct {
	name  string
	path  string
	value string // "" takes it out
	want  string
}

func TestMembers(t *testing.T) {
	const document = `{"b": 1.0, "a": {"x": [1, 2], "y": null}, "c": "\u00e9"}`
	for _, c := range []membersCase{
		{"change one", "b", "2", `{"b":2,"a":{"x": [1, 2], "y": null},"c":"\u00e9"}`},
		{"add one", "d", "2", `{"b":1.0,"a":{"x": [1, 2], "y": null},"c":"\u00e9","d":2}`},
		{"take one out", "b", "", `{"a":{"x": [1, 2], "y": null},"c":"\u00e9"}`},
		{"take out what is not there", "z", "", `{"b":1.0,"a":{"x": [1, 2], "y": null},"c":"\u00e9"}`},
		{"change one inside", "a.x", "3", `{"b":1.0,"a":{"x":3,"y":null},"c":"\u00e9"}`},
		{"take one out inside", "a.y", "", `{"b":1.0,"a":{"x":[1, 2]},"c":"\u00e9"}`},
		{"make what it stands in", "q.r", "3", `{"b":1.0,"a":{"x": [1, 2], "y": null},"c":"\u00e9","q":{"r":3}}`},
		{"take out inside of nothing", "q.r", "", `{"b":1.0,"a":{"x": [1, 2], "y": null},"c":"\u00e9"}`},
	} {
		t.Run(c.name, func(t *testing.T) {
			was := mustMembers(t, []byte(document))
			var value json.RawMessage
			if c.value != "" {
				value = json.RawMessage(c.value)
			}
			got, err := was.set(c.path, value).MarshalJSON()
			if err != nil || string(got) != c.want {
				t.Errorf("\n got %s, %v\nwant %s", got, err, c.want)
			}
			if before, err := was.MarshalJSON(); err != nil || string(before) != `{"b":1.0,"a":{"x": [1, 2], "y": null},"c":"\u00e9"}` {
				t.Errorf("the original became %s, %v", before, err)
			}
		})
	}
	if emptied, err := mustMembers(t, []byte(`{"a": {"x": 1}}`)).set("a.x", nil).MarshalJSON(); err != nil || string(emptied) != `{}` {
		t.Errorf("with its last member gone it is %s, %v", emptied, err)
	}
	for _, no := range []string{"", "[]", "5", `{"a":`, `{"a": 1`} {
		if _, err := readMembers([]byte(no)); err == nil {
			t.Errorf("%q is read as an object", no)
		}
	}
}
