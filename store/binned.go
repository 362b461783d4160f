package store

import (
	"context"
	"database/sql"
	"time"
)

// Binned is what lies in the bin and can be restored, the last deleted first.
type Binned struct {
	Builds []BinnedBuild
	Parts  []BinnedPart
}

// BinnedBuild is a deleted build.
type BinnedBuild struct {
	ID                  int64
	Title, Client, Site string
	Deleted             time.Time
}

// BinnedPart is a deleted part. Of several with one key only that one is
// listed which RestorePart would bring back.
type BinnedPart struct {
	Key, Type, Name string
	Deleted         time.Time
}

// Binned lists the bin.
func (s *Store) Binned(ctx context.Context) (bin Binned, err error) {
	defer wrap(&err, "list the bin")
	err = s.each(ctx, `
		SELECT id, title, client, site, deleted_at
		FROM builds WHERE deleted_at IS NOT NULL
		ORDER BY deleted_at DESC, id DESC`, func(rows *sql.Rows) error {
		var b BinnedBuild
		var deleted int64
		failed := rows.Scan(&b.ID, &b.Title, &b.Client, &b.Site, &deleted)
		b.Deleted = moment(deleted)
		bin.Builds = append(bin.Builds, b)
		return failed
	})
	if err != nil {
		return Binned{}, err
	}
	err = s.each(ctx, `
		SELECT key, type, name, deleted_at
		FROM parts AS p
		WHERE deleted_at IS NOT NULL AND NOT EXISTS (
			SELECT 1 FROM parts AS later
			WHERE later.key = p.key AND (later.deleted_at, later.id) > (p.deleted_at, p.id))
		ORDER BY deleted_at DESC, id DESC`, func(rows *sql.Rows) error {
		var p BinnedPart
		var deleted int64
		failed := rows.Scan(&p.Key, &p.Type, &p.Name, &deleted)
		p.Deleted = moment(deleted)
		bin.Parts = append(bin.Parts, p)
		return failed
	})
	if err != nil {
		return Binned{}, err
	}
	return bin, nil
}
