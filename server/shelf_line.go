package main

import (
	"bytes"
	"encoding/json"
	"strconv"
	"strings"
)

// lineOf returns the line, counted from 1, on which the value at a JSON Pointer
// (RFC 6901) begins. It finds none in a text that is no JSON up to there, and
// none for a value that is missing.
func lineOf(document []byte, pointer string) (line int, found bool) {
	if pointer == "" {
		return 0, false
	}
	d := json.NewDecoder(bytes.NewReader(document))
	for _, part := range strings.Split(pointer, "/")[1:] {
		part = strings.NewReplacer("~1", "/", "~0", "~").Replace(part)
		open, err := d.Token()
		if err != nil || !enter(d, open, part) {
			return 0, false
		}
	}
	at := int(d.InputOffset())
	at += len(document[at:]) - len(bytes.TrimLeft(document[at:], " \t\r\n:,"))
	return 1 + bytes.Count(document[:at], []byte("\n")), true
}

// enter moves the decoder, which has just read the token open, to the value of
// a key or an index inside.
func enter(d *json.Decoder, open json.Token, part string) bool {
	index := 0
	for d.More() {
		key := strconv.Itoa(index)
		if open == json.Delim('{') {
			token, err := d.Token()
			name, is := token.(string)
			if err != nil || !is {
				return false
			}
			key = name
		} else if open != json.Delim('[') {
			return false
		}
		if key == part {
			return true
		}
		var skipped json.RawMessage
		if d.Decode(&skipped) != nil {
			return false
		}
		index++
	}
	return false
}
