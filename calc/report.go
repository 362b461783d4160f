package calc

// ReportFormat is the value of "format" in every report.
const ReportFormat = "lanternbook-report/1"

// Severity is the outcome of a check.
type Severity string

// The outcomes, worst first as a list of checks sorts them.
const (
	Fail    Severity = "fail"
	Tight   Severity = "tight"
	Unknown Severity = "unknown"
	Pass    Severity = "pass"
)

// Report is what Check found: every figure of the build with its worst case,
// and the findings, worst first.
type Report struct {
	Format   string         `json:"format"`
	Verdict  Severity       `json:"verdict"`
	Strings  []StringReport `json:"strings"`
	Rails    []RailReport   `json:"rails"`
	Supply   SupplyReport   `json:"supply"`
	Runs     []RunReport    `json:"runs"`
	Findings []Finding      `json:"findings"`
}

// Range is a computed figure: its value with everything typical, and its worst
// cases over supply, ambient, part spreads and tolerances.
type Range struct {
	Min float64 `json:"min"` // in the unit of the field
	Typ float64 `json:"typ"` // in the unit of the field
	Max float64 `json:"max"` // in the unit of the field
}

// StringReport is one string of the build, each of its Quantity alike.
type StringReport struct {
	Label        string         `json:"label"`
	Quantity     int            `json:"quantity"`
	Kind         string         `json:"kind"`                    // the driver's kind
	Regulates    bool           `json:"regulates"`               // headroom.min is 0 or more
	Current      Range          `json:"current"`                 // [A] through the LEDs
	LEDVoltage   Range          `json:"led_voltage"`             // [V] across all LEDs of one string
	Headroom     Range          `json:"headroom"`                // [V] left over
	LuminousFlux *Range         `json:"luminous_flux,omitempty"` // [lm] of one string; nil when an LED's flux is not known
	Voltages     Voltages       `json:"voltages"`
	Devices      []DeviceReport `json:"devices"`
	Columns      Columns        `json:"columns"`

	// ControlFollowsSupply is nil where the control does not hang on the feed.
	ControlFollowsSupply *FollowsSupply `json:"control_follows_supply,omitempty"`
}

// FollowsSupply is what the supply does to a string whose control is a pot or
// a divider across the feed, everything else typical.
type FollowsSupply struct {
	PerVolt   float64 `json:"per_volt"`   // [A/V] more current for a volt more of supply, at its typical voltage
	AtLowest  float64 `json:"at_lowest"`  // [A] at the supply's lowest voltage
	AtHighest float64 `json:"at_highest"` // [A] at its highest
	Swing     float64 `json:"swing"`      // [1] from lowest to highest, of the typical current
}

// Voltages are the typical node voltages of a string against its own return.
// A point that the driver does not have is nil.
type Voltages struct {
	Feed    float64  `json:"feed"`              // [V] the string's positive end
	Tail    float64  `json:"tail"`              // [V] lower end of its LEDs
	Control *float64 `json:"control,omitempty"` // [V]
	Base    *float64 `json:"base,omitempty"`    // [V] the sink transistor's
	Sense   *float64 `json:"sense,omitempty"`   // [V] top of the sense resistor
	Gate    *float64 `json:"gate,omitempty"`    // [V] a MOSFET's
	Top     *float64 `json:"top,omitempty"`     // [V] upper end of the LEDs, where the driver stands above them
}

// DeviceReport is one part of one string, or one of several LEDs alike: its
// figures are those of a single device.
type DeviceReport struct {
	Role          string   `json:"role"`
	Part          string   `json:"part,omitempty"`           // key in the build's parts; empty for a resistor
	Power         Range    `json:"power"`                    // [W]
	Junction      Range    `json:"junction"`                 // [°C]; a resistor has none, it repeats the air
	PowerLimit    *float64 `json:"power_limit,omitempty"`    // [W]
	JunctionLimit *float64 `json:"junction_limit,omitempty"` // [°C]
}

// RailReport is a base rail that several strings share.
type RailReport struct {
	ID      string         `json:"id"`
	Voltage Range          `json:"voltage"` // [V]
	Devices []DeviceReport `json:"devices"`
}

// SupplyReport is the load as the supply sees it.
type SupplyReport struct {
	Current    Range   `json:"current"`           // [A]
	Power      Range   `json:"power"`             // [W]
	Loading    *Range  `json:"loading,omitempty"` // [1] of max_current; nil when that is not given
	Efficiency float64 `json:"efficiency"`        // [1] LED power over supply power, typical
	Inside     Range   `json:"inside"`            // [°C] air round the parts
}

// RunReport is one run at typical values.
type RunReport struct {
	ID      string  `json:"id"`
	Current float64 `json:"current"` // [A]
	Drop    float64 `json:"drop"`    // [V] out and back
	Loss    float64 `json:"loss"`    // [W]
}

// Columns are the three pictures of a string: how its feed is shared out on a
// usual day, on a cold one with a low supply, on a hot one with a high supply.
type Columns struct {
	Usual Column `json:"usual"`
	Cold  Column `json:"cold"`
	Hot   Column `json:"hot"`
}

// Column is how one string shares out the supply's voltage, from the foot up.
// Sense + Driver + LeftOver + the LEDs + Run is Supply; when LeftOver is
// negative the stack stands higher than the supply by that much.
type Column struct {
	Supply   float64     `json:"supply"`    // [V] the supply's own voltage in this corner
	Run      float64     `json:"run"`       // [V] lost in source resistance and cable
	LEDs     []ColumnLED `json:"leds"`      // from the positive end down
	LeftOver float64     `json:"left_over"` // [V] the headroom in this corner
	Driver   float64     `json:"driver"`    // [V] least the driver needs above the sense resistor
	Sense    float64     `json:"sense"`     // [V] across the sense (or series) resistor
	Current  float64     `json:"current"`   // [A] that really flows
	Heat     float64     `json:"heat"`      // [W] in the part that holds the current
}

// ColumnLED is the LEDs of one stack in a column.
type ColumnLED struct {
	Part     string  `json:"part"`
	Quantity int     `json:"quantity"`
	Each     float64 `json:"each"` // [V] across one
}

// Finding is one thing verified, and its result.
type Finding struct {
	Code     string   `json:"code"`
	Severity Severity `json:"severity"`
	Where    string   `json:"where"`
	Value    *float64 `json:"value"` // in Unit; nil when not known
	Limit    *float64 `json:"limit"` // in Unit; nil when not known
	Unit     string   `json:"unit"`
	Message  string   `json:"message"`
	Working  string   `json:"working"`
	Source   string   `json:"source"`
	Least    bool     `json:"least"` // the limit is a least, not a most
	At       string   `json:"at"`    // JSON Pointer to what the finding is about
	Remedies []Remedy `json:"remedies"`
}

// Remedy is an edit that has been tried: applied to the build, it makes its
// finding better.
type Remedy struct {
	Text  string      `json:"text"`
	Gives string      `json:"gives"` // what it would give, in words and numbers
	Patch []Operation `json:"patch"`
}

// Operation is one step of a JSON Patch (RFC 6902): add, remove or replace.
type Operation struct {
	Op    string `json:"op"`
	Path  string `json:"path"`
	Value any    `json:"value,omitempty"`
}
