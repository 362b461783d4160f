package store

import (
	"context"
	"database/sql"
	"io/fs"
	"time"
)

// OpenWith opens with other migrations than the program's own.
func OpenWith(ctx context.Context, path string, now func() time.Time, migrations fs.FS) (*Store, error) {
	return open(ctx, path, now, migrations)
}

// Remember sets how many revisions stay, so that pruning shows early.
func (s *Store) Remember(revisions int64) { s.remember = revisions }

// Writer and Reader are the pools, for tests that look at the connections.
func (s *Store) Writer() *sql.DB { return s.writer }
func (s *Store) Reader() *sql.DB { return s.reader }

// Migrations are the program's own.
var Migrations fs.FS = embedded

// Fold is what search does to text.
var Fold = fold
