package web

// ConflictView tells that the build was changed elsewhere since this page was
// made, and what differs.
type ConflictView struct {
	Theirs string // the revision there is now
	Rows   []ConflictRow
	Whole  bool   // strings or rows were added or taken away: fields cannot be put together one by one
	Reload string // address of the page as it is now
}

// ConflictRow is one field that differs.
type ConflictRow struct {
	Where  string // "string A"
	Label  string // "sense resistor"
	Before string // when this page was made
	Theirs string
	Mine   string
}
