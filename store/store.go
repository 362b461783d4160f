// Package store keeps builds, every revision of their documents, and the
// drawer of parts in one SQLite file. It answers: what was saved, and is it
// still exactly that?
//
// What a method has returned without an error is on disk. A document is kept
// and given back byte for byte; the store does not read builds, what it must
// know about one comes as a Summary beside it. It leaves out everything about
// circuits and about HTTP.
package store

import (
	"context"
	"database/sql"
	"errors"
	"io/fs"
	"net/url"
	"path/filepath"
	"runtime"
	"slices"
	"time"

	_ "github.com/mattn/go-sqlite3" // the driver "sqlite3"
)

// remembered is how many revisions of a build stay without being asked for,
// and how many states undo and redo can reach, the current one among them.
const remembered = 100

// Store is an open data file. All methods may be called from many goroutines
// at once, also by several processes on the same file.
type Store struct {
	writer   *sql.DB // one connection, so that writers queue here and not in SQLite
	reader   *sql.DB // many connections that cannot write
	now      func() time.Time
	remember int64 // remembered
}

// Open opens the data file at path, making it and its folder where they do not
// exist. An older file is copied to path.before-NNNN, NNNN being the first
// migration it lacks, and then migrated. What has been in the bin for thirty
// days is deleted for good. The caller owns the store and closes it.
//
// It returns ErrNotOurs for a file of another kind, ErrNewer (a *Newer) for
// one from a newer version, and the operating system's error where the folder
// or the file cannot be written; none of these files is touched.
func Open(ctx context.Context, path string, now func() time.Time) (*Store, error) {
	migrations, err := fs.Sub(embedded, "migrations")
	if err != nil {
		return nil, err
	}
	return open(ctx, path, now, migrations)
}

func open(ctx context.Context, path string, now func() time.Time, migrations fs.FS) (s *Store, err error) {
	defer wrap(&err, "open %s", path)
	path, err = filepath.Abs(path)
	if err != nil {
		return nil, err
	}
	known, err := versions(migrations)
	if err != nil {
		return nil, err
	}
	have, err := inspect(ctx, path)
	if err != nil {
		return nil, err
	}
	if newest := known[len(known)-1]; have > newest {
		return nil, &Newer{File: have, Program: newest}
	}
	err = makeWritable(path)
	if err != nil {
		return nil, err
	}
	err = migrate(ctx, path, have, known, migrations)
	if err != nil {
		return nil, err
	}
	s, err = connect(ctx, path, now)
	if err != nil {
		return nil, err
	}
	err = s.emptyBin(ctx)
	if err != nil {
		return nil, errors.Join(err, s.Close())
	}
	return s, nil
}

// connect opens the two pools on a file that is known to be ours and current.
func connect(ctx context.Context, path string, now func() time.Time) (*Store, error) {
	writer, err := sql.Open("sqlite3", dsn(path,
		"_foreign_keys", "on",
		"_journal_mode", "WAL",
		"_synchronous", "FULL",
		"_txlock", "immediate", // a writer that starts as a reader could find its place taken
		"_cache_size", "-16000", // [KiB]
		"_stmt_cache_size", "64", // the statements are few and always the same
	))
	if err != nil {
		return nil, err
	}
	writer.SetMaxOpenConns(1)
	writer.SetMaxIdleConns(1)
	// The writer comes first: a read-only connection cannot set the journal mode.
	err = writer.PingContext(ctx)
	if err != nil {
		return nil, errors.Join(err, writer.Close())
	}
	reader, err := sql.Open("sqlite3", dsn(path,
		"mode", "ro",
		"_query_only", "on",
		"_foreign_keys", "on",
		"_synchronous", "FULL",
		"_stmt_cache_size", "64",
	))
	if err != nil {
		return nil, errors.Join(err, writer.Close())
	}
	readers := max(4, runtime.NumCPU())
	reader.SetMaxOpenConns(readers)
	reader.SetMaxIdleConns(readers)
	return &Store{writer: writer, reader: reader, now: now, remember: remembered}, nil
}

// Close waits for what is under way and closes the file. The writer goes last:
// as the last connection it folds the write-ahead log into the file.
func (s *Store) Close() (err error) {
	defer wrap(&err, "close")
	return errors.Join(s.reader.Close(), s.writer.Close())
}

// dsn names the file for the driver, with settings in pairs of key and value.
// The driver ignores a key that it does not know, so a test asks each
// connection what it is set to.
func dsn(path string, settings ...string) string {
	query := url.Values{"_busy_timeout": {"5000"}} // [ms] for another process to finish writing
	for pair := range slices.Chunk(settings, 2) {
		query.Set(pair[0], pair[1])
	}
	name := url.URL{Scheme: "file", Opaque: (&url.URL{Path: path}).EscapedPath(), RawQuery: query.Encode()}
	return name.String()
}

// querier is what reads have in common, inside a transaction and outside.
type querier interface {
	QueryRowContext(ctx context.Context, query string, args ...any) *sql.Row
}

// each runs a query and calls do for every row.
func (s *Store) each(ctx context.Context, query string, do func(*sql.Rows) error, args ...any) error {
	rows, err := s.reader.QueryContext(ctx, query, args...)
	if err != nil {
		return err
	}
	defer func() { _ = rows.Close() }() // rows.Err tells
	for rows.Next() {
		err = do(rows)
		if err != nil {
			return err
		}
	}
	return rows.Err()
}

// write runs do in one transaction and commits it. A caller who has gone away
// before it starts leaves nothing behind; one who goes away later does not
// stop it, so that nothing is ever half done.
func write[T any](ctx context.Context, s *Store, do func(context.Context, *sql.Tx) (T, error)) (T, error) {
	var none T
	if err := ctx.Err(); err != nil {
		return none, err
	}
	ctx = context.WithoutCancel(ctx)
	tx, err := s.writer.BeginTx(ctx, nil)
	if err != nil {
		return none, err
	}
	defer func() { _ = tx.Rollback() }() // after a commit this does nothing
	result, err := do(ctx, tx)
	if err != nil {
		return none, err
	}
	if err := tx.Commit(); err != nil {
		return none, err
	}
	return result, nil
}

// change runs one statement that must reach a row, and returns ErrNotFound
// where it reaches none.
func change(ctx context.Context, tx *sql.Tx, statement string, args ...any) error {
	result, err := tx.ExecContext(ctx, statement, args...)
	if err != nil {
		return err
	}
	reached, err := result.RowsAffected()
	if err != nil {
		return err
	}
	if reached == 0 {
		return ErrNotFound
	}
	return nil
}

// stamp is the time of a change, as the tables hold it.
func (s *Store) stamp() int64 { return s.now().UnixMilli() }
