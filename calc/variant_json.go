package calc

import (
	"encoding/json"
	"fmt"
	"reflect"
)

// MarshalJSON writes the driver's fields beside its kind.
func (d Driver) MarshalJSON() ([]byte, error) { return marshalVariant(reflect.ValueOf(d)) }

// UnmarshalJSON reads a driver as strictly as Read does, but for its
// references. Its error is Invalid, with pointers relative to the driver.
func (d *Driver) UnmarshalJSON(raw []byte) error { return readInto(raw, d, "the driver") }

// MarshalJSON writes the part's fields beside its type.
func (p Part) MarshalJSON() ([]byte, error) { return marshalVariant(reflect.ValueOf(p)) }

// UnmarshalJSON reads a part as strictly as ReadPart does.
func (p *Part) UnmarshalJSON(raw []byte) error { return readInto(raw, p, "the part") }

// marshalVariant writes what the kind or type names. The name inside is taken
// from outside, so that a value put together in Go needs it once only.
func marshalVariant(v reflect.Value) ([]byte, error) {
	list, key, name, noun := variantsOf(v.Type())
	chosen := v.FieldByName(name).String()
	for _, candidate := range list {
		if candidate.name != chosen {
			continue
		}
		slot := v.FieldByName(candidate.in)
		if slot.IsNil() {
			break
		}
		filled := reflect.New(slot.Type().Elem())
		filled.Elem().Set(slot.Elem())
		filled.Elem().FieldByName(name).SetString(chosen)
		return json.Marshal(filled.Interface())
	}
	return nil, fmt.Errorf("calc: a %s of %s %q has no fields", noun, key, chosen)
}
