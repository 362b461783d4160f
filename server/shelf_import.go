package main

import (
	"errors"
	"fmt"
	"io"
	"mime/multipart"
	"net/http"
	"strings"
	"unicode/utf8"

	"lanternbook/calc"
	"lanternbook/web"
)

// showImport: GET /import.
func (s *server) showImport(w http.ResponseWriter, r *http.Request) error {
	return render(w, r, http.StatusOK, web.ImportPage(web.ImportView{}))
}

// importDocument: POST /import, a file or its text. A document that is refused
// comes back in the text field, with everything that is wrong with it.
func (s *server) importDocument(w http.ResponseWriter, r *http.Request) error {
	document, err := sentDocument(r)
	if err != nil {
		return err
	}
	refused := func(title string, faults calc.Invalid) error {
		return render(w, r, http.StatusUnprocessableEntity, web.ImportPage(web.ImportView{
			Text: string(document), Title: title, Faults: faultViews(document, faults),
		}))
	}
	switch {
	case strings.TrimSpace(string(document)) == "":
		return refused("Choose a file, or put its text below", nil)
	case !utf8.Valid(document):
		document = nil // no text that a page could show
		return refused("That file is no text", calc.Invalid{{Reason: "A build's document is JSON in UTF-8; this is something else."}})
	}
	kept, _, _, err := s.create(r.Context(), document)
	if invalid, is := errors.AsType[calc.Invalid](err); is {
		return refused("The document is refused: "+plural(len(invalid), "thing is", "things are")+" wrong with it", invalid)
	}
	if err != nil {
		return err
	}
	http.Redirect(w, r, fmt.Sprintf("/builds/%d", kept.ID), http.StatusSeeOther)
	return nil
}

// sentDocument is the chosen file, or else the text. A mark of byte order at
// its start, which some editors leave, is no part of it.
func sentDocument(r *http.Request) ([]byte, error) {
	if err := r.ParseMultipartForm(pageBody); err != nil { //nolint:gosec // maxBody bounds the body of every page's request
		if _, tooLarge := errors.AsType[*http.MaxBytesError](err); tooLarge || r.Context().Err() != nil {
			return nil, err
		}
		return nil, refuse(http.StatusBadRequest, "The form cannot be read", "Send it from the page /import.")
	}
	document := []byte(r.PostFormValue("text"))
	file, header, err := r.FormFile("document")
	if err == nil {
		if document, err = chosenFile(file, header, document); err != nil {
			return nil, err
		}
	}
	return []byte(strings.TrimPrefix(string(document), "\ufeff")), nil
}

// chosenFile reads the chosen file; when none was chosen a browser sends one
// without name and content, and the text stands.
func chosenFile(file multipart.File, header *multipart.FileHeader, text []byte) ([]byte, error) {
	content, err := io.ReadAll(file)
	if closing := file.Close(); err == nil {
		err = closing
	}
	if err != nil || header.Filename == "" && len(content) == 0 {
		return text, err
	}
	return content, nil
}

func faultViews(document []byte, faults calc.Invalid) []web.FaultView {
	var views []web.FaultView
	for _, f := range faults {
		v := web.FaultView{At: f.At, Reason: f.Reason}
		if line, found := lineOf(document, f.At); found {
			v.Line = fmt.Sprintf("line %d", line)
		}
		views = append(views, v)
	}
	return views
}
