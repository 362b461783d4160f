package web

import "lanternbook/calc"

// partCommon returns what every part may carry, whatever its type.
func partCommon(p calc.Part) calc.Common {
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
	if name := partCommon(p).Name; name != "" {
		return name
	}
	return key
}
