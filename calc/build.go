package calc

// BuildFormat is the value of "format" in every build document.
const BuildFormat = "lanternbook-build/1"

// Build is one job as its document states it: the supply, the strings that
// hang on it, the cable between them and a full copy of every part used.
type Build struct {
	Format    string          `json:"format" read:"required"`
	Title     string          `json:"title" read:"required"`
	Client    string          `json:"client,omitempty"`
	Site      string          `json:"site,omitempty"`
	Notes     string          `json:"notes,omitempty"`
	Tags      []string        `json:"tags,omitempty"`
	Ambient   Spread          `json:"ambient" read:"required"` // [°C]
	Enclosure *Enclosure      `json:"enclosure,omitempty"`
	Supply    Supply          `json:"supply" read:"required"`
	Limits    *Limits         `json:"limits,omitempty"`
	Strings   []String        `json:"strings" read:"required"`
	Runs      []Run           `json:"runs,omitempty"`
	Rails     []Rail          `json:"rails,omitempty"`
	Parts     map[string]Part `json:"parts" read:"required"`
}

// Spread is a value with its worst-case limits. In a document a bare number
// stands for all three, and Bare remembers that it was written so.
type Spread struct {
	Min  float64 // in the unit of the field
	Typ  float64 // in the unit of the field
	Max  float64 // in the unit of the field
	Bare bool
}

// Exactly returns the spread of a value without tolerance.
func Exactly(v float64) Spread { return Spread{Min: v, Typ: v, Max: v, Bare: true} }

// Enclosure tells whether the air round the parts is the ambient or warmer.
// Kind is "open" or "sealed"; a sealed one needs both figures.
type Enclosure struct {
	Kind         string   `json:"kind" read:"required"`
	SurfaceArea  *float64 `json:"surface_area,omitempty"`  // [m²]
	HeatTransfer *float64 `json:"heat_transfer,omitempty"` // [W/(m²·K)]
}

// Supply is what feeds the build.
type Supply struct {
	Label            string   `json:"label,omitempty"`
	Voltage          Spread   `json:"voltage" read:"required"`     // [V]
	MaxCurrent       *float64 `json:"max_current,omitempty"`       // [A]
	SourceResistance float64  `json:"source_resistance,omitempty"` // [Ω]
}

// Limits are what the shop asks of a build beyond bare survival. A missing
// one stands at its default.
type Limits struct {
	Headroom       *float64 `json:"headroom,omitempty"`        // [V] least left over, DefaultHeadroom
	JunctionMargin *float64 `json:"junction_margin,omitempty"` // [K] below the rated junction, DefaultJunctionMargin
	Loading        *float64 `json:"loading,omitempty"`         // [1] of the supply's rated current, DefaultLoading
}

// String is one series string of LEDs with its driver, Quantity times alike at
// the same place. LEDs are listed from the positive end down.
type String struct {
	Label    string     `json:"label" read:"required"`
	Quantity int        `json:"quantity" read:"required"`
	LEDs     []LEDStack `json:"leds" read:"required"`
	Driver   Driver     `json:"driver" read:"required"`
	FedBy    string     `json:"fed_by,omitempty"` // id of a run; empty means straight at the supply
	Wanted   *Wanted    `json:"wanted,omitempty"`
}

// LEDStack is Quantity LEDs of one part in series.
type LEDStack struct {
	Part     string `json:"part" read:"required"`
	Quantity int    `json:"quantity" read:"required"`
}

// Wanted is what the person asked of the string: a current or a light, one of
// the two. It changes nothing in the circuit; a check compares it.
type Wanted struct {
	Current      *float64 `json:"current,omitempty"`       // [A]
	LuminousFlux *float64 `json:"luminous_flux,omitempty"` // [lm] of the whole string
}

// Resistor is a resistor to fit. A missing tolerance is none; a missing rating
// makes its dissipation check unknown.
type Resistor struct {
	Ohms      float64  `json:"ohms" read:"required"` // [Ω]
	Tolerance float64  `json:"tolerance,omitempty"`  // [1]
	Watts     *float64 `json:"watts,omitempty"`      // [W]
}

// Run is an out-and-back pair of conductors: its loop resistance is twice the
// length. Exactly one of Conductor ("0.75 mm2", "AWG 18") and OhmsPerMetre
// (of one wire) is given.
type Run struct {
	ID           string   `json:"id" read:"required"`
	From         string   `json:"from" read:"required"`   // "supply" or another run's id
	Length       float64  `json:"length" read:"required"` // [m]
	Conductor    string   `json:"conductor,omitempty"`
	OhmsPerMetre *float64 `json:"ohms_per_metre,omitempty"` // [Ω/m]
}

// Control is the voltage that sets a sink's current. Exactly one of Volts,
// Pot and Divider is given; Ohms belongs to Volts.
type Control struct {
	Volts   *Spread  `json:"volts,omitempty"` // [V]
	Ohms    *float64 `json:"ohms,omitempty"`  // [Ω] behind which Volts stands
	Pot     *Pot     `json:"pot,omitempty"`
	Divider *Divider `json:"divider,omitempty"`
}

