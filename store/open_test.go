package store_test

import (
	"bytes"
	"context"
	"database/sql"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"syscall"
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

func TestStartsCutShortAreFinished(t *testing.T) {
	for name, leave := range map[string]func(*testing.T, string){
		"an empty file": func(t *testing.T, path string) {
			t.Helper()
			write(t, path, nil)
		},
		"only the mark": func(t *testing.T, path string) {
			t.Helper()
			execute(t, path, `PRAGMA application_id = 1282307170`)
		},
		"no tables of ours": func(t *testing.T, path string) {
			t.Helper()
			execute(t, path, `PRAGMA application_id = 1282307170`, `
				CREATE TABLE goose_db_version (id INTEGER PRIMARY KEY AUTOINCREMENT, version_id INTEGER NOT NULL,
					is_applied INTEGER NOT NULL, tstamp TIMESTAMP DEFAULT (datetime('now')))`,
				`INSERT INTO goose_db_version (version_id, is_applied) VALUES (0, 1)`)
		},
	} {
		t.Run(name, func(t *testing.T) {
			folder := t.TempDir()
			path := filepath.Join(folder, "book.db")
			leave(t, path)
			made(t, path)
			if diff := cmp.Diff([]string{"book.db"}, files(t, folder)); diff != "" {
				t.Errorf("files (-want +got):\n%s", diff)
			}
		})
	}
}

// A transaction that was cut short after it had reached the file and before its
// journal was gone: whoever reads the file without the journal sees tables that
// SQLite takes back as soon as it opens it.
func TestFirstStartCutShortInTheMiddleOfACommit(t *testing.T) {
	whole := filepath.Join(t.TempDir(), "whole.db")
	made(t, whole)
	path := filepath.Join(t.TempDir(), "book.db")
	execute(t, path, `PRAGMA application_id = 1282307170`)
	journal := func() []byte {
		db := plain(t, path+"?_synchronous=OFF") // so that the journal is written as it goes
		tx, err := db.BeginTx(t.Context(), nil)
		must(t, err)
		_, err = tx.ExecContext(t.Context(), `CREATE TABLE goose_db_version (
			id INTEGER PRIMARY KEY AUTOINCREMENT, version_id INTEGER NOT NULL, is_applied INTEGER NOT NULL, tstamp TIMESTAMP)`)
		must(t, err)
		_, err = tx.ExecContext(t.Context(), `INSERT INTO goose_db_version (version_id, is_applied) VALUES (1, 1)`)
		must(t, err)
		written := read(t, path+"-journal")
		must(t, tx.Commit())
		return written
	}()
	write(t, path+"-journal", journal)
	made(t, path)
	if diff := cmp.Diff([]string{"book.db"}, files(t, filepath.Dir(path))); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
	s := openStore(t, path, new(clock).now)
	if diff := cmp.Diff(schema(t, openStore(t, whole, new(clock).now).Reader()), schema(t, s.Reader())); diff != "" {
		t.Errorf("schema (-whole +cut short):\n%s", diff)
	}
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
