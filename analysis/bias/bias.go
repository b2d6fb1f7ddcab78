// Package bias finds node voltages and evaluates devices at them: annotated,
// then fixed by sources, for every mode and corner and over ranges. Its one
// invariant: every number says where it comes from, and what could not be
// evaluated is named as such, never taken as fine.
package bias

import (
	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
	"triodeck/parser"
)

// Provenance says where a voltage comes from, the weakest first.
type Provenance uint8

// The ways to know a voltage.
const (
	Unknown   Provenance = iota // not known; annotate it
	Solved                      // from Kirchhoff's current law
	Fixed                       // ground, or a chain of voltage sources from a known node
	Annotated                   // the deck's writer says so
)

func (p Provenance) String() string {
	return [...]string{"unknown", "solved", "fixed", "annotated"}[p]
}

// Result is a design with its operating points, one run a mode and corner.
type Result struct {
	Design   *circuit.Design
	Modes    []string // names of the modes, in order of appearance; one "" if there are none
	Corners  []string // names of the corners likewise
	Runs     []*Run   // corners outermost: for each corner, each mode
	Problems []Problem
}

// Run is the whole design in one mode at one corner.
type Run struct {
	Mode, Corner string
	TempC        float64
	Design       *circuit.Design // with the corner's library section and parameters
	Roots        []*Context      // the top level, then each subckt analysed alone
}

// Context is a cell at one set of port voltages; instances that see the same
// voltages share it.
type Context struct {
	Cell     *circuit.Cell
	Alone    bool      // a subckt analysed without an instance around it
	Samples  int       // points at which everything is evaluated, at least 1
	Axes     []Axis    // what varies over the samples; empty if nothing does
	Nodes    []Voltage // by NetID
	Devices  []*Device // every MOSFET of the cell, in card order
	Children []Child   // in card order

	named  map[string][]*Device // by folded name, in a cell of many devices
	within []string             // see frame
}

// Axis is a ranged node: its voltage at each sample.
type Axis struct {
	Node   string // hierarchical, as the annotation names it
	Values []float64
}

// Child is an instance with the context that it sees.
type Child struct {
	Instance *circuit.Instance
	Context  *Context // nil if the subckt is undefined
}

// Voltage is the voltage of a node over the samples.
type Voltage struct {
	V      []float64 // V against node 0, one a sample; nil if unknown
	Source Provenance
	Why    string        // "annotated", "fixed by V1", "ground", "from the instance", …
	Place  circuit.Place // the annotation or source; Doc is nil if there is none
}

// Device is a MOSFET in a context.
type Device struct {
	Device    *circuit.Device
	Polarity  mos.Polarity
	Model     string // spelt as on the card
	ModelKind string // "level 1", "BSIM4", …
	Geometry  mos.Geometry
	Points    []mos.Point   // one a sample; nil if not evaluated
	Verdicts  []mos.Verdict // likewise
	Source    Provenance    // the weakest of its nodes
	Missing   []string      // unknown nodes, as spelt, to annotate
	Reason    string        // why it is not evaluated, if for another reason than Missing
	Notes     []string      // what a reader must know: stand-in, access resistance left out, assumed values
}

// Row is one MOSFET of the design under its hierarchical name.
type Row struct {
	Path    string // x1.xsw.m3, as spelt; that of the instance where a subckt stands for one MOSFET
	Wrapper string // folded name of that subckt, else ""
	Shell   string // the same as spelt
	Context *Context
	*Device
}

// ProblemKind sorts what is wrong with the annotations themselves.
type ProblemKind uint8

// Kinds of problem with annotations.
const (
	UnknownName  ProblemKind = iota // a node, device, mode, corner or model that does not exist
	BadRange                        // lo above hi
	Circular                        // expressions that refer to each other
	NotEvaluated                    // an expression that does not evaluate
	Contradicted                    // two sources of truth for one node disagree
	NeverApplies                    // an expectation that can never be judged
	NotBuilt                        // a statement that is read and not acted on
)

// Problem is one thing wrong with an annotation.
type Problem struct {
	Kind    ProblemKind
	Place   circuit.Place
	Message string
}

// Status is the outcome of an expectation.
type Status uint8

// Outcomes.
const (
	Met Status = iota
	Failed
	NotJudged // what it needs was not evaluated
)

// Check is one condition of an expectation, judged over every run and instance
// that it speaks of; the values are those of the worst.
type Check struct {
	Note    circuit.NoteAt
	Place   circuit.Place // of the condition: region word or comparison
	Status  Status
	Subject string // device path or node
	Wanted  string // "triode", "ron<=150 Ω"
	Found   string // "saturation", "183 Ω"
	Mode    string // of the worst
	Corner  string
	Sample  int    // the worst
	At      string // the bias of the worst sample: "v(in)=1.60 V"; empty if nothing is ranged
	Reason  string // NotJudged: why
	Fails   int    // how many instances fail, in the run where most do
}

// Expect is the parsed expectation a check belongs to.
func (c Check) Expect() *parser.Expect { e, _ := c.Note.Note.(*parser.Expect); return e }
