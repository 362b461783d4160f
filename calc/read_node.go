package calc

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"unicode/utf8"
)

const (
	// largestDocument is far beyond any job: some ten thousand strings.
	largestDocument = 4 << 20 // bytes
	// deepest guards the recursion; a build nests some seven levels.
	deepest = 32
)

// nodeKind is what a JSON value is; its text is how a sentence names it.
type nodeKind string

const (
	isObject nodeKind = "an object"
	isArray  nodeKind = "a list"
	isText   nodeKind = "text"
	isNumber nodeKind = "a number"
	isBool   nodeKind = "true or false"
	isNull   nodeKind = "null"
)

// node is one JSON value as it was written: members keep their order and
// duplicates, numbers their digits.
type node struct {
	kind    nodeKind
	text    string   // of text, decoded; of a number or a bool, as written
	members []member // of an object
	items   []node   // of a list
}

type member struct {
	key   string
	value node
}

// find returns the first member of that key.
func (n node) find(key string) (node, bool) {
	for _, m := range n.members {
		if m.key == key {
			return m.value, true
		}
	}
	return node{}, false
}

// parse turns a document into nodes. Its error is a sentence about the whole
// document, with line and column where there is a place to name.
func parse(raw []byte) (node, error) {
	switch {
	case len(raw) > largestDocument:
		return node{}, fmt.Errorf("is larger than %d MB", largestDocument>>20)
	case bytes.HasPrefix(raw, []byte("\xef\xbb\xbf")):
		return node{}, errors.New("starts with a byte order mark: save it as UTF-8 without one")
	case !utf8.Valid(raw):
		return node{}, errors.New("is not UTF-8 text")
	}
	var whole json.RawMessage
	if err := json.Unmarshal(raw, &whole); err != nil {
		return node{}, syntaxError(raw, err)
	}
	s := scanner{rest: whole}
	n, err := s.value(0)
	return n, err
}

func syntaxError(raw []byte, err error) error {
	var syntax *json.SyntaxError
	if !errors.As(err, &syntax) {
		return fmt.Errorf("is not JSON: %w", err)
	}
	before := raw[:min(max(syntax.Offset-1, 0), int64(len(raw)))]
	line := 1 + bytes.Count(before, []byte("\n"))
	column := 1 + utf8.RuneCount(before[bytes.LastIndexByte(before, '\n')+1:])
	return fmt.Errorf("is not JSON, at line %d, column %d: %w", line, column, err)
}

// scanner walks over bytes that are known to be valid JSON, so that it need
// not look for faults in the grammar.
type scanner struct{ rest []byte }

func (s *scanner) blank() { s.rest = bytes.TrimLeft(s.rest, " \t\r\n") }

func (s *scanner) value(depth int) (node, error) {
	if depth > deepest {
		return node{}, fmt.Errorf("is nested more than %d levels deep", deepest)
	}
	s.blank()
	switch c := s.rest[0]; c {
	case '{':
		return s.object(depth)
	case '[':
		return s.array(depth)
	case '"':
		text, err := s.text()
		return node{kind: isText, text: text}, err
	default:
		word := s.word()
		kind := isNumber
		switch c {
		case 't', 'f':
			kind = isBool
		case 'n':
			kind = isNull
		}
		return node{kind: kind, text: word}, nil
	}
}

func (s *scanner) object(depth int) (node, error) {
	n := node{kind: isObject}
	s.rest = s.rest[1:]
	for s.blank(); s.rest[0] != '}'; s.blank() {
		if s.rest[0] == ',' {
			s.rest = s.rest[1:]
			s.blank()
		}
		key, err := s.text()
		if err != nil {
			return n, err
		}
		s.blank()
		s.rest = s.rest[1:] // the colon
		v, err := s.value(depth + 1)
		if err != nil {
			return n, err
		}
		n.members = append(n.members, member{key, v})
	}
	s.rest = s.rest[1:]
	return n, nil
}

func (s *scanner) array(depth int) (node, error) {
	n := node{kind: isArray}
	s.rest = s.rest[1:]
	for s.blank(); s.rest[0] != ']'; s.blank() {
		if s.rest[0] == ',' {
			s.rest = s.rest[1:]
		}
		v, err := s.value(depth + 1)
		if err != nil {
			return n, err
		}
		n.items = append(n.items, v)
	}
	s.rest = s.rest[1:]
	return n, nil
}

// text reads a string. Half a surrogate pair would come out as U+FFFD and not
// be the same value when written again; it is refused.
func (s *scanner) text() (string, error) {
	end := 1
	for s.rest[end] != '"' {
		if s.rest[end] == '\\' {
			end++
		}
		end++
	}
	quoted := s.rest[:end+1]
	s.rest = s.rest[end+1:]
	if !bytes.ContainsRune(quoted, '\\') {
		return string(quoted[1:end]), nil
	}
	var text string
	if err := json.Unmarshal(quoted, &text); err != nil {
		return "", fmt.Errorf("is not JSON: %w", err)
	}
	if strings.ContainsRune(text, utf8.RuneError) && !bytes.Contains(bytes.ToLower(quoted), []byte(`\ufffd`)) && !bytes.Contains(quoted, []byte("\ufffd")) {
		return "", fmt.Errorf("has half a character in %s", quoted[:min(len(quoted), 60)])
	}
	return text, nil
}

// word reads a number, true, false or null.
func (s *scanner) word() string {
	end := bytes.IndexAny(s.rest, " \t\r\n,]}")
	if end < 0 {
		end = len(s.rest)
	}
	word := string(s.rest[:end])
	s.rest = s.rest[end:]
	return word
}
