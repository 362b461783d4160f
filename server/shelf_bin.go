package main

import (
	"fmt"
	"net/http"
	"net/url"
	"strconv"

	"lanternbook/store"
	"lanternbook/web"
)

// showBin: GET /bin.
func (s *server) showBin(w http.ResponseWriter, r *http.Request) error {
	bin, err := s.store.Binned(r.Context())
	if err != nil {
		return err
	}
	now := s.now()
	var view web.BinView
	for _, b := range bin.Builds {
		view.Builds = append(view.Builds, web.BinnedView{
			Name: buildName(b.ID, b.Title), About: joined(" · ", b.Client, b.Site),
			Deleted: when(b.Deleted, now), Action: restoreBuildAddress(b.ID),
		})
	}
	for _, p := range bin.Parts {
		view.Parts = append(view.Parts, web.BinnedView{
			Name: either(p.Name, p.Key), About: typeWord(p.Type),
			Deleted: when(p.Deleted, now), Action: restorePartAddress(p.Key),
		})
	}
	return render(w, r, http.StatusOK, web.BinPage(view))
}

// binned returns the notice that belongs to ?gone=, while that build is in the
// bin, and how much else lies there. Since both come from the store and not
// from the deletion itself, they stand after a reload too.
func (s *server) binned(r *http.Request) (*web.NoticeView, string, error) {
	bin, err := s.store.Binned(r.Context())
	if err != nil {
		return nil, "", err
	}
	gone, _ := strconv.ParseInt(r.URL.Query().Get("gone"), 10, 64) // no number: no build, no notice
	var notice *web.NoticeView
	for _, b := range bin.Builds {
		if b.ID == gone {
			notice = &web.NoticeView{
				Text:   fmt.Sprintf("“%s” is in the bin.", buildName(b.ID, b.Title)),
				More:   "It stays there for thirty days.",
				Action: restoreBuildAddress(b.ID), Button: "bring it back",
			}
		}
	}
	return notice, binWords(bin), nil
}

// binWords says what lies in the bin; "" when nothing does.
func binWords(bin store.Binned) string {
	builds, parts := "", ""
	if n := len(bin.Builds); n > 0 {
		builds = plural(n, "build", "builds")
	}
	if n := len(bin.Parts); n > 0 {
		parts = plural(n, "part", "parts")
	}
	words := joined(" and ", builds, parts)
	if words == "" {
		return ""
	}
	return "Bin: " + words
}

func restoreBuildAddress(id int64) string {
	return "/builds/" + strconv.FormatInt(id, 10) + "/restore"
}

func restorePartAddress(key string) string { return "/drawer/" + url.PathEscape(key) + "/restore" }

// buildName is what a build is called; one without a title by its number.
func buildName(id int64, title string) string {
	return either(title, "Build "+strconv.FormatInt(id, 10))
}
