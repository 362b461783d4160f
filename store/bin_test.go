package store_test

import (
	"errors"
	"path/filepath"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

func TestDeletedBuildComesBackWhole(t *testing.T) {
	s := newStore(t)
	b := save(t, s, create(t, s, 1), 2)
	history, err := s.Revisions(t.Context(), b.ID)
	must(t, err)
	must(t, s.DeleteBuild(t.Context(), b.ID))
	builds, err := s.Builds(t.Context(), "")
	must(t, err)
	if len(builds) != 0 {
		t.Errorf("Builds = %d builds, want none", len(builds))
	}
	for range 2 { // restoring what is there changes nothing
		var restored store.Build
		restored, err = s.RestoreBuild(t.Context(), b.ID)
		must(t, err)
		if diff := cmp.Diff(b, restored); diff != "" {
			t.Errorf("RestoreBuild (-want +got):\n%s", diff)
		}
	}
	again, err := s.Revisions(t.Context(), b.ID)
	must(t, err)
	if diff := cmp.Diff(history, again); diff != "" {
		t.Errorf("history (-want +got):\n%s", diff)
	}
	if undone, err := s.Undo(t.Context(), b.ID, b.Revision); err != nil || undone.Summary.Title != "state 1" {
		t.Errorf("Undo after RestoreBuild = %s, %v, want state 1", undone.Summary.Title, err)
	}
}

type binCase struct {
	name string
	wait time.Duration
	want error // of restoring
}

func TestTheBinIsEmptiedAfterThirtyDays(t *testing.T) {
	const day = 24 * time.Hour
	cases := []binCase{
		{"after 29 days", 29 * day, nil},
		{"after 31 days", 31 * day, store.ErrNotFound},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			path := filepath.Join(t.TempDir(), "book.db")
			ticking := new(clock)
			s := openBriefly(t, path, ticking.now)
			b, stays := save(t, s, create(t, s, 1), 2), create(t, s, 3)
			_, err := s.CreatePart(t.Context(), "white", []byte(`{"type":"led"}`))
			must(t, err)
			must(t, errors.Join(s.DeleteBuild(t.Context(), b.ID), s.DeletePart(t.Context(), "white"), s.Close()))
			ticking.pass(c.wait)
			s = openStore(t, path, ticking.now)
			if _, err = s.RestoreBuild(t.Context(), b.ID); !errors.Is(err, c.want) {
				t.Errorf("RestoreBuild: error = %v, want %v", err, c.want)
			}
			if _, err = s.RestorePart(t.Context(), "white"); !errors.Is(err, c.want) {
				t.Errorf("RestorePart: error = %v, want %v", err, c.want)
			}
			if _, err = s.Build(t.Context(), stays.ID); err != nil {
				t.Errorf("the build on the shelf: %v", err)
			}
			var left int
			err = s.Reader().QueryRowContext(t.Context(), `SELECT count(*) FROM revisions WHERE build = ?`, b.ID).Scan(&left)
			if err != nil || (left == 0) != (c.want != nil) {
				t.Errorf("%d of its revisions are left, %v", left, err)
			}
			sound(t, s)
		})
	}
}

func TestNumbersOfPurgedBuildsAreNotGivenAgain(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book.db")
	ticking := new(clock)
	s := openBriefly(t, path, ticking.now)
	b := create(t, s, 1)
	must(t, errors.Join(s.DeleteBuild(t.Context(), b.ID), s.Close()))
	ticking.pass(31 * 24 * time.Hour)
	s = openStore(t, path, ticking.now)
	if empty, err := s.Empty(t.Context()); err != nil || empty {
		t.Errorf("Empty = %v, %v where a build once was, want false", empty, err)
	}
	if next := create(t, s, 2); next.ID == b.ID {
		t.Errorf("build number %d is given a second time", b.ID)
	}
}
