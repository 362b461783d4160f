package web

import "strings"

// ShelfView is the library of builds.
type ShelfView struct {
	Query  string      // as typed
	Notice *NoticeView // nil when nothing has just happened
	Found  FoundView
	Bin    string // "2 builds in the bin"; "" when it is empty
}

// FoundView is what a search of the shelf gave; without a query, everything.
type FoundView struct {
	Query string // "" when nothing was asked
	Words string // "14 builds", "2 of 14 builds"
	Cards []CardView
	Bare  bool   // there is no build on the shelf at all
	More  string // "Show all 214"; "" when all are shown
	All   string // address that shows them
}

// CardView is one build on the shelf.
type CardView struct {
	ID        string
	Href      string // its page
	Title     string
	For       string // "Fernhollow club · Station board"; "" when neither is known
	Supply    string // "24 V adapter"
	Volts     string // "23.5 / 24 / 24.5 V"
	LEDs      string // "4 × 6 white"
	Verdict   VerdictView
	Touched   string // "today 14:02"
	TouchedAt string // the same for programs, RFC 3339
	Tags      []LinkView
	Picture   SmallPicture
	Stage     string // beside the picture: "+ 3 more", "not solved"; may be empty
}

// LinkView is a link of a few words.
type LinkView struct {
	Text string
	Href string
}

// NoticeView tells what has just been done, and how to take it back.
type NoticeView struct {
	Text   string // "“Harbour” is in the bin."
	More   string // what that means; may be empty
	Action string // address that takes it back by a POST; "" when there is nothing to take back
	Button string // "bring it back"
}

// VerdictView is a verdict as it is always shown: a shape and a word, and a
// class for the colour.
type VerdictView struct {
	Class string // "fail", "tight", "unknown", "pass"
	Shape string // "▲", "◆", "○", "●"
	Word  string // "fails", "tight", "unknown", "passes"
}

// NewVerdict returns how a severity is shown. One that is none of the four is
// shown as unknown: nothing is ever taken for a pass.
func NewVerdict(severity string) VerdictView {
	switch severity {
	case "fail":
		return VerdictView{Class: "fail", Shape: "▲", Word: "fails"}
	case "tight":
		return VerdictView{Class: "tight", Shape: "◆", Word: "tight"}
	case "pass":
		return VerdictView{Class: "pass", Shape: "●", Word: "passes"}
	}
	return VerdictView{Class: "unknown", Shape: "○", Word: "unknown"}
}

// CardID is the id of a build's card, for links that lead to it.
func CardID(id string) string { return "build-" + id }

// action is an address below the build's own.
func (v CardView) action(what string) string { return strings.TrimSuffix(v.Href, "/") + "/" + what }

// BinView lists what was deleted and can be brought back.
type BinView struct {
	Builds []BinnedView
	Parts  []BinnedView
	Notice *NoticeView
}

// BinnedView is one deleted build or part.
type BinnedView struct {
	Name    string
	About   string // "Fernhollow club · Station board", "npn transistor"
	Deleted string // "today 14:02"
	Action  string // address that restores it by a POST
}

// ImportView is the page that takes a build's document.
type ImportView struct {
	Text   string      // the document that was refused, kept for mending
	Title  string      // what is wrong with it, in a line; "" on a first visit
	Faults []FaultView // each single thing wrong
}

// FaultView is one thing wrong with a document.
type FaultView struct {
	At     string // JSON Pointer; "" is the document itself
	Line   string // "line 12"; "" when the place has none
	Reason string
}
