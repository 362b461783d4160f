package quantity_test

import (
	"bytes"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// near fails when got is further than tol from want, or either is NaN.
func near(t *testing.T, name string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %v, want %v within %v", name, got, want, tol)
	}
}

// published reads a table of testdata/published, each row by its column names.
func published(t *testing.T, name string, rows int) []map[string]string {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "..", "testdata", "published", name))
	if err != nil {
		t.Fatal(err)
	}
	all, err := csv.NewReader(bytes.NewReader(raw)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != rows+1 {
		t.Fatalf("%s has %d rows, want %d", name, len(all)-1, rows)
	}
	var table []map[string]string
	for _, line := range all[1:] {
		row := map[string]string{}
		for i, head := range all[0] {
			row[head] = line[i]
		}
		table = append(table, row)
	}
	return table
}
