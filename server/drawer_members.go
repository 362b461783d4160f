package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"slices"
	"strings"
)

// members is a JSON object as it was written: its keys in their order, their
// values untouched. An edit changes one value and leaves the others byte for
// byte as they were.
type members []member

type member struct {
	key   string
	value json.RawMessage
}

// readMembers reads a JSON object.
func readMembers(document []byte) (members, error) {
	d := json.NewDecoder(bytes.NewReader(document))
	open, err := d.Token()
	if err != nil {
		return nil, err
	}
	if open != json.Delim('{') {
		return nil, errors.New("not a JSON object")
	}
	var m members
	for d.More() {
		var token json.Token
		if token, err = d.Token(); err != nil {
			return nil, err
		}
		key, _ := token.(string) // More is true: the token is a key
		var value json.RawMessage
		if err = d.Decode(&value); err != nil {
			return nil, err
		}
		m = append(m, member{key, value})
	}
	_, err = d.Token()
	return m, err
}

// MarshalJSON writes the object again.
func (m members) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, one := range m {
		if i > 0 {
			b.WriteByte(',')
		}
		key, err := json.Marshal(one.key)
		if err != nil {
			return nil, err
		}
		b.Write(key)
		b.WriteByte(':')
		b.Write(one.value)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

// get returns the value at a path of keys parted by dots; nil when there is
// none.
func (m members) get(path string) json.RawMessage {
	key, rest, deeper := strings.Cut(path, ".")
	i := m.index(key)
	if i < 0 {
		return nil
	}
	if !deeper {
		return m[i].value
	}
	inner, err := readMembers(m[i].value)
	if err != nil {
		return nil
	}
	return inner.get(rest)
}

// set returns the object with another value at a path, new members at the end.
// A nil value takes the member out, and with its last member goes the object
// that held it.
func (m members) set(path string, value json.RawMessage) members {
	key, rest, deeper := strings.Cut(path, ".")
	i := m.index(key)
	if deeper {
		var inner members
		if i >= 0 {
			inner, _ = readMembers(m[i].value) // what is no object is replaced by one
		}
		inner = inner.set(rest, value)
		value = nil
		if len(inner) > 0 {
			value, _ = inner.MarshalJSON() // keys are strings: cannot fail
		}
	}
	switch {
	case value == nil && i < 0:
		return m
	case value == nil:
		return slices.Delete(slices.Clone(m), i, i+1)
	case i < 0:
		return append(slices.Clip(m), member{key, value})
	}
	m = slices.Clone(m)
	m[i].value = value
	return m
}

func (m members) index(key string) int {
	return slices.IndexFunc(m, func(one member) bool { return one.key == key })
}
