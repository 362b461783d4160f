package calc_test

import (
	"go/ast"
	"go/parser"
	"go/token"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"lanternbook/calc"
)

// unitsKnown are what a comment may give in brackets: one unit, or the two of
// a pair. The ratio and the plain number are 1.
var unitsKnown = []string{
	"1", "V", "A", "Ω", "W", "m", "m²", "°C", "K", "lm", "cd", "nm", "°", "eV",
	"K/W", "V/K", "A/V", "Ω/m", "1/K", "W/(m²·K)",
	"A, V", "°C, share of max_current",
}

// unitElsewhere are the words for a number whose unit another field gives.
var unitElsewhere = []string{"in the unit of the field", "in Unit"}

var bracketed = regexp.MustCompile(`^\[([^\]]*)\]`)

// Every number that package calc shows carries its unit in its comment, and it
// is the one that the reader's limits are in.
func TestExportedNumbersCarryTheirUnit(t *testing.T) {
	names, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, nil, parser.ParseComments)
		if err != nil {
			t.Fatal(err)
		}
		ast.Inspect(file, func(n ast.Node) bool {
			spec, ok := n.(*ast.TypeSpec)
			if !ok || !spec.Name.IsExported() {
				return true
			}
			s, ok := spec.Type.(*ast.StructType)
			if !ok {
				return true
			}
			for _, f := range s.Fields.List {
				for _, name := range f.Names {
					if name.IsExported() && holdsNumbers(f.Type) {
						found++
						unitOf(t, spec.Name.Name, name.Name, f)
					}
				}
			}
			return true
		})
	}
	if found < 150 {
		t.Errorf("found %d numbers: the test looks in the wrong place", found)
	}
}

// holdsNumbers looks for float64, Spread and Range in a field's type.
func holdsNumbers(e ast.Expr) bool {
	switch x := e.(type) {
	case *ast.Ident:
		return x.Name == "float64" || x.Name == "Spread" || x.Name == "Range"
	case *ast.StarExpr:
		return holdsNumbers(x.X)
	case *ast.ArrayType:
		return holdsNumbers(x.Elt)
	case *ast.MapType:
		return holdsNumbers(x.Value)
	}
	return false
}

func unitOf(t *testing.T, owner, name string, f *ast.Field) {
	t.Helper()
	comment := strings.TrimSpace(f.Comment.Text())
	m := bracketed.FindStringSubmatch(comment)
	if m == nil {
		if !slices.ContainsFunc(unitElsewhere, func(words string) bool { return strings.HasPrefix(comment, words) }) {
			t.Errorf("%s.%s: the comment %q begins with no unit in brackets", owner, name, comment)
		}
		return
	}
	if !slices.Contains(unitsKnown, m[1]) {
		t.Errorf("%s.%s: %q is none of the units that are used", owner, name, m[1])
	}
	if f.Tag == nil {
		return
	}
	key := regexp.MustCompile(`json:"([a-z0-9_]+)`).FindStringSubmatch(f.Tag.Value)
	first, second, ok := calc.LimitsOf(owner, key[1])
	if !ok {
		return // of a report
	}
	inComment, _, _ := strings.Cut(m[1], ",")
	if want := asComment(first.Unit); inComment != want {
		t.Errorf("%s.%s: the comment says %s, the reader's limits are in %s", owner, name, inComment, want)
	}
	if strings.Contains(m[1], ",") != (second != calc.Limit{} && second.Unit != first.Unit) {
		t.Errorf("%s.%s: the comment says [%s], the reader's limits are %v and %v", owner, name, m[1], first, second)
	}
}

func asComment(unit string) string {
	if unit == "" {
		return "1"
	}
	return unit
}
