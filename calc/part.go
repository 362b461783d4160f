package calc

// Part is one part of the drawer, or a build's own copy of one. Type names
// which of the others is set; in a document its fields stand beside "type".
type Part struct {
	Type       string
	LED        *LED
	Transistor *Transistor // types "npn" and "pnp"
	MOSFET     *MOSFET
	Opamp      *Opamp
	Regulator  *Regulator
	Module     *Module
	Supply     *SupplyPart
}

// The part types of a document.
const (
	TypeLED       = "led"
	TypeNPN       = "npn"
	TypePNP       = "pnp"
	TypeNMOS      = "nmos"
	TypeOpamp     = "opamp"
	TypeRegulator = "regulator"
	TypeModule    = "module"
	TypeSupply    = "supply"
)

// Common is what every part may carry whatever its type.
type Common struct {
	Type      string   `json:"type"`
	Name      string   `json:"name,omitempty"`
	MakerCode string   `json:"maker_code,omitempty"`
	Notes     string   `json:"notes,omitempty"`
	Price     *float64 `json:"price,omitempty"` // [1] in the shop's currency
	Package   string   `json:"package,omitempty"`
	Pins      string   `json:"pins,omitempty"` // seen facing the flat or printed side, leads down: "E-B-C"
}

// LED is a light-emitting diode's datasheet. A missing figure is a nil
// pointer: it is not zero, it makes the check that needs it unknown.
type LED struct {
	Common
	Colour             string       `json:"colour,omitempty"`
	Wavelength         *float64     `json:"wavelength,omitempty"`                     // [nm]
	CCT                *float64     `json:"cct,omitempty"`                            // [K]
	TestCurrent        float64      `json:"test_current,omitempty" read:"required"`   // [A]
	ForwardVoltage     Spread       `json:"forward_voltage,omitzero" read:"required"` // [V] at TestCurrent, 25 °C
	VoltageTempco      float64      `json:"voltage_tempco,omitempty"`                 // [V/K]
	LuminousFlux       *float64     `json:"luminous_flux,omitempty"`                  // [lm] at TestCurrent
	LuminousIntensity  *float64     `json:"luminous_intensity,omitempty"`             // [cd] at TestCurrent
	BeamAngle          *float64     `json:"beam_angle,omitempty"`                     // [°] full angle at half intensity
	FluxCurve          [][2]float64 `json:"flux_curve,omitempty"`                     // [1] pairs I/Itest, flux/flux at test
	FluxTempco         *float64     `json:"flux_tempco,omitempty"`                    // [1/K]
	MaxCurrent         *float64     `json:"max_current,omitempty"`                    // [A]
	MaxJunction        *float64     `json:"max_junction,omitempty"`                   // [°C]
	RthJunctionAmbient *float64     `json:"rth_junction_ambient,omitempty"`           // [K/W] 0 stays at ambient
	Model              *LEDModel    `json:"model,omitempty"`
	Points             [][2]float64 `json:"points,omitempty"` // [A, V] measured at 25 °C
}

// LEDModel holds the parameters of V = n·VT·ln(1+I/is) + I·rs at 25 °C.
type LEDModel struct {
	Is float64 `json:"is" read:"required"` // [A]
	N  float64 `json:"n" read:"required"`  // [1]
	Rs float64 `json:"rs"`                 // [Ω]
}

// Transistor is a bipolar transistor's datasheet, NPN or PNP by its Type; all
// figures are written as positive numbers.
type Transistor struct {
	Common
	MaxCollectorEmitterVoltage *float64    `json:"max_collector_emitter_voltage,omitempty"` // [V]
	MaxEmitterBaseVoltage      *float64    `json:"max_emitter_base_voltage,omitempty"`      // [V]
	MaxCollectorCurrent        *float64    `json:"max_collector_current,omitempty"`         // [A]
	MaxPower                   *float64    `json:"max_power,omitempty"`                     // [W] at 25 °C ambient
	MaxJunction                *float64    `json:"max_junction,omitempty"`                  // [°C]
	RthJunctionAmbient         *float64    `json:"rth_junction_ambient,omitempty"`          // [K/W] 0 stays at ambient
	HFE                        *Spread     `json:"hfe,omitempty"`                           // [1]
	HFEAt                      *float64    `json:"hfe_at,omitempty"`                        // [A]
	VBEOn                      *VBEOn      `json:"vbe_on,omitempty"`
	VCESat                     *VCESat     `json:"vce_sat,omitempty"`
	Model                      *GummelPoon `json:"model,omitempty"`
}

// VBEOn is a base-emitter voltage in the active region.
type VBEOn struct {
	Volts Spread  `json:"volts" read:"required"` // [V]
	At    float64 `json:"at" read:"required"`    // [A] collector current
}

// VCESat is a collector-emitter voltage in saturation.
type VCESat struct {
	Volts float64 `json:"volts" read:"required"` // [V]
	Ic    float64 `json:"ic" read:"required"`    // [A]
	Ib    float64 `json:"ib" read:"required"`    // [A]
}

