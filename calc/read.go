package calc

import (
	"fmt"
	"reflect"
	"slices"
	"strings"
)

// Read reads a build document strictly and returns the build, or Invalid with
// everything that is wrong with it, in the document's order, each fault with
// the JSON Pointer of its value: unknown, repeated and missing keys, values of
// another JSON type, numbers out of range, references to what is not there.
//
// What it returns is finite and consistent; Check takes it as it is. Kinds of
// driver that Check cannot solve yet are read like the others.
//
// Writing the build with encoding/json gives the same JSON value again, except
// that optional texts, lists and objects that are empty, and zeros that stand
// for "none" (source_resistance, tolerance, tempco, a pot's upper and lower),
// are left out, and that a missing model's rs is written as 0. Whoever must
// keep the value exactly keeps the document.
func Read(raw []byte) (Build, error) {
	var b Build
	r := reader{what: "the document"}
	n, err := parse(raw)
	if err != nil {
		return Build{}, Invalid{{"", r.what + " " + err.Error()}}
	}
	r.fill(n, reflect.ValueOf(&b).Elem(), "", rule{})
	r.format(n)
	r.references(&b)
	if err := r.sorted(); err != nil {
		return Build{}, err
	}
	return b, nil
}

// ReadPart reads one part, as it stands in a build's parts, as strictly as
// Read; pointers are relative to the part.
func ReadPart(raw []byte) (Part, error) {
	var p Part
	if err := readInto(raw, &p, "the part"); err != nil {
		return Part{}, err
	}
	return p, nil
}

// readInto reads a piece of a document into the value that to points at.
func readInto(raw []byte, to any, what string) error {
	n, err := parse(raw)
	if err != nil {
		return Invalid{{"", what + " " + err.Error()}}
	}
	r := reader{what: what}
	r.fill(n, reflect.ValueOf(to).Elem(), "", rule{})
	return r.sorted()
}

// reader collects the faults of one document.
type reader struct {
	what   string // is read, for sentences about all of it
	faults Invalid
	place  map[string]int // how many values were met before the one at a pointer
}

// mostFaults keeps the answer to a document of another kind readable.
const mostFaults = 100

func (r *reader) fault(at, format string, args ...any) {
	if r.full() {
		return
	}
	reason := fmt.Sprintf(format, args...)
	if at == "" {
		reason = r.what + " " + reason
	}
	r.faults = append(r.faults, Fault{at, reason})
}

// full tells that there is no use in reading on.
func (r *reader) full() bool { return len(r.faults) >= mostFaults }

// blamed tells whether a value was reported as a whole, so that nothing need
// be said about what it lacks.
func (r *reader) blamed(at string) bool {
	return slices.ContainsFunc(r.faults, func(f Fault) bool { return f.At == at })
}

// met notes where in the document a value stands.
func (r *reader) met(at string) {
	if r.place == nil {
		r.place = map[string]int{}
	}
	if _, twice := r.place[at]; !twice {
		r.place[at] = len(r.place)
	}
}

// sorted returns the faults in the order of the document; a missing value
// stands where its object begins.
func (r *reader) sorted() error {
	where := func(at string) int {
		for {
			if i, ok := r.place[at]; ok {
				return i
			}
			cut := strings.LastIndexByte(at, '/')
			if cut < 0 {
				return 0
			}
			at = at[:cut]
		}
	}
	slices.SortStableFunc(r.faults, func(a, b Fault) int { return where(a.At) - where(b.At) })
	if r.full() {
		r.faults = append(r.faults, Fault{"", fmt.Sprintf("%s may have more faults: these are the first %d", r.what, mostFaults)})
	}
	return r.faults.ErrOrNil()
}

// format tells a document of another kind or version apart.
func (r *reader) format(n node) {
	f, ok := n.find("format")
	if !ok || f.kind != isText || f.text == BuildFormat {
		return
	}
	if version, ours := strings.CutPrefix(f.text, "lanternbook-build/"); ours {
		r.fault("/format", "is version %.20q of the build document, and this program reads version \"1\"", version)
		return
	}
	r.fault("/format", "must be %q, not %.60q", BuildFormat, f.text)
}
