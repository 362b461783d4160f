package main

import (
	"net/http"
	"slices"
	"strconv"
	"strings"
)

// A build's entity tag is its revision in quotes: "7".

// entityTag returns the ETag of a revision.
func entityTag(revision int64) string {
	return `"` + strconv.FormatInt(revision, 10) + `"`
}

// tagList is a list of entity tags as If-Match and If-None-Match carry it
// (RFC 9110 section 13.1).
type tagList struct {
	any    bool // "*"
	strong []string
	weak   []string
}

// have tells whether a revision is in the list by strong comparison.
func (l tagList) have(revision int64) bool {
	return l.any || slices.Contains(l.strong, entityTag(revision))
}

// weaklyHave tells the same by weak comparison, which If-None-Match asks for.
func (l tagList) weaklyHave(revision int64) bool {
	return l.have(revision) || slices.Contains(l.weak, entityTag(revision))
}

// tagsOf reads the entity tags of a header. A header that is no such list is a
// refusal with status 400, an absent one an empty list.
func tagsOf(r *http.Request, header string) (tagList, error) {
	var list tagList
	value := strings.Join(r.Header.Values(header), ",")
	if strings.TrimSpace(value) == "*" {
		return tagList{any: true}, nil
	}
	for rest := strings.Trim(value, " \t,"); rest != ""; rest = strings.TrimLeft(rest, " \t,") {
		weak := strings.HasPrefix(rest, "W/")
		rest = strings.TrimPrefix(rest, "W/")
		end := -1
		if strings.HasPrefix(rest, `"`) {
			end = strings.IndexByte(rest[1:], '"')
		}
		if end < 0 {
			return tagList{}, refuse(http.StatusBadRequest, "The "+header+" header cannot be read",
				`It takes entity tags in quotes, such as "7".`)
		}
		tag := rest[:end+2]
		rest = rest[end+2:]
		if weak {
			list.weak = append(list.weak, tag)
		} else {
			list.strong = append(list.strong, tag)
		}
	}
	return list, nil
}
