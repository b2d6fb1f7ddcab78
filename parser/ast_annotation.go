package parser

import "triodeck/parser/source"

// Annotation is one annotation of the deck's writer: what stands behind `*@`,
// `;@` or `$@`. Spans are relative to the card that carries it.
type Annotation struct {
	Span     source.Span
	Trailing bool // its subject is the element on whose card it stands
	Note     Note // nil if it could not be read; then Err tells why
	Err      *Error
}

// Note is what an annotation says.
type Note interface{ note() }

// Assign is `v(node)=lo[..hi]`; Hi is nil for a point.
type Assign struct {
	Node   Word // the node's name, without `v()`
	Lo, Hi Expr
	Span   source.Span
}

// Bias is `bias v(a)=… v(b)=…`.
type Bias struct{ Assigns []Assign }

// BiasFrom is `bias from "file.csv"`; Path.Text has no quotes.
type BiasFrom struct{ Path Word }

// Mode is `mode name v(a)=…`.
type Mode struct {
	Name    Word
	Assigns []Assign
}

// Tweak is one `name=value` of a corner: a parameter set (Op 0), shifted ('+', '-') or scaled ('*').
type Tweak struct {
	Name  Word
	Op    byte
	Value Expr
}

// Corner is `corner name temp=… lib=… v(a)=… param=… vto=+40m u0=*0.9`.
type Corner struct {
	Name    Word
	Temp    Expr // °C, nil if not stated
	Lib     Word // section, zero if not stated
	Assigns []Assign
	Tweaks  []Tweak
}

// TargetKind says what an expectation speaks of.
type TargetKind uint8

// The targets of an expectation.
const (
	DeviceTarget TargetKind = iota // a MOSFET, by name or wildcard
	NodeTarget                     // v(node)
	PathTarget                     // path(a,b)
	SettleTarget                   // settle(node)
)

// RegionWish is a region named in an expectation; Region is one of the design's
// names in lower case, words joined by one blank.
type RegionWish struct {
	Word
	Region string
	Not    bool
}

// Compare is `quantity op limit`, or `=lo..hi` with Op "=" and Hi set.
type Compare struct {
	Quantity Word   // lower-case in Name
	Name     string // folded: "ron", "vds", "v" for a NodeTarget
	Op       string // <= >= < > =
	Lo, Hi   Expr   // Hi only for a range
	Span     source.Span
}

// Expect is `expect target regions conditions [in modes] [at corners]`.
type Expect struct {
	Kind    TargetKind
	Target  Word // device pattern or node; zero when Trailing names it
	To      Word // second node of a path
	Regions []RegionWish
	Conds   []Compare
	Within  Expr // settle: seconds
	Bits    Expr // settle: resolution
	Modes   []Word
	Corners []Word
}

// Rating is `rating model vgs<=… vds<=…`.
type Rating struct {
	Model Word
	Conds []Compare
}

// Fit is `fit model nmos vto=… kp=…`.
type Fit struct {
	Model, Type Word
	Params      []Param
}

// Access is `access model rs=… rd=… | rsw=…`.
type Access struct {
	Model  Word
	Params []Param
}

// Allow is `allow rule [on target] "reason"`; Reason.Text has no quotes.
type Allow struct {
	Rule, On, Reason Word
}

func (*Bias) note()     {}
func (*BiasFrom) note() {}
func (*Mode) note()     {}
func (*Corner) note()   {}
func (*Expect) note()   {}
func (*Rating) note()   {}
func (*Fit) note()      {}
func (*Access) note()   {}
func (*Allow) note()    {}
