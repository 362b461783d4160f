package calc

import (
	"encoding/json"
	"math"

	"lanternbook/calc/spread"
)

// manyStrings is the number of strings above which strings of one make share
// the search for their worst corners.
const manyStrings = 12

// catalogue holds the worst case of the first string of each make.
type catalogue map[string]*worst

// extremes finds a string's worst case. In a large build a string of a make
// that came before is solved only in the corners that mattered there, as long
// as both hold their current in all of them: between neighbours along a cable
// they are then the same.
func (c catalogue) extremes(p *plant, l *line, r reach) (worst, error) {
	if len(p.strings) <= manyStrings {
		return l.extremes(r, nil)
	}
	key := l.kindKey()
	if like := c[key]; like != nil {
		w, err := l.extremes(r, like)
		if err != nil {
			return w, err
		}
		if w.runaway == nil && sameState(&w, like) {
			return w, nil
		}
	}
	w, err := l.extremes(r, nil)
	if err == nil && w.runaway == nil {
		c[key] = &w
	}
	return w, err
}

// drawCatalogue is catalogue for what strings draw.
type drawCatalogue map[string]*spread.Extremes

// sameDraw is the share by which neighbours of one make may differ in what
// they draw typically and still share their corners.
const sameDraw = 0.005

func (c drawCatalogue) extremes(p *plant, l *line, r reach) (*spread.Extremes, error) {
	if len(p.strings) <= manyStrings {
		return l.drawExtremes(r, nil)
	}
	key := l.kindKey()
	if like := c[key]; like != nil {
		x, err := l.drawExtremes(r, like)
		if err != nil || math.Abs(x.Typ[0]-like.Typ[0]) <= sameDraw*math.Abs(like.Typ[0]) {
			return x, err
		}
	}
	x, err := l.drawExtremes(r, nil)
	if err == nil {
		c[key] = x
	}
	return x, err
}

// sameState says whether two strings of one make both hold their current in
// every corner: only there the corners are sure to be the same.
func sameState(a, b *worst) bool { return a.Min[figHeadroom] >= 0 && b.Min[figHeadroom] >= 0 }

// kindKey is a key that strings of the same LEDs and driver share.
func (l *line) kindKey() string {
	s := *l.spec
	s.Label, s.FedBy, s.Quantity, s.Wanted = "", "", 0, nil
	key, err := json.Marshal(s)
	if err != nil {
		return l.spec.Label // a figure that cannot be written is shared with nobody
	}
	return string(key)
}
