package web

// LayoutView is what the frame round every page needs.
type LayoutView struct {
	Title string // names the page in the browser's tab
	Here  string // which entry of the top bar is this page: "shelf", "drawer" or ""
	Query string // what stands in the search box
}

// DocumentTitle returns the page's title as the browser's tab shows it.
func (v LayoutView) DocumentTitle() string {
	if v.Title == "" {
		return "Lanternbook"
	}
	return v.Title + " · Lanternbook"
}

// ProblemView is a page that could not be shown, and why.
type ProblemView struct {
	Title string // "There is no such build"
	Text  string // what the person can do about it
}

// searchID is what the search box of the top bar is called: "find", which is
// where "/" leads, unless the page has a search field of its own.
func (v LayoutView) searchID() string {
	if v.Here == "drawer" {
		return "find-build"
	}
	return "find"
}
