package web

import "strconv"

// DrawerView is the library of parts.
type DrawerView struct {
	Query  string // as typed
	Type   string // the only type shown; "" shows all
	Notice *NoticeView
	Types  []TypeView
	Found  PartsView
	Bin    string // "Bin: 2 parts"; "" when it is empty
}

// TypeView is a type of the drawer as something to choose.
type TypeView struct {
	Text  string // "LEDs"
	Count string // "9"; "" where it is of no use
	Href  string
	Here  bool
}

// PartsView is what a search of the drawer gave.
type PartsView struct {
	Query  string
	Type   string
	Words  string // "35 parts", "3 of 35 parts"
	Groups []PartGroupView
	Bare   bool   // the drawer itself is empty
	Clear  string // address that shows the whole drawer
}

// PartGroupView is the parts of one type.
type PartGroupView struct {
	Type  string   // "led"
	Title string   // "LEDs"
	Add   string   // address of a new one's form
	New   string   // "new LED"
	Heads []string // of the columns after the name
	Rows  []PartRowView
}

// PartRowView is one part.
type PartRowView struct {
	ID     string
	Key    string
	Name   string
	About  string // "TO-92", "5 mm"
	Href   string
	Swatch *Light // nil unless it shines
	Cells  []CellView
	Copy   string // address of a form filled from it
	Delete string // address that takes it out by a POST
}

// CellView is one figure of a part.
type CellView struct {
	Head string // the column's, for a narrow page
	Text string // "2.8 / 2.95 / 3.2 V"; "" when it is not known
	At   string // "20 mA", what it is stated at; may be empty
}

// PartView is the form of one part.
type PartView struct {
	Title   string     // "BC547B", "A new LED"
	Word    string     // "NPN transistor"
	Type    string     // "npn"
	Types   []TypeView // for a new part: what else it might be
	Action  string     // address that the form is sent to
	Look    string     // address that the form is sent to for a look alone
	Key     string     // of a part that exists
	From    string     // key of the part that a new one starts from
	Seen    string     // when the part was last changed, as this form knows it
	Groups  []FieldGroupView
	Other   []string   // what is wrong with no field's value
	Changed []LinkView // fields that somebody changed meanwhile, and what stands there now
	Notice  *NoticeView
	Seeing  LookView
	Save    string // what the button says
	Copy    string // address of a form filled from this part; "" for a new one
	Delete  string // address that takes it out by a POST; "" for a new one
}

// FieldGroupView is fields that belong together.
type FieldGroupView struct {
	Title  string
	About  string
	Folded bool // shown on demand
	Open   bool // shown now all the same
	Filled int  // fields with something in them
	Fields []FieldView
}

// filled says how much a folded group holds.
func (v FieldGroupView) filled() string {
	switch v.Filled {
	case 0:
		return "empty"
	case 1:
		return "1 figure"
	}
	return strconv.Itoa(v.Filled) + " figures"
}

// LookView is a part at a glance: what the figures typed so far amount to.
type LookView struct {
	Swatch  *Light
	Curves  []CurveView
	Pins    []string // from the left
	Facts   []FactView
	Nothing string // why nothing can be shown yet; "" when something can
}

// FactView is a figure that follows from others.
type FactView struct {
	Name string
	Text string
}
