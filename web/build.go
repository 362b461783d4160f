package web

import (
	"hash/fnv"
	"strconv"

	"lanternbook/calc"
)

// BuildView is the page of one build.
type BuildView struct {
	ID       string
	Revision string
	Shape    string // changes when a command or a picker changes which fields there are
	Title    string // as the document has it
	Kept     KeptView
	Verdict  VerdictBox
	CanUndo  bool
	CanRedo  bool
	Corner   string
	Open     int // which string's fields stand open
	Form     BuildForm
	Strings  []StringSummary // one for each of Form.Strings
	Picture  *PictureView    // nil when the build could not be solved
	Narrow   *PictureView    // the same for a phone, where Picture's columns are too slim; may be nil
	Unsolved string          // why there is no picture
	Readings []ReadingView
	Supply   *ReadingView // nil when the build could not be solved
	Checks   ChecksView
	Cautions []string
	Notice   string // what could not be done; "" when everything was
	Conflict *ConflictView
}

// KeptView tells what of the page is on disk.
type KeptView struct {
	Words string // "kept 14:02", "2 fields not kept"
	Wrong bool   // something typed is not kept
}

// VerdictBox is the verdict of the whole build.
type VerdictBox struct {
	VerdictView
	Words string // "1 fails · 1 tight · 1 unknown"
}

// StringSummary is what stands beside a string's fields.
type StringSummary struct {
	Line    string // "6 × white · 20.1 mA"
	Outcome string // "pass", "tight", "fail", or "" when not solved
	Stacks  []StackSummary
}

// StackSummary is what stands beside one stack's fields.
type StackSummary struct {
	Fill string // the light's colour
	Word string // "warm white"
	Sum  string // "6 × 2.95 V"; "" when not solved
}

// BuildInput is what a build's page is made of.
type BuildInput struct {
	ID, Revision     int64
	Kept             KeptView
	CanUndo, CanRedo bool
	Build            calc.Build
	Report           calc.Report // without strings when the build could not be solved
	Drawer           []Stock
	Suggestions      map[int]calc.Suggestion // by string
	Corner           string                  // Usual, Cold or Hot; anything else is Usual
	Open             int
	Typed            map[string]string // texts to show in the place of the document's, by entry
	Faults           map[string]string // what is wrong with them, by entry
	Notice           string
	Conflict         *ConflictView
}

// NewBuildView makes the page of a build.
func NewBuildView(in BuildInput) BuildView {
	b, r := in.Build, in.Report
	v := BuildView{
		ID: strconv.FormatInt(in.ID, 10), Revision: strconv.FormatInt(in.Revision, 10), Title: b.Title,
		Kept: in.Kept, CanUndo: in.CanUndo, CanRedo: in.CanRedo, Corner: in.Corner,
		Open: min(max(in.Open, 0), max(len(b.Strings)-1, 0)),
		Form: NewBuildForm(b, in.Drawer), Notice: in.Notice, Conflict: in.Conflict,
		Cautions: cautions(b, r), Checks: newChecks(b, r),
	}
	v.Verdict = verdictBox(r, v.Checks.Count)
	if v.Corner != Cold && v.Corner != Hot {
		v.Corner = Usual
	}
	v.Shape = v.Form.Shape()
	solved := len(r.Strings) == len(b.Strings) && len(b.Strings) > 0
	if solved {
		picture := NewPicture(b, r, v.Corner, FrameFor(len(b.Strings)))
		v.Picture = &picture
		if len(b.Strings) > 3 {
			narrow := NewPicture(b, r, v.Corner, WideFrame)
			v.Narrow = &narrow
		}
		for i := range r.Strings {
			v.Readings = append(v.Readings, stringReading(b, r, i))
		}
		for i := range r.Rails {
			v.Readings = append(v.Readings, railReading(b, r, i))
		}
		supply := supplyReading(b, r)
		v.Supply = &supply
	} else {
		v.Unsolved = unsolvedWords(b, r)
	}
	v.Form.offer(b, r, in.Suggestions, solved)
	v.Form.showTyped(in.Typed, in.Faults)
	for i := range b.Strings {
		v.Strings = append(v.Strings, stringSummary(b, r, i, solved))
	}
	return v
}

// Shape changes when which fields there are changes: an answer to a form of
// another shape must not be taken for the fields of this one.
func (f BuildForm) Shape() string {
	h := fnv.New64a()
	for _, e := range f.Entries() {
		_, _ = h.Write([]byte(e.Name + "\n")) // never fails
	}
	return strconv.FormatUint(h.Sum64(), 36)
}

// Lists changes when Shape does or any list to choose from: the fields must
// then be drawn anew.
func (f BuildForm) Lists() string {
	h := fnv.New64a()
	for _, e := range f.Entries() {
		_, _ = h.Write([]byte(e.Name + "\n"))
		for _, g := range e.Groups {
			for _, o := range g.Options {
				_, _ = h.Write([]byte(o.Value + "\t" + o.Text + "\n"))
			}
		}
	}
	return strconv.FormatUint(h.Sum64(), 36)
}

// showTyped shows texts as they were typed, and what is wrong with them.
func (f BuildForm) showTyped(texts, faults map[string]string) {
	for _, e := range f.Entries() {
		if text, typed := texts[e.Name]; typed {
			e.Value = text
		}
		e.Error = faults[e.Name]
	}
}

// unsolvedWords says why there is nothing to draw.
func unsolvedWords(b calc.Build, r calc.Report) string {
	if len(b.Strings) == 0 {
		return "There is no string yet."
	}
	for _, f := range r.Findings {
		if f.Severity == calc.Unknown || f.Severity == calc.Fail {
			return f.Message
		}
	}
	return "No operating point was found."
}

// Action is where the form posts to.
func (v BuildView) Action() string { return "/builds/" + v.ID }

// Path is an address below the build's own.
func (v BuildView) Path(what string) string { return "/builds/" + v.ID + "/" + what }

// pressed tells whether the picture is drawn in this corner.
func (v BuildView) pressed(corner string) string {
	if v.Corner == corner {
		return "true"
	}
	return "false"
}

// verdict is how the string's worst outcome is shown.
func (s StringSummary) verdict() VerdictView { return NewVerdict(s.Outcome) }
