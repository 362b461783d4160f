package store

import (
	"context"
	"database/sql"
	"encoding/binary"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// applicationID is how our files are told from other SQLite files: the letters
// "Lntb" in the header's application_id.
const applicationID = 0x4c6e7462

// The parts of a SQLite file's header that tell whose it is.
// Source: "Database File Format", section 1.3, sqlite.org/fileformat2.html.
const (
	headerSize          = 100
	headerMagic         = "SQLite format 3\x00"
	headerApplicationID = 68 // offset of a big-endian 32-bit number
)

// inspect returns the schema number of the file at path, 0 for one that is
// missing or empty. It changes nothing at all, since the file may be anybody's:
// it reads the header itself and lets SQLite near only what bears our mark.
func inspect(ctx context.Context, path string) (int64, error) {
	info, err := os.Stat(path)
	if errors.Is(err, fs.ErrNotExist) {
		return 0, nil
	}
	if err != nil {
		return 0, err
	}
	if !info.Mode().IsRegular() {
		return 0, ErrNotOurs
	}
	if info.Size() == 0 {
		return 0, nil // a first start that was cut short leaves this
	}
	ours, err := bearsOurMark(path)
	if err != nil {
		return 0, err
	}
	if !ours {
		return 0, ErrNotOurs
	}
	return schemaNumber(ctx, path)
}

func bearsOurMark(path string) (bool, error) {
	file, err := os.Open(path) // #nosec G304 -- the user names the data file
	if err != nil {
		return false, err
	}
	defer func() { _ = file.Close() }() // only read
	header := make([]byte, headerSize)
	if _, err := io.ReadFull(file, header); errors.Is(err, io.ErrUnexpectedEOF) {
		return false, nil
	} else if err != nil {
		return false, err
	}
	return string(header[:len(headerMagic)]) == headerMagic &&
		binary.BigEndian.Uint32(header[headerApplicationID:]) == applicationID, nil
}

// schemaNumber asks the file for the last migration it has seen.
func schemaNumber(ctx context.Context, path string) (number int64, err error) {
	var settings []string
	switch {
	case exists(path + "-journal"):
		// A first start was cut short - later there is a write-ahead log
		// instead - and SQLite must undo what was half written to tell.
	case exists(path + "-wal"):
		settings = []string{"mode", "ro"}
	default:
		// Nobody has the file open. A mere "ro" would leave two new files
		// beside it.
		settings = []string{"mode", "ro", "immutable", "1"}
	}
	db, err := sql.Open("sqlite3", dsn(path, settings...))
	if err != nil {
		return 0, err
	}
	defer func() { err = errors.Join(err, db.Close()) }()
	var begun bool
	err = db.QueryRowContext(ctx, `
		SELECT EXISTS (SELECT 1 FROM sqlite_schema WHERE name = 'goose_db_version')`).Scan(&begun)
	if err != nil || !begun {
		return 0, err
	}
	err = db.QueryRowContext(ctx, `
		SELECT coalesce(max(version_id), 0) FROM goose_db_version WHERE is_applied`).Scan(&number)
	return number, err
}

func exists(path string) bool {
	_, err := os.Lstat(path)
	return err == nil
}

// makeWritable sees to it that the folder and the file exist and can be
// written, so that whoever may not write hears it in the operating system's
// words. The folder must be writable too: SQLite keeps its log beside the file.
// Both are for their owner alone.
func makeWritable(path string) error {
	folder := filepath.Dir(path)
	if err := os.MkdirAll(folder, 0o700); err != nil {
		return err
	}
	file, err := os.OpenFile(path, os.O_RDWR|os.O_CREATE, 0o600) // #nosec G304 -- the user names the data file
	if err != nil {
		return err
	}
	err = file.Close()
	if err != nil {
		return err
	}
	probe, err := os.CreateTemp(folder, filepath.Base(path)+".probe-*")
	if err != nil {
		return err
	}
	return errors.Join(probe.Close(), os.Remove(probe.Name()))
}
