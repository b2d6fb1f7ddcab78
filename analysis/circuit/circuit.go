// Package circuit makes a design out of files: includes and library sections,
// scopes and symbols, hierarchy, parameters, nets and terminals. Its one
// invariant: a design is an immutable value and building it cannot fail; what
// could not be found or evaluated is said in place, as a problem or as the
// error of the value. It knows no voltages and no device physics.
package circuit

import (
	"sync"

	"triodeck/parser"
	"triodeck/parser/source"
)

// Reader gives the syntax of a file by its path; it parses each file once.
// The error is one of package io/fs (not exist, permission) or another reason
// why the file could not be read.
type Reader interface {
	File(path string) (*parser.File, error)
}

// Document is one file of a design.
type Document struct {
	Path string // as given or as resolved against the including file
	File *parser.File
}

// Place is a span of a document; spans are absolute in the file.
type Place struct {
	Doc  *Document
	Card int // index of the card
	Span source.Span
}

// Options change how a design is built; a corner sets them.
type Options struct {
	Section string            // replaces the section of `.lib file section` calls outside libraries' own sections, where the file has such a section
	Params  map[string]string // overrides of top-level parameters, by folded name: an expression's text
	Roots   []string          // folders to look for includes in, after the including file's own
	TempC   *float64          // °C, in place of the deck's own temperature
	Facts   Facts             // what no card tells

	Problems []Problem // found before the files were read; the design passes them on
}

// Design is a root deck with everything that it reaches.
type Design struct {
	Root     *Document
	Docs     []*Document // every file reached, root first, in order of first use
	Top      *Scope      // the root deck's own scope
	Main     *Cell       // the top level, elaborated with its hierarchy
	Alone    []*Cell     // subckts of the root document that nothing instantiates, elaborated with their defaults
	Problems []Problem   // what went wrong in loading, one a cause
	Sealed   []Place     // where each encrypted block begins; its text is never shown
	TempC    float64     // `.temp` or `.option temp`, else 27
	TnomC    float64     // `.option tnom`, else 27
	Options  Options
}

// ProblemKind sorts problems; rules report them.
type ProblemKind uint8

// Kinds of problem found while loading.
const (
	IncludeMissing  ProblemKind = iota // file not found or not readable
	IncludeCircular                    // a file that includes itself
	SectionMissing                     // the library has no such section
	BlockUnclosed                      // .subckt without .ends, .lib without .endl, .if without .endif
	BlockStray                         // .ends, .endl, .endif without its start, or with another name
	Recursion                          // a subckt that contains itself
	TooDeep                            // nesting or size beyond the cap
	ParamCycle                         // parameters that refer to each other in a circle
	ParamUndefined                     // an expression names an unknown parameter
	ParamInvalid                       // an expression that does not evaluate otherwise
	BinMissing                         // a size that no bin of its model covers
	BinOverlap                         // a size that several bins cover
	SettingInvalid                     // a settings file that says something else than it may
)

// Problem is one cause found while loading.
type Problem struct {
	Kind    ProblemKind
	Place   Place
	Name    string // the file, section, subckt or parameter concerned, as written
	Message string // one lower-case sentence
}

// Scope is a name space of the text: the top level or a subckt's body.
type Scope struct {
	Name     string         // folded; "" at the top level
	Subckt   *parser.Subckt // nil at the top level
	Place    Place          // of the `.subckt` name
	Parent   *Scope
	Ports    []parser.Word // the optional ones last
	Optional int           // how many of Ports a caller may leave out
	Elements []ElementAt
	Notes    []NoteAt
	Models   map[string][]*ModelDef // by folded name; more than one where sections or duplicates exist
	Subckts  map[string][]*Scope    // by folded name
	Params   map[string][]*ParamDef // by folded name: ports' defaults first, then `.param`
	Globals  map[string]bool        // top level only: folded names of `.global`
	Initials []InitialAt
	Open     bool     // an unresolved include or section, or an encrypted block, may define more names here
	Branch   *Branch  // where the definition of a subckt is conditional
	Children []*Scope // the subckts defined directly here, in the order of the text

	models []*ModelDef // all of Models, in the order of the text
	params []*ParamDef // all of Params, likewise
	bins   map[string][]*ModelDef
	conds  []*Conditional
	words  map[string]bool // see mentions
	sole   bool            // see factNames
}

// Conditional is an `.if` in a subckt's body. Each cell chooses an arm by its
// own parameters; at the top level the choice is made once, in loading, and the
// arms not chosen are not part of the design.
type Conditional struct {
	Place  Place
	Within *Branch // the arm that it stands in, or nil
	Arms   []*Branch
}

