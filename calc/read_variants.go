package calc

import (
	"reflect"
	"slices"
	"strings"
)

// variant is one kind of driver or one type of part: its name in a document,
// and the field of Driver or Part that holds it.
type variant struct {
	name string
	in   string
}

var driverVariants = []variant{
	{KindResistor, "Resistor"},
	{KindRailSink, "RailSink"},
	{KindFollowerSink, "FollowerSink"},
	{KindReferenceSink, "ReferenceSink"},
	{KindTwoTransistor, "TwoTransistor"},
	{KindOpampSink, "OpampSink"},
	{KindRegulator, "Regulator"},
	{KindModule, "ModuleInstance"},
}

var partVariants = []variant{
	{TypeLED, "LED"},
	{TypeNPN, "Transistor"},
	{TypePNP, "Transistor"},
	{TypeNMOS, "MOSFET"},
	{TypeOpamp, "Opamp"},
	{TypeRegulator, "Regulator"},
	{TypeModule, "Module"},
	{TypeSupply, "Supply"},
}

// variantsOf returns the variants of Driver or Part, the key that chooses one,
// the field that repeats it and a word for sentences.
func variantsOf(t reflect.Type) (list []variant, key, name, noun string) {
	if t == driverType {
		return driverVariants, "kind", "Kind", "driver"
	}
	return partVariants, "type", "Type", "part"
}

// variant reads a Driver or a Part: the members of what its kind or type says.
func (r *reader) variant(n node, v reflect.Value, at string) {
	list, key, name, noun := variantsOf(v.Type())
	if n.kind != isObject {
		r.fault(at, "must be an object, not %s", n.kind)
		return
	}
	chosen, ok := n.find(key)
	switch {
	case !ok:
		r.fault(at+"/"+key, "is missing")
		return
	case chosen.kind != isText:
		r.fault(at+"/"+key, "must be text, not %s", chosen.kind)
		return
	}
	names := make([]string, len(list))
	for i := range list {
		names[i] = list[i].name
	}
	i := slices.Index(names, chosen.text)
	if i < 0 {
		r.fault(at+"/"+key, "%.60q is no %s of a %s: it must be one of %s", chosen.text, key, noun, strings.Join(names, ", "))
		return
	}
	v.FieldByName(name).SetString(chosen.text)
	slot := v.FieldByName(list[i].in)
	slot.Set(reflect.New(slot.Type().Elem()))
	r.object(n, slot.Elem(), at, rule{}, func(unknown string) string {
		for _, other := range list {
			f, ok := v.Type().FieldByName(other.in)
			if !ok {
				continue
			}
			if _, ok := byKey(members[f.Type.Elem()], unknown); ok {
				return "a " + noun + " of " + key + " " + other.name + ", not of " + chosen.text
			}
		}
		return ""
	})
}
