package main

import (
	"context"
	"database/sql"
	"path/filepath"
	"testing"
	"time"

	_ "github.com/mattn/go-sqlite3" // opens files as another program would

	"lanternbook/store"
)

// database makes an SQLite file that is not ours.
func database(t *testing.T, folder, name, statements string) string {
	t.Helper()
	path := filepath.Join(folder, name)
	execute(t, path, statements)
	return path
}

// newerDatabase makes a data file as a later version would leave it.
func newerDatabase(t *testing.T, folder string) string {
	t.Helper()
	path := filepath.Join(folder, "newer.db")
	st, err := store.Open(context.Background(), path, time.Now)
	if err != nil {
		t.Fatal(err)
	}
	if err := st.Close(); err != nil {
		t.Fatal(err)
	}
	execute(t, path, "INSERT INTO goose_db_version (version_id, is_applied) VALUES (9999, 1)")
	return path
}

func execute(t *testing.T, path, statements string) {
	t.Helper()
	db, err := sql.Open("sqlite3", "file:"+path)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = db.Close() }()
	if _, err := db.ExecContext(t.Context(), statements); err != nil {
		t.Fatal(err)
	}
}
