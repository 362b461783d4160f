package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"unicode"

	"lanternbook/calc/quantity"
)

// text is a member's value as its field shows it, and as parse reads it again.
// A member that is missing, or not of the figure's kind, shows as nothing.
func (f figure) text(raw json.RawMessage) string {
	if raw == nil {
		return ""
	}
	switch f.kind {
	case ofNumber:
		if v, err := read[float64](raw); err == nil && f.tiny && v != 0 {
			return strconv.FormatFloat(v, 'g', -1, 64) + " " + f.unit
		} else if err == nil {
			return quantity.Text(v, f.unit)
		}
	case ofSpread:
		if v, err := readSpread(raw); err == nil {
			return quantity.FormatSpread(v, f.unit)
		}
	case ofPairs:
		if pairs, err := read[[][2]float64](raw); err == nil {
			return f.pairsText(pairs)
		}
	case ofChoice:
		if v, err := read[bool](raw); err == nil && v {
			return f.yes
		}
	default:
		if v, err := read[string](raw); err == nil {
			return plainLines(v)
		}
	}
	return ""
}

// pairsText writes one pair a line.
func (f figure) pairsText(pairs [][2]float64) string {
	lines := make([]string, len(pairs))
	for i, p := range pairs {
		lines[i] = quantity.Text(p[0], f.unit) + "  " + quantity.Text(p[1], f.second)
	}
	return strings.Join(lines, "\n")
}

// parse reads what was typed, which is not empty, into a JSON value. An error
// is a sentence for the person who typed.
func (f figure) parse(typed string) (any, error) {
	switch f.kind {
	case ofNumber:
		if err := f.bare(typed); err != nil {
			return nil, err
		}
		return quantity.Parse(typed, f.unit)
	case ofSpread:
		if err := f.bare(typed); err != nil {
			return nil, err
		}
		s, err := quantity.ParseSpread(typed, f.unit)
		if err != nil || s.Bare {
			return s.Typ, err
		}
		return limits{s.Min, s.Typ, s.Max}, nil
	case ofPairs:
		return f.parsePairs(typed)
	case ofChoice:
		return typed == f.yes, nil
	}
	return typed, nil
}

// bare refuses a number without its unit where people write a prefix: 20 in a
// field of amps is a slip for 20 mA, and would pass every check of plausibility
// in some other build.
func (f figure) bare(typed string) error {
	if !f.scaled || f.unit == quantity.Number {
		return nil
	}
	number, err := quantity.ParseSpread(typed, quantity.Number)
	plain := err == nil && !strings.Contains(typed, "%")
	if !plain || number.Min == 0 && number.Max == 0 {
		return nil
	}
	return fmt.Errorf("%q has no unit: write it like %s", strings.TrimSpace(typed), f.example)
}

// parsePairs reads one pair a line; a line without anything is none.
func (f figure) parsePairs(typed string) (any, error) {
	pairs := [][2]float64{}
	for i, line := range strings.Split(plainLines(typed), "\n") {
		if strings.TrimSpace(line) == "" {
			continue
		}
		pair, err := f.parsePair(line)
		if err != nil {
			return nil, fmt.Errorf("line %d: %w", i+1, err)
		}
		pairs = append(pairs, pair)
	}
	return pairs, nil
}

func (f figure) parsePair(line string) (pair [2]float64, err error) {
	pieces := valuesOf(line)
	if len(pieces) != 2 {
		return pair, fmt.Errorf("write two values, like %s", f.example)
	}
	if err = f.bare(pieces[0]); err != nil {
		return pair, err
	}
	if pair[0], err = quantity.Parse(pieces[0], f.unit); err != nil {
		return pair, err
	}
	pair[1], err = quantity.Parse(pieces[1], f.second)
	return pair, err
}

// valuesOf cuts a line into values: at a semicolon, a bar, a tab, a comma with
// a blank behind it, a slash with blanks round it, and at blanks before which a
// value is complete.
func valuesOf(line string) []string {
	line = strings.NewReplacer(";", "|", "\t", "|", ", ", "|", " / ", "|").Replace(strings.TrimSpace(line))
	var pieces []string
	for part := range strings.SplitSeq(line, "|") {
		for i, word := range strings.Fields(part) {
			if i == 0 || startsValue(word) {
				pieces = append(pieces, word)
			} else {
				pieces[len(pieces)-1] += " " + word
			}
		}
	}
	return pieces
}

func startsValue(word string) bool {
	word = strings.TrimLeft(word, "+-−–.,")
	return word != "" && unicode.IsDigit(rune(word[0]))
}

// plainLines is text with the line ends that documents have; a browser sends
// those of RFC 9110's form data.
func plainLines(s string) string { return strings.ReplaceAll(s, "\r\n", "\n") }

func read[T any](raw json.RawMessage) (T, error) {
	var v T
	err := json.Unmarshal(raw, &v)
	return v, err
}

// readSpread reads a spread in either of its two spellings.
func readSpread(raw json.RawMessage) (quantity.Spread, error) {
	if v, err := read[float64](raw); err == nil {
		return quantity.Spread{Min: v, Typ: v, Max: v, Bare: true}, nil
	}
	v, err := read[map[string]float64](raw)
	if err != nil || len(v) != 3 {
		return quantity.Spread{}, errors.New("no spread")
	}
	return quantity.Spread{Min: v["min"], Typ: v["typ"], Max: v["max"]}, nil
}
