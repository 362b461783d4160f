package calc

import "strings"

// escape writes a key as one step of a JSON Pointer.
//
// Source: RFC 6901.
func escape(key string) string {
	if !strings.ContainsAny(key, "~/") {
		return key
	}
	return strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
}

// unknown reports a key that the object does not have: the variant that it
// belongs to, else the known key that it comes closest to.
func (r *reader) unknown(at, key string, fields []field, alien func(key string) string) {
	if alien != nil {
		if where := alien(key); where != "" {
			r.fault(at, "the key %.60q belongs to %s", key, where)
			return
		}
	}
	known := make([]string, len(fields))
	for i, f := range fields {
		known[i] = f.key
	}
	if likely := closest(key, known); likely != "" {
		r.fault(at, "the key %.60q is unknown: perhaps %q is meant", key, likely)
		return
	}
	r.fault(at, "the key %.60q is unknown", key)
}

// closest returns the known word that a mistyped one most likely stands for,
// empty when none is close: at most a third of its letters may differ.
func closest(word string, known []string) string {
	best, least := "", 1+len(word)/3
	for _, k := range known {
		if d := distance(plainKey(word), plainKey(k)); d < least {
			best, least = k, d
		}
	}
	return best
}

// plainKey drops what differs between habits of writing keys.
func plainKey(s string) string {
	s = strings.ToLower(s[:min(len(s), 60)])
	return strings.NewReplacer("_", "", "-", "", " ", "").Replace(s)
}

// distance counts the letters to insert, delete, replace or swap with their
// neighbour that turn a into b.
func distance(a, b string) int {
	before := make([]int, len(b)+1) // the row before the last
	last := make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row := make([]int, len(b)+1)
		row[0] = i
		for j := 1; j <= len(b); j++ {
			step := 1
			if a[i-1] == b[j-1] {
				step = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+step)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last = last, row
	}
	return last[len(b)]
}
