package main

import (
	"fmt"
	"net/http"
	"net/url"
	"strings"
	"unicode"

	"github.com/go-chi/chi/v5"
	"golang.org/x/text/cases"
	"golang.org/x/text/unicode/norm"

	"lanternbook/store"
	"lanternbook/web"
)

// drawerRoutes are the pages of the library of parts.
func (s *server) drawerRoutes(r chi.Router) {
	r.Get("/drawer", s.page(s.showDrawer))                 // ?q= searches, ?type= shows one type
	r.Get("/drawer/new", s.page(s.showNewPart))            // ?type= of the part, ?from= a part to start from
	r.Post("/drawer", s.page(s.createPart))                //
	r.Post("/drawer/new", s.page(s.lookAtNewPart))         // changes nothing
	r.Get("/drawer/{key}", s.page(s.showPart))             //
	r.Post("/drawer/{key}", s.page(s.savePart))            //
	r.Post("/drawer/{key}/look", s.page(s.lookAtPart))     // changes nothing
	r.Post("/drawer/{key}/delete", s.page(s.deletePart))   // into the bin
	r.Post("/drawer/{key}/restore", s.page(s.restorePart)) // out of it
}

// showDrawer: GET /drawer. By script only the rows are answered.
func (s *server) showDrawer(w http.ResponseWriter, r *http.Request) error {
	query, typ := r.URL.Query().Get("q"), r.URL.Query().Get("type")
	if figuresOf(typ) == nil {
		typ = ""
	}
	all, err := s.store.Parts(r.Context(), "")
	if err != nil {
		return err
	}
	found := foundParts(all, query, typ)
	if fromScript(r) {
		w.Header().Set("HX-Replace-Url", drawerAddress(query, typ))
		return render(w, r, http.StatusOK, web.Parts(found))
	}
	view := web.DrawerView{Query: query, Type: typ, Types: drawerTypes(all, query, typ), Found: found}
	if view.Notice, view.Bin, err = s.binnedPart(r); err != nil {
		return err
	}
	return render(w, r, http.StatusOK, web.DrawerPage(view))
}

// foundParts is the parts of a type in which every word of a query occurs, by
// type in the drawer's order.
func foundParts(all []store.Part, query, typ string) web.PartsView {
	v := web.PartsView{Query: query, Type: typ, Bare: len(all) == 0, Clear: "/drawer", Words: plural(len(all), "part", "parts")}
	words := strings.Fields(folded(query))
	shown := 0
	for _, t := range partTypes {
		if typ != "" && t != typ {
			continue
		}
		var parts []store.Part
		for _, p := range all {
			if p.Type == t && hasAll(partText(p), words) {
				parts = append(parts, p)
			}
		}
		if len(parts) > 0 {
			v.Groups = append(v.Groups, partGroup(t, parts))
			shown += len(parts)
		}
	}
	if query != "" || typ != "" {
		v.Words = fmt.Sprintf("%d of %s", shown, v.Words)
	}
	return v
}

// drawerTypes are the types to choose from, with how many parts each has.
func drawerTypes(all []store.Part, query, chosen string) []web.TypeView {
	views := []web.TypeView{{Text: "all", Count: fmt.Sprint(len(all)), Href: drawerAddress(query, ""), Here: chosen == ""}}
	for _, t := range partTypes {
		n := 0
		for _, p := range all {
			n += count(p.Type == t)
		}
		views = append(views, web.TypeView{Text: typeWords(t), Count: fmt.Sprint(n), Href: drawerAddress(query, t), Here: t == chosen})
	}
	return views
}

// drawerAddress is where the drawer stands, searched and narrowed to a type.
func drawerAddress(query, typ string) string {
	values := url.Values{}
	if query != "" {
		values.Set("q", query)
	}
	if typ != "" {
		values.Set("type", typ)
	}
	if len(values) == 0 {
		return "/drawer"
	}
	return "/drawer?" + values.Encode()
}

// partAddress is a part's form.
func partAddress(key string) string { return "/drawer/" + url.PathEscape(key) }

// deletePart: POST /drawer/{key}/delete. The drawer then offers the way back.
func (s *server) deletePart(w http.ResponseWriter, r *http.Request) error {
	key := partKey(r)
	if err := s.store.DeletePart(r.Context(), key); err != nil {
		return err
	}
	http.Redirect(w, r, "/drawer?gone="+url.QueryEscape(key), http.StatusSeeOther)
	return nil
}

// restorePart: POST /drawer/{key}/restore.
func (s *server) restorePart(w http.ResponseWriter, r *http.Request) error {
	key := partKey(r)
	if _, err := s.store.RestorePart(r.Context(), key); err != nil {
		return err
	}
	http.Redirect(w, r, "/drawer#"+partID(key), http.StatusSeeOther) //nolint:gosec // the key only makes the fragment
	return nil
}

// binnedPart returns the notice of ?gone= or ?kept=, as far as it is still
// true, and what lies in the bin.
func (s *server) binnedPart(r *http.Request) (*web.NoticeView, string, error) {
	bin, err := s.store.Binned(r.Context())
	if err != nil {
		return nil, "", err
	}
	var notice *web.NoticeView
	if kept := r.URL.Query().Get("kept"); kept != "" {
		if p, err := s.store.Part(r.Context(), kept); err == nil {
			notice = &web.NoticeView{Text: "“" + either(p.Name, p.Key) + "” is kept.", More: "Builds that use it have their own copies and stay as they are."}
		}
	}
	gone := r.URL.Query().Get("gone")
	for _, p := range bin.Parts {
		if p.Key == gone {
			notice = &web.NoticeView{
				Text:   "“" + either(p.Name, p.Key) + "” is in the bin.",
				More:   "Builds that use it have their own copies and stay as they are.",
				Action: restorePartAddress(p.Key), Button: "bring it back",
			}
		}
	}
	return notice, binWords(bin), nil
}

// partKey is the key in the address.
func partKey(r *http.Request) string {
	key := chi.URLParam(r, "key")
	if plain, err := url.PathUnescape(key); err == nil {
		return plain
	}
	return key
}

// partID is the id of a part's row.
func partID(key string) string { return "part-" + url.PathEscape(key) }

// partText is what a search of the drawer looks through.
func partText(p store.Part) string {
	document, err := readMembers(p.Document)
	if err != nil {
		return folded(p.Key + " " + p.Name)
	}
	texts := []string{p.Key, typeWord(p.Type)}
	for _, path := range []string{"name", "maker_code", "package", "colour", "notes"} {
		texts = append(texts, figure{}.text(document.get(path)))
	}
	if light := lightOf(p.Document); light != nil {
		texts = append(texts, light.Word)
	}
	return folded(strings.Join(texts, "\n"))
}

// folded takes from text what a search must not depend on: case, accents,
// compatibility forms.
func folded(text string) string {
	return cases.Fold().String(strings.Map(func(r rune) rune {
		if unicode.Is(unicode.Mn, r) {
			return -1
		}
		return r
	}, norm.NFKD.String(text)))
}

func hasAll(text string, words []string) bool {
	for _, word := range words {
		if !strings.Contains(text, word) {
			return false
		}
	}
	return true
}
