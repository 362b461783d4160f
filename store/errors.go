package store

import (
	"errors"
	"fmt"
)

// The answers of a store that are no accident. Test with errors.Is: they come
// wrapped in what was being done.
var (
	// ErrNotFound: there is no such build, revision or part, or it lies in the bin.
	ErrNotFound = errors.New("not found")
	// ErrNothing: there is no step to undo or to redo.
	ErrNothing = errors.New("nothing left to undo or redo")
	// ErrNotOurs: the file is not a Lanternbook data file.
	ErrNotOurs = errors.New("not a Lanternbook data file")
	// ErrNewer: a newer version of the program made the file. The error is a
	// *Newer, which holds both numbers.
	ErrNewer = errors.New("made by a newer version of Lanternbook")
)

// Newer tells how far a file is ahead of this program; errors.Is(err, ErrNewer)
// holds for it.
type Newer struct {
	File    int64 // schema number of the file
	Program int64 // highest schema number that this program knows
}

func (e *Newer) Error() string {
	return fmt.Sprintf("%v: the file has schema %d, this program knows %d", ErrNewer, e.File, e.Program)
}

// Unwrap makes errors.Is(err, ErrNewer) true.
func (e *Newer) Unwrap() error { return ErrNewer }

// Stale refuses a save that was made from a revision which is no longer the
// current one. Nothing was written.
type Stale struct {
	Have int64 // number of the current revision
}

func (e *Stale) Error() string {
	return fmt.Sprintf("the build has changed meanwhile and is at revision %d", e.Have)
}

// KeyTaken refuses a second part of the same key in the drawer.
type KeyTaken struct {
	Key string
}

func (e *KeyTaken) Error() string {
	return fmt.Sprintf("the drawer already holds a part %q", e.Key)
}

// wrap puts what was being done in front of an error, once, at the package's
// edge. It is deferred, so that no return of a method can miss it.
func wrap(err *error, format string, args ...any) {
	if *err != nil {
		*err = fmt.Errorf("store: %s: %w", fmt.Sprintf(format, args...), *err)
	}
}
