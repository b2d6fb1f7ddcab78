package analysis

import (
	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// Severity says how much a finding matters.
type Severity uint8

// The severities, the mildest first.
const (
	Note    Severity = iota // worth knowing; nothing need change
	Warning                 // probably a mistake
	Error                   // wrong whatever was meant
)

func (s Severity) String() string { return [...]string{"note", "warning", "error"}[min(s, Error)] }

// Finding is one thing to say about a deck, at the place where it stands.
type Finding struct {
	Rule     string
	Severity Severity
	Place    circuit.Place
	Message  string // one lower-case sentence, without the rule's name
	Related  []Related
	Edits    []Edit
	Subject  Subject // what an allowance may name; zero if nothing
}

// Subject is the device or node that a finding is about.
type Subject struct {
	Path string        // hierarchical from the root deck, as spelt: x1.m3
	Card circuit.Place // the element's card, where a trailing allowance may stand; Doc is nil for a node
}

// Related is another place that a reader of a finding should see.
type Related struct {
	Place   circuit.Place
	Message string
}

// Edit is a way to mend a finding. A safe one keeps the circuit's meaning or is
// certain to be what was meant; another is only offered.
type Edit struct {
	Title string
	Safe  bool
	Path  string        // the file edited
	Edits []source.Edit // sorted, in offsets of the file
}

// EditAt makes an edit of one span.
func EditAt(title string, safe bool, at circuit.Place, text string) Edit {
	return Edit{Title: title, Safe: safe, Path: at.Doc.Path, Edits: []source.Edit{{Span: at.Span, New: text}}}
}
