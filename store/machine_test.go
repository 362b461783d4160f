package store_test

import (
	"context"
	"errors"
	"path/filepath"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"lanternbook/store"
)

// editor is the model of a build: the list of states that an editor holds, a
// place in it, and every document under its revision.
type editor struct {
	s        *store.Store
	remember int

	id      int64
	states  []int64 // what undo and redo walk along
	at      int     // the current one
	saved   []int64 // the state of revision i+1
	kept    map[int64]bool
	deleted bool
	fresh   int64 // the next state
}

// revision is the number of the current revision.
func (e *editor) revision() int64 { return int64(len(e.saved)) }

// land notes a new revision of the current state, and forgets states that are
// too far away.
func (e *editor) land() {
	e.saved = append(e.saved, e.states[e.at])
	if before := e.at - (e.remember - 1); before > 0 {
		e.states = e.states[before:]
		e.at -= before
	}
}

func (e *editor) edit(t *rapid.T) {
	document, sum := state(e.fresh)
	_, err := e.s.SaveBuild(context.Background(), e.id, e.revision(), document, sum)
	if e.refused(t, err) {
		return
	}
	e.states = append(e.states[:e.at+1:e.at+1], e.fresh)
	e.at++
	e.fresh++
	e.land()
}

func (e *editor) undo(t *rapid.T) {
	_, err := e.s.Undo(context.Background(), e.id, e.revision())
	e.move(t, err, -1)
}

func (e *editor) redo(t *rapid.T) {
	_, err := e.s.Redo(context.Background(), e.id, e.revision())
	e.move(t, err, 1)
}

func (e *editor) move(t *rapid.T, err error, by int) {
	if e.refused(t, err) {
		return
	}
	if at := e.at + by; at < 0 || at >= len(e.states) {
		if !errors.Is(err, store.ErrNothing) {
			t.Fatalf("error = %v, want ErrNothing", err)
		}
		return
	}
	if err != nil {
		t.Fatal(err)
	}
	e.at += by
	e.land()
}

// stale saves from a revision that is not the current one.
func (e *editor) stale(t *rapid.T) {
	wrong := rapid.Int64Range(-1, e.revision()+2).
		Filter(func(n int64) bool { return n != e.revision() }).Draw(t, "wrong revision")
	document, sum := state(e.fresh)
	_, err := e.s.SaveBuild(context.Background(), e.id, wrong, document, sum)
	var stale *store.Stale
	if e.deleted {
		e.refused(t, err)
	} else if !errors.As(err, &stale) || stale.Have != e.revision() {
		t.Fatalf("error = %v, want *Stale with %d", err, e.revision())
	}
}

func (e *editor) keep(t *rapid.T) {
	number := rapid.Int64Range(1, e.revision()).Draw(t, "revision")
	keep := rapid.Bool().Draw(t, "keep")
	err := e.s.KeepRevision(context.Background(), e.id, number, keep, "note")
	if !e.deleted && errors.Is(err, store.ErrNotFound) && number <= e.revision()-int64(e.remember) {
		return // pruned
	}
	if !e.refused(t, err) {
		e.kept[number] = keep
	}
}

func (e *editor) throwAway(t *rapid.T) {
	if !e.refused(t, e.s.DeleteBuild(context.Background(), e.id)) {
		e.deleted = true
	}
}

func (e *editor) restore(t *rapid.T) {
	if _, err := e.s.RestoreBuild(context.Background(), e.id); err != nil {
		t.Fatal(err)
	}
	e.deleted = false
}

// refused reports whether err refuses a build that lies in the bin. Any other
// error but ErrNothing fails the test.
func (e *editor) refused(t *rapid.T, err error) bool {
	if e.deleted {
		if !errors.Is(err, store.ErrNotFound) {
			t.Fatalf("error = %v for a build in the bin, want ErrNotFound", err)
		}
		return true
	}
	if err != nil && !errors.Is(err, store.ErrNothing) {
		t.Fatal(err)
	}
	return false
}

