// Package ide answers an editor's questions about a place in a deck: what is
// this, where does it come from, what does it do. Its one invariant: byte
// offsets go in and plain values come out. It knows no protocol, and it keeps
// nothing between two questions.
package ide

import (
	"context"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/analysis/workspace"
	"triodeck/parser"
	"triodeck/parser/source"
)

// query is a question about a file as part of a deck. Its parts are filled as
// far as they are known: a deck that does not reach the file leaves doc nil.
type query struct {
	ctx    context.Context
	deck   *workspace.Deck
	design *circuit.Design
	doc    *circuit.Document
}

func ask(ctx context.Context, deck *workspace.Deck, path string) (query, bool) {
	q := query{ctx: ctx, deck: deck, design: deck.Design(ctx)}
	if q.design == nil {
		return q, false
	}
	for _, d := range q.design.Docs {
		if d.Path == path {
			q.doc = d
			return q, true
		}
	}
	return q, false
}

// place is the card at an offset and the word of it that stands there.
type place struct {
	card  int
	start int32 // of the card in the file
	*parser.Card
	word mark
	some bool // there is a word
}

func (q query) at(offset int32) (place, bool) {
	f := q.doc.File
	i := f.CardAt(offset)
	if i < 0 || i >= f.Len() {
		return place{}, false
	}
	p := place{card: i, start: f.Start(i), Card: f.Card(i)}
	p.word, p.some = markAt(p.Card, offset-p.start)
	return p, true
}

// span is a span of the card's text as one of the file.
func (p place) span(sp source.Span) source.Span { return sp.Shift(p.start) }

// body is the subckt around a card, nil at the top level. The cards before it
// tell, so that this also holds for cards that could not be read.
func (q query) body(card int) *parser.Subckt {
	depth := 0
	for i := card; i >= 0; i-- {
		switch s := q.doc.File.Card(i).Stmt.(type) {
		case *parser.Ends:
			// An `.ends` still belongs to the subckt that it closes.
			if i != card {
				depth++
			}
		case *parser.Subckt:
			if depth == 0 {
				return s
			}
			depth--
		}
	}
	return nil
}

// turnsBody says that a card stands in another body than the card before it.
func (q query) turnsBody(card int) bool {
	if _, ok := q.doc.File.Card(card).Stmt.(*parser.Subckt); ok {
		return true
	}
	if card == 0 {
		return false
	}
	_, ok := q.doc.File.Card(card - 1).Stmt.(*parser.Ends)
	return ok
}

// scope is the name space in which a card speaks.
func (q query) scope(card int) *circuit.Scope {
	s := q.body(card)
	if s == nil {
		return q.design.Top
	}
	if found := scopeOf(q.design.Top, s, 0); found != nil {
		return found
	}
	return q.design.Top
}

// maxNesting ends the search in a name space that contains itself.
const maxNesting = 64

func scopeOf(s *circuit.Scope, subckt *parser.Subckt, depth int) *circuit.Scope {
	if s == nil || s.Subckt == subckt {
		return s
	}
	if depth > maxNesting {
		return nil
	}
	for _, defs := range s.Subckts {
		for _, d := range defs {
			if found := scopeOf(d, subckt, depth+1); found != nil {
				return found
			}
		}
	}
	return nil
}

// sighting is a cell in one context of one run, under the name of its first
// instance.
type sighting struct {
	run     *bias.Run
	path    string // "" for the top level
	context *bias.Context
}

// sightings lists the contexts of the body of a subckt, nil for the top level.
func sightings(r *bias.Result, body *parser.Subckt) []sighting {
	var out []sighting
	if r == nil {
		return nil
	}
	for _, run := range r.Runs {
		for path, c := range r.Contexts(run) {
			if c.Cell.Scope.Subckt == body {
				out = append(out, sighting{run, path, c})
			}
		}
	}
	return out
}
