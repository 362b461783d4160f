package store_test

import (
	"errors"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

type undoCase struct {
	name string
	acts string // blank-separated: a number saves that state, u undoes, r redoes
	want string // the current state, or "nothing" when the last act finds nothing
	undo bool
	redo bool
}

func TestUndoAndRedo(t *testing.T) {
	cases := []undoCase{
		{"nothing is undone in a new build", "u", "nothing", false, false},
		{"nothing is redone in a new build", "r", "nothing", false, false},
		{"one edit", "1", "1", true, false},
		{"one edit undone", "1 u", "0", false, true},
		{"one edit undone twice", "1 u u", "nothing", false, true},
		{"one edit undone and redone", "1 u r", "1", true, false},
		{"redone once too often", "1 u r r", "nothing", true, false},
		{"two of three undone", "1 2 3 u u", "1", true, true},
		{"two of three undone, one redone", "1 2 3 u u r", "2", true, true},
		{"all undone and all redone", "1 2 3 u u u r r r", "3", true, false},
		{"there and back twice", "1 2 u u r r u u r", "1", true, true},
		{"an edit after an undo ends redo", "1 2 u 3 r", "nothing", true, false},
		{"an edit after two undos ends redo", "1 2 3 u u 4 r", "nothing", true, false},
		{"an edit after an undo stands on what was undone to", "1 2 u 3 u", "1", true, true},
		{"an undo after that goes round the dead branch", "1 2 u 3 u u", "0", false, true},
		{"the new branch is redone, not the dead one", "1 2 u 3 u u r r", "3", true, false},
		{"an edit after a redo ends the rest of redo", "1 2 3 u u r 4 r", "nothing", true, false},
		{"the same state saved twice takes two undos", "1 1 u", "1", true, true},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s := newStore(t)
			b := create(t, s, 0)
			var err error
			for act := range strings.FieldsSeq(c.acts) {
				b, err = perform(t, s, b, act)
			}
			got := "nothing"
			if !errors.Is(err, store.ErrNothing) {
				must(t, err)
				got = strings.TrimPrefix(b.Summary.Title, "state ")
			}
			if got != c.want || b.CanUndo != c.undo || b.CanRedo != c.redo {
				t.Errorf("after %s: state %s, CanUndo %v, CanRedo %v, want %s, %v, %v",
					c.acts, got, b.CanUndo, b.CanRedo, c.want, c.undo, c.redo)
			}
		})
	}
}

// perform does one act of an undoCase and checks what holds for each of them.
// When it fails, the build is returned as it was.
func perform(t *testing.T, s *store.Store, b store.Build, act string) (store.Build, error) {
	t.Helper()
	var next store.Build
	var err error
	switch act {
	case "u":
		next, err = s.Undo(t.Context(), b.ID, b.Revision)
	case "r":
		next, err = s.Redo(t.Context(), b.ID, b.Revision)
	default:
		n, parseErr := strconv.ParseInt(act, 10, 64)
		if parseErr != nil {
			t.Fatal(parseErr)
		}
		document, sum := state(n)
		next, err = s.SaveBuild(t.Context(), b.ID, b.Revision, document, sum)
	}
	if err != nil {
		return b, err
	}
	if next.Revision != b.Revision+1 {
		t.Errorf("%s: revision %d follows %d", act, next.Revision, b.Revision)
	}
	number, parseErr := strconv.ParseInt(strings.TrimPrefix(next.Summary.Title, "state "), 10, 64)
	if parseErr != nil {
		t.Fatal(parseErr)
	}
	document, sum := state(number)
	if diff := cmp.Diff(sum, next.Summary); diff != "" || string(next.Document) != string(document) {
		t.Errorf("%s: document %s, summary:\n%s", act, next.Document, diff)
	}
	return next, nil
}

func TestUndoIsASaveThatOthersSee(t *testing.T) {
	s := newStore(t)
	b := save(t, s, create(t, s, 1), 2)
	undone, err := s.Undo(t.Context(), b.ID, b.Revision)
	must(t, err)
	document, sum := state(3)
	_, err = s.SaveBuild(t.Context(), b.ID, b.Revision, document, sum)
	var stale *store.Stale
	if !errors.As(err, &stale) || stale.Have != undone.Revision {
		t.Errorf("save from before the undo: error = %v, want *Stale with %d", err, undone.Revision)
	}
	for name, move := range map[string]func() error{
		"Undo": func() error { _, moved := s.Undo(t.Context(), b.ID, b.Revision); return moved },
		"Redo": func() error { _, moved := s.Redo(t.Context(), b.ID, b.Revision); return moved },
	} {
		if err = move(); !errors.As(err, &stale) || stale.Have != undone.Revision {
			t.Errorf("%s from before the undo: error = %v, want *Stale with %d", name, err, undone.Revision)
		}
	}
	found, err := s.Builds(t.Context(), "led1")
	must(t, err)
	if len(found) != 1 {
		t.Errorf("search for the words of the state gone back to finds %d builds, want 1", len(found))
	}
}

