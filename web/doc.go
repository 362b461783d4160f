// Package web holds the pages as components, and the view models they take.
//
// A view model carries finished strings: rounding, prefixes and units are done
// in Go and tested, a template only places them. Nothing here reads a file,
// asks the store or computes a circuit.
package web
