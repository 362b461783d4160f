package main

import (
	"context"
	"errors"
	"maps"
	"net/http"
	"net/url"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

// editBuild: POST /builds/{id}. What of the form is right is kept, even where
// other fields are wrong; then what the pressed button asks for is done.
func (s *server) editBuild(w http.ResponseWriter, r *http.Request) error {
	return s.edit(w, r, "")
}

// doOnBuild: POST /builds/{id}/undo and its like. The form comes along: what
// was typed and not yet kept is kept first.
func (s *server) doOnBuild(what string) routed {
	return func(w http.ResponseWriter, r *http.Request) error { return s.edit(w, r, what) }
}

func (s *server) edit(w http.ResponseWriter, r *http.Request, what string) error {
	id, err := pathID(r, "id")
	if err != nil {
		return err
	}
	if err = r.ParseForm(); err != nil {
		return err
	}
	kept, err := s.store.Build(r.Context(), id)
	if err != nil {
		return err
	}
	e := newEdit(s, kept, r.PostForm, what)
	if err = e.run(r.Context()); err != nil {
		return err
	}
	return s.answerEdit(w, r, e)
}

// buildEdit is one post of a build's form on its way through.
type buildEdit struct {
	s      *server
	posted url.Values
	texts  formText
	button string // what was pressed: "undo", "redo", "remedy", a command; "" for just keeping the fields
	before string // the lists and fields that the page has, as web.BuildForm.Lists says them
	page   buildPage
	anew   bool // the fields must be drawn anew
}

func newEdit(s *server, kept store.Build, posted url.Values, what string) *buildEdit {
	e := &buildEdit{s: s, posted: posted, texts: readText(posted), button: what}
	e.texts.offered(posted.Get("set"))
	if e.button == "" {
		e.button = posted.Get("do")
	}
	if e.button == "" && posted.Has("remedy") {
		e.button = "remedy"
	}
	e.page = buildPage{kept: kept, corner: posted.Get("shown")}
	if corner := posted.Get("corner"); corner != "" {
		e.page.corner = corner
	}
	e.page.open, _ = strconv.Atoi(posted.Get("open")) // anything else shows the first
	return e
}

// run does what the post asks for.
func (e *buildEdit) run(ctx context.Context) error {
	read, err := calc.Read(e.page.kept.Document)
	if err != nil {
		return err
	}
	e.page.b = read
	form := web.NewBuildForm(read, nil)
	if revision := e.posted.Get("revision"); revision != "" && revision != strconv.FormatInt(e.page.kept.Revision, 10) {
		return e.stale(ctx, revision)
	}
	if shape := e.posted.Get("shape"); shape != "" && shape != form.Shape() {
		// An answer that is still under way has changed which fields there are:
		// these texts belong to other ones.
		e.texts, e.button, e.anew = formText{}, "", true
	}
	var offered []calc.Finding
	if e.button == "remedy" {
		_, report, _, err := examine(e.page.kept.Document)
		if err != nil {
			return err
		}
		offered = report.Findings
	}
	if err := e.keep(ctx); err != nil {
		return err
	}
	switch e.button {
	case "":
		return nil
	case "undo":
		return e.travel(ctx, e.s.store.Undo, "There is nothing to undo.")
	case "redo":
		return e.travel(ctx, e.s.store.Redo, "There is nothing to redo.")
	case "remedy":
		return e.remedy(ctx, offered)
	}
	return e.command(ctx)
}

// keep puts the changed fields into the build. Those that the reader refuses
// are left out, one round after the other, until the rest is taken.
func (e *buildEdit) keep(ctx context.Context) error {
	form, err := e.form(ctx)
	if err != nil {
		return err
	}
	refused := map[string]string{}
	for {
		d, err := newDraft(e.page.kept.Document)
		if err != nil {
			return err
		}
		e.page.faults = e.texts.write(d, form, e.page.b, e.page.drawer, refused)
		maps.Copy(e.page.faults, refused)
		err = e.change(ctx, d)
		var invalid calc.Invalid
		if !errors.As(err, &invalid) {
			return err
		}
		if !refuseFields(refused, invalid, form, e.texts) {
			e.page.notice = "This was not kept: " + invalid.Error()
			return e.change(ctx, &draft{})
		}
	}
}

// form is the build's form before the edit. The drawer is only read where the
// edit may need it: typing into a field does not.
func (e *buildEdit) form(ctx context.Context) (web.BuildForm, error) {
	form := web.NewBuildForm(e.page.b, nil)
	needed := e.button != "" || e.anew || e.posted.Has("resolve")
	for _, entry := range form.Entries() {
		needed = needed || entry.Rebuilds && e.texts.changed(entry)
	}
	if needed {
		var err error
		if e.page.drawer, err = e.s.stock(ctx); err != nil {
			return form, err
		}
		form = web.NewBuildForm(e.page.b, e.page.drawer)
	}
	e.before = form.Lists()
	return form, nil
}

// change keeps a draft.
func (e *buildEdit) change(ctx context.Context, d *draft) error {
	patch, err := d.patch()
	if err != nil {
		return err
	}
	kept, b, report, err := e.s.change(ctx, e.page.kept.ID, e.page.kept.Revision, patch)
	if err != nil {
		return err
	}
	e.page.kept, e.page.b, e.page.report = kept, b, report
	return nil
}

// refuseFields adds to refused the changed fields that the reader's faults are
// about. It returns false when there are none: the faults are then about
// something that no field of this edit can mend.
func refuseFields(refused map[string]string, faults calc.Invalid, form web.BuildForm, texts formText) bool {
	found := false
	for _, fault := range faults {
		at := strings.Replace(fault.At, "/ohms_per_metre", "/conductor", 1)
		for _, entry := range form.Entries() {
			_, already := refused[entry.Name]
			if !already && texts.changed(entry) && about(at, entry.Name) {
				refused[entry.Name], found = fault.Reason, true
			}
		}
	}
	return found
}

// about tells whether a fault at one JSON Pointer is about the value at
// another: at it, in it, or in what holds it.
func about(fault, name string) bool {
	name = strings.TrimSuffix(name, "/kind")
	return fault == name || strings.HasPrefix(fault, name+"/") || fault != "" && strings.HasPrefix(name, fault+"/")
}

// command moves rows about. The texts that were not taken stay with their
// fields wherever those go.
func (e *buildEdit) command(ctx context.Context) error {
	d, err := newDraft(e.page.kept.Document)
	if err != nil {
		return err
	}
	move, err := rowCommand(d, e.button, e.page.b, e.page.drawer)
	if err == nil {
		err = e.change(ctx, d)
	}
	var invalid calc.Invalid
	switch {
	case errors.Is(err, errNoSuchRow):
		e.page.notice = "The build has changed: " + err.Error() + "."
	case errors.As(err, &invalid):
		e.page.notice = "This cannot be done: " + invalid.Error()
	case err != nil:
		return err
	default:
		e.texts, e.page.faults = move.rename(e.texts), move.rename(e.page.faults)
		e.page.open = openAfter(e.button, e.page.open, move, len(e.page.b.Strings))
	}
	e.anew = true
	return nil
}

// openAfter is the string whose fields stand open after a command: the new one,
// or the one before it wherever it went.
func openAfter(button string, open int, move renamed, count int) int {
	verb, at, _ := strings.Cut(button, " ")
	switch verb {
	case "string-add":
		return count - 1
	case "string-copy":
		if row, _, in := inList(at+"/", "/strings"); in {
			return row + 1
		}
	}
	if name, stays := move("/strings/" + strconv.Itoa(open) + "/label"); stays {
		open, _, _ = inList(name, "/strings")
	}
	return open
}

// travel goes one revision back or forth.
func (e *buildEdit) travel(ctx context.Context, where func(context.Context, int64, int64) (store.Build, error), nothing string) error {
	e.anew = true
	kept, err := where(context.WithoutCancel(ctx), e.page.kept.ID, e.page.kept.Revision)
	switch {
	case errors.Is(err, store.ErrNothing):
		e.page.notice = nothing
		return nil
	case err != nil:
		return err
	}
	b, report, _, err := examine(kept.Document)
	if err != nil {
		return err
	}
	e.page.kept, e.page.b, e.page.report = kept, b, report
	return nil
}

// remedy applies an edit that the checks offered. Which one, the page says by
// its place among the findings that it shows; the fields that came along may
// have changed those, so that the ones before them count.
func (e *buildEdit) remedy(ctx context.Context, offered []calc.Finding) error {
	e.anew = true
	remedy := chosen(e.posted.Get("remedy"), offered)
	if remedy == nil {
		e.page.notice = "The checks have changed: look at them again."
		return nil
	}
	err := e.change(ctx, &draft{ops: remedy.Patch})
	if invalid, ok := errors.AsType[calc.Invalid](err); ok {
		e.page.notice = "This cannot be done: " + invalid.Error()
		return nil
	}
	return err
}

// chosen finds a remedy by the place of its finding and its own, "0.2".
func chosen(place string, findings []calc.Finding) *calc.Remedy {
	finding, remedy, _ := strings.Cut(place, ".")
	i, err := strconv.Atoi(finding)
	k, failed := strconv.Atoi(remedy)
	if err != nil || failed != nil || i < 0 || i >= len(findings) || k < 0 || k >= len(findings[i].Remedies) {
		return nil
	}
	return &findings[i].Remedies[k]
}
