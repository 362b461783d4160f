package calc

import (
	"strings"

	"lanternbook/calc/driver"
)

// knobPointer is the JSON Pointer to the value that one of the string's knobs
// turns.
func (l *line) knobPointer(k driver.Knob) string {
	part := func(role, member string) string {
		for _, d := range l.Devices {
			if d.Role == role {
				return "/parts/" + escapePointer(d.Part) + "/" + member
			}
		}
		return l.pointer("/driver")
	}
	role := func(suffix string) string {
		return strings.ReplaceAll(strings.TrimSuffix(k.Name, suffix), " ", "_")
	}
	switch k.Culprit {
	case driver.Bin:
		return "/parts/" + escapePointer(strings.TrimSuffix(k.Name, " bin")) + "/forward_voltage"
	case driver.Tolerance:
		return l.pointer("/driver" + resistorPath(role("")))
	case driver.Gain:
		return part(role(" gain"), "hfe")
	}
	switch k.Name {
	case "control voltage":
		return l.pointer("/driver/control/volts")
	case "reference":
		return l.pointer("/driver/reference/volts")
	case "MOSFET threshold":
		return part("fet", "gate_threshold")
	case "op-amp offset":
		return part("opamp", "offset_voltage")
	case "regulator reference":
		return part("regulator", "reference_voltage")
	case "adjustment current":
		return part("regulator", "adjustment_current")
	case "module current":
		return part("module", "current")
	}
	return part(role(" VBE"), "vbe_on")
}
