package store

import (
	"context"
	"database/sql"
	"encoding/json"
	"errors"
	"slices"
	"time"
)

// RevisionInfo is one entry of a build's history, without the document.
type RevisionInfo struct {
	Number  int64
	At      time.Time
	Act     string // "edit", "undo" or "redo": how it came about
	Kept    bool   // stays for ever
	Note    string // why it is kept
	Title   string
	Verdict string
}

// line is the row of states that undo and redo walk along, as an editor has
// it: a place in it and its two ends. Each state is held by one revision, which
// bears the state's step. It is never longer than what is remembered, since only
// an edit makes it longer and cuts it at the far end.
type line struct {
	at, first, last int64
}

// edited is the line after an edit: one step on, and nothing to redo.
func (l line) edited(remember int64) line {
	at := l.at + 1
	return line{at: at, first: max(l.first, at-remember+1), last: at}
}

// moved is the line after a step back (by -1) or forward (by 1) to a state that
// it holds already; false when it ends there.
func (l line) moved(by int64) (line, bool) {
	l.at += by
	return l, l.first <= l.at && l.at <= l.last
}

// revision is one about to be written.
type revision struct {
	number   int64
	at       int64 // [ms] since 1970
	act      string
	line     line // with the new revision at its place
	document []byte
	summary  Summary
}

// Undo makes the state before the current one current again. That is a save of
// its own: the revision number grows, *Stale guards it like any other. It
// returns ErrNothing when there is no state to go back to.
func (s *Store) Undo(ctx context.Context, id, ifRevision int64) (b Build, err error) {
	defer wrap(&err, "undo in build %d", id)
	return s.move(ctx, id, ifRevision, "undo", -1)
}

// Redo takes back an undo, in the same way. It returns ErrNothing when nothing
// was undone since the last edit.
func (s *Store) Redo(ctx context.Context, id, ifRevision int64) (b Build, err error) {
	defer wrap(&err, "redo in build %d", id)
	return s.move(ctx, id, ifRevision, "redo", 1)
}

func (s *Store) move(ctx context.Context, id, ifRevision int64, act string, by int64) (Build, error) {
	return write(ctx, s, func(ctx context.Context, tx *sql.Tx) (Build, error) {
		here, err := lineOf(ctx, tx, id, ifRevision)
		if err != nil {
			return Build{}, err
		}
		there, ok := here.moved(by)
		if !ok {
			return Build{}, ErrNothing
		}
		next := revision{number: ifRevision + 1, at: s.stamp(), act: act, line: there}
		var tags string
		err = tx.QueryRowContext(ctx, `
			SELECT document, title, client, site, tags, search, verdict, card
			FROM revisions WHERE build = ? AND step = ?`, id, there.at).
			Scan(&next.document, &next.summary.Title, &next.summary.Client, &next.summary.Site, &tags,
				&next.summary.Search, &next.summary.Verdict, &next.summary.Card)
		if err != nil {
			return Build{}, err
		}
		if err := json.Unmarshal([]byte(tags), &next.summary.Tags); err != nil {
			return Build{}, err
		}
		return s.addRevision(ctx, tx, id, next)
	})
}

// Revision returns the document of one revision, byte for byte as it was saved.
// ErrNotFound when it was never made, or pruned.
func (s *Store) Revision(ctx context.Context, id, number int64) (document []byte, err error) {
	defer wrap(&err, "load revision %d of build %d", number, id)
	err = s.reader.QueryRowContext(ctx, `
		SELECT r.document
		FROM revisions AS r JOIN builds AS b ON b.id = r.build
		WHERE r.build = ? AND r.number = ? AND b.deleted_at IS NULL`, id, number).Scan(&document)
	if errors.Is(err, sql.ErrNoRows) {
		return nil, ErrNotFound
	}
	return document, err
}

// Revisions returns the history of a build, newest first. The last hundred
// revisions are in it, every kept one, and those that undo and redo can reach.
func (s *Store) Revisions(ctx context.Context, id int64) (history []RevisionInfo, err error) {
	defer wrap(&err, "list revisions of build %d", id)
	err = s.each(ctx, `
		SELECT r.number, r.at, r.act, r.kept, r.note, r.title, r.verdict
		FROM revisions AS r JOIN builds AS b ON b.id = r.build
		WHERE r.build = ? AND b.deleted_at IS NULL
		ORDER BY r.number DESC`, func(rows *sql.Rows) error {
		var entry RevisionInfo
		var at int64
		failed := rows.Scan(&entry.Number, &at, &entry.Act, &entry.Kept, &entry.Note, &entry.Title, &entry.Verdict)
		entry.At = moment(at)
		history = append(history, entry)
		return failed
	}, id)
	if err != nil {
		return nil, err
	}
	if len(history) == 0 {
		return nil, ErrNotFound // a build always has its current revision
	}
	return history, nil
}

