package store

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"github.com/mattn/go-sqlite3"
)

// busyPause is the wait before a copy is tried again that found the file locked.
const busyPause = 10 * time.Millisecond

// Backup writes a copy of the whole store, as it is at one moment, to a new
// file at path; Open opens it. Writers go on meanwhile. The file appears under
// its name only when it is whole and on disk. It returns fs.ErrExist when
// there is something at path, which it never overwrites.
func (s *Store) Backup(ctx context.Context, path string) (err error) {
	defer wrap(&err, "back up to %s", path)
	path, err = filepath.Abs(path)
	if err != nil {
		return err
	}
	conn, err := s.reader.Conn(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = conn.Close() }() // only hands it back
	return copyFile(ctx, conn, path)
}

// copyFile copies what source has open to a new file at path.
func copyFile(ctx context.Context, source *sql.Conn, path string) error {
	if exists(path) {
		return &fs.PathError{Op: "create", Path: path, Err: fs.ErrExist} // before the long work
	}
	temporary, err := os.CreateTemp(filepath.Dir(path), filepath.Base(path)+".part-*")
	if err != nil {
		return err
	}
	err = temporary.Close()
	if err == nil {
		err = fill(ctx, temporary.Name(), source)
	}
	if err == nil {
		err = publish(temporary.Name(), path)
	}
	if err != nil {
		_ = os.Remove(temporary.Name()) // the first error is the one to tell
	}
	return err
}

// fill copies what source has open into the empty file at path.
func fill(ctx context.Context, path string, source *sql.Conn) (err error) {
	db, err := sql.Open("sqlite3", dsn(path, "_synchronous", "FULL"))
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, db.Close()) }()
	conn, err := db.Conn(ctx)
	if err != nil {
		return err
	}
	defer func() { _ = conn.Close() }() // only hands it back
	return copyPages(ctx, conn, source)
}

// copyPages overwrites the database open on to with that open on from, by
// SQLite's online backup. All pages go in one step: a copy in several starts
// over at each write of somebody else.
func copyPages(ctx context.Context, to, from *sql.Conn) error {
	return raw(to, func(target *sqlite3.SQLiteConn) error {
		return raw(from, func(source *sqlite3.SQLiteConn) error {
			backup, err := target.Backup("main", source, "main")
			if err != nil {
				return err
			}
			err = step(ctx, backup)
			if finish := backup.Finish(); err == nil { // otherwise it only says the same again
				err = finish
			}
			return err
		})
	})
}

func step(ctx context.Context, backup *sqlite3.SQLiteBackup) error {
	for {
		done, err := backup.Step(-1)
		if done || err != nil {
			return err
		}
		select { // neither done nor an error: somebody holds a lock
		case <-ctx.Done():
			return ctx.Err()
		case <-time.After(busyPause):
		}
	}
}

func raw(conn *sql.Conn, do func(*sqlite3.SQLiteConn) error) error {
	return conn.Raw(func(driver any) error {
		sqlite, ok := driver.(*sqlite3.SQLiteConn)
		if !ok {
			return fmt.Errorf("a %T is no SQLite connection", driver)
		}
		return do(sqlite)
	})
}

// publish gives the finished file its name, and sees the name to disk. The name
// is claimed first, so that two copies at once cannot take the same; a rename
// alone would overwrite, and a hard link does not work on every memory stick.
func publish(temporary, path string) error {
	claim, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600) // #nosec G304 -- the user names the file
	if err != nil {
		return err
	}
	err = errors.Join(claim.Close(), os.Rename(temporary, path))
	if err != nil {
		return errors.Join(err, os.Remove(path))
	}
	folder, err := os.Open(filepath.Dir(path))
	if err != nil {
		return err
	}
	return errors.Join(folder.Sync(), folder.Close())
}
