package calc

import (
	"reflect"
	"strconv"
	"strings"
	"unicode"

	"lanternbook/calc/quantity"
)

// field is a member that an object may have.
type field struct {
	key      string
	owner    string // name of the struct that declares it
	index    []int
	required bool
	limits   rule // zero where it holds no number, or a spread's own
	limited  bool
}

// members lists the fields of every struct that a document is made of. It is
// worked out once: looking tags up for each object took most of the time.
var members = membersFrom(reflect.TypeFor[Build](), map[reflect.Type][]field{
	reflect.TypeFor[spreadMembers](): tagged(reflect.TypeFor[spreadMembers]()),
})

// membersFrom adds the struct t and all that it is made of.
func membersFrom(t reflect.Type, known map[reflect.Type][]field) map[reflect.Type][]field {
	switch t.Kind() {
	case reflect.Pointer, reflect.Slice, reflect.Map:
		return membersFrom(t.Elem(), known)
	case reflect.Struct:
		if _, done := known[t]; done {
			return known
		}
		known[t] = tagged(t)
		for f := range t.Fields() {
			membersFrom(f.Type, known)
		}
	}
	return known
}

// tagged lists the members of a struct by their json tags, with those of
// embedded structs, in their order.
func tagged(t reflect.Type) []field {
	var list []field
	for i := range t.NumField() {
		f := t.Field(i)
		if f.Anonymous {
			for _, inner := range tagged(f.Type) {
				inner.index = append([]int{i}, inner.index...)
				list = append(list, inner)
			}
			continue
		}
		key, _, _ := strings.Cut(f.Tag.Get("json"), ",")
		limits, limited := rules[t.Name()+"."+key]
		list = append(list, field{key: key, owner: t.Name(), index: []int{i}, required: f.Tag.Get("read") == "required", limits: limits, limited: limited})
	}
	return list
}

var (
	spreadType = reflect.TypeFor[Spread]()
	driverType = reflect.TypeFor[Driver]()
	partType   = reflect.TypeFor[Part]()
)

// fill reads n into v, which stands at the pointer at and must keep to ru.
func (r *reader) fill(n node, v reflect.Value, at string, ru rule) {
	if r.full() {
		return
	}
	r.met(at)
	switch v.Type() {
	case spreadType:
		r.spread(n, v, at, ru.first)
		return
	case driverType, partType:
		r.variant(n, v, at)
		return
	}
	switch v.Kind() {
	case reflect.Pointer:
		v.Set(reflect.New(v.Type().Elem()))
		r.fill(n, v.Elem(), at, ru)
	case reflect.Struct:
		r.object(n, v, at, rule{}, nil)
	case reflect.Map:
		r.table(n, v, at)
	case reflect.Slice:
		r.list(n, v, at, ru)
	case reflect.Array:
		r.pair(n, v, at, ru)
	case reflect.String:
		r.text(n, v, at)
	case reflect.Bool:
		if n.kind != isBool {
			r.fault(at, "must be true or false, not %s", n.kind)
			return
		}
		v.SetBool(n.text == "true")
	case reflect.Int:
		if x, ok := r.number(n, at, ru.first); ok {
			if x != float64(int(x)) {
				r.fault(at, "must be a whole number, not %s", quantity.Text(x, quantity.Number))
				return
			}
			v.SetInt(int64(x))
		}
	case reflect.Float64:
		if x, ok := r.number(n, at, ru.first); ok {
			v.SetFloat(x)
		}
	}
}

// object reads the members of a struct; those of a spread keep to ru. alien,
// where given, says to which other variant an unknown key would belong.
func (r *reader) object(n node, v reflect.Value, at string, ru rule, alien func(key string) string) {
	if n.kind != isObject {
		r.fault(at, "must be an object, not %s", n.kind)
		return
	}
	fields := members[v.Type()]
	seen := map[string]bool{}
	for _, m := range n.members {
		if r.full() {
			return
		}
		here := at + "/" + escape(m.key)
		if seen[m.key] {
			r.fault(here, "is given twice")
			continue
		}
		seen[m.key] = true
		f, ok := byKey(fields, m.key)
		if !ok {
			r.met(here)
			r.unknown(here, m.key, fields, alien)
			continue
		}
		limits := f.limits
		if !f.limited {
			limits = ru
		}
		r.fill(m.value, v.FieldByIndex(f.index), here, limits)
		if f.required && m.value.kind == isText && m.value.text == "" && f.owner+"."+f.key != mayBeEmpty {
			r.fault(here, "must not be empty")
		}
	}
	for _, f := range fields {
		if f.required && !seen[f.key] {
			r.fault(at+"/"+f.key, "is missing")
		}
	}
}

// mayBeEmpty is the only required text that may be empty.
const mayBeEmpty = "Build.title"

