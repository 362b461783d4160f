package store

import (
	"context"
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
	"time"

	"github.com/mattn/go-sqlite3"
)

// Part is one part of the drawer.
type Part struct {
	Key      string // what builds call it, such as "bc547b"
	Type     string // from the document, such as "npn"
	Name     string // from the document, "" when it has none
	Document []byte // the part's JSON, byte for byte as it was saved
	Updated  time.Time
}

// Parts returns the parts of one type, of every type when typ is "", by type,
// then name, then key.
func (s *Store) Parts(ctx context.Context, typ string) (parts []Part, err error) {
	defer wrap(&err, "list parts")
	err = s.each(ctx, `
		SELECT key, type, name, document, updated
		FROM parts
		WHERE deleted_at IS NULL AND (type = :type OR :type = '')
		ORDER BY type, name COLLATE NOCASE, key`, func(rows *sql.Rows) error {
		p, failed := scanPart(rows.Scan)
		parts = append(parts, p)
		return failed
	}, sql.Named("type", typ))
	if err != nil {
		return nil, err
	}
	return parts, nil
}

// Part returns the part of that key, or ErrNotFound.
func (s *Store) Part(ctx context.Context, key string) (p Part, err error) {
	defer wrap(&err, "load part %q", key)
	return part(ctx, s.reader, key)
}

// CreatePart puts a new part into the drawer. The document must be a JSON
// object that names its "type". A *KeyTaken when the drawer holds the key
// already; a part in the bin does not count.
func (s *Store) CreatePart(ctx context.Context, key string, document []byte) (p Part, err error) {
	defer wrap(&err, "create part %q", key)
	label, err := labelOf(document)
	if err != nil {
		return Part{}, err
	}
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Part, error) {
		_, err := tx.ExecContext(ctx, `
			INSERT INTO parts (key, type, name, document, created, updated)
			VALUES (:key, :type, :name, :document, :now, :now)`,
			sql.Named("key", key),
			sql.Named("type", label.Type),
			sql.Named("name", label.Name),
			sql.Named("document", string(document)),
			sql.Named("now", s.stamp()))
		if err != nil {
			return Part{}, keyTaken(err, key)
		}
		return part(ctx, tx, key)
	})
}

// SavePart gives a part of the drawer a new document, or returns ErrNotFound.
// Builds that use the part keep their own copies.
func (s *Store) SavePart(ctx context.Context, key string, document []byte) (p Part, err error) {
	defer wrap(&err, "save part %q", key)
	label, err := labelOf(document)
	if err != nil {
		return Part{}, err
	}
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Part, error) {
		err := change(ctx, tx, `
			UPDATE parts SET type = :type, name = :name, document = :document, updated = :now
			WHERE key = :key AND deleted_at IS NULL`,
			sql.Named("key", key),
			sql.Named("type", label.Type),
			sql.Named("name", label.Name),
			sql.Named("document", string(document)),
			sql.Named("now", s.stamp()))
		if err != nil {
			return Part{}, err
		}
		return part(ctx, tx, key)
	})
}

// DeletePart puts the part into the bin, where it stays for thirty days. Its
// key is free at once.
func (s *Store) DeletePart(ctx context.Context, key string) (err error) {
	defer wrap(&err, "delete part %q", key)
	_, err = write(ctx, s, func(ctx context.Context, tx *sql.Tx) (struct{}, error) {
		return struct{}{}, change(ctx, tx, `
			UPDATE parts SET deleted_at = ? WHERE key = ? AND deleted_at IS NULL`, s.stamp(), key)
	})
	return err
}

// RestorePart brings back the part of that key which was deleted last. A
// *KeyTaken when the drawer holds another of that key by now; where the bin
// holds none, the part in the drawer stays as it is.
func (s *Store) RestorePart(ctx context.Context, key string) (p Part, err error) {
	defer wrap(&err, "restore part %q", key)
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Part, error) {
		_, err := tx.ExecContext(ctx, `
			UPDATE parts SET deleted_at = NULL
			WHERE id = (
				SELECT id FROM parts WHERE key = ? AND deleted_at IS NOT NULL
				ORDER BY deleted_at DESC, id DESC LIMIT 1)`, key)
		if err != nil {
			return Part{}, keyTaken(err, key)
		}
		return part(ctx, tx, key)
	})
}

// part loads a part that is not in the bin.
func part(ctx context.Context, from querier, key string) (Part, error) {
	p, err := scanPart(from.QueryRowContext(ctx, `
		SELECT key, type, name, document, updated
		FROM parts WHERE key = ? AND deleted_at IS NULL`, key).Scan)
	if errors.Is(err, sql.ErrNoRows) {
		return Part{}, ErrNotFound
	}
	return p, err
}

func scanPart(scan func(...any) error) (Part, error) {
	var p Part
	var updated int64
	if err := scan(&p.Key, &p.Type, &p.Name, &p.Document, &updated); err != nil {
		return Part{}, err
	}
	p.Updated = moment(updated)
	return p, nil
}

// label is what the drawer lists a part by.
type label struct {
	Type string `json:"type"`
	Name string `json:"name"`
}

func labelOf(document []byte) (label, error) {
	var l label
	if err := json.Unmarshal(document, &l); err != nil {
		return label{}, fmt.Errorf("read the part's type and name: %w", err)
	}
	if l.Type == "" {
		return label{}, errors.New("the part does not say its type")
	}
	return l, nil
}

// keyTaken turns the refusal of a unique index into a *KeyTaken.
func keyTaken(err error, key string) error {
	var refused sqlite3.Error
	if errors.As(err, &refused) && refused.ExtendedCode == sqlite3.ErrConstraintUnique {
		return &KeyTaken{Key: key}
	}
	return err
}
