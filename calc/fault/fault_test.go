package fault_test

import (
	"slices"
	"strings"
	"testing"

	"lanternbook/calc/fault"
)

var kinds = []fault.Kind{
	fault.LED, fault.Resistor, fault.Transistor, fault.Reference, fault.MOSFET,
	fault.Opamp, fault.Regulator, fault.Module, fault.Control, fault.Supply,
}

// Every way has a sentence of its own, so that no two faults of a part read
// alike.
func TestEveryWayHasWordsOfItsOwn(t *testing.T) {
	for _, k := range kinds {
		seen := map[string]fault.How{}
		for _, h := range fault.Ways(k) {
			words := h.Words("part")
			if strings.Contains(words, "_") {
				t.Errorf("%s: %s has no words", k, h)
			}
			if other, ok := seen[words]; ok {
				t.Errorf("%s: %s and %s both read %q", k, h, other, words)
			}
			seen[words] = h
		}
		if len(seen) < 2 {
			t.Errorf("%s: %d ways, want two at least", k, len(seen))
		}
	}
}

// What is fitted wrongly comes after what fails: a build that has worked for
// years is asked for the first ones only.
func TestSlipsComeLast(t *testing.T) {
	for _, k := range kinds {
		ways := fault.Ways(k)
		first := slices.IndexFunc(ways, fault.How.Slip)
		if first < 0 {
			continue
		}
		for _, h := range ways[first:] {
			if !h.Slip() {
				t.Errorf("%s: %s comes after a slip", k, h)
			}
		}
	}
}

func TestTheListIsACopy(t *testing.T) {
	fault.Ways(fault.LED)[0] = fault.Half
	if got := fault.Ways(fault.LED)[0]; got != fault.Open {
		t.Errorf("the first way of an LED is %s, want open", got)
	}
}
