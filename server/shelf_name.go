package main

import (
	"encoding/json"
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// longestSlug is the most letters of a slug: enough to tell parts apart, and
// short enough for a file name on any disk.
const longestSlug = 48

// unmarked spells letters that have no plain one inside them.
var unmarked = strings.NewReplacer("ß", "ss", "æ", "ae", "œ", "oe", "ø", "o", "đ", "d", "ł", "l", "þ", "th",
	"µ", "u", "μ", "u", "ω", "ohm", "&", " and ", "+", " plus ")

// slug makes a name that keys and file names can be of a title: lower case
// letters a to z and digits, parted by single dashes. It is "" when the title
// has none of them.
func slug(title string) string {
	lower := unmarked.Replace(strings.ToLower(norm.NFKC.String(title)))
	var b strings.Builder
	for _, r := range norm.NFKD.String(lower) {
		switch {
		case r >= 'a' && r <= 'z' || r >= '0' && r <= '9':
			b.WriteRune(r)
		case unicode.Is(unicode.Mn, r) || r == '\'' || r == '’': // a mark on the letter before; Tom's
		default:
			b.WriteByte('-')
		}
	}
	words := strings.FieldsFunc(b.String(), func(r rune) bool { return r == '-' })
	made := ""
	for _, word := range words {
		next := strings.TrimPrefix(made+"-"+word, "-")
		if len(next) > longestSlug {
			if made == "" {
				made = word[:longestSlug]
			}
			break
		}
		made = next
	}
	return made
}

// copied matches a title that copyTitle made.
var copied = regexp.MustCompile(`^(.*), copy(?: (\d{1,4}))?$`)

// copyTitle is what the copy of a build is called: "Quay, copy", then
// "Quay, copy 2".
func copyTitle(title string) string {
	found := copied.FindStringSubmatch(title)
	if found == nil {
		return title + ", copy"
	}
	n, err := strconv.Atoi(found[2])
	if err != nil { // none was there
		n = 1
	}
	return fmt.Sprintf("%s, copy %d", found[1], n+1)
}

// retitled returns a build's document with another title and nothing else
// changed.
func retitled(document []byte, title string) ([]byte, error) {
	patch, err := json.Marshal([]map[string]any{{"op": "replace", "path": "/title", "value": title}})
	if err != nil {
		return nil, err
	}
	return applyPatch(document, patch)
}
