package store

import (
	"context"
	"database/sql"
	"encoding/json"
	"errors"
	"time"
)

// Summary is what the shelf shows of a build and finds it by. The caller draws
// it from the document and gives both together.
type Summary struct {
	Title   string
	Client  string
	Site    string
	Tags    []string
	Search  string // more words to find the build by, such as "white-2835 bc547b"
	Verdict string // "pass", "tight", "unknown", "fail", or "" when it could not be checked
	Card    []byte // the shelf's small picture as UTF-8 text, opaque here
}

// Build is one job with its current document.
type Build struct {
	ID       int64
	Revision int64  // grows by one with each save, undo and redo
	Document []byte // byte for byte as it was saved; nil in a list
	Summary  Summary
	Created  time.Time // UTC, to the millisecond, like every time here
	Updated  time.Time // when the current revision was made
	CanUndo  bool
	CanRedo  bool
}

// CreateBuild puts a new build on the shelf, at revision 1.
func (s *Store) CreateBuild(ctx context.Context, document []byte, sum Summary) (b Build, err error) {
	defer wrap(&err, "create build")
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Build, error) {
		return s.createBuild(ctx, tx, document, sum)
	})
}

// CopyBuild puts a new build on the shelf that starts from build id, under
// another title; document is the copy's, with that title in it. The history
// stays with the original. ErrNotFound when there is no build id.
func (s *Store) CopyBuild(ctx context.Context, id int64, title string, document []byte, sum Summary) (b Build, err error) {
	defer wrap(&err, "copy build %d", id)
	sum.Title = title
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Build, error) {
		if _, err := build(ctx, tx, id); err != nil {
			return Build{}, err
		}
		return s.createBuild(ctx, tx, document, sum)
	})
}

// Build returns the build with its current document, or ErrNotFound.
func (s *Store) Build(ctx context.Context, id int64) (b Build, err error) {
	defer wrap(&err, "load build %d", id)
	return build(ctx, s.reader, id)
}

// SaveBuild makes document the build's next revision. It writes nothing and
// returns a *Stale when ifRevision is no longer the current one. What had been
// undone can no longer be redone, but stays in the history.
func (s *Store) SaveBuild(ctx context.Context, id, ifRevision int64, document []byte, sum Summary) (b Build, err error) {
	defer wrap(&err, "save build %d", id)
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Build, error) {
		here, err := lineOf(ctx, tx, id, ifRevision)
		if err != nil {
			return Build{}, err
		}
		return s.addRevision(ctx, tx, id, revision{
			number: ifRevision + 1, at: s.stamp(), act: "edit", line: here.edited(s.remember),
			document: document, summary: sum,
		})
	})
}

// DeleteBuild puts the build into the bin, where it stays for thirty days.
func (s *Store) DeleteBuild(ctx context.Context, id int64) (err error) {
	defer wrap(&err, "delete build %d", id)
	_, err = write(ctx, s, func(ctx context.Context, tx *sql.Tx) (struct{}, error) {
		return struct{}{}, change(ctx, tx, `
			UPDATE builds SET deleted_at = ? WHERE id = ? AND deleted_at IS NULL`, s.stamp(), id)
	})
	return err
}

// RestoreBuild brings the build back from the bin as it was, history and all.
// One that is on the shelf stays there.
func (s *Store) RestoreBuild(ctx context.Context, id int64) (b Build, err error) {
	defer wrap(&err, "restore build %d", id)
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Build, error) {
		err := change(ctx, tx, `UPDATE builds SET deleted_at = NULL WHERE id = ?`, id)
		if err != nil {
			return Build{}, err
		}
		return build(ctx, tx, id)
	})
}

func (s *Store) createBuild(ctx context.Context, tx *sql.Tx, document []byte, sum Summary) (Build, error) {
	now := s.stamp()
	// A row to hang the first revision on, which then fills it.
	result, err := tx.ExecContext(ctx, `
		INSERT INTO builds (revision, step, first_step, last_step, created, updated,
			folded, title, client, site, tags, verdict, card)
		VALUES (1, 0, 0, 0, ?, ?, '', '', '', '', '[]', '', '')`, now, now)
	if err != nil {
		return Build{}, err
	}
	id, err := result.LastInsertId()
	if err != nil {
		return Build{}, err
	}
	return s.addRevision(ctx, tx, id, revision{number: 1, at: now, act: "edit", document: document, summary: sum})
}

// build loads a build that is not in the bin.
func build(ctx context.Context, from querier, id int64) (Build, error) {
	var b Build
	var created, updated int64
	var tags string
	err := from.QueryRowContext(ctx, `
		SELECT b.id, b.revision, b.created, b.updated, b.step > b.first_step, b.step < b.last_step,
			r.title, r.client, r.site, r.tags, r.search, r.verdict, r.card, r.document
		FROM builds AS b
		JOIN revisions AS r ON r.build = b.id AND r.number = b.revision
		WHERE b.id = ? AND b.deleted_at IS NULL`, id).
		Scan(&b.ID, &b.Revision, &created, &updated, &b.CanUndo, &b.CanRedo,
			&b.Summary.Title, &b.Summary.Client, &b.Summary.Site, &tags,
			&b.Summary.Search, &b.Summary.Verdict, &b.Summary.Card, &b.Document)
	if errors.Is(err, sql.ErrNoRows) {
		return Build{}, ErrNotFound
	}
	if err != nil {
		return Build{}, err
	}
	b.Created, b.Updated = moment(created), moment(updated)
	return b, json.Unmarshal([]byte(tags), &b.Summary.Tags)
}

func moment(stamp int64) time.Time { return time.UnixMilli(stamp).UTC() }

// tagsText is the column form of tags. No tags are an empty list, not null.
func tagsText(tags []string) (string, error) {
	if tags == nil {
		tags = []string{}
	}
	text, err := json.Marshal(tags)
	return string(text), err
}
