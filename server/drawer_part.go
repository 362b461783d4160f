package main

import (
	"errors"
	"fmt"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

// showNewPart: GET /drawer/new, empty or filled from another part.
func (s *server) showNewPart(w http.ResponseWriter, r *http.Request) error {
	typ, from := r.URL.Query().Get("type"), r.URL.Query().Get("from")
	base, err := s.baseOf(r, from)
	if err != nil {
		return err
	}
	if from != "" {
		typ = figure{}.text(base.get("type"))
	}
	if figuresOf(typ) == nil {
		typ = calc.TypeLED
	}
	form := formOf(typ, base)
	if from != "" {
		form.typed["name"] = copyTitle(either(form.typed["name"], from))
	}
	return render(w, r, http.StatusOK, web.PartPage(newPartView(form, base, "", from)))
}

// createPart: POST /drawer.
func (s *server) createPart(w http.ResponseWriter, r *http.Request) error {
	form, base, err := s.sentPart(r)
	if err != nil {
		return err
	}
	typed := strings.TrimSpace(r.PostFormValue("key"))
	document := form.document(base)
	if reason := keyFault(typed); reason != "" {
		form.faults["key"] = reason
	}
	if !form.sound() {
		return render(w, r, http.StatusUnprocessableEntity, web.PartPage(newPartView(form, base, typed, r.PostFormValue("from"))))
	}
	made, err := s.putIntoDrawer(r, typed, form, document)
	if _, taken := errors.AsType[*store.KeyTaken](err); taken {
		form.faults["key"] = "the drawer has a part of this key already"
		return render(w, r, http.StatusUnprocessableEntity, web.PartPage(newPartView(form, base, typed, r.PostFormValue("from"))))
	}
	if err != nil {
		return err
	}
	http.Redirect(w, r, keptAddress(made.Key), http.StatusSeeOther)
	return nil
}

// putIntoDrawer keeps a new part under the key that was typed or, without one,
// under the first free one made of its name.
func (s *server) putIntoDrawer(r *http.Request, typed string, form partForm, document []byte) (store.Part, error) {
	if typed != "" {
		return s.store.CreatePart(r.Context(), typed, document)
	}
	name := keyOf(form)
	key := name
	for n := 2; ; n++ {
		made, err := s.store.CreatePart(r.Context(), key, document)
		if _, taken := errors.AsType[*store.KeyTaken](err); !taken {
			return made, err
		}
		key = name + "-" + strconv.Itoa(n)
	}
}

// showPart: GET /drawer/{key}.
func (s *server) showPart(w http.ResponseWriter, r *http.Request) error {
	part, err := s.store.Part(r.Context(), partKey(r))
	if err != nil {
		return err
	}
	document, err := readMembers(part.Document)
	if err != nil {
		return fmt.Errorf("part %q: %w", part.Key, err)
	}
	return render(w, r, http.StatusOK, web.PartPage(partView(part, formOf(part.Type, document))))
}

// savePart: POST /drawer/{key}. A part that somebody else changed meanwhile is
// not overwritten unseen: the form comes back with what stands there now.
func (s *server) savePart(w http.ResponseWriter, r *http.Request) error {
	part, err := s.store.Part(r.Context(), partKey(r))
	if err != nil {
		return err
	}
	if err = r.ParseForm(); err != nil {
		return err
	}
	was, err := readMembers(part.Document)
	if err != nil {
		return fmt.Errorf("part %q: %w", part.Key, err)
	}
	form := typedForm(part.Type, r.PostForm)
	document := form.document(was)
	view := partView(part, form)
	if seen := r.PostForm.Get("seen"); seen != "" && seen != seenAt(part) {
		view.Changed = changedFields(form, formOf(part.Type, was))
	}
	switch {
	case len(view.Changed) > 0:
		return render(w, r, http.StatusConflict, web.PartPage(view))
	case !form.sound():
		return render(w, r, http.StatusUnprocessableEntity, web.PartPage(view))
	}
	if _, err := s.store.SavePart(r.Context(), part.Key, document); err != nil {
		return err
	}
	http.Redirect(w, r, keptAddress(part.Key), http.StatusSeeOther)
	return nil
}

// sentPart is the form of a new part as it was sent, and the document that it
// starts from.
func (s *server) sentPart(r *http.Request) (partForm, members, error) {
	if err := r.ParseForm(); err != nil {
		return partForm{}, nil, err
	}
	typ := r.PostForm.Get("type")
	if figuresOf(typ) == nil {
		return partForm{}, nil, refuse(http.StatusUnprocessableEntity, "That is no type of part", "Open the drawer and choose one there.")
	}
	base, err := s.baseOf(r, r.PostForm.Get("from"))
	if errors.Is(err, store.ErrNotFound) {
		base, err = nil, nil // deleted meanwhile: what was typed is not lost for that
	}
	return typedForm(typ, r.PostForm), base, err
}

// baseOf is the document of the part that a new one starts from; empty when it
// starts from nothing.
func (s *server) baseOf(r *http.Request, from string) (members, error) {
	if from == "" {
		return nil, nil
	}
	part, err := s.store.Part(r.Context(), from)
	if err != nil {
		return nil, err
	}
	return readMembers(part.Document)
}

// newPartView is the form of a part that does not exist yet.
func newPartView(form partForm, base members, key, from string) web.PartView {
	v := web.PartView{
		Title: "A new part: " + typeWord(form.typ), Word: typeWord(form.typ), Type: form.typ, From: from,
		Action: "/drawer", Look: "/drawer/new", Groups: form.groups(), Other: form.other, Save: "Put it into the drawer",
		Seeing: lookAt(form, base),
	}
	first := &v.Groups[0].Fields
	*first = slices.Insert(*first, 1, *keyField(form, key)) // beside the name that makes it
	if from == "" {
		for _, t := range partTypes {
			v.Types = append(v.Types, web.TypeView{Text: typeWord(t), Href: "/drawer/new?type=" + t, Here: t == form.typ})
		}
	}
	return v
}

// keyField is where a new part's key is chosen.
func keyField(form partForm, typed string) *web.FieldView {
	return &web.FieldView{
		Name: "key", Label: "key", Value: typed, Error: form.faults["key"], Placeholder: keyOf(form),
		Hint: "what builds call it, for ever; empty: " + keyOf(form),
	}
}

// partView is the form of a part in the drawer.
func partView(part store.Part, form partForm) web.PartView {
	address := partAddress(part.Key)
	was, _ := readMembers(part.Document) // a broken one was refused before
	return web.PartView{
		Title: either(part.Name, part.Key), Word: typeWord(part.Type), Type: part.Type, Key: part.Key, Seen: seenAt(part),
		Action: address, Look: address + "/look", Groups: form.groups(), Other: form.other, Save: "Keep it",
		Seeing: lookAt(form, was), Copy: "/drawer/new?from=" + part.Key, Delete: address + "/delete",
	}
}

// seenAt tells one state of a part from the next.
func seenAt(part store.Part) string { return part.Updated.UTC().Format(time.RFC3339Nano) }

// changedFields lists what of the part as it stands now differs from what was
// typed.
func changedFields(typed, now partForm) []web.LinkView {
	var changes []web.LinkView
	for _, group := range figuresOf(now.typ) {
		for _, fig := range group.figures {
			there := strings.TrimSpace(now.typed[fig.path])
			if there != strings.TrimSpace(typed.typed[fig.path]) {
				changes = append(changes, web.LinkView{
					Text: fig.label + ": " + either(there, "nothing"), Href: "#" + web.FieldID(fig.path),
				})
			}
		}
	}
	return changes
}

func keptAddress(key string) string {
	return drawerAddress("", "") + "?kept=" + key + "#" + partID(key)
}

// keyOf is the key that a part's name makes.
func keyOf(form partForm) string { return either(slug(form.typed["name"]), form.typ) }

// keyFault says what is wrong with a key that was typed; "" when nothing is.
func keyFault(key string) string {
	switch {
	case key == "":
		return ""
	case key == "new":
		return "this word stands for the form itself: choose another"
	case key != slug(key):
		return "takes small letters, digits and single dashes, at most " + strconv.Itoa(longestSlug) + " of them: like " + either(slug(key), "bc547b")
	}
	return ""
}
