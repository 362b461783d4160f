// Package fault names what can be wrong with one part of a build: which ways a
// part of each kind fails or is fitted wrongly, and how one says it.
//
// It knows no circuit: package driver does to a string what a fault names, and
// package calc finds what comes of it.
package fault