// Pot is a potentiometer across the string's own feed.
type Pot struct {
	Ohms  float64 `json:"ohms" read:"required"` // [Ω]
	Turn  float64 `json:"turn" read:"required"` // [1] 0 at the return's end, 1 at the feed's
	Upper float64 `json:"upper,omitempty"`      // [Ω] fixed, towards the feed
	Lower float64 `json:"lower,omitempty"`      // [Ω] fixed, towards the return
}

// Divider is two resistors across the string's own feed.
type Divider struct {
	Upper Resistor `json:"upper" read:"required"`
	Lower Resistor `json:"lower" read:"required"`
}

// Reference holds a base: a Zener, a shunt reference or diodes, as a voltage
// at 25 °C behind a slope resistance. A check says so where the base takes more
// than the bias brings, which no reference can give.
type Reference struct {
	Volts  Spread  `json:"volts" read:"required"` // [V]
	Tempco float64 `json:"tempco,omitempty"`      // [V/K]
	Ohms   float64 `json:"ohms,omitempty"`        // [Ω]
}

// Driver is what holds a string's current. Kind names which of the others is
// set; in a document its fields stand beside "kind".
type Driver struct {
	Kind           string
	Resistor       *ResistorDriver
	FollowerSink   *FollowerSink
	ReferenceSink  *ReferenceSink
	TwoTransistor  *TwoTransistor
	RailSink       *RailSink
	OpampSink      *OpampSink
	Regulator      *RegulatorDriver
	ModuleInstance *ModuleDriver
}

// The driver kinds of a build document.
const (
	KindResistor      = "resistor"
	KindFollowerSink  = "follower-sink"
	KindReferenceSink = "reference-sink"
	KindTwoTransistor = "two-transistor"
	KindRailSink      = "rail-sink"
	KindOpampSink     = "opamp-sink"
	KindRegulator     = "regulator"
	KindModule        = "module"
)

// ResistorDriver is a series (ballast) resistor.
type ResistorDriver struct {
	Kind     string   `json:"kind"`
	Resistor Resistor `json:"resistor" read:"required"`
}

// FollowerSink is an NPN with an emitter (sense) resistor whose base a PNP
// emitter follower drives; the pull-up goes from the feed to that emitter.
type FollowerSink struct {
	Kind    string   `json:"kind"`
	Control Control  `json:"control" read:"required"`
	PNP     string   `json:"pnp" read:"required"`
	NPN     string   `json:"npn" read:"required"`
	Pullup  Resistor `json:"pullup" read:"required"`
	Sense   Resistor `json:"sense" read:"required"`
}

// ReferenceSink is an NPN with a sense resistor, its base held by a reference
// that Bias feeds from the string's feed.
type ReferenceSink struct {
	Kind      string    `json:"kind"`
	Reference Reference `json:"reference" read:"required"`
	Bias      Resistor  `json:"bias" read:"required"`
	NPN       string    `json:"npn" read:"required"`
	Sense     Resistor  `json:"sense" read:"required"`
}

// TwoTransistor is a pass NPN whose base drive, fed by Bias, a second NPN
// steals when the sense voltage reaches its VBE.
type TwoTransistor struct {
	Kind   string   `json:"kind"`
	Pass   string   `json:"pass" read:"required"`
	Sensor string   `json:"sensor" read:"required"`
	Bias   Resistor `json:"bias" read:"required"`
	Sense  Resistor `json:"sense" read:"required"`
}

// RailSink is an NPN with a sense resistor, its base on a shared rail.
type RailSink struct {
	Kind         string   `json:"kind"`
	Rail         string   `json:"rail" read:"required"`
	NPN          string   `json:"npn" read:"required"`
	Sense        Resistor `json:"sense" read:"required"`
	BaseResistor *float64 `json:"base_resistor,omitempty"` // [Ω]
}

// OpampSink is an op-amp and a MOSFET that hold the sense voltage at the
// control voltage.
type OpampSink struct {
	Kind    string   `json:"kind"`
	Control Control  `json:"control" read:"required"`
	Opamp   string   `json:"opamp" read:"required"`
	FET     string   `json:"fet" read:"required"`
	Sense   Resistor `json:"sense" read:"required"`
}

// RegulatorDriver is an adjustable three-terminal regulator wired as a
// current source above the LEDs.
type RegulatorDriver struct {
	Kind      string   `json:"kind"`
	Regulator string   `json:"regulator" read:"required"`
	Set       Resistor `json:"set" read:"required"`
}

// ModuleDriver is a bought constant-current module.
type ModuleDriver struct {
	Kind   string `json:"kind"`
	Module string `json:"module" read:"required"`
}

// Rail is a base rail that several strings share. Kind is "follower",
// "reference" or "buffered-reference".
type Rail struct {
	ID        string     `json:"id" read:"required"`
	Kind      string     `json:"kind" read:"required"`
	FedBy     string     `json:"fed_by,omitempty"`
	Control   *Control   `json:"control,omitempty"`
	PNP       string     `json:"pnp,omitempty"`
	Pullup    *Resistor  `json:"pullup,omitempty"`
	Reference *Reference `json:"reference,omitempty"`
	Bias      *Resistor  `json:"bias,omitempty"`
	NPN       string     `json:"npn,omitempty"`
	Pulldown  *Resistor  `json:"pulldown,omitempty"`
}
