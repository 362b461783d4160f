package calc

import (
	"fmt"

	"lanternbook/calc/wiring"
)

// supplyID is what "from" and "fed_by" call the supply itself.
const supplyID = "supply"

// references checks what the fields of a build say about each other. It looks
// only at what could be read: what is missing was reported already.
func (r *reader) references(b *Build) {
	r.enclosure(b.Enclosure)
	runs := r.runs(b)
	rails := r.rails(b, runs)
	labels := map[string]int{}
	for i := range b.Strings {
		s := &b.Strings[i]
		at := fmt.Sprintf("/strings/%d", i)
		if first, twice := labels[s.Label]; twice && s.Label != "" {
			r.fault(at+"/label", "%.60q is the label of string %d already", s.Label, first+1)
		} else {
			labels[s.Label] = i
		}
		if _, there := r.place[at+"/leds"]; there && len(s.LEDs) == 0 {
			r.fault(at+"/leds", "must have at least one LED")
		}
		for k, stack := range s.LEDs {
			r.part(b, fmt.Sprintf("%s/leds/%d/part", at, k), stack.Part, TypeLED)
		}
		r.fedBy(at, s.FedBy, runs)
		r.driver(b, at+"/driver", &s.Driver, rails)
		if w := s.Wanted; w != nil {
			r.exactlyOne(at+"/wanted", "current", "luminous_flux")
		}
	}
}

func (r *reader) enclosure(e *Enclosure) {
	if e == nil || e.Kind == "" {
		return
	}
	switch e.Kind {
	case "open":
	case "sealed":
		r.needs("/enclosure", "a sealed enclosure", "surface_area", "heat_transfer")
	default:
		r.fault("/enclosure/kind", "must be \"open\" or \"sealed\", not %.60q", e.Kind)
	}
}

// runs checks the tree of runs and returns their ids.
func (r *reader) runs(b *Build) map[string]int {
	ids := map[string]int{}
	for i, run := range b.Runs {
		at := fmt.Sprintf("/runs/%d", i)
		switch first, twice := ids[run.ID]; {
		case run.ID == "":
		case run.ID == supplyID:
			r.fault(at+"/id", "must not be %q, which is the supply itself", supplyID)
		case twice:
			r.fault(at+"/id", "%.60q is the id of run %d already", run.ID, first+1)
		default:
			ids[run.ID] = i
		}
		r.exactlyOne(at, "conductor", "ohms_per_metre")
		if run.Conductor != "" {
			if _, err := wiring.ParseConductor(run.Conductor); err != nil {
				r.fault(at+"/conductor", "%s", err)
			}
		} else if r.there(at + "/conductor") {
			r.fault(at+"/conductor", "must not be empty")
		}
	}
	for i, run := range b.Runs {
		at := fmt.Sprintf("/runs/%d/from", i)
		if _, ok := ids[run.From]; !ok && run.From != supplyID && run.From != "" {
			r.fault(at, "there is no run %.60q", run.From)
		}
		if circular(b.Runs, ids, i) {
			r.fault(at, "leads round in a circle and never to the supply")
		}
	}
	return ids
}

// circular tells whether run i comes back to itself on its way to the supply.
func circular(runs []Run, ids map[string]int, i int) bool {
	at := i
	for range runs {
		next, ok := ids[runs[at].From]
		if !ok {
			return false
		}
		if next == i {
			return true
		}
		at = next
	}
	return false // a circle further up, which is reported there
}

// railFields lists what each kind of base rail is made of.
var railFields = map[string][]string{
	"follower":           {"control", "pnp", "pullup"},
	"reference":          {"reference", "bias"},
	"buffered-reference": {"reference", "bias", "npn", "pulldown"},
}

// rails checks the base rails and returns their ids.
func (r *reader) rails(b *Build, runs map[string]int) map[string]int {
	ids := map[string]int{}
	for i := range b.Rails {
		rail := &b.Rails[i]
		at := fmt.Sprintf("/rails/%d", i)
		if first, twice := ids[rail.ID]; twice && rail.ID != "" {
			r.fault(at+"/id", "%.60q is the id of rail %d already", rail.ID, first+1)
		} else {
			ids[rail.ID] = i
		}
		r.fedBy(at, rail.FedBy, runs)
		needed, ok := railFields[rail.Kind]
		if !ok {
			if rail.Kind != "" {
				r.fault(at+"/kind", "must be \"follower\", \"reference\" or \"buffered-reference\", not %.60q", rail.Kind)
			}
			continue
		}
		r.needs(at, "a rail of kind "+rail.Kind, needed...)
		r.onlyOf(at, "a rail of kind "+rail.Kind, needed)
		r.control(at+"/control", rail.Control)
		r.part(b, at+"/pnp", rail.PNP, TypePNP)
		r.part(b, at+"/npn", rail.NPN, TypeNPN)
	}
	return ids
}

