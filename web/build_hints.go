package web

import (
	"fmt"
	"strconv"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// offer puts below fields what their neighbours would give: the preferred
// resistors round a wish, the control voltage that meets it, the light there
// is.
func (f BuildForm) offer(b calc.Build, r calc.Report, suggestions map[int]calc.Suggestion, solved bool) {
	byName := map[string]*Entry{}
	for _, e := range f.Entries() {
		byName[e.Name] = e
	}
	for i := range f.Strings {
		for _, below := range []string{"/wanted", "/driver/sense/ohms", "/driver/resistor/ohms", "/driver/set/ohms", "/driver/control/volts"} {
			if e := byName[f.Strings[i].At+below]; e != nil {
				e.Live = true
			}
		}
		s, has := suggestions[i]
		if has {
			if e := byName[s.At]; e != nil {
				e.Hint, e.Offers = settingHint(s), settingOffers(s, b.Strings[i].Wanted)
			}
			if e := byName[s.ControlAt]; e != nil && s.ControlVolts > 0 {
				e.Offers = []Offer{{Value: quantity.Format(s.ControlVolts, quantity.Volt, 3), Gives: "gives what is wanted"}}
			}
		}
		if solved {
			f.Strings[i].Wanted.Hint = wantedHint(b, r, i, s, has)
		}
	}
}

// settingHint says what resistor would be exact, where no preferred one is
// near enough to be taken for it.
func settingHint(s calc.Suggestion) string {
	if len(s.Choices) == 0 || !(s.Exact > 0) {
		return ""
	}
	return "exactly " + quantity.Format(s.Exact, s.Unit, 3) + " would give it; the values sold nearby:"
}

func settingOffers(s calc.Suggestion, w *calc.Wanted) []Offer {
	var offers []Offer
	for _, c := range s.Choices {
		gives := quantity.Format(c.Current, quantity.Amp, 3)
		if w != nil && w.LuminousFlux != nil && c.Flux != nil {
			gives = quantity.Format(*c.Flux, quantity.Lumen, 3)
		}
		offers = append(offers, Offer{Value: quantity.Text(c.Value, s.Unit), Gives: gives + " · " + c.Series})
	}
	return offers
}

// wantedHint says what the string gives now.
func wantedHint(b calc.Build, r calc.Report, i int, s calc.Suggestion, has bool) string {
	str := r.Strings[i]
	words := []string{"gives " + quantity.Format(str.Current.Typ, quantity.Amp, 3)}
	if str.LuminousFlux != nil {
		words = append(words, quantity.Format(str.LuminousFlux.Typ, quantity.Lumen, 3)+" a string")
		if n := b.Strings[i].Quantity; n > 1 {
			words = append(words, quantity.Format(str.LuminousFlux.Typ*float64(n), quantity.Lumen, 3)+" in all "+strconv.Itoa(n))
		}
	}
	hint := strings.Join(words, ", ")
	if w := b.Strings[i].Wanted; w == nil {
		hint += "; ask for a current or a light, 20 mA or 55 lm"
	} else if has && len(s.Choices) == 0 {
		hint += "; no resistor reaches what is wanted here"
	}
	return hint
}

// stringSummary is what stands beside a string's fields.
func stringSummary(b calc.Build, r calc.Report, i int, solved bool) StringSummary {
	var s StringSummary
	var words []string
	for j, stack := range b.Strings[i].LEDs {
		light := Light{Word: stack.Part}
		if led := b.Parts[stack.Part].LED; led != nil {
			light = Emitted(*led)
		}
		words = append(words, fmt.Sprintf("%d × %s", stack.Quantity, light.Word))
		v := StackSummary{Fill: light.Fill, Word: light.Word}
		if solved && j < len(r.Strings[i].Columns.Usual.LEDs) {
			v.Sum = fmt.Sprintf("%d × %s", stack.Quantity, quantity.Format(r.Strings[i].Columns.Usual.LEDs[j].Each, quantity.Volt, 3))
		}
		s.Stacks = append(s.Stacks, v)
	}
	s.Line = strings.Join(words, ", ")
	if solved {
		s.Line += " · " + quantity.Format(r.Strings[i].Current.Typ, quantity.Amp, 3)
		s.Outcome = string(worstOf(r, i))
	}
	return s
}

// worstOf is the worst outcome of the checks on string i.
func worstOf(r calc.Report, i int) calc.Severity {
	for _, f := range r.Findings { // worst first
		if at, in := strings.CutPrefix(f.At, "/strings/"); in {
			if number, _, _ := strings.Cut(at, "/"); number == strconv.Itoa(i) {
				return f.Severity
			}
		}
	}
	return calc.Pass
}
