package calc

import "encoding/json"

// MarshalJSON writes a spread as it was written: one number, or all three.
func (s Spread) MarshalJSON() ([]byte, error) {
	if s.Bare {
		return json.Marshal(s.Typ)
	}
	return json.Marshal(spreadMembers{&s.Min, &s.Typ, &s.Max})
}

// UnmarshalJSON reads a number or an object of min, typ and max. Its error is
// Invalid.
func (s *Spread) UnmarshalJSON(raw []byte) error { return readInto(raw, s, "the spread") }