func TestHistoryIsListedNewestFirst(t *testing.T) {
	s := newStore(t)
	b := save(t, s, create(t, s, 1), 2)
	for _, act := range []string{"u", "r", "3"} {
		next, err := perform(t, s, b, act)
		must(t, err)
		b = next
	}
	must(t, s.KeepRevision(t.Context(), b.ID, 2, true, "as hung up"))
	got, err := s.Revisions(t.Context(), b.ID)
	must(t, err)
	want := []store.RevisionInfo{
		{Number: 5, Act: "edit", Title: "state 3", Verdict: "fail"},
		{Number: 4, Act: "redo", Title: "state 2", Verdict: "unknown"},
		{Number: 3, Act: "undo", Title: "state 1", Verdict: "tight"},
		{Number: 2, Act: "edit", Title: "state 2", Verdict: "unknown", Kept: true, Note: "as hung up"},
		{Number: 1, Act: "edit", Title: "state 1", Verdict: "tight"},
	}
	at := b.Updated
	for i := range want {
		want[i].At = at
		at = at.Add(-time.Second) // as the clock of these tests goes
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("Revisions (-want +got):\n%s", diff)
	}
}

func TestTheLastHundredRevisionsStay(t *testing.T) {
	s := newStore(t)
	b := create(t, s, 1)
	for n := int64(2); n <= 150; n++ {
		b = save(t, s, b, n)
	}
	checkRevisions(t, s, b.ID, 51, 150)
	for range 99 {
		next, err := s.Undo(t.Context(), b.ID, b.Revision)
		must(t, err)
		b = next
	}
	if b.CanUndo || b.Summary.Title != "state 51" {
		t.Errorf("after 99 undos: %s, CanUndo %v, want state 51 and no more", b.Summary.Title, b.CanUndo)
	}
	for range 99 {
		next, err := s.Redo(t.Context(), b.ID, b.Revision)
		must(t, err)
		b = next
	}
	if b.CanRedo || b.Summary.Title != "state 150" {
		t.Errorf("after 99 redos: %s, CanRedo %v, want state 150 and no more", b.Summary.Title, b.CanRedo)
	}
}

func TestPruningSparesWhatUndoCanReach(t *testing.T) {
	s := newStore(t)
	s.Remember(4)
	b := create(t, s, 1)
	for act := range strings.FieldsSeq("2 3 4 u r u r u r u r") { // the undo line is 1 2 3 4 all along
		next, err := perform(t, s, b, act)
		must(t, err)
		b = next
	}
	// The last four, and revisions 1 and 2, which hold the states 1 and 2.
	checkRevisions(t, s, b.ID, 1, 2, 9, 12)
	for _, want := range []string{"state 3", "state 2", "state 1"} {
		next, err := s.Undo(t.Context(), b.ID, b.Revision)
		must(t, err)
		if b = next; b.Summary.Title != want {
			t.Errorf("undo gives %s, want %s", b.Summary.Title, want)
		}
	}
}

func TestPruningLetsGoOfWhatAnEditCutOff(t *testing.T) {
	s := newStore(t)
	s.Remember(3)
	b := create(t, s, 1)
	for act := range strings.FieldsSeq("2 3 u u 4 u 5 u 6") { // 2 and 3 are cut off by 4
		next, err := perform(t, s, b, act)
		must(t, err)
		b = next
	}
	checkRevisions(t, s, b.ID, 8, 10)
}

func TestKeptRevisionsStayUntilLetGo(t *testing.T) {
	s := newStore(t)
	s.Remember(3)
	b := create(t, s, 1)
	must(t, s.KeepRevision(t.Context(), b.ID, 1, true, "as quoted"))
	for n := int64(2); n <= 9; n++ {
		b = save(t, s, b, n)
	}
	checkRevisions(t, s, b.ID, 1, 1, 7, 9)
	want, _ := state(1)
	if got, err := s.Revision(t.Context(), b.ID, 1); err != nil || string(got) != string(want) {
		t.Errorf("kept revision = %s, %v, want %s", got, err, want)
	}
	must(t, s.KeepRevision(t.Context(), b.ID, 1, false, "a note that goes with the mark"))
	b = save(t, s, b, 10)
	checkRevisions(t, s, b.ID, 8, 10)
	if err := s.KeepRevision(t.Context(), b.ID, 1, true, ""); !errors.Is(err, store.ErrNotFound) {
		t.Errorf("keeping a pruned revision: error = %v, want ErrNotFound", err)
	}
}

// checkRevisions wants exactly the revisions in the ranges given as pairs.
func checkRevisions(t *testing.T, s *store.Store, id int64, pairs ...int64) {
	t.Helper()
	history, err := s.Revisions(t.Context(), id)
	must(t, err)
	var got, want []int64
	for _, entry := range history {
		got = append(got, entry.Number)
	}
	for i := len(pairs) - 2; i >= 0; i -= 2 {
		for number := pairs[i+1]; number >= pairs[i]; number-- {
			want = append(want, number)
		}
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("revisions (-want +got):\n%s", diff)
	}
}
