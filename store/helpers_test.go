package store_test

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"sync/atomic"
	"testing"
	"time"

	"lanternbook/store"
)

// clock is a time that moves on by a second whenever it is asked.
type clock struct{ seconds atomic.Int64 }

var epoch = time.Date(2024, 2, 29, 12, 0, 0, 0, time.UTC)

func (c *clock) now() time.Time {
	return epoch.Add(time.Duration(c.seconds.Add(1)) * time.Second)
}

func (c *clock) pass(d time.Duration) { c.seconds.Add(int64(d / time.Second)) }

// newStore opens a new file in a folder of its own.
func newStore(tb testing.TB) *store.Store {
	tb.Helper()
	return openStore(tb, filepath.Join(tb.TempDir(), "book.db"), new(clock).now)
}

// openStore opens a file for the length of the test.
func openStore(tb testing.TB, path string, now func() time.Time) *store.Store {
	tb.Helper()
	s := openBriefly(tb, path, now)
	tb.Cleanup(func() { must(tb, s.Close()) })
	return s
}

// openBriefly opens a file that the test itself closes.
func openBriefly(tb testing.TB, path string, now func() time.Time) *store.Store {
	tb.Helper()
	s, err := store.Open(context.Background(), path, now)
	must(tb, err)
	return s
}

func must(tb testing.TB, err error) {
	tb.Helper()
	if err != nil {
		tb.Fatal(err)
	}
}

// state is a document and the summary that belongs to it.
func state(n int64) ([]byte, store.Summary) {
	return fmt.Appendf(nil, `{"title": "state %d"}`, n), store.Summary{
		Title:   fmt.Sprintf("state %d", n),
		Client:  fmt.Sprintf("client %d", n),
		Site:    fmt.Sprintf("site %d", n),
		Tags:    []string{fmt.Sprintf("tag %d", n), "all"},
		Search:  fmt.Sprintf("led%d", n),
		Verdict: []string{"pass", "tight", "unknown", "fail", ""}[n%5],
		Card:    fmt.Appendf(nil, `{"n":%d}`, n),
	}
}

func create(tb testing.TB, s *store.Store, n int64) store.Build {
	tb.Helper()
	document, sum := state(n)
	b, err := s.CreateBuild(context.Background(), document, sum)
	if err != nil {
		tb.Fatal(err)
	}
	return b
}

func save(tb testing.TB, s *store.Store, b store.Build, n int64) store.Build {
	tb.Helper()
	document, sum := state(n)
	b, err := s.SaveBuild(context.Background(), b.ID, b.Revision, document, sum)
	if err != nil {
		tb.Fatal(err)
	}
	return b
}

// files lists a folder.
func files(tb testing.TB, folder string) []string {
	tb.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		tb.Fatal(err)
	}
	var names []string
	for _, entry := range entries {
		names = append(names, entry.Name())
	}
	slices.Sort(names)
	return names
}

func read(tb testing.TB, path string) []byte {
	tb.Helper()
	content, err := os.ReadFile(path)
	if err != nil {
		tb.Fatal(err)
	}
	return content
}

// sound fails the test unless SQLite finds the store's file in order.
func sound(tb testing.TB, s *store.Store) {
	tb.Helper()
	var integrity string
	var broken int
	row := s.Reader().QueryRowContext(context.Background(),
		`SELECT (SELECT group_concat(integrity_check) FROM pragma_integrity_check),
			(SELECT count(*) FROM pragma_foreign_key_check)`)
	if err := row.Scan(&integrity, &broken); err != nil {
		tb.Fatal(err)
	}
	if integrity != "ok" || broken != 0 {
		tb.Fatalf("integrity_check = %q, foreign_key_check = %d rows, want ok and none", integrity, broken)
	}
}
