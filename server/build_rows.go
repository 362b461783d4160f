package main

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/web"
)

// renamed tells under which name an entry stands after a command moved rows
// about, and whether it still stands anywhere.
type renamed func(name string) (string, bool)

func unmoved(name string) (string, bool) { return name, true }

// rename moves texts and faults to where their entries stand now.
func (move renamed) rename(texts map[string]string) map[string]string {
	after := map[string]string{}
	for name, text := range texts {
		if to, stays := move(name); stays {
			after[to] = text
		}
	}
	return after
}

// errNoSuchRow is for a button of a page that is older than the build.
var errNoSuchRow = errors.New("the row is not there any more")

// rowCommand does what a button of the form asks for: "string-copy /strings/1".
// b is the build before the edits that the draft may hold already; rows are
// only ever moved by commands, so that their places are the same.
func rowCommand(d *draft, text string, b calc.Build, drawer []web.Stock) (renamed, error) {
	verb, at, _ := strings.Cut(text, " ")
	if _, has := d.get(at); !has {
		return unmoved, errNoSuchRow
	}
	list, last := pointerSplit(at)
	i, _ := strconv.Atoi(last) // only lists of rows have a number there, and the others do not use it
	switch verb {
	case "string-add":
		return addString(d, len(b.Strings)-1, b)
	case "string-copy":
		return addString(d, i, b)
	case "string-remove", "stack-remove":
		return removeRow(d, list, i)
	case "string-up", "stack-up":
		return swapRows(d, list, i-1)
	case "string-down", "stack-down":
		return swapRows(d, list, i)
	case "stack-add":
		return unmoved, addStack(d, at, b, drawer)
	case "more":
		return unmoved, countBy(d, at, 1)
	case "fewer":
		return unmoved, countBy(d, at, -1)
	case "rail-add":
		_, err := addRail(d, b, drawer)
		return unmoved, err
	case "rail-remove":
		return removeRail(d, i, b)
	case "run-add":
		return unmoved, addRun(d, b)
	case "run-remove":
		return removeRun(d, i, b)
	}
	return unmoved, fmt.Errorf("there is no command %q", verb)
}

// addString puts a copy of string i after it, once, under the next free label.
func addString(d *draft, i int, b calc.Build) (renamed, error) {
	at := "/strings/" + strconv.Itoa(i)
	like, has := d.get(at)
	if !has {
		return unmoved, errNoSuchRow
	}
	copied, err := asTree(like) // a value of its own: the two must not share their lists
	if err != nil {
		return unmoved, err
	}
	row, ok := copied.(map[string]any)
	if !ok {
		return unmoved, errNoSuchRow
	}
	row["label"], row["quantity"] = freeLabel(b), 1
	return insertedAt("/strings", i+1), d.insert("/strings/"+strconv.Itoa(i+1), row)
}

// freeLabel is the first of A to Z, AA to ZZ that no string has.
func freeLabel(b calc.Build) string {
	taken := map[string]bool{}
	for _, s := range b.Strings {
		taken[s.Label] = true
	}
	for n := 0; ; n++ {
		label := string(rune('A' + n%26))
		if n >= 26 {
			label = string(rune('A'+(n/26-1)%26)) + label
		}
		if n >= 26*27 {
			label += strconv.Itoa(n)
		}
		if !taken[label] {
			return label
		}
	}
}

// addStack puts one LED at the lower end of a string: of a type that the string
// does not have yet, where build or drawer have one.
func addStack(d *draft, at string, b calc.Build, drawer []web.Stock) error {
	i, err := stringIndex(at)
	if err != nil || i >= len(b.Strings) || len(b.Strings[i].LEDs) == 0 {
		return errNoSuchRow
	}
	has := func(key string) bool {
		return slices.ContainsFunc(b.Strings[i].LEDs, func(l calc.LEDStack) bool { return l.Part == key })
	}
	key := b.Strings[i].LEDs[len(b.Strings[i].LEDs)-1].Part
	if other := otherLED(b, has); other != "" {
		key = other
	} else if j := slices.IndexFunc(drawer, func(s web.Stock) bool { return s.Part.Type == calc.TypeLED && !has(s.Key) }); j >= 0 {
		if key, err = copyPart(d, drawer[j].Key, drawer); err != nil {
			return err
		}
	}
	return d.insert(at+"/leds/-", map[string]any{"part": key, "quantity": 1})
}

