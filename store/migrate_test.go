package store_test

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

// schemaOne makes the file that the program with schema 1 left behind.
func schemaOne(t *testing.T) (path string) {
	t.Helper()
	path = filepath.Join(t.TempDir(), "book.db")
	execute(t, path, string(read(t, "testdata/schema-1.sql")), `PRAGMA journal_mode = WAL`)
	return path
}

// withMigrations are the program's own migrations and further ones, by name.
func withMigrations(t *testing.T, further map[string]string) fs.FS {
	t.Helper()
	all := fstest.MapFS{}
	names, err := fs.Glob(store.Migrations, "migrations/*.sql")
	must(t, err)
	for _, name := range names {
		content, err := fs.ReadFile(store.Migrations, name)
		must(t, err)
		all[filepath.Base(name)] = &fstest.MapFile{Data: content}
	}
	for name, content := range further {
		all[name] = &fstest.MapFile{Data: []byte("-- +goose Up\n" + content)}
	}
	return all
}

// shelf is all that a store tells of itself.
type shelf struct {
	Builds    []store.Build
	Revisions map[int64][]store.RevisionInfo
	Documents map[string]string
	Parts     []store.Part
}

func everything(t *testing.T, s *store.Store) shelf {
	t.Helper()
	all := shelf{Revisions: map[int64][]store.RevisionInfo{}, Documents: map[string]string{}}
	list, err := s.Builds(t.Context(), "")
	must(t, err)
	for _, entry := range list {
		b, failed := s.Build(t.Context(), entry.ID)
		must(t, failed)
		all.Builds = append(all.Builds, b)
		all.Revisions[b.ID], failed = s.Revisions(t.Context(), b.ID)
		must(t, failed)
		for _, revision := range all.Revisions[b.ID] {
			var document []byte
			document, failed = s.Revision(t.Context(), b.ID, revision.Number)
			must(t, failed)
			all.Documents[fmt.Sprintf("%d/%d", b.ID, revision.Number)] = string(document)
		}
	}
	all.Parts, err = s.Parts(t.Context(), "")
	must(t, err)
	return all
}

func TestFileOfSchemaOneOpens(t *testing.T) {
	s := openStore(t, schemaOne(t), new(clock).now)
	sound(t, s)
	b, err := s.Build(t.Context(), 1)
	must(t, err)
	want := "{\"title\": \"Tide-table case\",\n \"x\": 1.70}"
	if string(b.Document) != want || b.Revision != 7 || !b.CanUndo || !b.CanRedo {
		t.Errorf("build 1 = revision %d, CanUndo %v, CanRedo %v, %s, want 7, true, true, %s",
			b.Revision, b.CanUndo, b.CanRedo, b.Document, want)
	}
	for _, step := range []struct {
		move func(context.Context, int64, int64) (store.Build, error)
		want string
	}{{s.Undo, "1.60"}, {s.Undo, "1.50"}, {s.Redo, "1.60"}, {s.Redo, "1.70"}, {s.Redo, "1.80"}} {
		b, err = step.move(t.Context(), 1, b.Revision)
		must(t, err)
		if !strings.Contains(string(b.Document), step.want) {
			t.Errorf("document = %s, want the one with %s", b.Document, step.want)
		}
	}
	if found, err := s.Builds(t.Context(), "GROSSE muller"); err != nil || len(found) != 1 {
		t.Errorf("search finds %d builds, %v, want 1", len(found), err)
	}
	if kept, err := s.Revision(t.Context(), 1, 2); err != nil || !strings.Contains(string(kept), "1.60") {
		t.Errorf("kept revision = %s, %v", kept, err)
	}
	if _, err := s.RestoreBuild(t.Context(), 3); err != nil {
		t.Errorf("build in the bin: %v", err)
	}
	if p, err := s.Part(t.Context(), "white-2835"); err != nil || p.Name != "White 2835" {
		t.Errorf("part = %+v, %v", p, err)
	}
}

// A migration that has been released must not be edited: files made by it are
// out there.
func TestOldFilesGetTheSchemaOfNewOnes(t *testing.T) {
	old := openStore(t, schemaOne(t), new(clock).now)
	if diff := cmp.Diff(schema(t, newStore(t).Reader()), schema(t, old.Reader())); diff != "" {
		t.Errorf("a migrated file differs from a new one (-new +migrated):\n%s", diff)
	}
}

func schema(t *testing.T, db *sql.DB) map[string]string {
	t.Helper()
	rows, err := db.QueryContext(t.Context(), `SELECT type || ' ' || name, coalesce(sql, '') FROM sqlite_schema`)
	must(t, err)
	defer func() { _ = rows.Close() }() // rows.Err tells
	all := map[string]string{}
	for rows.Next() {
		var name, text string
		must(t, rows.Scan(&name, &text))
		all[name] = strings.Join(strings.Fields(text), " ")
	}
	must(t, rows.Err())
	return all
}

