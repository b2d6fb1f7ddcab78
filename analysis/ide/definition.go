package ide

import (
	"context"

	"triodeck/analysis/circuit"
	"triodeck/analysis/workspace"
	"triodeck/parser"
	"triodeck/parser/source"
)

// Location is a span of a file.
type Location struct {
	Path string
	Span source.Span
}

// Definition gives the places where the name at an offset is defined; empty if
// it is not a name or is not defined.
func Definition(ctx context.Context, deck *workspace.Deck, path string, offset int32) []Location {
	q, ok := ask(ctx, deck, path)
	if !ok {
		return nil
	}
	p, ok := q.at(offset)
	if !ok || !p.some {
		return nil
	}
	var out []Location
	for _, at := range q.definitions(p) {
		if at.Doc != nil {
			out = append(out, Location{at.Doc.Path, at.Span})
		}
	}
	return out
}

func (q query) definitions(p place) []circuit.Place {
	scope, name := q.scope(p.card), parser.Fold(p.word.text)
	var out []circuit.Place
	switch p.word.kind {
	case modelMark:
		defs := scope.FindModel(name)
		if len(defs) == 0 {
			defs = scope.FindBins(name)
		}
		for _, d := range defs {
			out = append(out, d.Place)
		}
		if len(defs) == 0 {
			out = subcktPlaces(scope, name)
		}
	case subcktMark:
		return subcktPlaces(scope, name)
	case paramMark, paramDefMark:
		for _, d := range scope.FindParam(name) {
			out = append(out, d.Place)
		}
	case keyMark:
		return passedParam(scope, p)
	case pathMark:
		if d := q.included(p.word.text); d != nil {
			out = append(out, circuit.Place{Doc: d})
		}
	case sectionMark:
		return q.section(p)
	case nodeMark:
		return q.firstMention(p, name)
	case elementMark, targetMark:
		if e, ok := q.elementAt(scope, name); ok {
			out = append(out, wordIn(e.Place, e.Name))
		}
	case modeMark, cornerMark:
		return q.named(scope, p.word.kind, name)
	}
	return out
}

// wordIn is the place of a word of a card.
func wordIn(card circuit.Place, w parser.Word) circuit.Place {
	card.Span = w.Span().Shift(card.Doc.File.Start(card.Card))
	return card
}

func subcktPlaces(scope *circuit.Scope, name string) []circuit.Place {
	var out []circuit.Place
	for _, s := range scope.FindSubckt(name) {
		out = append(out, s.Place)
	}
	if len(out) == 0 && scope.Name == name && scope.Subckt != nil {
		out = append(out, scope.Place)
	}
	return out
}

// passedParam is the definition of a parameter that an instance line passes.
func passedParam(scope *circuit.Scope, p place) []circuit.Place {
	e, ok := p.Stmt.(*parser.Element)
	if !ok || e.Letter != 'x' {
		return nil
	}
	var out []circuit.Place
	for _, s := range scope.FindSubckt(parser.Fold(e.Model.Text)) {
		for _, d := range s.Params[p.word.key] {
			out = append(out, d.Place)
		}
	}
	return out
}

// section is the place where the library section of a `.lib` call begins.
func (q query) section(p place) []circuit.Place {
	doc := q.doc
	if lib, ok := p.Stmt.(*parser.Lib); ok {
		doc = q.included(lib.Path.Text)
	}
	if doc == nil {
		return nil
	}
	for i := range doc.File.Len() {
		s, ok := doc.File.Card(i).Stmt.(*parser.LibSection)
		if ok && parser.Fold(s.Name.Text) == parser.Fold(p.word.text) {
			return []circuit.Place{wordIn(circuit.Place{Doc: doc, Card: i}, s.Name)}
		}
	}
	return nil
}

// firstMention is where a node first appears, in the subckt's ports or on a card.
func (q query) firstMention(p place, name string) []circuit.Place {
	body := q.body(p.card)
	for _, c := range q.cells() {
		if c.Scope.Subckt != body {
			continue
		}
		if at, ok := mentionIn(c, name); ok {
			return []circuit.Place{at}
		}
	}
	return nil
}

func mentionIn(c *circuit.Cell, name string) (circuit.Place, bool) {
	if net, ok := c.NetByName(name); ok && c.Nets[net].Place.Doc != nil {
		return c.Nets[net].Place, true
	}
	for i, r := range name {
		if r != '.' {
			continue
		}
		if x := c.InstanceByName(name[:i]); x != nil && x.Cell != nil {
			return mentionIn(x.Cell, name[i+1:])
		}
	}
	return circuit.Place{}, false
}

// named is where a mode or corner is defined; those of the top level hold in
// every subckt.
func (q query) named(scope *circuit.Scope, kind markKind, name string) []circuit.Place {
	for s := scope; s != nil; s = s.Parent {
		for _, n := range s.Notes {
			var w parser.Word
			switch note := n.Note.(type) {
			case *parser.Mode:
				if kind == modeMark {
					w = note.Name
				}
			case *parser.Corner:
				if kind == cornerMark {
					w = note.Name
				}
			}
			if !w.IsZero() && parser.Fold(w.Text) == name {
				return []circuit.Place{wordIn(n.Place, w)}
			}
		}
	}
	return nil
}
