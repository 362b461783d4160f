package main

import (
	"bytes"
	"html"
	"mime/multipart"
	"net/http"
	"strings"
	"testing"
)

// bringIn sends the import page's form, with a file when it has a name.
func (p *shop) bringIn(name, file, text string) answer {
	p.t.Helper()
	var body bytes.Buffer
	w := multipart.NewWriter(&body)
	part, err := w.CreateFormFile("document", name)
	if err != nil {
		p.t.Fatal(err)
	}
	if _, err := part.Write([]byte(file)); err != nil {
		p.t.Fatal(err)
	}
	if err := w.WriteField("text", text); err != nil {
		p.t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		p.t.Fatal(err)
	}
	return p.do(http.MethodPost, "/import", body.String(), "Content-Type", w.FormDataContentType(), "Sec-Fetch-Site", "same-origin")
}

func TestImportTakesAFileOrItsText(t *testing.T) {
	p := openShop(t)
	wantWords(t, p.get("/import"), `enctype="multipart/form-data"`, `type="file"`)

	a := p.bringIn("tide.json", tide(t), "")
	a.wantStatus(t, http.StatusSeeOther)
	if got := a.header.Get("Location"); got != "/builds/1" {
		t.Errorf("the build opens at %q", got)
	}
	if p.get("/api/builds/1") != tide(t) {
		t.Error("the document is not kept byte for byte")
	}

	p.bringIn("", "", titled(t, "From text")).wantStatus(t, http.StatusSeeOther)
	p.bringIn("shelf.json", titled(t, "From the file"), titled(t, "Not this one")).wantStatus(t, http.StatusSeeOther)
	p.bringIn("bom.json", "\ufeff"+titled(t, "With a mark of byte order"), "").wantStatus(t, http.StatusSeeOther)
	page := p.get("/")
	wantWords(t, page, "4 builds", "From text", "From the file", "With a mark of byte order")
	wantNot(t, page, "Not this one")
}

type refusedCase struct {
	name  string
	file  string
	text  string
	words []string
}

func TestImportRefuses(t *testing.T) {
	p := openShop(t)
	magic := strings.Replace(shelfLight(t), `"kind": "resistor"`, `"kind": "magic"`, 1)
	unknown := strings.Replace(shelfLight(t), `"max_current": 1}`, `"max_current": 1, "</textarea><script>alert": 1}`, 1)
	for _, c := range []refusedCase{
		{"nothing at all", "", "", []string{"Choose a file, or put its text below"}},
		{"blanks", "", "  \n ", []string{"Choose a file, or put its text below"}},
		{"no JSON", "", "hello", []string{"hello", "1 thing is wrong"}},
		{"a kind of driver that does not exist", magic, "", []string{"/strings/0/driver/kind", "line 9", "magic"}},
		{"an unknown key, with markup in it", "", unknown, []string{"/supply/<~1textarea><script>alert", `"</textarea><script>alert": 1}`}},
		{"bytes that are no text", "\xff\xfe\x00{", "", []string{"That file is no text"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			name := ""
			if c.file != "" {
				name = "build.json"
			}
			a := p.bringIn(name, c.file, c.text)
			a.wantStatus(t, http.StatusUnprocessableEntity)
			wantWords(t, a.body, c.words...)
			wantNot(t, a.body, "<script>alert")
		})
	}
	wantWords(t, p.get("/"), "Nothing stands here yet")
}

func TestImportKeepsTheRefusedText(t *testing.T) {
	p := openShop(t)
	refused := strings.Replace(shelfLight(t), `"ohms": 330`, `"ohms": -330`, 1)
	a := p.bringIn("build.json", refused, "")
	a.wantStatus(t, http.StatusUnprocessableEntity)
	_, rest, _ := strings.Cut(a.body, `<textarea id="text"`)
	m := textareas.FindStringSubmatch(`<textarea id="text"` + rest)
	if m == nil {
		t.Fatal("the page has no field for the text")
	}
	kept := strings.TrimPrefix(m[2], "\n")
	a = p.bringIn("", "", strings.Replace(html.UnescapeString(kept), "-330", "330", 1))
	a.wantStatus(t, http.StatusSeeOther)
	wantJSON(t, p.get("/api/builds/1"), shelfLight(t))
}

func TestImportTooLarge(t *testing.T) {
	p := openShop(t)
	p.bringIn("big.json", strings.Repeat(" ", pageBody+1), "").wantStatus(t, http.StatusRequestEntityTooLarge)
	p.do(http.MethodPost, "/import", "{}", "Content-Type", "application/json").wantStatus(t, http.StatusBadRequest)
}