// rebuildBuilds is what a migration must do to change a column: make the table
// anew. With foreign keys on, dropping the old one would take all revisions along.
const rebuildBuilds = `
CREATE TABLE builds_new (
    id INTEGER PRIMARY KEY AUTOINCREMENT, revision INTEGER NOT NULL, step INTEGER NOT NULL,
    first_step INTEGER NOT NULL, last_step INTEGER NOT NULL, created INTEGER NOT NULL, updated INTEGER NOT NULL,
    deleted_at INTEGER, folded TEXT NOT NULL, title TEXT NOT NULL, client TEXT NOT NULL, site TEXT NOT NULL,
    tags TEXT NOT NULL, verdict TEXT NOT NULL, card TEXT NOT NULL, colour TEXT NOT NULL DEFAULT 'white',
    FOREIGN KEY (id, revision) REFERENCES revisions (build, number) DEFERRABLE INITIALLY DEFERRED
) STRICT;
INSERT INTO builds_new SELECT *, 'amber' FROM builds;
DROP TABLE builds;
ALTER TABLE builds_new RENAME TO builds;
`

func TestRebuildingAParentTableLosesNoRevision(t *testing.T) {
	path := schemaOne(t)
	old := openBriefly(t, path, new(clock).now)
	want := everything(t, old)
	must(t, old.Close())
	migrations := withMigrations(t, map[string]string{"0002_colours.sql": rebuildBuilds})
	s, err := store.OpenWith(t.Context(), path, new(clock).now, migrations)
	must(t, err)
	if diff := cmp.Diff(want, everything(t, s)); diff != "" {
		t.Errorf("after the migration (-before +after):\n%s", diff)
	}
	sound(t, s)
	var colour string
	if err := s.Reader().QueryRowContext(t.Context(), `SELECT colour FROM builds WHERE id = 1`).Scan(&colour); err != nil || colour != "amber" {
		t.Errorf("colour = %q, %v: the migration did not run", colour, err)
	}
	must(t, s.Close())
	if diff := cmp.Diff([]string{"book.db", "book.db.before-0002"}, files(t, filepath.Dir(path))); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
	if _, err := store.Open(t.Context(), path, new(clock).now); !errors.Is(err, store.ErrNewer) {
		t.Errorf("the old program on the new file: error = %v, want ErrNewer", err)
	}
	copied := openStore(t, path+".before-0002", new(clock).now)
	if diff := cmp.Diff(want, everything(t, copied)); diff != "" {
		t.Errorf("the copy (-before +copy):\n%s", diff)
	}
}

func TestMigratedFileIsNotCopiedAgain(t *testing.T) {
	path := schemaOne(t)
	migrations := withMigrations(t, map[string]string{"0002_colours.sql": rebuildBuilds})
	for range 2 {
		s, err := store.OpenWith(t.Context(), path, new(clock).now, migrations)
		must(t, err)
		must(t, s.Close())
	}
	if diff := cmp.Diff([]string{"book.db", "book.db.before-0002"}, files(t, filepath.Dir(path))); diff != "" {
		t.Errorf("files (-want +got):\n%s", diff)
	}
}

type failureCase struct {
	name       string
	migrations map[string]string
	want       string // in the error
}

func TestFailedMigrationLeavesTheFileAsItWas(t *testing.T) {
	cases := []failureCase{
		{"an error in SQL", map[string]string{
			"0002_colours.sql": "ALTER TABLE builds ADD COLUMN colour TEXT;\nSELECT nonsense;\n",
		}, "no such column"},
		{"an error after one that went well", map[string]string{
			"0002_colours.sql":  rebuildBuilds,
			"0003_nonsense.sql": "SELECT nonsense;\n",
		}, "no such column"},
		{"rows that refer to nothing", map[string]string{
			"0002_loss.sql": "DELETE FROM builds WHERE id = 1;\n",
		}, "7 rows, the first in table revisions, refer to rows that are gone"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			path := schemaOne(t)
			for range 2 { // a second try is no worse
				_, err := store.OpenWith(t.Context(), path, new(clock).now, withMigrations(t, c.migrations))
				if err == nil || !strings.Contains(err.Error(), c.want) {
					t.Errorf("error = %v, want one with %q", err, c.want)
				}
			}
			s := openStore(t, path, new(clock).now)
			sound(t, s)
			if diff := cmp.Diff(everything(t, openStore(t, schemaOne(t), new(clock).now)), everything(t, s)); diff != "" {
				t.Errorf("the file has changed (-want +got):\n%s", diff)
			}
			want := []string{"book.db", "book.db-shm", "book.db-wal", "book.db.before-0002", "book.db.before-0002-2"}
			if diff := cmp.Diff(want, files(t, filepath.Dir(path))); diff != "" {
				t.Errorf("files (-want +got):\n%s", diff)
			}
		})
	}
}

// This waits for as long as SQLite is told to wait for others.
func TestNothingIsMigratedUnderAnotherProgram(t *testing.T) {
	if testing.Short() {
		t.Skip("waits for five seconds")
	}
	t.Parallel()
	path := schemaOne(t)
	old := openStore(t, path, new(clock).now)
	want := everything(t, old)
	migrations := withMigrations(t, map[string]string{"0002_colours.sql": rebuildBuilds})
	if s, err := store.OpenWith(t.Context(), path, new(clock).now, migrations); err == nil {
		t.Error("a file in use is migrated")
		_ = s.Close()
	}
	if diff := cmp.Diff(want, everything(t, old)); diff != "" {
		t.Errorf("the file has changed:\n%s", diff)
	}
	b, err := old.Build(t.Context(), 1)
	must(t, err)
	save(t, old, b, 5)
}
