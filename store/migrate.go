package store

import (
	"context"
	"database/sql"
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"slices"

	"github.com/pressly/goose/v3"
)

//go:embed migrations/*.sql
var embedded embed.FS

// versions returns the numbers of the migrations, ascending.
func versions(migrations fs.FS) ([]int64, error) {
	names, err := fs.Glob(migrations, "*.sql")
	if err != nil {
		return nil, err
	}
	var numbers []int64
	for _, name := range names {
		number, err := goose.NumericComponent(name)
		if err != nil {
			return nil, fmt.Errorf("migration %s: %w", name, err)
		}
		numbers = append(numbers, number)
	}
	if len(numbers) == 0 {
		return nil, errors.New("no migrations")
	}
	slices.Sort(numbers)
	return numbers, nil
}

// migrate brings the file from schema number have to the newest of known.
// A file that holds anything is copied first, and gets its old contents back
// when any migration fails, so that the version that made it still opens it.
//
// It works on a connection of its own that nobody can share the file with.
// Foreign keys are off there: a migration rebuilds a table by dropping the old
// one, and with them on that would silently delete every row that refers to it.
// They are checked when all is done.
func migrate(ctx context.Context, path string, have int64, known []int64, migrations fs.FS) (err error) {
	pending := slices.IndexFunc(known, func(number int64) bool { return number > have })
	if pending < 0 {
		return nil
	}
	db, err := sql.Open("sqlite3", dsn(path,
		"_foreign_keys", "off",
		"_synchronous", "FULL",
		"_locking_mode", "EXCLUSIVE",
		"_txlock", "immediate",
	))
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, db.Close()) }()
	db.SetMaxOpenConns(1)
	if have == 0 {
		// The mark is the first thing ever written, so that a start cut short
		// leaves either an empty file or one that we know again.
		_, err = db.ExecContext(ctx, fmt.Sprintf("PRAGMA application_id = %d", applicationID))
		if err != nil {
			return err
		}
		return up(ctx, db, migrations)
	}
	copied, err := copyBefore(ctx, db, path, known[pending])
	if err != nil {
		return err
	}
	err = up(ctx, db, migrations)
	if err != nil {
		return errors.Join(err, putBack(context.WithoutCancel(ctx), db, copied))
	}
	return nil
}

// up runs the pending migrations, each in a transaction of its own.
func up(ctx context.Context, db *sql.DB, migrations fs.FS) error {
	runner, err := goose.NewProvider(goose.DialectSQLite3, db, migrations, goose.WithDisableGlobalRegistry(true))
	if err != nil {
		return err
	}
	if _, err := runner.Up(ctx); err != nil {
		return err
	}
	return checkForeignKeys(ctx, db)
}

func checkForeignKeys(ctx context.Context, db *sql.DB) error {
	var table string
	var broken int64
	err := db.QueryRowContext(ctx, `
		SELECT "table", count(*) OVER () FROM pragma_foreign_key_check LIMIT 1`).Scan(&table, &broken)
	if errors.Is(err, sql.ErrNoRows) {
		return nil
	}
	if err != nil {
		return err
	}
	return fmt.Errorf("%d rows, the first in table %s, refer to rows that are gone", broken, table)
}

// copyBefore copies the file to path.before-NNNN and returns that name. It
// never replaces an earlier copy, but counts on: path.before-NNNN-2.
func copyBefore(ctx context.Context, db *sql.DB, path string, migration int64) (string, error) {
	conn, err := db.Conn(ctx)
	if err != nil {
		return "", err
	}
	defer func() { _ = conn.Close() }() // only hands it back
	name := fmt.Sprintf("%s.before-%04d", path, migration)
	for i := 1; ; i++ {
		target := name
		if i > 1 {
			target = fmt.Sprintf("%s-%d", name, i)
		}
		err := copyFile(ctx, conn, target)
		if !errors.Is(err, fs.ErrExist) {
			return target, err
		}
	}
}

// putBack overwrites the open file with the copy made of it.
func putBack(ctx context.Context, db *sql.DB, copied string) (err error) {
	source, err := sql.Open("sqlite3", dsn(copied, "mode", "ro", "immutable", "1"))
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, source.Close()) }()
	from, err := source.Conn(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = from.Close() }() // only hands it back
	to, err := db.Conn(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = to.Close() }() // only hands it back
	return copyPages(ctx, to, from)
}