// check compares the store with the model.
func (e *editor) check(t *rapid.T) {
	b, err := e.s.Build(context.Background(), e.id)
	if e.refused(t, err) {
		return
	}
	want, sum := state(e.states[e.at])
	if b.Revision != e.revision() || string(b.Document) != string(want) || b.Summary.Title != sum.Title {
		t.Fatalf("revision %d with %s, want %d with %s", b.Revision, b.Document, e.revision(), want)
	}
	if canUndo, canRedo := e.at > 0, e.at < len(e.states)-1; b.CanUndo != canUndo || b.CanRedo != canRedo {
		t.Fatalf("CanUndo %v, CanRedo %v, want %v, %v", b.CanUndo, b.CanRedo, canUndo, canRedo)
	}
	listed, err := e.s.Builds(context.Background(), sum.Search)
	if err != nil || len(listed) != 1 || listed[0].CanUndo != b.CanUndo || listed[0].CanRedo != b.CanRedo {
		t.Fatalf("the shelf shows %+v, %v, want %+v", listed, err, b)
	}
	e.checkHistory(t)
}

// checkHistory wants the last revisions and the kept ones to be there, each
// listed one to hold its document, and no old one that nothing needs. (One that
// was kept and let go is pruned with the next save only.)
func (e *editor) checkHistory(t *rapid.T) {
	history, err := e.s.Revisions(context.Background(), e.id)
	if err != nil {
		t.Fatal(err)
	}
	there := map[int64]bool{}
	for _, entry := range history {
		there[entry.Number] = true
		document, err := e.s.Revision(context.Background(), e.id, entry.Number)
		if err != nil {
			t.Fatal(err)
		}
		if want, _ := state(e.saved[entry.Number-1]); string(document) != string(want) {
			t.Fatalf("revision %d holds %s, want %s", entry.Number, document, want)
		}
		_, marked := e.kept[entry.Number]
		old := entry.Number <= e.revision()-int64(e.remember)
		if old && !marked && !slices.Contains(e.states, e.saved[entry.Number-1]) {
			t.Fatalf("revision %d of %d is still there, holding a state out of reach", entry.Number, e.revision())
		}
	}
	for number := max(1, e.revision()-int64(e.remember)+1); number <= e.revision(); number++ {
		if !there[number] {
			t.Fatalf("revision %d of %d is gone, the last %d should stay", number, e.revision(), e.remember)
		}
	}
	for number, kept := range e.kept {
		if kept && !there[number] {
			t.Fatalf("revision %d was to be kept and is gone", number)
		}
	}
}

func TestUndoBehavesLikeAnEditor(t *testing.T) {
	s := openStore(t, filepath.Join(t.TempDir(), "book.db"), new(clock).now)
	rapid.Check(t, func(t *rapid.T) {
		e := &editor{s: s, remember: rapid.IntRange(1, 6).Draw(t, "remember"), kept: map[int64]bool{}, states: []int64{0}, fresh: 1}
		s.Remember(int64(e.remember))
		document, sum := state(0)
		b, err := s.CreateBuild(context.Background(), document, sum)
		if err != nil {
			t.Fatal(err)
		}
		e.id, e.saved = b.ID, []int64{0}
		t.Cleanup(func() { // out of the next one's way
			if err := s.DeleteBuild(context.Background(), e.id); err != nil && !errors.Is(err, store.ErrNotFound) {
				t.Error(err)
			}
		})
		t.Repeat(map[string]func(*rapid.T){
			"edit": e.edit, "another edit": e.edit, "undo": e.undo, "another undo": e.undo, "redo": e.redo,
			"stale": e.stale, "keep": e.keep, "throw away": e.throwAway, "restore": e.restore, "restore again": e.restore,
			"": e.check,
		})
	})
	sound(t, s)
}
