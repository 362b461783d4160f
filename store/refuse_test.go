package store_test

import (
	"bytes"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"syscall"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

type refusedCase struct {
	name string
	make func(t *testing.T, path string)
	want error
}

func TestFilesThatAreNotForUsStayUntouched(t *testing.T) {
	const newer = `INSERT INTO goose_db_version (version_id, is_applied) VALUES (9, 1)`
	cases := []refusedCase{
		{"a text", func(t *testing.T, path string) {
			t.Helper()
			write(t, path, bytes.Repeat([]byte("Not a database.\n"), 500))
		}, store.ErrNotOurs},
		{"a text of one line", func(t *testing.T, path string) {
			t.Helper()
			write(t, path, []byte("short\n"))
		}, store.ErrNotOurs},
		{"a SQLite file without a mark", func(t *testing.T, path string) {
			t.Helper()
			execute(t, path, `CREATE TABLE builds (id INTEGER)`)
		}, store.ErrNotOurs},
		{"a SQLite file of another program", func(t *testing.T, path string) {
			t.Helper()
			execute(t, path, `PRAGMA application_id = 252006675`, `CREATE TABLE builds (id INTEGER)`)
		}, store.ErrNotOurs},
		{"a foreign file that somebody has open", func(t *testing.T, path string) {
			t.Helper()
			db := plain(t, path+"?_journal_mode=WAL")
			_, err := db.ExecContext(t.Context(), `CREATE TABLE builds (id INTEGER)`)
			must(t, err)
		}, store.ErrNotOurs},
		{"a folder", func(t *testing.T, path string) {
			t.Helper()
			must(t, os.Mkdir(path, 0o700))
		}, store.ErrNotOurs},
		{"a file from a newer version", func(t *testing.T, path string) {
			t.Helper()
			made(t, path)
			execute(t, path, newer)
		}, store.ErrNewer},
		{"a file that a newer version left behind when it was killed", func(t *testing.T, path string) {
			t.Helper()
			original := filepath.Join(t.TempDir(), "book.db")
			made(t, original)
			db := plain(t, original)
			if _, err := db.ExecContext(t.Context(), newer); err != nil { // stands in the log only
				t.Fatal(err)
			}
			for _, ending := range []string{"", "-wal", "-shm"} {
				write(t, path+ending, read(t, original+ending))
			}
		}, store.ErrNewer},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			folder := t.TempDir()
			path := filepath.Join(folder, "book.db")
			c.make(t, path)
			before := content(t, folder)
			_, err := store.Open(t.Context(), path, new(clock).now)
			if !errors.Is(err, c.want) {
				t.Errorf("error = %v, want %v", err, c.want)
			}
			after := content(t, folder)
			// Any reader of a log writes where it reads into the shared memory.
			delete(before, "book.db-shm")
			delete(after, "book.db-shm")
			if diff := cmp.Diff(before, after); diff != "" {
				t.Errorf("the folder has changed:\n%s", diff)
			}
		})
	}
}

func TestNewerTellsBothNumbers(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book.db")
	made(t, path)
	execute(t, path, `INSERT INTO goose_db_version (version_id, is_applied) VALUES (9, 1)`)
	_, err := store.Open(t.Context(), path, new(clock).now)
	var newer *store.Newer
	if !errors.As(err, &newer) {
		t.Fatalf("error = %v, want *Newer", err)
	}
	if want := (store.Newer{File: 9, Program: 1}); *newer != want {
		t.Errorf("Newer = %+v, want %+v", *newer, want)
	}
	want := "store: open " + path + ": made by a newer version of Lanternbook: the file has schema 9, this program knows 1"
	if err.Error() != want {
		t.Errorf("error = %q, want %q", err, want)
	}
}

// A folder without write permission would not stop root, so these paths are
// such as nobody can make.
func TestFolderThatCannotBeMade(t *testing.T) {
	for name, below := range map[string]string{
		"a file stands where the folder should be":   "book.db",
		"a file stands where a folder above it goes": "deeper/book.db",
	} {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			write(t, filepath.Join(folder, "file"), []byte("mine"))
			before := content(t, folder)
			_, err := store.Open(t.Context(), filepath.Join(folder, "file", below), new(clock).now)
			var reason *fs.PathError
			if !errors.As(err, &reason) || !errors.Is(err, syscall.ENOTDIR) {
				t.Errorf("error = %v, want the system's \"not a directory\"", err)
			}
			if diff := cmp.Diff(before, content(t, folder)); diff != "" {
				t.Errorf("the folder has changed:\n%s", diff)
			}
		})
	}
}

func write(t *testing.T, path string, content []byte) {
	t.Helper()
	must(t, os.WriteFile(path, content, 0o600))
}

// content is every file of a folder with its bytes.
func content(t *testing.T, folder string) map[string]string {
	t.Helper()
	all := map[string]string{}
	for _, name := range files(t, folder) {
		info, err := os.Stat(filepath.Join(folder, name))
		must(t, err)
		if info.IsDir() {
			all[name] = "folder"
			continue
		}
		all[name] = string(read(t, filepath.Join(folder, name)))
	}
	return all
}
