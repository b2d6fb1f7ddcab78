package analysis

import (
	"cmp"
	"slices"
	"sync"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

// Facts is a deck with what several rules ask of it, each worked out once.
type Facts struct {
	Design *circuit.Design
	Bias   *bias.Result

	cells  func() []*circuit.Cell
	scopes func() []*circuit.Scope
	whole  func() bool
	closed func() bool
}

// NewFacts prepares the facts of a deck; both arguments may be nil.
func NewFacts(d *circuit.Design, b *bias.Result) *Facts {
	return &Facts{
		Design: d,
		Bias:   b,
		cells:  sync.OnceValue(func() []*circuit.Cell { return cellsOf(d) }),
		scopes: sync.OnceValue(func() []*circuit.Scope { return scopesOf(d) }),
		whole:  sync.OnceValue(func() bool { return d != nil && whole(d) }),
		closed: sync.OnceValue(func() bool { return d != nil && closed(d) }),
	}
}

// Cells lists every elaborated cell once: the top level first, then in order of
// first use, then the subckts that nothing instantiates.
func (f *Facts) Cells() []*circuit.Cell { return f.cells() }

// Scopes lists every scope of the text once, outer before inner, in order of
// their names' places.
func (f *Facts) Scopes() []*circuit.Scope { return f.scopes() }

// Whole says that the root file is a deck of its own and not a part for others
// to include: it has elements at its top level, and drives, analyses or ends.
func (f *Facts) Whole() bool { return f.whole() }

// Closed says that every file and section that the deck asks for was found, so
// that a name which is not defined is defined nowhere.
func (f *Facts) Closed() bool { return f.closed() }

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
	seen := map[*circuit.Scope]bool{d.Top: true}
	order := map[*circuit.Document]int{}
	for i, doc := range d.Docs {
		order[doc] = i
	}
	for i := 0; i < len(list); i++ {
		var inner []*circuit.Scope
		for _, defs := range list[i].Subckts {
			for _, s := range defs {
				if !seen[s] {
					seen[s] = true
					inner = append(inner, s)
				}
			}
		}
		slices.SortFunc(inner, func(a, b *circuit.Scope) int {
			return cmp.Or(cmp.Compare(order[a.Place.Doc], order[b.Place.Doc]), cmp.Compare(a.Place.Span.Start, b.Place.Span.Start))
		})
		list = append(list, inner...)
	}
	return list
}
