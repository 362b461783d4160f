package store_test

import (
	"context"
	"database/sql"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

func TestOpenMakesFolderAndFileForTheirOwnerAlone(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "a", "b")
	path := filepath.Join(folder, "book.db")
	s := openStore(t, path, new(clock).now)
	if empty, err := s.Empty(t.Context()); err != nil || !empty {
		t.Errorf("Empty = %v, %v, want true", empty, err)
	}
	for name, want := range map[string]fs.FileMode{folder: fs.ModeDir | 0o700, path: 0o600} {
		info, err := os.Stat(name)
		must(t, err)
		if info.Mode() != want {
			t.Errorf("%s has mode %v, want %v", name, info.Mode(), want)
		}
	}
}

func TestCloseLeavesOneFile(t *testing.T) {
	folder := t.TempDir()
	s := openBriefly(t, filepath.Join(folder, "book.db"), new(clock).now)
	b := create(t, s, 1)
	_, err := s.Build(t.Context(), b.ID)
	must(t, err)
	must(t, s.Close())
	if diff := cmp.Diff([]string{"book.db"}, files(t, folder)); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
}

func TestFileNamesMayHoldAnything(t *testing.T) {
	for _, name := range []string{"a b.db", "50%.db", "why?mode=memory.db", "no#1.db", "grün.db", "a&b=c.db", "file:x.db", "%41.db"} {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			create(t, openStore(t, filepath.Join(folder, name), new(clock).now), 1)
			if diff := cmp.Diff([]string{name, name + "-shm", name + "-wal"}, files(t, folder)); diff != "" {
				t.Errorf("files (-want +got):\n%s", diff)
			}
		})
	}
}

func TestRelativePathStaysWhereItWasOpened(t *testing.T) {
	t.Chdir(t.TempDir())
	s := openStore(t, "book.db", new(clock).now)
	t.Chdir(t.TempDir())
	create(t, s, 1)
	if _, err := s.Builds(t.Context(), ""); err != nil { // opens a reader only now
		t.Error(err)
	}
}

type pragmaCase struct {
	name   string
	writer string
	reader string
}

func TestEveryConnectionIsSetUp(t *testing.T) {
	cases := []pragmaCase{
		{"journal_mode", "wal", "wal"},
		{"synchronous", "2", "2"}, // FULL
		{"foreign_keys", "1", "1"},
		{"busy_timeout", "5000", "5000"},
		{"query_only", "0", "1"},
		{"cache_size", "-16000", "-2000"},
		{"application_id", "1282307170", "1282307170"},
	}
	s := newStore(t)
	writer := hold(t, s.Writer())
	readers := []*sql.Conn{hold(t, s.Reader()), hold(t, s.Reader())}
	for _, c := range cases {
		if got := pragma(t, writer, c.name); got != c.writer {
			t.Errorf("writer: %s = %s, want %s", c.name, got, c.writer)
		}
		for i, reader := range readers {
			if got := pragma(t, reader, c.name); got != c.reader {
				t.Errorf("reader %d: %s = %s, want %s", i, c.name, got, c.reader)
			}
		}
	}
	if got := s.Writer().Stats().MaxOpenConnections; got != 1 {
		t.Errorf("%d writers, want 1", got)
	}
	if _, err := readers[0].ExecContext(t.Context(), `DELETE FROM builds`); err == nil {
		t.Error("a reader can write")
	}
}

// hold takes a connection out of the pool for the length of the test.
func hold(t *testing.T, db *sql.DB) *sql.Conn {
	t.Helper()
	conn, err := db.Conn(t.Context())
	must(t, err)
	t.Cleanup(func() {
		if err := conn.Close(); err != nil {
			t.Error(err)
		}
	})
	return conn
}

func pragma(t *testing.T, conn *sql.Conn, name string) (value string) {
	t.Helper()
	if err := conn.QueryRowContext(t.Context(), "PRAGMA "+name).Scan(&value); err != nil {
		t.Fatalf("PRAGMA %s: %v", name, err)
	}
	return value
}

func TestWriterTakesItsLockAtOnce(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book.db")
	s := openStore(t, path, new(clock).now)
	tx, err := s.Writer().BeginTx(t.Context(), nil)
	must(t, err)
	other := plain(t, path+"?_txlock=immediate&_busy_timeout=0")
	if second, err := other.BeginTx(t.Context(), nil); err == nil {
		t.Error("a second writer got in beside a transaction that has not written yet")
		_ = second.Rollback()
	}
	must(t, tx.Rollback())
}

func TestTwoProgramsShareAFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book.db")
	first, second := openStore(t, path, new(clock).now), openStore(t, path, new(clock).now)
	b := save(t, second, create(t, first, 1), 2)
	if got, err := first.Build(t.Context(), b.ID); err != nil || got.Revision != 2 {
		t.Errorf("revision %d, %v, want 2", got.Revision, err)
	}
}

// plain opens a file with SQLite's own defaults.
func plain(t *testing.T, name string) *sql.DB {
	t.Helper()
	db, err := sql.Open("sqlite3", "file:"+name)
	must(t, err)
	t.Cleanup(func() {
		if err := db.Close(); err != nil {
			t.Error(err)
		}
	})
	return db
}

// execute runs statements on a file that no store has open.
func execute(t *testing.T, path string, statements ...string) {
	t.Helper()
	db, err := sql.Open("sqlite3", "file:"+path)
	must(t, err)
	for _, statement := range statements {
		if _, err := db.ExecContext(t.Context(), statement); err != nil {
			t.Fatalf("%.100s: %v", statement, err)
		}
	}
	must(t, db.Close())
}

// made makes a file with one build in it, and closes it.
func made(t *testing.T, path string) {
	t.Helper()
	s := openBriefly(t, path, new(clock).now)
	create(t, s, 1)
	must(t, s.Close())
}

func TestOpenStopsWhenTold(t *testing.T) {
	gone, leave := context.WithCancel(t.Context())
	leave()
	if s, err := store.Open(gone, filepath.Join(t.TempDir(), "book.db"), new(clock).now); !errors.Is(err, context.Canceled) {
		t.Errorf("error = %v, want context.Canceled", err)
		if err == nil {
			_ = s.Close()
		}
	}
}
