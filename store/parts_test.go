package store_test

import (
	"errors"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

func TestPartsAreKeptByKey(t *testing.T) {
	s := newStore(t)
	document := "{ \"type\": \"npn\",\r\n \"name\": \"BC547B\", \"hfe\": 2.00e2, \"extra\": 123456789012345678901234567890 }"
	created, err := s.CreatePart(t.Context(), "bc547b", []byte(document))
	must(t, err)
	want := store.Part{Key: "bc547b", Type: "npn", Name: "BC547B", Document: []byte(document), Updated: created.Updated}
	if diff := cmp.Diff(want, created); diff != "" {
		t.Errorf("CreatePart (-want +got):\n%s", diff)
	}
	want.Type, want.Name, want.Document = "pnp", "", []byte(`{"type":"pnp"}`)
	saved, err := s.SavePart(t.Context(), "bc547b", want.Document)
	must(t, err)
	if !saved.Updated.After(created.Updated) {
		t.Errorf("Updated = %v, want later than %v", saved.Updated, created.Updated)
	}
	want.Updated = saved.Updated
	loaded, err := s.Part(t.Context(), "bc547b")
	must(t, err)
	if diff := cmp.Diff(want, loaded); diff != "" {
		t.Errorf("Part after SavePart (-want +got):\n%s", diff)
	}
}

func TestPartsAreListedByTypeAndName(t *testing.T) {
	s := newStore(t)
	for key, document := range map[string]string{
		"q2": `{"type":"npn","name":"bc337"}`,
		"q1": `{"type":"npn","name":"BC547"}`,
		"d2": `{"type":"led","name":"White"}`,
		"d1": `{"type":"led","name":"amber"}`,
		"d3": `{"type":"led","name":"White"}`,
		"d4": `{"type":"led"}`,
	} {
		_, err := s.CreatePart(t.Context(), key, []byte(document))
		must(t, err)
	}
	must(t, s.DeletePart(t.Context(), "d3"))
	for typ, want := range map[string][]string{
		"":       {"d4", "d1", "d2", "q2", "q1"},
		"npn":    {"q2", "q1"},
		"module": nil,
	} {
		parts, err := s.Parts(t.Context(), typ)
		must(t, err)
		var got []string
		for _, p := range parts {
			got = append(got, p.Key)
			if len(p.Document) == 0 {
				t.Errorf("part %s is listed without its document", p.Key)
			}
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("Parts(%q) (-want +got):\n%s", typ, diff)
		}
	}
}

func TestAKeyIsTakenOnlyByWhatLiesInTheDrawer(t *testing.T) {
	s := newStore(t)
	first, second := []byte(`{"type":"led","name":"first"}`), []byte(`{"type":"led","name":"second"}`)
	_, err := s.CreatePart(t.Context(), "white", first)
	must(t, err)
	_, err = s.CreatePart(t.Context(), "white", second)
	taken(t, "CreatePart", err)
	must(t, s.DeletePart(t.Context(), "white"))
	if _, err = s.CreatePart(t.Context(), "white", second); err != nil {
		t.Errorf("CreatePart with the key of a part in the bin: %v", err)
	}
	_, err = s.RestorePart(t.Context(), "white")
	taken(t, "RestorePart", err)
	must(t, s.DeletePart(t.Context(), "white"))
	for range 2 { // the second time it is there already
		p, err := s.RestorePart(t.Context(), "white")
		if err == nil {
			if p.Name != "second" {
				t.Errorf("RestorePart brings back the %s, want the one deleted last", p.Name)
			}
			continue
		}
		taken(t, "RestorePart beside an older one in the bin", err)
	}
	if p, err := s.Part(t.Context(), "white"); err != nil || p.Name != "second" {
		t.Errorf("Part = %s, %v, want the second", p.Name, err)
	}
}

func taken(t *testing.T, call string, err error) {
	t.Helper()
	if taken, ok := errors.AsType[*store.KeyTaken](err); !ok {
		t.Errorf("%s: error = %v, want *KeyTaken", call, err)
	} else if taken.Key != "white" {
		t.Errorf("%s: Key = %q, want white", call, taken.Key)
	}
}

func TestPartsMustSayTheirType(t *testing.T) {
	s := newStore(t)
	for name, document := range map[string]string{
		"no JSON":           `{"type":`,
		"no object":         `["led"]`,
		"no type":           `{"name":"x"}`,
		"a type of no text": `{"type":1}`,
		"nothing":           ``,
	} {
		t.Run(name, func(t *testing.T) {
			if _, err := s.CreatePart(t.Context(), "x", []byte(document)); err == nil {
				t.Error("CreatePart takes it")
			}
		})
	}
	if empty, err := s.Empty(t.Context()); err != nil || !empty {
		t.Errorf("Empty = %v, %v after refusals only, want true", empty, err)
	}
}
