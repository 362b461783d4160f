package main

import (
	"encoding/json"
	"errors"
	"net/url"
	"regexp"
	"strings"

	"lanternbook/calc"
	"lanternbook/web"
)

// partForm is a part's form: what stands in its fields, and what is wrong.
type partForm struct {
	typ    string
	typed  map[string]string // by the figure's path
	faults map[string]string // by the figure's path
	other  []string          // what is wrong with no field's value
}

// formOf fills the form from a part's document.
func formOf(typ string, document members) partForm {
	f := partForm{typ: typ, typed: map[string]string{}, faults: map[string]string{}}
	for _, group := range figuresOf(typ) {
		for _, fig := range group.figures {
			f.typed[fig.path] = fig.text(document.get(fig.path))
		}
	}
	return f
}

// typedForm is the form as it was sent. Values are kept as typed.
func typedForm(typ string, sent url.Values) partForm {
	f := partForm{typ: typ, typed: map[string]string{}, faults: map[string]string{}}
	for _, group := range figuresOf(typ) {
		for _, fig := range group.figures {
			f.typed[fig.path] = plainLines(sent.Get(fig.path))
		}
	}
	return f
}

// document writes what was typed into a part's document and leaves everything
// else of it as it is: members that the form does not know, and values whose
// field was not touched. It notes what is wrong beside the fields; the document
// is for use only when nothing is.
func (f *partForm) document(was members) []byte {
	if was.get("type") == nil {
		typ, _ := json.Marshal(f.typ) // a string: cannot fail
		was = append(members{{"type", typ}}, was...)
	}
	now := was
	for _, group := range figuresOf(f.typ) {
		for _, fig := range group.figures {
			typed := f.typed[fig.path]
			if strings.TrimSpace(typed) == strings.TrimSpace(fig.text(was.get(fig.path))) {
				f.require(fig, typed)
				continue
			}
			value, err := fig.value(typed)
			if err != nil {
				f.faults[fig.path] = err.Error()
				continue
			}
			f.require(fig, typed)
			now = now.set(fig.path, value)
		}
	}
	document, err := now.MarshalJSON()
	if err != nil { // keys are strings
		f.other = append(f.other, err.Error())
		return nil
	}
	f.readStrictly(document)
	return document
}

// value is what was typed as a JSON value; nil when nothing was.
func (f figure) value(typed string) (json.RawMessage, error) {
	if strings.TrimSpace(typed) == "" {
		return nil, nil
	}
	if f.kind != ofLines {
		typed = strings.TrimSpace(typed)
	}
	v, err := f.parse(typed)
	if err != nil {
		return nil, err
	}
	if v == false { // missing says the same
		return nil, nil
	}
	return json.Marshal(v)
}

func (f *partForm) require(fig figure, typed string) {
	if fig.needed && strings.TrimSpace(typed) == "" {
		f.faults[fig.path] = "is needed, like " + fig.example
	}
}

// readStrictly lets the strict reader judge the document, and puts each of its
// faults beside the field that it is about, unless that has one of its own.
func (f *partForm) readStrictly(document []byte) {
	_, err := calc.ReadPart(document)
	var invalid calc.Invalid
	if err != nil && !errors.As(err, &invalid) {
		f.other = append(f.other, err.Error())
	}
	for _, fault := range invalid {
		path := f.fieldAt(fault.At)
		reason := jsonHint.ReplaceAllString(fault.Reason, "")
		switch {
		case path == "":
			f.other = append(f.other, joined(": ", fault.At, reason))
		case f.faults[path] == "":
			f.faults[path] = reason
		}
	}
}

// jsonHint is the reader's advice on how to write a number in a document, which
// is not how it is written in a field.
var jsonHint = regexp.MustCompile(` \([^()]* is written [^()]*\)`)

// fieldAt is the field that holds the value at a JSON Pointer, or a value round
// it; "" when no field does.
func (f *partForm) fieldAt(pointer string) string {
	path := strings.ReplaceAll(strings.TrimPrefix(pointer, "/"), "/", ".")
	for path != "" {
		if _, ours := f.typed[path]; ours {
			return path
		}
		dot := strings.LastIndexByte(path, '.')
		if dot < 0 {
			break
		}
		path = path[:dot]
	}
	// A fault of the object as a whole: beside its first field.
	for _, group := range figuresOf(f.typ) {
		for _, fig := range group.figures {
			if path != "" && strings.HasPrefix(fig.path, path+".") {
				return fig.path
			}
		}
	}
	return ""
}

// sound tells whether nothing is wrong.
func (f *partForm) sound() bool { return len(f.faults) == 0 && len(f.other) == 0 }

// groups is the form as the page shows it. A folded group stands open when it
// has something to show.
func (f *partForm) groups() []web.FieldGroupView {
	var views []web.FieldGroupView
	for _, group := range figuresOf(f.typ) {
		v := web.FieldGroupView{Title: group.title, About: group.about, Folded: group.folded}
		for _, fig := range group.figures {
			field := fig.field(f.typed[fig.path], f.faults[fig.path])
			v.Fields = append(v.Fields, field)
			v.Open = v.Open || field.Error != ""
			if strings.TrimSpace(field.Value) != "" {
				v.Filled++
			}
		}
		views = append(views, v)
	}
	return views
}

// field is the figure's field.
func (f figure) field(typed, fault string) web.FieldView {
	v := web.FieldView{Name: f.path, Label: f.label, Value: typed, Error: fault, Hint: f.hint, Placeholder: f.example}
	switch f.kind {
	case ofLines:
		v.Lines, v.Layout, v.Placeholder = 5, "tall", ""
	case ofPairs:
		v.Lines = min(max(4, 1+strings.Count(typed, "\n")+1), 12)
	case ofChoice:
		v.Groups = []web.OptionGroup{{Options: []web.Option{{Value: "", Text: f.no}, {Value: f.yes, Text: f.yes}}}}
	}
	return v
}
