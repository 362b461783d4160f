package store_test

import (
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"
)

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