func otherLED(b calc.Build, has func(string) bool) string {
	first := ""
	for key, p := range b.Parts {
		if p.Type == calc.TypeLED && !has(key) && (first == "" || key < first) {
			first = key
		}
	}
	return first
}

// countBy changes a quantity by one; below one it stays.
func countBy(d *draft, at string, by int) error {
	value, _ := d.get(at)
	var n int
	if err := fromTree(value, &n); err != nil {
		return errNoSuchRow
	}
	return d.set(at, max(1, n+by))
}

// addRun puts a run at the end: a metre of the usual cable at the supply.
func addRun(d *draft, b calc.Build) error {
	for n := len(b.Runs) + 1; ; n++ {
		id := "r" + strconv.Itoa(n)
		if slices.ContainsFunc(b.Runs, func(r calc.Run) bool { return r.ID == id }) {
			continue
		}
		return d.insert("/runs/-", map[string]any{"id": id, "from": "supply", "length": 1, "conductor": "0.75 mm2"})
	}
}

// removeRun takes a run away. What hung on it hangs where it came from.
func removeRun(d *draft, i int, b calc.Build) (renamed, error) {
	if i >= len(b.Runs) {
		return unmoved, errNoSuchRow
	}
	gone := "/runs/" + strconv.Itoa(i)
	var run calc.Run
	value, _ := d.get(gone)
	if err := fromTree(value, &run); err != nil {
		return unmoved, err
	}
	for j := range b.Runs {
		at := "/runs/" + strconv.Itoa(j) + "/from"
		if from, _ := d.get(at); from == run.ID {
			if err := d.set(at, run.From); err != nil {
				return unmoved, err
			}
		}
	}
	for j := range b.Strings {
		at := "/strings/" + strconv.Itoa(j) + "/fed_by"
		if from, _ := d.get(at); from != run.ID {
			continue
		}
		var err error
		if run.From == "supply" {
			err = d.remove(at)
		} else {
			err = d.set(at, run.From)
		}
		if err != nil {
			return unmoved, err
		}
	}
	return removeRow(d, "/runs", i)
}

// removeRow takes row i out of a list.
func removeRow(d *draft, list string, i int) (renamed, error) {
	return removedAt(list, i), d.remove(list + "/" + strconv.Itoa(i))
}

// swapRows lets row i and the one after it change places.
func swapRows(d *draft, list string, i int) (renamed, error) {
	at := list + "/" + strconv.Itoa(i)
	row, has := d.get(at)
	if _, next := d.get(list + "/" + strconv.Itoa(i+1)); !has || !next {
		return unmoved, nil // the first cannot go up, nor the last down
	}
	if err := d.remove(at); err != nil {
		return unmoved, err
	}
	return swappedAt(list, i), d.insert(list+"/"+strconv.Itoa(i+1), row)
}

// inList reads a name as row number and rest below a list.
func inList(name, list string) (row int, rest string, in bool) {
	below, in := strings.CutPrefix(name, list+"/")
	if !in {
		return 0, "", false
	}
	number, rest, _ := strings.Cut(below, "/")
	row, err := strconv.Atoi(number)
	return row, "/" + rest, err == nil
}

// movedIn renames the rows of a list; a row below 0 is gone.
func movedIn(list string, to func(row int) int) renamed {
	return func(name string) (string, bool) {
		row, rest, in := inList(name, list)
		if !in {
			return name, true
		}
		row = to(row)
		return list + "/" + strconv.Itoa(row) + rest, row >= 0
	}
}

func insertedAt(list string, at int) renamed {
	return movedIn(list, func(row int) int {
		if row >= at {
			return row + 1
		}
		return row
	})
}

func removedAt(list string, at int) renamed {
	return movedIn(list, func(row int) int {
		switch {
		case row == at:
			return -1
		case row > at:
			return row - 1
		}
		return row
	})
}

func swappedAt(list string, at int) renamed {
	return movedIn(list, func(row int) int {
		switch row {
		case at:
			return at + 1
		case at + 1:
			return at
		}
		return row
	})
}