// GummelPoon holds DC parameters at 27 °C by their usual names in lower case.
// A missing one stands at the usual default: nf nr 1, bf 100, br 1, ne 1.5,
// nc 2, xti 3, eg 1.11, xtb 0, resistances and leakages 0, vaf var ikf ikr
// infinite; rbm is rb and irb infinite.
type GummelPoon struct {
	Is  *float64 `json:"is,omitempty" read:"required"` // [A]
	Bf  *float64 `json:"bf,omitempty"`                 // [1]
	Nf  *float64 `json:"nf,omitempty"`                 // [1]
	Vaf *float64 `json:"vaf,omitempty"`                // [V] 0 is infinite
	Ikf *float64 `json:"ikf,omitempty"`                // [A] 0 is infinite
	Ise *float64 `json:"ise,omitempty"`                // [A]
	Ne  *float64 `json:"ne,omitempty"`                 // [1]
	Br  *float64 `json:"br,omitempty"`                 // [1]
	Nr  *float64 `json:"nr,omitempty"`                 // [1]
	Var *float64 `json:"var,omitempty"`                // [V] 0 is infinite
	Ikr *float64 `json:"ikr,omitempty"`                // [A] 0 is infinite
	Isc *float64 `json:"isc,omitempty"`                // [A]
	Nc  *float64 `json:"nc,omitempty"`                 // [1]
	Rb  *float64 `json:"rb,omitempty"`                 // [Ω]
	Irb *float64 `json:"irb,omitempty"`                // [A] 0 is infinite
	Rbm *float64 `json:"rbm,omitempty"`                // [Ω]
	Re  *float64 `json:"re,omitempty"`                 // [Ω]
	Rc  *float64 `json:"rc,omitempty"`                 // [Ω]
	Xti *float64 `json:"xti,omitempty"`                // [1]
	Eg  *float64 `json:"eg,omitempty"`                 // [eV]
	Xtb *float64 `json:"xtb,omitempty"`                // [1]
}

// MOSFET is an n-channel power MOSFET's datasheet.
type MOSFET struct {
	Common
	MaxDrainSourceVoltage *float64 `json:"max_drain_source_voltage,omitempty"` // [V]
	MaxDrainCurrent       *float64 `json:"max_drain_current,omitempty"`        // [A]
	MaxPower              *float64 `json:"max_power,omitempty"`                // [W] at 25 °C ambient
	MaxJunction           *float64 `json:"max_junction,omitempty"`             // [°C]
	RthJunctionAmbient    *float64 `json:"rth_junction_ambient,omitempty"`     // [K/W]
	GateThreshold         *Spread  `json:"gate_threshold,omitempty"`           // [V]
	OnResistance          *float64 `json:"on_resistance,omitempty"`            // [Ω]
	OnResistanceAt        *float64 `json:"on_resistance_at,omitempty"`         // [V] gate-source
}

// Opamp is an operational amplifier's datasheet.
type Opamp struct {
	Common
	OffsetVoltage *float64 `json:"offset_voltage,omitempty"` // [V] either way
	InputLow      *float64 `json:"input_low,omitempty"`      // [V] above the negative supply
	InputHigh     *float64 `json:"input_high,omitempty"`     // [V] below the positive supply
	OutputLow     *float64 `json:"output_low,omitempty"`     // [V] above the negative supply
	OutputHigh    *float64 `json:"output_high,omitempty"`    // [V] below the positive supply
	MaxSupply     *float64 `json:"max_supply,omitempty"`     // [V]
	SupplyCurrent *float64 `json:"supply_current,omitempty"` // [A]
}

// Regulator is an adjustable three-terminal regulator's datasheet.
type Regulator struct {
	Common
	ReferenceVoltage   *Spread      `json:"reference_voltage,omitempty"`    // [V]
	AdjustmentCurrent  *Spread      `json:"adjustment_current,omitempty"`   // [A]
	Dropout            [][2]float64 `json:"dropout,omitempty"`              // [A, V]
	LeastLoad          *float64     `json:"least_load,omitempty"`           // [A]
	MaxInputOutput     *float64     `json:"max_input_output,omitempty"`     // [V]
	MaxCurrent         *float64     `json:"max_current,omitempty"`          // [A]
	MaxPower           *float64     `json:"max_power,omitempty"`            // [W] at 25 °C ambient
	MaxJunction        *float64     `json:"max_junction,omitempty"`         // [°C]
	RthJunctionAmbient *float64     `json:"rth_junction_ambient,omitempty"` // [K/W]
}

// Module is a bought constant-current module's datasheet.
type Module struct {
	Common
	Current       *Spread  `json:"current,omitempty"`        // [A]
	InputVoltage  *Spread  `json:"input_voltage,omitempty"`  // [V] min and max are the window
	OutputVoltage *Spread  `json:"output_voltage,omitempty"` // [V] min and max are the window
	Dropout       *float64 `json:"dropout,omitempty"`        // [V]
	Efficiency    *float64 `json:"efficiency,omitempty"`     // [1] a switching module's
	Switching     bool     `json:"switching,omitempty"`
	MaxPower      *float64 `json:"max_power,omitempty"` // [W]
}

// SupplyPart is a power supply that a brief may choose.
type SupplyPart struct {
	Common
	Voltage          Spread       `json:"voltage,omitzero" read:"required"` // [V]
	MaxCurrent       *float64     `json:"max_current,omitempty"`            // [A]
	SourceResistance float64      `json:"source_resistance,omitempty"`      // [Ω]
	Derating         [][2]float64 `json:"derating,omitempty"`               // [°C, share of max_current]
}

// common is what a part carries whatever its type; nil where none is set.
func (p *Part) common() *Common {
	switch {
	case p.LED != nil:
		return &p.LED.Common
	case p.Transistor != nil:
		return &p.Transistor.Common
	case p.MOSFET != nil:
		return &p.MOSFET.Common
	case p.Opamp != nil:
		return &p.Opamp.Common
	case p.Regulator != nil:
		return &p.Regulator.Common
	case p.Module != nil:
		return &p.Module.Common
	case p.Supply != nil:
		return &p.Supply.Common
	}
	return nil
}

// nameOf is how a part is called: its name, or its key where it has none.
func (b *Build) nameOf(key string) string {
	part := b.Parts[key]
	if c := part.common(); c != nil && c.Name != "" {
		return c.Name
	}
	return key
}
