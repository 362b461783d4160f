package calc_test

import (
	"encoding/json"
	"math"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"

	jsonpatch "github.com/evanphx/json-patch/v5"

	"lanternbook/calc"
)

// remedied is how many builds the tests of remedies look at; always the same.
const remedied = 25

// faulty are builds with something to cure.
func faulty(t *testing.T) func(i int) calc.Build {
	t.Helper()
	made := recipe{strings: 2, quantity: 2, coupled: true, held: true, tooMany: 1.4, partsOf: drawerParts(t)}.builds()
	return func(i int) calc.Build {
		b := made.Example(i)
		least := 0.05 // so that the supply's loading has something to say
		b.Supply.MaxCurrent = &least
		return b
	}
}

// written is a build as its document.
func written(t *testing.T, b calc.Build) []byte {
	t.Helper()
	raw, err := json.Marshal(b)
	if err != nil {
		t.Fatal(err)
	}
	return raw
}

// reported reads and checks a document.
func reported(t *testing.T, raw []byte) calc.Report {
	t.Helper()
	b, err := calc.Read(raw)
	if err != nil {
		t.Fatal(err)
	}
	return check(t, b)
}

// patched applies a remedy's patch to a document, as RFC 6902 has it.
func patched(t *testing.T, raw []byte, operations []calc.Operation) []byte {
	t.Helper()
	text, err := json.Marshal(operations)
	if err != nil {
		t.Fatal(err)
	}
	patch, err := jsonpatch.DecodePatch(text)
	if err != nil {
		t.Fatal(err)
	}
	after, err := patch.Apply(raw)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return after
}

func TestEveryRemedyImprovesItsFinding(t *testing.T) {
	build := faulty(t)
	tried := 0
	for i := range remedied {
		raw := written(t, build(i))
		for _, f := range reported(t, raw).Findings {
			for _, remedy := range f.Remedies {
				tried++
				after := reported(t, patched(t, raw, remedy.Patch))
				k := slices.IndexFunc(after.Findings, func(g calc.Finding) bool { return g.Code == f.Code && g.Where == f.Where })
				if k < 0 {
					t.Errorf("build %d: %q makes the finding %s of %s go away without an answer", i, remedy.Text, f.Code, f.Where)
					continue
				}
				if !improved(f, after.Findings[k]) {
					t.Errorf("build %d: %q does not improve %s of %s: %s, was %s", i, remedy.Text, f.Code, f.Where, after.Findings[k].Message, f.Message)
				}
			}
		}
	}
	if tried < remedied {
		t.Errorf("only %d remedies were tried", tried)
	}
}

// improved says whether a finding got better: a better severity, never by
// becoming unknown, or a value further on the good side.
func improved(before, after calc.Finding) bool {
	order := []calc.Severity{calc.Fail, calc.Tight, calc.Pass}
	was, is := slices.Index(order, before.Severity), slices.Index(order, after.Severity)
	if was < 0 || is < 0 || before.Value == nil || after.Value == nil {
		return false
	}
	if is != was {
		return is > was
	}
	if before.Code == "wanted" {
		return math.Abs(*after.Value-*after.Limit) < math.Abs(*before.Value-*before.Limit)
	}
	if before.Least {
		return *after.Value-*after.Limit > *before.Value-*before.Limit
	}
	return *after.Limit-*after.Value > *before.Limit-*before.Value
}

func TestUndoingARemedyRestoresTheReport(t *testing.T) {
	build := faulty(t)
	undone := 0
	for i := range remedied {
		raw := written(t, build(i))
		before := reported(t, raw)
		for _, f := range before.Findings {
			for _, remedy := range f.Remedies[:min(1, len(f.Remedies))] {
				back := patched(t, patched(t, raw, remedy.Patch), undo(t, raw, remedy.Patch))
				if !jsonpatch.Equal(raw, back) {
					t.Fatalf("build %d: undoing %q leaves another document", i, remedy.Text)
				}
				if after := reported(t, back); !reflect.DeepEqual(before, after) {
					t.Errorf("build %d: undoing %q leaves another report", i, remedy.Text)
				}
				undone++
			}
		}
	}
	if undone < remedied/2 {
		t.Errorf("only %d remedies were undone", undone)
	}
}

// undo is the patch that takes a patch back: its steps in reverse, each with
// what stood there before it.
func undo(t *testing.T, raw []byte, operations []calc.Operation) []calc.Operation {
	t.Helper()
	var back []calc.Operation
	for _, op := range operations {
		old, there := valueAt(t, raw, op.Path)
		switch {
		case op.Op == "replace" || op.Op == "add" && there && !strings.HasSuffix(op.Path, "/-") && !inArray(t, raw, op.Path):
			back = append(back, calc.Operation{Op: "replace", Path: op.Path, Value: old})
		case op.Op == "add":
			back = append(back, calc.Operation{Op: "remove", Path: op.Path})
		case op.Op == "remove":
			back = append(back, calc.Operation{Op: "add", Path: op.Path, Value: old})
		default:
			t.Fatalf("unknown operation %q", op.Op)
		}
		raw = patched(t, raw, []calc.Operation{op})
	}
	slices.Reverse(back)
	return back
}

// valueAt reads the value at a JSON Pointer without escapes in its last steps.
func valueAt(t *testing.T, raw []byte, pointer string) (any, bool) {
	t.Helper()
	var v any
	if err := json.Unmarshal(raw, &v); err != nil {
		t.Fatal(err)
	}
	for _, step := range strings.Split(pointer, "/")[1:] {
		step = strings.NewReplacer("~1", "/", "~0", "~").Replace(step)
		switch at := v.(type) {
		case map[string]any:
			next, ok := at[step]
			if !ok {
				return nil, false
			}
			v = next
		case []any:
			k, err := strconv.Atoi(step)
			if err != nil || k >= len(at) {
				return nil, false
			}
			v = at[k]
		default:
			return nil, false
		}
	}
	return v, true
}

func inArray(t *testing.T, raw []byte, pointer string) bool {
	t.Helper()
	parent, ok := valueAt(t, raw, pointer[:strings.LastIndexByte(pointer, '/')])
	_, array := parent.([]any)
	return ok && array
}
