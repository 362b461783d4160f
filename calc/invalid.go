package calc

import "strings"

// Fault is one thing wrong with a document. At is a JSON Pointer (RFC 6901) to
// the value at fault; Reason is a sentence for the person who wrote it, with
// the limit in it.
type Fault struct {
	At     string
	Reason string
}

// Invalid is everything wrong with a document, in the document's order.
type Invalid []Fault

// Error returns all faults, one after the other.
func (v Invalid) Error() string {
	var b strings.Builder
	for i, f := range v {
		if i > 0 {
			b.WriteString("; ")
		}
		if f.At != "" {
			b.WriteString(f.At + ": ")
		}
		b.WriteString(f.Reason)
	}
	return b.String()
}

// ErrOrNil returns v as an error, or nil when nothing is wrong.
func (v Invalid) ErrOrNil() error {
	if len(v) == 0 {
		return nil
	}
	return v
}