// onlyOf refuses what belongs to another kind of rail.
func (r *reader) onlyOf(at, what string, needed []string) {
	allowed := map[string]bool{}
	for _, key := range needed {
		allowed[key] = true
	}
	for _, key := range []string{"control", "pnp", "pullup", "reference", "bias", "npn", "pulldown"} {
		if r.there(at+"/"+key) && !allowed[key] {
			r.fault(at+"/"+key, "does not belong to %s", what)
		}
	}
}

// driver checks the references of a string's driver.
func (r *reader) driver(b *Build, at string, d *Driver, rails map[string]int) {
	switch {
	case d.FollowerSink != nil:
		r.control(at+"/control", &d.FollowerSink.Control)
		r.part(b, at+"/pnp", d.FollowerSink.PNP, TypePNP)
		r.part(b, at+"/npn", d.FollowerSink.NPN, TypeNPN)
	case d.ReferenceSink != nil:
		r.part(b, at+"/npn", d.ReferenceSink.NPN, TypeNPN)
	case d.TwoTransistor != nil:
		r.part(b, at+"/pass", d.TwoTransistor.Pass, TypeNPN)
		r.part(b, at+"/sensor", d.TwoTransistor.Sensor, TypeNPN)
	case d.RailSink != nil:
		if _, ok := rails[d.RailSink.Rail]; !ok && d.RailSink.Rail != "" {
			r.fault(at+"/rail", "there is no rail %.60q", d.RailSink.Rail)
		}
		r.part(b, at+"/npn", d.RailSink.NPN, TypeNPN)
	case d.OpampSink != nil:
		r.control(at+"/control", &d.OpampSink.Control)
		r.part(b, at+"/opamp", d.OpampSink.Opamp, TypeOpamp)
		r.part(b, at+"/fet", d.OpampSink.FET, TypeNMOS)
	case d.Regulator != nil:
		r.part(b, at+"/regulator", d.Regulator.Regulator, TypeRegulator)
	case d.ModuleInstance != nil:
		r.part(b, at+"/module", d.ModuleInstance.Module, TypeModule)
	}
}

func (r *reader) control(at string, c *Control) {
	if c == nil || !r.there(at) {
		return
	}
	r.exactlyOne(at, "volts", "pot", "divider")
	if r.there(at+"/ohms") && !r.there(at+"/volts") {
		r.fault(at+"/ohms", "belongs to volts: it is the resistance behind them")
	}
}

func (r *reader) fedBy(at, id string, runs map[string]int) {
	if _, ok := runs[id]; !ok && id != "" && id != supplyID {
		r.fault(at+"/fed_by", "there is no run %.60q", id)
	}
}

// part checks that a part is there and of the type that its place asks for.
func (r *reader) part(b *Build, at, key, typ string) {
	if key == "" {
		return
	}
	p, ok := b.Parts[key]
	switch {
	case !ok:
		r.fault(at, "there is no part %.60q in parts", key)
	case p.Type != "" && p.Type != typ:
		r.fault(at, "must be a part of type %s, and %.60q is of type %s", typ, key, p.Type)
	}
}

// there tells whether the document has a value at a pointer.
func (r *reader) there(at string) bool {
	_, ok := r.place[at]
	return ok
}

func (r *reader) needs(at, what string, keys ...string) {
	for _, key := range keys {
		if !r.there(at + "/" + key) {
			r.fault(at+"/"+key, "is missing: %s needs it", what)
		}
	}
}

// exactlyOne demands one of the keys of an object that is there.
func (r *reader) exactlyOne(at string, keys ...string) {
	if r.blamed(at) {
		return
	}
	list, given := "", 0
	for i, key := range keys {
		switch {
		case i == 0:
		case i == len(keys)-1:
			list += " or "
		default:
			list += ", "
		}
		list += key
		if r.there(at + "/" + key) {
			given++
		}
	}
	switch {
	case given == 0:
		r.fault(at, "must have %s", list)
	case given > 1:
		r.fault(at, "must have only one of %s", list)
	}
}
