package web

import (
	"maps"
	"reflect"
	"slices"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// PartCommon returns what every part may carry, whatever its type.
func PartCommon(p calc.Part) calc.Common {
	switch {
	case p.LED != nil:
		return p.LED.Common
	case p.Transistor != nil:
		return p.Transistor.Common
	case p.MOSFET != nil:
		return p.MOSFET.Common
	case p.Opamp != nil:
		return p.Opamp.Common
	case p.Regulator != nil:
		return p.Regulator.Common
	case p.Module != nil:
		return p.Module.Common
	case p.Supply != nil:
		return p.Supply.Common
	}
	return calc.Common{}
}

// partName is what a part is called: its name, or the key it stands under.
func partName(key string, p calc.Part) string {
	if name := PartCommon(p).Name; name != "" {
		return name
	}
	return key
}

// partEntry is a picker: the build's own parts of a type first, then what the
// drawer has beside them.
func partEntry(at, label, kept, typ string, b calc.Build, drawer []Stock) *Entry {
	e := newEntry(at, label, kept, EntryPart)
	e.Rebuilds = true
	own := OptionGroup{Label: "in this build"}
	for _, key := range slices.Sorted(maps.Keys(b.Parts)) {
		if b.Parts[key].Type == typ {
			own.Options = append(own.Options, Option{key, partWords(key, b.Parts[key])})
		}
	}
	e.Groups = []OptionGroup{own}
	stock := OptionGroup{Label: "from the drawer"}
	for _, s := range drawer {
		if mine, has := b.Parts[s.Key]; s.Part.Type != typ || has && reflect.DeepEqual(mine, s.Part) {
			continue
		}
		stock.Options = append(stock.Options, Option{FromDrawer + s.Key, partWords(s.Key, s.Part)})
	}
	if len(stock.Options) > 0 {
		e.Groups = append(e.Groups, stock)
	}
	return e
}

// partWords is how a picker names a part: with the figure one chooses by.
func partWords(key string, p calc.Part) string {
	name := partName(key, p)
	if p.LED != nil && p.LED.ForwardVoltage.Typ > 0 {
		return name + ", " + quantity.Text(p.LED.ForwardVoltage.Typ, quantity.Volt) + " at " + quantity.Text(p.LED.TestCurrent, quantity.Amp)
	}
	return name
}