// Branch is one arm of a conditional: what stands between its `.if`, `.elseif`
// or `.else` and the next.
type Branch struct {
	Cond  *Conditional
	Else  bool
	Test  parser.Value // absent for `.else`
	Place Place        // of the card
}

// ElementAt is an element card in its place.
type ElementAt struct {
	*parser.Element
	Place  Place   // the whole card
	Branch *Branch // the conditional arm it stands in, or nil
}

// NoteAt is an annotation in its place. Subject is the element of a trailing one.
type NoteAt struct {
	*parser.Annotation
	Place   Place
	Subject *parser.Element
	Branch  *Branch
}

// InitialAt is a `.ic` or `.nodeset` card in its place.
type InitialAt struct {
	*parser.Initial
	Place  Place
	Branch *Branch
}

// ModelDef is a `.model` card in its place.
type ModelDef struct {
	*parser.Model
	Name   string // folded
	Type   string // folded: nmos, pmos, d, npn, …
	Place  Place  // of the name
	Scope  *Scope
	Branch *Branch
}

// ParamDef is one definition of a parameter, or of a user's function.
type ParamDef struct {
	Name   string // folded
	Value  parser.Value
	Place  Place // of the name
	Func   *parser.FuncDef
	Branch *Branch
}

// Cell is a scope elaborated with one set of parameter values. Equal sets share
// one cell, however many instances call it.
type Cell struct {
	Scope     *Scope
	Key       string // the distinguishing parameter values, in a canonical text
	Nets      []Net  // Nets[0] is ground
	Ports     []NetID
	Devices   []*Device
	Instances []*Instance
	Env       *Env // evaluates expressions in the cell's scope

	nets      map[string]NetID // by folded name
	index     sync.Once
	devices   map[string]*Device
	instances map[string]*Instance
	wrapOnce  sync.Once
	wrap      *Wrapper
}

// NetID indexes Cell.Nets.
type NetID int32

// Ground is the net of node 0 in every cell.
const Ground NetID = 0

// Net is a node of a cell.
type Net struct {
	Name   string // folded
	Spelt  string // as first written
	Port   int    // index among the ports, -1 if none
	Global bool   // ground, or named by `.global`, or ending in `!`
	Pins   []Pin
	Place  Place // first mention
}

// Pin is one terminal on a net: of a device or of an instance.
type Pin struct {
	Device   *Device   // nil for an instance's pin
	Instance *Instance // nil for a device's pin
	Terminal int
}

// Kind sorts devices by their physics.
type Kind uint8

// Kinds of device.
const (
	OtherKind Kind = iota
	MOSFET
	Resistor
	Capacitor
	Inductor
	Diode
	Bipolar
	VSource
	ISource
	VCVS // E
	VCCS // G
	CCCS // F
	CCVS // H
	Coupling
)

// Value is an evaluated number, or the reason why there is none.
type Value struct {
	V   float64 // SI
	Set bool    // the card states it (or a default does)
	Err error   // why it could not be evaluated; V is then 0
}

// Device is an element of a cell with its numbers evaluated.
type Device struct {
	Name   string // folded, local
	Spelt  string // as written
	Kind   Kind
	Elem   *parser.Element
	Place  Place
	Nets   []NetID
	Model  *Model           // nil if the form has none or it is undefined
	Value  Value            // resistance, capacitance, DC of a source, gain, area of a junction
	Params map[string]Value // by folded name; equal cards of a cell share one map
	Scale  float64          // `.option scale`: multiplies geometry; 1 by default
	Size   *Size            // of a MOSFET; nil for other kinds
}

// Model is a model card with its parameters evaluated in the device's context.
type Model struct {
	Def    *ModelDef
	Bins   []*ModelDef // all of `name.1 …` where the name has bins; Def is then the one picked, nil if none covers the device
	Params map[string]Value

	table *binTable // of Bins
}

// Instance is an X element of a cell.
type Instance struct {
	Name  string // folded, local
	Spelt string
	Elem  *parser.Element
	Place Place
	Nets  []NetID
	Def   *Scope // nil if the subckt is undefined
	Cell  *Cell  // nil likewise, or if recursive

	// Params holds what the card passes, by folded name, evaluated in the
	// caller; equal cards share one map.
	Params map[string]Value
	// M multiplies every current of the instance: its `m=`, 1 by default. It is
	// 1 where the subckt declares a parameter of that name and so uses it itself.
	M Value
}
