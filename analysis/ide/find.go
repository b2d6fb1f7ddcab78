package ide

import (
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// findElement finds the element that a name on a card means, if it stands in the
// same file: the card's own, or another of the scope.
func (q query) findElement(p place, name string) (e *parser.Element, card int, ok bool) {
	if e, ok := p.Stmt.(*parser.Element); ok && e.Name.Span() == p.word.span {
		return e, p.card, true
	}
	at, ok := q.elementAt(q.scope(p.card), name)
	if !ok || at.Place.Doc != q.doc {
		return nil, 0, false
	}
	return at.Element, at.Place.Card, true
}

// elementAt finds an element by its name in a scope, through instances if the
// name has dots.
func (q query) elementAt(scope *circuit.Scope, name string) (circuit.ElementAt, bool) {
	name = parser.Fold(name)
	for {
		for _, e := range scope.Elements {
			if parser.Fold(e.Name.Text) == name {
				return e, true
			}
		}
		head, rest, ok := strings.Cut(name, ".")
		if !ok {
			return circuit.ElementAt{}, false
		}
		x, ok := q.elementAt(scope, head)
		if !ok || x.Letter != 'x' {
			return circuit.ElementAt{}, false
		}
		defs := scope.FindSubckt(parser.Fold(x.Model.Text))
		if len(defs) == 0 {
			return circuit.ElementAt{}, false
		}
		scope, name = defs[len(defs)-1], rest
	}
}