func byKey(fields []field, key string) (field, bool) {
	for _, f := range fields {
		if f.key == key {
			return f, true
		}
	}
	return field{}, false
}

// table reads a map from keys to parts.
func (r *reader) table(n node, v reflect.Value, at string) {
	if n.kind != isObject {
		r.fault(at, "must be an object, not %s", n.kind)
		return
	}
	v.Set(reflect.MakeMap(v.Type()))
	for _, m := range n.members {
		if r.full() {
			return
		}
		here := at + "/" + escape(m.key)
		key := reflect.ValueOf(m.key)
		if v.MapIndex(key).IsValid() {
			r.fault(here, "is given twice")
			continue
		}
		element := reflect.New(v.Type().Elem()).Elem()
		r.fill(m.value, element, here, rule{})
		v.SetMapIndex(key, element)
		if m.key == "" {
			r.fault(here, "needs a key that is not empty")
		}
	}
}

func (r *reader) list(n node, v reflect.Value, at string, ru rule) {
	if n.kind != isArray {
		r.fault(at, "must be a list, not %s", n.kind)
		return
	}
	v.Set(reflect.MakeSlice(v.Type(), 0, min(len(n.items), 64))) // no more room than what is read deserves
	for i := range n.items {
		if r.full() {
			return
		}
		v.Set(reflect.Append(v, reflect.Zero(v.Type().Elem())))
		r.fill(n.items[i], v.Index(i), at+"/"+strconv.Itoa(i), ru)
	}
}

// pair reads one point of a curve.
func (r *reader) pair(n node, v reflect.Value, at string, ru rule) {
	if n.kind != isArray || len(n.items) != v.Len() {
		r.fault(at, "must be a list of two numbers, %s and %s", ru.first.words(), ru.second.words())
		return
	}
	r.fill(n.items[0], v.Index(0), at+"/0", rule{first: ru.first})
	r.fill(n.items[1], v.Index(1), at+"/1", rule{first: ru.second})
}

// longestText is how many bytes a text may have: some fifty pages of notes.
const longestText = 200_000

func (r *reader) text(n node, v reflect.Value, at string) {
	if n.kind != isText {
		r.fault(at, "must be text, not %s", n.kind)
		return
	}
	if len(n.text) > longestText {
		r.fault(at, "must be at most %d bytes of text", longestText)
		return
	}
	for _, c := range n.text {
		if unicode.IsControl(c) && !strings.ContainsRune("\n\r\t", c) {
			r.fault(at, "has the control character %U in its text", c)
			return
		}
	}
	v.SetString(n.text)
}

// number reads a number and holds it against its limits.
func (r *reader) number(n node, at string, f figure) (float64, bool) {
	if n.kind != isNumber {
		r.fault(at, "must be %s, not %s", f.words(), n.kind)
		return 0, false
	}
	x, err := strconv.ParseFloat(n.text, 64)
	if err != nil {
		r.fault(at, "is too large: %s", f.demand())
		return 0, false
	}
	mantissa, _, _ := strings.Cut(strings.ToLower(n.text), "e")
	if x == 0 && strings.ContainsAny(mantissa, "123456789") {
		r.fault(at, "is closer to zero than can be held: write 0 or a larger number")
		return 0, false
	}
	if !f.holds(x) {
		r.fault(at, "%s", f.refusal(x))
		return 0, false
	}
	return x, true
}

// spread reads a bare number or the three members of a spread.
func (r *reader) spread(n node, v reflect.Value, at string, f figure) {
	switch n.kind {
	case isNumber:
		if x, ok := r.number(n, at, f); ok {
			v.Set(reflect.ValueOf(Exactly(x)))
		}
		return
	case isObject:
	default:
		r.fault(at, "must be %s, or three as min, typ and max, not %s", f.words(), n.kind)
		return
	}
	var s spreadMembers
	before := len(r.faults)
	r.object(n, reflect.ValueOf(&s).Elem(), at, rule{first: f}, nil)
	if len(r.faults) > before || s.Min == nil || s.Typ == nil || s.Max == nil {
		return
	}
	if !(*s.Min <= *s.Typ && *s.Typ <= *s.Max) {
		r.fault(at, "min, typ and max must rise, not be %s", quantity.FormatSpread(quantity.Spread{Min: *s.Min, Typ: *s.Typ, Max: *s.Max}, f.unit))
		return
	}
	v.Set(reflect.ValueOf(Spread{Min: *s.Min, Typ: *s.Typ, Max: *s.Max}))
}

// spreadMembers is a spread as it is written in full.
type spreadMembers struct {
	Min *float64 `json:"min" read:"required"`
	Typ *float64 `json:"typ" read:"required"`
	Max *float64 `json:"max" read:"required"`
}
