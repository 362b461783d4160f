package store

import (
	"context"
	"database/sql"
	"encoding/json"
	"fmt"
	"slices"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// The bounds of a search. SQLite refuses statements with more terms and
// patterns that are longer than some multiple of these.
const (
	mostWords   = 100   // of a query; more cannot narrow it down any further in practice
	longestWord = 10000 // [bytes] in a query; a longer one is in no build
)

// Builds returns the builds on the shelf in which every word of the query
// occurs - in title, client, site, a tag or the summary's Search - the one last
// touched first. Case, accents and other marks do not count: "grosse" finds
// GRÖßE. An empty query finds all. The documents and Summary.Search are left out.
func (s *Store) Builds(ctx context.Context, query string) (builds []Build, err error) {
	defer wrap(&err, "search builds")
	words := strings.Fields(fold(query))
	slices.Sort(words)
	words = slices.Compact(words)
	words = words[:min(len(words), mostWords)]
	var patterns []any
	for _, word := range words {
		if len(word) > longestWord {
			return nil, nil
		}
		patterns = append(patterns, "%"+escape.Replace(word)+"%")
	}
	// Only the number of conditions comes from the query, never its text.
	conditions := strings.Repeat(` AND folded LIKE ? ESCAPE '\'`, len(patterns))
	err = s.each(ctx, fmt.Sprintf(`
		SELECT id, revision, created, updated, step > first_step, step < last_step,
			title, client, site, tags, verdict, card
		FROM builds
		WHERE deleted_at IS NULL%s
		ORDER BY updated DESC, id DESC`, conditions), func(rows *sql.Rows) error {
		var b Build
		var created, updated int64
		var tags string
		failed := rows.Scan(&b.ID, &b.Revision, &created, &updated, &b.CanUndo, &b.CanRedo,
			&b.Summary.Title, &b.Summary.Client, &b.Summary.Site, &tags, &b.Summary.Verdict, &b.Summary.Card)
		if failed != nil {
			return failed
		}
		b.Created, b.Updated = moment(created), moment(updated)
		builds = append(builds, b)
		return json.Unmarshal([]byte(tags), &builds[len(builds)-1].Summary.Tags)
	}, patterns...)
	if err != nil {
		return nil, err
	}
	return builds, nil
}

// escape takes the meaning from the characters that LIKE treats as wildcards.
var escape = strings.NewReplacer(`\`, `\\`, `%`, `\%`, `_`, `\_`)

// folded is the text that a search looks through. Each piece stands on a line
// of its own, so that no word is found across two of them.
func folded(sum Summary) string {
	pieces := append([]string{sum.Title, sum.Client, sum.Site}, sum.Tags...)
	return fold(strings.Join(append(pieces, sum.Search), "\n"))
}

// fold takes from text what a search must not depend on: compatibility forms
// (NFKD: a ligature, a no-break space, the ohm sign for omega), accents and
// other marks, and case. Going by way of the capital brings together letters
// with several small forms, such as σ and ς; ß has no capital there and becomes
// "ss". Control characters become blanks: LIKE would stop at a NUL.
//
// Source: Unicode Standard Annex 15, "Unicode Normalization Forms".
func fold(text string) string {
	text = strings.Map(func(r rune) rune {
		switch {
		case unicode.Is(unicode.Mn, r):
			return -1
		case unicode.IsControl(r):
			return ' '
		}
		return unicode.ToLower(unicode.ToUpper(r))
	}, norm.NFKD.String(text))
	return strings.ReplaceAll(text, "ß", "ss")
}
