package analysis

import (
	"sync"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// Facts is a deck with what several rules ask of it, each worked out once.
type Facts struct {
	Design *circuit.Design
	Bias   *bias.Result

	cells  func() []*circuit.Cell
	scopes func() []*circuit.Scope
	whole  func() bool
	closed func() bool
	supply func() bool

	mu      sync.Mutex
	foreign map[*parser.File]string
}

// NewFacts prepares the facts of a deck; both arguments may be nil.
func NewFacts(d *circuit.Design, b *bias.Result) *Facts {
	f := &Facts{
		Design:  d,
		Bias:    b,
		foreign: map[*parser.File]string{},
		cells:   sync.OnceValue(func() []*circuit.Cell { return cellsOf(d) }),
		scopes:  sync.OnceValue(func() []*circuit.Scope { return scopesOf(d) }),
		whole:   sync.OnceValue(func() bool { return d != nil && whole(d) }),
		closed:  sync.OnceValue(func() bool { return d != nil && closed(d) }),
	}
	f.supply = sync.OnceValue(func() bool { return supplied(f.Scopes(), f.Cells()) })
	return f
}

// Cells lists every elaborated cell once: the top level first, then in order of
// first use, then the subckts that nothing instantiates.
func (f *Facts) Cells() []*circuit.Cell { return f.cells() }

// Scopes lists every scope of the text once, outer before inner.
func (f *Facts) Scopes() []*circuit.Scope { return f.scopes() }

// Whole says that the root file is a deck of its own and not a part for others
// to include: it has elements at its top level, and drives, analyses or ends.
func (f *Facts) Whole() bool { return f.whole() }

// Closed says that every file and section that the deck asks for was found, so
// that a name which is not defined is defined nowhere.
func (f *Facts) Closed() bool { return f.closed() }

// Supplied says that the deck brings the models that its devices need, or needs
// none. One that brings none is completed by whoever simulates it: what else it
// leaves undefined may come from there too.
func (f *Facts) Supplied() bool { return f.supply() }

func cellsOf(d *circuit.Design) []*circuit.Cell {
	if d == nil {
		return nil
	}
	var list []*circuit.Cell
	seen := map[*circuit.Cell]bool{}
	add := func(c *circuit.Cell) {
		if c != nil && !seen[c] {
			seen[c] = true
			list = append(list, c)
		}
	}
	add(d.Main)
	for i := 0; i < len(list); i++ {
		for _, x := range list[i].Instances {
			add(x.Cell)
		}
		if i == len(list)-1 {
			for _, c := range d.Alone {
				add(c)
			}
		}
	}
	return list
}

func scopesOf(d *circuit.Design) []*circuit.Scope {
	if d == nil || d.Top == nil {
		return nil
	}
	list := []*circuit.Scope{d.Top}
	for i := 0; i < len(list); i++ {
		list = append(list, list[i].Children...)
	}
	return list
}

// Foreign says why a file is no deck, "" if it is one. Nothing else is said of
// a file that is none.
func (f *Facts) Foreign(doc *circuit.Document) string {
	f.mu.Lock()
	defer f.mu.Unlock()
	why, ok := f.foreign[doc.File]
	if !ok {
		why = foreign(doc.File)
		f.foreign[doc.File] = why
	}
	return why
}
