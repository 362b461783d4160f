package main

import (
	"context"
	"errors"
	"strconv"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

// stale handles a post from a page that stands on an older revision: another
// tab or program was faster. Nothing is kept before the person has chosen.
func (e *buildEdit) stale(ctx context.Context, revision string) error {
	old, err := e.base(ctx, revision)
	if err != nil {
		return err
	}
	b, report, _, err := examine(old.Document)
	if err != nil {
		return err
	}
	mine, theirs := web.NewBuildForm(b, nil), web.NewBuildForm(e.page.b, nil)
	whole := mine.Shape() != theirs.Shape()
	if e.posted.Get("resolve") == "mine" && e.posted.Get("theirs") == strconv.FormatInt(e.page.kept.Revision, 10) {
		return e.onTop(ctx, old, b, whole)
	}
	conflict := &web.ConflictView{
		Theirs: strconv.FormatInt(e.page.kept.Revision, 10), Whole: whole, Reload: e.page.address(),
		Rows: differences(mine, theirs, e.texts),
	}
	drawer, err := e.s.stock(ctx)
	if err != nil {
		return err
	}
	e.page = buildPage{kept: old, b: b, report: report, drawer: drawer, corner: e.page.corner, open: e.page.open, conflict: conflict}
	return nil
}

// base is the build at the revision that a page stands on. One that the store
// no longer has is taken for the present one: every field that differs then
// counts as this page's edit.
func (e *buildEdit) base(ctx context.Context, revision string) (store.Build, error) {
	old := e.page.kept
	number, _ := strconv.ParseInt(revision, 10, 64) // what is no number is 0, which no revision has
	document, err := e.s.store.Revision(ctx, old.ID, number)
	if errors.Is(err, store.ErrNotFound) {
		return old, nil
	}
	if err != nil {
		return old, err
	}
	old.Revision, old.Document = number, document
	return old, nil
}

// differences lists the fields of which one side at least has made something
// else since.
func differences(before, theirs web.BuildForm, mine formText) []web.ConflictRow {
	now := map[string]*web.Entry{}
	for _, e := range theirs.Entries() {
		now[e.Name] = e
	}
	var rows []web.ConflictRow
	for _, e := range before.Entries() {
		row := web.ConflictRow{Where: e.Where, Label: e.Label, Before: shown(e, e.Kept), Mine: shown(e, e.Kept), Theirs: "gone"}
		if mine.changed(e) {
			row.Mine = shown(e, mine[e.Name])
		}
		if other := now[e.Name]; other != nil {
			row.Theirs = shown(other, other.Kept)
			delete(now, e.Name)
		}
		if row.Theirs != row.Before || row.Mine != row.Before {
			rows = append(rows, row)
		}
	}
	for _, e := range theirs.Entries() { // in the order of the page
		if now[e.Name] != nil {
			rows = append(rows, web.ConflictRow{Where: e.Where, Label: e.Label, Before: "none", Theirs: shown(e, e.Kept), Mine: "none"})
		}
	}
	return rows
}

// shown is a field's text as a person knows it: for a list its words.
func shown(e *web.Entry, text string) string {
	for _, g := range e.Groups {
		for _, o := range g.Options {
			if o.Value == text {
				return o.Text
			}
		}
	}
	if text == "" {
		return "empty"
	}
	return text
}

// onTop keeps this page's edits on top of theirs: field by field, or, where
// rows came or went there, the page as a whole; theirs is one Undo away.
func (e *buildEdit) onTop(ctx context.Context, old store.Build, b calc.Build, whole bool) error {
	e.anew, e.button = true, ""
	for _, entry := range web.NewBuildForm(b, nil).Entries() {
		if !e.texts.changed(entry) {
			delete(e.texts, entry.Name)
		}
	}
	if whole {
		d, err := replaced(e.page.kept.Document, old.Document)
		if err != nil {
			return err
		}
		if err := e.change(ctx, d); err != nil {
			return err
		}
	}
	return e.keep(ctx)
}

// replaced is a draft that makes of one document another, key by key.
func replaced(document, by []byte) (*draft, error) {
	d, err := newDraft(document)
	if err != nil {
		return nil, err
	}
	tree, err := decodeTree(by)
	if err != nil {
		return nil, err
	}
	wanted, _ := tree.(map[string]any)
	has, _ := d.tree.(map[string]any)
	for _, key := range sortedKeys(has) {
		if _, stays := wanted[key]; !stays {
			if err := d.remove("/" + pointerEscape(key)); err != nil {
				return nil, err
			}
		}
	}
	for _, key := range sortedKeys(wanted) {
		if err := d.set("/"+pointerEscape(key), wanted[key]); err != nil {
			return nil, err
		}
	}
	return d, nil
}
