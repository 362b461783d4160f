package store_test

import (
	"strings"
	"testing"
	"unicode"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"lanternbook/store"
)

type searchCase struct {
	name  string
	query string
	want  []string
}

func TestSearch(t *testing.T) {
	shelf := []store.Summary{
		{Title: "GRÖßE 50% Kirchturm", Client: "Müller & Söhne"},
		{Title: "Tide-table case", Site: "Ferry waiting room", Tags: []string{"display case", "marine"}, Search: "0.75 mm² \ufb01tting"},
		{Title: "HARBOUR letters", Client: "Ångström", Search: "white-2835 bc547b 4.7 kΩ"},
		{Title: "snake_case C:\\lamps", Tags: []string{"Ελλάς", "İstanbul"}},
	}
	cases := []searchCase{
		{"an empty query finds all, the last touched first", "", []string{"snake_case C:\\lamps", "HARBOUR letters", "Tide-table case", "GRÖßE 50% Kirchturm"}},
		{"blanks only are an empty query", " \t\u00a0", []string{"snake_case C:\\lamps", "HARBOUR letters", "Tide-table case", "GRÖßE 50% Kirchturm"}},
		{"case does not count", "harbour", []string{"HARBOUR letters"}},
		{"sharp s is ss, an umlaut its vowel", "grosse", []string{"GRÖßE 50% Kirchturm"}},
		{"the other way round", "GRÖSSE", []string{"GRÖßE 50% Kirchturm"}},
		{"the capital sharp s too", "größe GRÖẞE", []string{"GRÖßE 50% Kirchturm"}},
		{"accents typed apart from their letter", "mu\u0308ller", []string{"GRÖßE 50% Kirchturm"}},
		{"accents left out", "angstrom", []string{"HARBOUR letters"}},
		{"the unit sign for the letter", "ÅNGSTRÖM", []string{"HARBOUR letters"}},
		{"ohm sign for omega", "k\u2126", []string{"HARBOUR letters"}},
		{"a raised figure", "mm2", []string{"Tide-table case"}},
		{"a ligature", "fitting", []string{"Tide-table case"}},
		{"full-width letters", "\uff34\uff29\uff24\uff25", []string{"Tide-table case"}},
		{"both forms of sigma", "ΕΛΛΆΣ", []string{"snake_case C:\\lamps"}},
		{"dotted capital i", "istanbul", []string{"snake_case C:\\lamps"}},
		{"inside a word", "irchtu", []string{"GRÖßE 50% Kirchturm"}},
		{"client", "söhne", []string{"GRÖßE 50% Kirchturm"}},
		{"site", "ferry", []string{"Tide-table case"}},
		{"tag", "marine", []string{"Tide-table case"}},
		{"words from the parts", "bc547", []string{"HARBOUR letters"}},
		{"all words must be there, in any order and field", "room tide marine", []string{"Tide-table case"}},
		{"one word missing", "tide harbour", nil},
		{"a word in two builds", "case", []string{"snake_case C:\\lamps", "Tide-table case"}},
		{"a word twice", "case case", []string{"snake_case C:\\lamps", "Tide-table case"}},
		{"a percent sign is only that", "50%", []string{"GRÖßE 50% Kirchturm"}},
		{"a percent sign alone", "%", []string{"GRÖßE 50% Kirchturm"}},
		{"an underscore is only that", "e_c", []string{"snake_case C:\\lamps"}},
		{"a backslash is only that", `c:\l`, []string{"snake_case C:\\lamps"}},
		{"a backslash before a wildcard", `\%`, nil},
		{"no word crosses from one field to the next", "kirchturmmüller", nil},
		{"a NUL is a blank", "tide\x00marine", []string{"Tide-table case"}},
		{"bytes that are not UTF-8", "\xff", nil},
		{"a quote", `'; DROP TABLE builds; --"`, nil},
		{"more words than SQLite takes terms", strings.Repeat("tide table case ferry ", 500) + "zz zy zx", nil},
		{"a word longer than SQLite takes patterns", strings.Repeat("tide", 20000), nil},
	}
	s := newStore(t)
	for _, sum := range shelf {
		_, err := s.CreateBuild(t.Context(), []byte(`{}`), sum)
		must(t, err)
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			builds, err := s.Builds(t.Context(), c.query)
			must(t, err)
			var got []string
			for _, b := range builds {
				got = append(got, b.Summary.Title)
			}
			if diff := cmp.Diff(c.want, got); diff != "" {
				t.Errorf("Builds(%.60q) (-want +got):\n%s", c.query, diff)
			}
		})
	}
}

func TestThousandsOfDifferentWordsAreNoError(t *testing.T) {
	var query strings.Builder
	for i := range 3000 {
		query.WriteString(strings.Repeat("x", i%50) + string(rune('a'+i%26)) + string(rune(0x4e00+i)) + " ")
	}
	builds, err := newStore(t).Builds(t.Context(), query.String())
	if err != nil || len(builds) != 0 {
		t.Errorf("Builds = %d builds, %v, want none and no error", len(builds), err)
	}
}

func TestSearchFollowsEdits(t *testing.T) {
	s := newStore(t)
	b := save(t, s, create(t, s, 1), 2)
	create(t, s, 7)
	for query, want := range map[string]int{"led1": 0, "led2": 1, "all": 2} {
		if got, err := s.Builds(t.Context(), query); err != nil || len(got) != want {
			t.Errorf("Builds(%q) = %d builds, %v, want %d", query, len(got), err, want)
		}
	}
	save(t, s, b, 3)
	got, err := s.Builds(t.Context(), "")
	must(t, err)
	if len(got) != 2 || got[0].ID != b.ID {
		t.Errorf("the build touched last is not the first of the shelf: %+v", got)
	}
}

// Every letter that Unicode has, since the exceptions are where a search fails.
func TestFoldingForgetsCase(t *testing.T) {
	for r := rune(0); r <= unicode.MaxRune; r++ {
		if !unicode.IsLetter(r) {
			continue
		}
		letter := string(r)
		folded := store.Fold(letter)
		for way, other := range map[string]string{
			"its capital": strings.ToUpper(letter), "its small form": strings.ToLower(letter), "what it folds to": folded,
		} {
			if got := store.Fold(other); got != folded {
				t.Errorf("%U %s folds to %q, %s to %q", r, letter, folded, way, got)
			}
		}
	}
}

func TestFoldingTwiceChangesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		once := store.Fold(rapid.String().Draw(t, "text"))
		if twice := store.Fold(once); twice != once {
			t.Errorf("folds to %q, and that to %q", once, twice)
		}
	})
}

func TestEveryTitleIsFoundByItself(t *testing.T) {
	s := newStore(t)
	rapid.Check(t, func(rt *rapid.T) {
		title := rapid.String().Draw(rt, "title")
		b, err := s.CreateBuild(t.Context(), []byte(`{}`), store.Summary{Title: title})
		if err != nil {
			rt.Fatal(err)
		}
		found, err := s.Builds(t.Context(), title)
		if err != nil {
			rt.Fatal(err)
		}
		if len(found) == 0 || found[0].ID != b.ID {
			rt.Errorf("Builds(%q) does not find its title", title)
		}
		if err := s.DeleteBuild(t.Context(), b.ID); err != nil {
			rt.Fatal(err)
		}
	})
}
