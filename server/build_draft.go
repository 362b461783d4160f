package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"lanternbook/calc"
)

// draft is a document while a form's edits are gathered: the values as they
// come to be, and the JSON Patch that makes them so. Numbers keep the text that
// the document has.
type draft struct {
	tree any // of map[string]any, []any, json.Number, string, bool and nil
	ops  []calc.Operation
}

// newDraft starts from a document, which the strict reader has taken before.
func newDraft(document []byte) (*draft, error) {
	tree, err := decodeTree(document)
	return &draft{tree: tree}, err
}

func decodeTree(document []byte) (any, error) {
	reader := json.NewDecoder(bytes.NewReader(document))
	reader.UseNumber()
	var tree any
	err := reader.Decode(&tree)
	return tree, err
}

// asTree turns any value into what decodeTree makes of its JSON.
func asTree(value any) (any, error) {
	text, err := json.Marshal(value)
	if err != nil {
		return nil, err
	}
	return decodeTree(text)
}

// get returns the value at a JSON Pointer, and whether there is one.
func (d *draft) get(at string) (any, bool) {
	node := d.tree
	for _, token := range pointerTokens(at) {
		switch n := node.(type) {
		case map[string]any:
			value, has := n[token]
			if !has {
				return nil, false
			}
			node = value
		case []any:
			i, err := strconv.Atoi(token)
			if err != nil || i < 0 || i >= len(n) {
				return nil, false
			}
			node = n[i]
		default:
			return nil, false
		}
	}
	return node, true
}

// set gives the place at a JSON Pointer a value, whether or not it has one. An
// object that should hold it and is missing is made. A value equal to what
// stands there changes nothing.
func (d *draft) set(at string, value any) error {
	value, err := asTree(value)
	if err != nil {
		return err
	}
	old, has := d.get(at)
	if has && sameJSON(old, value) {
		return nil
	}
	parent, _ := pointerSplit(at)
	if _, there := d.get(parent); !there {
		if err := d.set(parent, map[string]any{}); err != nil {
			return err
		}
	}
	op := "add"
	if has {
		op = "replace"
	}
	return d.do(op, at, value)
}

// insert puts a value into a list, before what stands at the pointer; "-" as
// its last part is the end of the list. A list that is missing is made.
func (d *draft) insert(at string, value any) error {
	value, err := asTree(value)
	if err != nil {
		return err
	}
	parent, _ := pointerSplit(at)
	if _, there := d.get(parent); !there {
		return d.set(parent, []any{value})
	}
	return d.do("add", at, value)
}

// remove takes the value at a JSON Pointer away, if there is one.
func (d *draft) remove(at string) error {
	if _, has := d.get(at); !has {
		return nil
	}
	return d.do("remove", at, nil)
}

// do applies one operation to the tree and notes it.
func (d *draft) do(op, at string, value any) error {
	noted, err := asTree(value) // a copy: later operations change what is in the tree
	if err != nil {
		return err
	}
	tree, err := putAt(d.tree, pointerTokens(at), op, value)
	if err != nil {
		return fmt.Errorf("%s %s: %w", op, at, err)
	}
	d.tree = tree
	d.ops = append(d.ops, calc.Operation{Op: op, Path: at, Value: noted})
	return nil
}

// patch is the JSON Patch gathered so far.
func (d *draft) patch() ([]byte, error) {
	if d.ops == nil {
		return []byte("[]"), nil
	}
	return json.Marshal(d.ops)
}

// putAt returns node with an operation done at the path below it.
func putAt(node any, path []string, op string, value any) (any, error) {
	if len(path) == 0 {
		return value, nil
	}
	token, last := path[0], len(path) == 1
	switch n := node.(type) {
	case map[string]any:
		if last {
			if op == "remove" {
				delete(n, token)
			} else {
				n[token] = value
			}
			return n, nil
		}
		child, err := putAt(n[token], path[1:], op, value)
		if err == nil {
			n[token] = child
		}
		return n, err
	case []any:
		i, err := strconv.Atoi(token)
		if token == "-" && last {
			i, err = len(n), nil
		}
		most := len(n) - 1
		if last && op == "add" {
			most = len(n)
		}
		switch {
		case err != nil || i < 0 || i > most:
			return n, fmt.Errorf("there is no place %q in the list", token)
		case !last:
			n[i], err = putAt(n[i], path[1:], op, value)
			return n, err
		case op == "add":
			return slices.Insert(n, i, value), nil
		case op == "remove":
			return slices.Delete(n, i, i+1), nil
		}
		n[i] = value
		return n, nil
	}
	return node, fmt.Errorf("there is nothing that could hold %q", token)
}

// sameJSON tells whether two values are the same JSON value: 2.20 is 2.2.
func sameJSON(a, b any) bool {
	switch x := a.(type) {
	case map[string]any:
		y, ok := b.(map[string]any)
		if !ok || len(x) != len(y) {
			return false
		}
		for key, value := range x {
			if other, has := y[key]; !has || !sameJSON(value, other) {
				return false
			}
		}
		return true
	case []any:
		y, ok := b.([]any)
		return ok && slices.EqualFunc(x, y, sameJSON)
	case json.Number:
		y, ok := b.(json.Number)
		if !ok {
			return false
		}
		p, err := x.Float64()
		q, failed := y.Float64()
		return err == nil && failed == nil && p == q
	}
	return a == b
}

// pointerTokens splits a JSON Pointer (RFC 6901) into its parts.
func pointerTokens(at string) []string {
	if at == "" {
		return nil
	}
	parts := strings.Split(strings.TrimPrefix(at, "/"), "/")
	for i, p := range parts {
		parts[i] = strings.ReplaceAll(strings.ReplaceAll(p, "~1", "/"), "~0", "~")
	}
	return parts
}

// pointerEscape makes a key one part of a JSON Pointer.
func pointerEscape(key string) string {
	return strings.ReplaceAll(strings.ReplaceAll(key, "~", "~0"), "/", "~1")
}

// pointerSplit cuts the last part off a JSON Pointer.
func pointerSplit(at string) (parent, last string) {
	i := strings.LastIndexByte(at, '/')
	if i < 0 {
		return "", at
	}
	return at[:i], at[i+1:]
}

// fromTree reads a value of a tree into a type of ours.
func fromTree(value, into any) error {
	text, err := json.Marshal(value)
	if err != nil {
		return err
	}
	return json.Unmarshal(text, into)
}

// sortedKeys lists an object's keys in an order that does not change.
func sortedKeys(object map[string]any) []string {
	return slices.Sorted(maps.Keys(object))
}
