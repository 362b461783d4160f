package store_test

import (
	"context"
	"errors"
	"io/fs"
	"path/filepath"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

func TestBackupHoldsEverything(t *testing.T) {
	s := openStore(t, schemaOne(t), new(clock).now)
	folder := t.TempDir()
	path := filepath.Join(folder, "copy.db")
	must(t, s.Backup(t.Context(), path))
	if diff := cmp.Diff([]string{"copy.db"}, files(t, folder)); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
	copied := openStore(t, path, new(clock).now)
	sound(t, copied)
	if diff := cmp.Diff(everything(t, s), everything(t, copied)); diff != "" {
		t.Errorf("the backup differs (-store +backup):\n%s", diff)
	}
}

func TestBackupOverwritesNothing(t *testing.T) {
	s := newStore(t)
	create(t, s, 1)
	folder := t.TempDir()
	path := filepath.Join(folder, "copy.db")
	write(t, path, []byte("mine"))
	if err := s.Backup(t.Context(), path); !errors.Is(err, fs.ErrExist) {
		t.Errorf("error = %v, want fs.ErrExist", err)
	}
	if diff := cmp.Diff(map[string]string{"copy.db": "mine"}, content(t, folder)); diff != "" {
		t.Errorf("the folder has changed:\n%s", diff)
	}
}

func TestOfBackupsToOneNameOneWins(t *testing.T) {
	s := newStore(t)
	b := create(t, s, 1)
	folder := t.TempDir()
	path := filepath.Join(folder, "copy.db")
	errs := make([]error, 8)
	var group sync.WaitGroup
	for i := range errs {
		group.Go(func() { errs[i] = s.Backup(t.Context(), path) })
	}
	group.Wait()
	won := 0
	for _, err := range errs {
		if err == nil {
			won++
		} else if !errors.Is(err, fs.ErrExist) {
			t.Errorf("error = %v, want fs.ErrExist", err)
		}
	}
	if won != 1 {
		t.Errorf("%d backups went well, want 1", won)
	}
	if diff := cmp.Diff([]string{"copy.db"}, files(t, folder)); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
	if _, err := openStore(t, path, new(clock).now).Build(t.Context(), b.ID); err != nil {
		t.Error(err)
	}
}

func TestBackupThatFailsLeavesNothing(t *testing.T) {
	s := newStore(t)
	folder := t.TempDir()
	if err := s.Backup(t.Context(), filepath.Join(folder, "missing", "copy.db")); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("into a folder that is missing: error = %v, want fs.ErrNotExist", err)
	}
	gone, leave := context.WithCancel(t.Context())
	leave()
	if err := s.Backup(gone, filepath.Join(folder, "copy.db")); !errors.Is(err, context.Canceled) {
		t.Errorf("for a client who is gone: error = %v, want context.Canceled", err)
	}
	if left := files(t, folder); left != nil {
		t.Errorf("left behind: %v", left)
	}
}

// Several writers save without a pause while copies are made. Each copy must be
// whole, hold a state between the beginning and the end, and never one older
// than the copy before it.
func TestBackupUnderWrites(t *testing.T) {
	s := newStore(t)
	s.Remember(20)
	var builds []store.Build
	for n := range int64(4) {
		builds = append(builds, create(t, s, n))
	}
	stop := make(chan struct{})
	var group sync.WaitGroup
	for _, b := range builds {
		group.Go(func() {
			for n := int64(1); ; n++ {
				select {
				case <-stop:
					return
				default:
				}
				document, sum := state(n)
				next, err := s.SaveBuild(t.Context(), b.ID, b.Revision, document, sum)
				if err != nil {
					t.Error(err)
					return
				}
				b = next
			}
		})
	}
	folder := t.TempDir()
	seen := make([]int64, len(builds))
	for _, name := range []string{"1", "2", "3", "4", "5"} {
		path := filepath.Join(folder, name)
		if err := s.Backup(t.Context(), path); err != nil {
			t.Error(err)
			break
		}
		copied := openStore(t, path, new(clock).now)
		sound(t, copied)
		for i, b := range builds {
			got, err := copied.Build(t.Context(), b.ID)
			if err != nil {
				t.Error(err)
				continue
			}
			if got.Revision < seen[i] {
				t.Errorf("backup %s holds revision %d of build %d, an earlier one %d", name, got.Revision, b.ID, seen[i])
			}
			seen[i] = got.Revision
		}
	}
	close(stop)
	group.Wait()
	for i, b := range builds {
		now, err := s.Build(t.Context(), b.ID)
		must(t, err)
		if seen[i] < 1 || now.Revision < seen[i] {
			t.Errorf("build %d: a backup holds revision %d, the store %d", b.ID, seen[i], now.Revision)
		}
	}
}