// KeepRevision marks a revision to stay for ever, with a note why, or lets it
// go again; the note goes with the mark. It makes no revision.
func (s *Store) KeepRevision(ctx context.Context, id, number int64, keep bool, note string) (err error) {
	defer wrap(&err, "keep revision %d of build %d", number, id)
	if !keep {
		note = ""
	}
	_, err = write(ctx, s, func(ctx context.Context, tx *sql.Tx) (struct{}, error) {
		return struct{}{}, change(ctx, tx, `
			UPDATE revisions SET kept = :kept, note = :note
			WHERE build = :build AND number = :number
				AND EXISTS (SELECT 1 FROM builds WHERE id = :build AND deleted_at IS NULL)`,
			sql.Named("kept", keep),
			sql.Named("note", note),
			sql.Named("build", id),
			sql.Named("number", number))
	})
	return err
}

// lineOf returns the undo line of a build, provided that ifRevision is its
// current revision.
func lineOf(ctx context.Context, tx *sql.Tx, id, ifRevision int64) (line, error) {
	var l line
	var current int64
	err := tx.QueryRowContext(ctx, `
		SELECT revision, step, first_step, last_step
		FROM builds WHERE id = ? AND deleted_at IS NULL`, id).Scan(&current, &l.at, &l.first, &l.last)
	if errors.Is(err, sql.ErrNoRows) {
		return line{}, ErrNotFound
	}
	if err != nil {
		return line{}, err
	}
	if current != ifRevision {
		return line{}, &Stale{Have: current}
	}
	return l, nil
}

// addRevision writes r as the current revision of build id, and prunes.
func (s *Store) addRevision(ctx context.Context, tx *sql.Tx, id int64, r revision) (Build, error) {
	// The revisions that leave the line: the one whose state r now holds, the
	// states that an edit made unreachable, and those too far away.
	_, err := tx.ExecContext(ctx, `
		UPDATE revisions SET step = NULL
		WHERE build = :build AND step IS NOT NULL AND (step = :at OR step < :first OR step > :last)`,
		sql.Named("build", id),
		sql.Named("at", r.line.at),
		sql.Named("first", r.line.first),
		sql.Named("last", r.line.last))
	if err != nil {
		return Build{}, err
	}
	err = insertRevision(ctx, tx, id, r)
	if err != nil {
		return Build{}, err
	}
	_, err = tx.ExecContext(ctx, `
		DELETE FROM revisions
		WHERE build = ? AND number <= ? AND kept = 0 AND step IS NULL`, id, r.number-s.remember)
	if err != nil {
		return Build{}, err
	}
	return build(ctx, tx, id)
}

// insertRevision writes the row, and what the shelf needs of it to the build.
func insertRevision(ctx context.Context, tx *sql.Tx, id int64, r revision) error {
	tags, err := tagsText(r.summary.Tags)
	if err != nil {
		return err
	}
	shown := []any{
		sql.Named("build", id),
		sql.Named("number", r.number),
		sql.Named("step", r.line.at),
		sql.Named("at", r.at),
		sql.Named("title", r.summary.Title),
		sql.Named("client", r.summary.Client),
		sql.Named("site", r.summary.Site),
		sql.Named("tags", tags),
		sql.Named("verdict", r.summary.Verdict),
		sql.Named("card", string(r.summary.Card)),
	}
	_, err = tx.ExecContext(ctx, `
		INSERT INTO revisions (build, number, at, act, step,
			title, client, site, tags, search, verdict, card, document)
		VALUES (:build, :number, :at, :act, :step,
			:title, :client, :site, :tags, :search, :verdict, :card, :document)`,
		slices.Concat(shown, []any{
			sql.Named("act", r.act),
			sql.Named("search", r.summary.Search),
			sql.Named("document", string(r.document)),
		})...)
	if err != nil {
		return err
	}
	return change(ctx, tx, `
		UPDATE builds SET revision = :number, step = :step, first_step = :first, last_step = :last,
			updated = :at, folded = :folded, title = :title, client = :client, site = :site,
			tags = :tags, verdict = :verdict, card = :card
		WHERE id = :build`,
		slices.Concat(shown, []any{
			sql.Named("first", r.line.first),
			sql.Named("last", r.line.last),
			sql.Named("folded", folded(r.summary)),
		})...)
}
