// Package mos evaluates MOSFETs and junctions: numbers in, numbers out. It knows
// no netlist, no file and no annotation; a model card reaches it as a map of
// numbers, and every result is a pure function of its arguments.
package mos

// Polarity is the channel type: +1 for NMOS, -1 for PMOS.
type Polarity int8

// The two channel types.
const (
	NMOS Polarity = 1
	PMOS Polarity = -1
)

// String gives the `.model` type word: "nmos" or "pmos".
func (p Polarity) String() string {
	if p == PMOS {
		return "pmos"
	}
	return "nmos"
}

// Card is a `.model` card reduced to numbers. Params holds the parameters that
// the card states, by lower-case name ("vto", "kp", "level", ...), in the units
// of the card (SPICE's own: UO in cm²/Vs, NSUB in cm⁻³, TNOM in °C). A name that
// is absent takes the default of the model's publication.
//
// A `.model` of type `vdmos` arrives with Vertical set; its polarity is that of
// the `pchan` parameter (a bare `pchan` counts as 1), whatever Polarity says.
// EKV 2.6, which some decks select by name, is level 44.
type Card struct {
	Name     string
	Polarity Polarity
	Params   map[string]float64
	Vertical bool // the type word is `vdmos`
}

// Geometry is what the instance line says of one MOSFET, in metres, square
// metres and squares. A value that the line does not state is NaN where absence
// differs from zero (NRD, NRS, SA, SB, SD); otherwise zero. Unstated returns a
// Geometry with those set.
type Geometry struct {
	W, L           float64 // drawn width (total over the fingers) and length
	NF, M          float64 // fingers, parallel multiplier; zero means one
	AD, AS, PD, PS float64 // junction areas and perimeters
	NRD, NRS       float64 // squares of diffusion, NaN: not stated
	SA, SB, SD     float64 // stress distances, NaN: not stated
	DelVTO         float64 // threshold shift in volts, added to the card's
	MulU0          float64 // mobility factor; zero means one
	RD, RS         float64 // access resistance outside the card, ohms a side, per instance of M = 1
}

// Note is one thing that Compile has to say about a card or geometry: a value
// out of its physical range, an unknown parameter, a selector not modelled.
type Note struct {
	Param string // lower-case parameter name the note is about, or ""
	Text  string // one lower-case sentence
	Fatal bool   // the device cannot be evaluated
}

// Point is a device evaluated at one bias. Voltages and currents carry the
// signs of the terminals as wired (a conducting PMOS has negative Vgs, Vds and
// Id), except those of the second group, which are taken in the device's
// conducting direction: polarity removed, and drain and source as biased.
type Point struct {
	Vgs, Vds, Vbs float64 // V, as wired, at the outer terminals
	Id            float64 // A, into the drain terminal
	Gm, Gds, Gmb  float64 // S, partial derivatives of Id as wired

	Swapped bool    // the terminal written as source is the drain as biased
	VGS     float64 // V, gate to the source as biased
	VDS     float64 // V, >= 0
	VBS     float64 // V, bulk to the source as biased; > 0 is forward bias
	Vth     float64 // V, with the body effect; same sign as VGS when the device conducts
	Vov     float64 // V, VGS - Vth
	Vdsat   float64 // V, edge of saturation
	ID      float64 // A, |Id|
	N       float64 // slope factor of weak inversion; see NAssumed
	IC      float64 // inversion coefficient
	Ron     float64 // ohm, chord VDS/ID; 1/gds where VDS is 0
	Rds     float64 // ohm, 1/gds, the slope
	Ron0    float64 // ohm, 1/(k·Vov): the small-Vds law's own prediction; +Inf where Vov <= 0
	Slope   float64 // gds·VDS/ID: 0 an ideal source, 1 a resistor; NaN where ID is 0

	NAssumed bool // N is an assumption, the model has no weak inversion of its own

	K        float64 // A/V², small-VDS transconductance factor µ·Cox·W/L at this bias, of which Ron0 is made
	Vt       float64 // V, kT/q at the device's temperature
	VelSat   float64 // overdrive over Esat·Leff: > 0.2 velocity saturation begins, > 1 it rules; NaN where the model has none
	Internal Inner   // the channel inside the access resistances; as above where there are none
	Failed   bool    // the equations gave no finite number: the currents read zero and mean nothing
}

// Inner is the channel between its own ends, behind the access resistances.
// Vth, Vov and Vdsat of a Point are taken at the outer voltages, as cards and
// tables quote them; the region follows these.
type Inner struct {
	VGS, VDS, VBS float64 // V
	Vth, Vdsat    float64 // V
}

// Margin is how far the channel is in saturation, in volts: positive in
// saturation. It is VDS - Vdsat, except that access resistance takes its share
// of VDS first.
func (p Point) Margin() float64 { return p.Internal.VDS - p.Internal.Vdsat }
