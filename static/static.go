// Package static holds the files that browsers fetch: style sheets, scripts,
// fonts and the document schemas. It only embeds and serves them.
//
// A file's address carries a hash of all files, so that a browser may keep it
// for ever and still never shows yesterday's style with today's page.
package static

import (
	"bytes"
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"io/fs"
	"mime"
	"net/http"
	"path"
	"slices"
	"strconv"
	"strings"
)

//go:embed *.js *.svg css fonts
var embedded embed.FS

// sheet is the one style sheet that pages ask for: every css/*.css, joined in
// the order of their names. A new page brings its own file and needs no link.
const sheet = "app.css"

var (
	files = read()
	hash  = sum(files)
)

// URL returns the address of a file by its name in this package, such as
// "app.css" or "fonts/jetbrains-mono-latin-wght-normal.woff2".
func URL(name string) string { return "/static/" + hash + "/" + name }

// Handler serves /static/<hash>/<name>. Any other hash and any other name is
// not found, and folders are not listed.
func Handler() http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		name, ours := strings.CutPrefix(r.URL.Path, URL(""))
		content, found := files[name]
		if !ours || !found {
			http.NotFound(w, r)
			return
		}
		if r.Method != http.MethodGet && r.Method != http.MethodHead {
			w.Header().Set("Allow", "GET, HEAD")
			http.Error(w, "only GET and HEAD", http.StatusMethodNotAllowed)
			return
		}
		h := w.Header()
		h.Set("Content-Type", contentType(name))
		h.Set("Content-Length", strconv.Itoa(len(content)))
		h.Set("Cache-Control", "public, max-age=31536000, immutable")
		if r.Method == http.MethodGet {
			_, _ = w.Write(content) // the only failure is a browser that went away
		}
	})
}

// contentType knows the few kinds in this package and asks no system table,
// which differs from machine to machine.
func contentType(name string) string {
	switch path.Ext(name) {
	case ".css":
		return "text/css; charset=utf-8"
	case ".js":
		return "text/javascript; charset=utf-8"
	case ".svg":
		return "image/svg+xml"
	case ".woff2":
		return "font/woff2"
	case ".txt":
		return "text/plain; charset=utf-8"
	}
	if kind := mime.TypeByExtension(path.Ext(name)); kind != "" {
		return kind
	}
	return "application/octet-stream"
}

// read loads every embedded file and joins the style sheets. It panics when
// the embedded files cannot be read, which only a broken build can cause.
func read() map[string][]byte {
	all := map[string][]byte{}
	var sheets []string
	err := fs.WalkDir(embedded, ".", func(name string, entry fs.DirEntry, err error) error {
		if err != nil || entry.IsDir() {
			return err
		}
		content, err := embedded.ReadFile(name)
		if err != nil {
			return err
		}
		if strings.HasPrefix(name, "css/") {
			sheets = append(sheets, name)
		}
		all[name] = content
		return nil
	})
	if err != nil {
		panic(err)
	}
	slices.Sort(sheets)
	var joined bytes.Buffer
	for _, name := range sheets {
		joined.Write(all[name])
		joined.WriteByte('\n')
		delete(all, name)
	}
	all[sheet] = joined.Bytes()
	return all
}

// sum returns a short hash over the names and contents of all files.
func sum(all map[string][]byte) string {
	names := make([]string, 0, len(all))
	for name := range all {
		names = append(names, name)
	}
	slices.Sort(names)
	h := sha256.New()
	for _, name := range names {
		h.Write([]byte(name))
		h.Write([]byte{0})
		h.Write(all[name])
		h.Write([]byte{0})
	}
	return hex.EncodeToString(h.Sum(nil))[:16]
}
