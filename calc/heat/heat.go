// Package heat turns watts into degrees: junctions, derating, heat sinks and
// the air in a closed can. It leaves out how heat moves in time.
package heat

// JunctionTemperature returns a junction's temperature in °C from the air's in
// °C, the power in watts and the thermal resistance from junction to air in
// K/W:
//
//	Tj = Tair + Rth·P
//
// Source: franco, ex. 11.14.
func JunctionTemperature(airC, power, resistance float64) float64 { return airC + resistance*power }

// PowerAllowed returns the watts that bring a junction from the air's
// temperature just to its limit, both in °C, through a thermal resistance in
// K/W above 0. It is 0 where the air is hotter than the limit.
//
//	P = (Tj − Tair)/Rth
//
// Source: franco, ex. 11.14; neamen, ex. 8.1.
func PowerAllowed(limitC, airC, resistance float64) float64 {
	return max(0, (limitC-airC)/resistance)
}

// Derated returns what is left at a temperature of a power in watts that is
// rated at ratedC and falls in a straight line to nothing at limitC.
//
// Source: malvino, ex. 12-14; boylestad, ex. 12.17.
func Derated(power, ratedC, limitC, atC float64) float64 {
	if atC <= ratedC {
		return power
	}
	return max(0, power*(limitC-atC)/(limitC-ratedC))
}

// SinkResistance returns the heat sink's thermal resistance to air in K/W that
// holds a junction at limitC in air of airC with a power in watts, inner being
// what lies between junction and sink, in K/W. A negative answer means that no
// sink does it.
//
// Source: jacob, ex. 4.6; franco, ex. 11.15.
func SinkResistance(limitC, airC, power, inner float64) float64 {
	return (limitC-airC)/power - inner
}

// EnclosureRise returns how many kelvin the air in a closed can rises above
// that outside: the heat in watts over surface in m² times transfer in
// W/(m²·K).
//
// Source: definition of the heat transfer coefficient.
func EnclosureRise(power, surface, transfer float64) float64 { return power / (surface * transfer) }
