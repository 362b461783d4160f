package store

import (
	"context"
	"database/sql"
	"time"
)

// binKeeps is how long what was deleted can still be restored.
const binKeeps = 30 * 24 * time.Hour

// emptyBin deletes for good what has been in the bin for longer than binKeeps;
// revisions go with their build.
func (s *Store) emptyBin(ctx context.Context) error {
	oldest := s.now().Add(-binKeeps).UnixMilli()
	_, err := write(ctx, s, func(ctx context.Context, tx *sql.Tx) (struct{}, error) {
		_, err := tx.ExecContext(ctx, `DELETE FROM builds WHERE deleted_at < ?`, oldest)
		if err != nil {
			return struct{}{}, err
		}
		_, err = tx.ExecContext(ctx, `DELETE FROM parts WHERE deleted_at < ?`, oldest)
		return struct{}{}, err
	})
	return err
}

// Empty reports whether no build and no part was ever made, as on a first
// start. It stays false when all of them are deleted again.
func (s *Store) Empty(ctx context.Context) (empty bool, err error) {
	defer wrap(&err, "look for a first start")
	err = s.reader.QueryRowContext(ctx, `
		SELECT NOT EXISTS (
			SELECT 1 FROM sqlite_sequence WHERE name IN ('builds', 'parts') AND seq > 0)`).Scan(&empty)
	return empty, err
}
