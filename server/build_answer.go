package main

import (
	"net/http"

	"lanternbook/web"
)

// answerEdit answers a post of a build's form. A script gets the sections that
// show results; a plain post goes on to the page, unless something typed was
// not taken: then the page stays as it is, with the reasons.
func (s *server) answerEdit(w http.ResponseWriter, r *http.Request, e *buildEdit) error {
	p := &e.page
	if p.conflict != nil {
		p.texts = e.texts
		if fromScript(r) {
			return render(w, r, http.StatusOK, web.BuildStale(s.buildView(*p)))
		}
		return render(w, r, http.StatusConflict, web.BuildPage(s.buildView(*p)))
	}
	if fromScript(r) {
		return s.answerScript(w, r, e)
	}
	if len(p.faults) == 0 && p.notice == "" {
		http.Redirect(w, r, p.address(), http.StatusSeeOther) //nolint:gosec // a path of ours; what was posted is only escaped into its query
		return nil
	}
	if p.drawer == nil {
		var err error
		if p.drawer, err = s.stock(r.Context()); err != nil {
			return err
		}
	}
	p.texts = e.echo()
	return render(w, r, http.StatusUnprocessableEntity, web.BuildPage(s.buildView(*p)))
}

// answerScript sends the sections, and the fields where which of them there are
// has changed. Wrong fields are no failure of the request: it is answered with
// 200, and what is wrong stands beside them.
func (s *server) answerScript(w http.ResponseWriter, r *http.Request, e *buildEdit) error {
	p := &e.page
	fields := e.anew || web.NewBuildForm(p.b, p.drawer).Lists() != e.before
	if fields {
		p.texts = e.echo()
	}
	w.Header().Set("HX-Replace-Url", p.address())
	return render(w, r, http.StatusOK, web.BuildAnswer(s.buildView(*p), fields))
}

// echo is what the fields show when they are drawn anew: what was typed, where
// it was not taken or means what the document has; else what that has.
func (e *buildEdit) echo() formText {
	echoed := formText{}
	d, err := newDraft(e.page.kept.Document)
	if err != nil {
		return echoed
	}
	for _, entry := range web.NewBuildForm(e.page.b, e.page.drawer).Entries() {
		text, came := e.texts[entry.Name]
		if !came {
			continue
		}
		if _, wrong := e.page.faults[entry.Name]; wrong {
			echoed[entry.Name] = text
			continue
		}
		if entry.Groups != nil {
			continue // a list shows what the document has
		}
		before := len(d.ops)
		if writeEntry(d, entry, text, e.page.b, e.page.drawer) == nil && len(d.ops) == before {
			echoed[entry.Name] = text
		}
	}
	return echoed
}
