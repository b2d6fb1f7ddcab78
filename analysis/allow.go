package analysis

import (
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/source"
)

// Allowance is a writer's `allow RULE [on TARGET] "reason"`. It silences one rule:
// behind an element, for that element; with a target, for the device or node of
// that name; else for the subckt that it stands in, or outside one for its file.
type Allowance struct {
	*parser.Allow
	Place circuit.Place // the annotation

	trailing bool
	block    source.Span // the subckt's cards, or the whole file
	root     bool        // at the top level of the root deck, where hierarchical names begin
	used     bool
}

// allowances lists those of a file in the order of the text.
func allowances(doc *circuit.Document, root bool) []*Allowance {
	var list, open []*Allowance // open: those whose block has not ended yet
	type block struct {
		start int32
		first int // index in open of the first allowance of the block
	}
	var blocks []block
	closeBlock := func(end int32) {
		b := blocks[len(blocks)-1]
		blocks = blocks[:len(blocks)-1]
		for _, a := range open[b.first:] {
			a.block = source.Span{Start: b.start, End: end}
		}
		open = open[:b.first]
	}
	for i := range doc.File.Len() {
		card := doc.File.Card(i)
		switch card.Stmt.(type) {
		case *parser.Subckt:
			blocks = append(blocks, block{doc.File.Start(i), len(open)})
		case *parser.Ends:
			if len(blocks) > 0 {
				closeBlock(doc.File.Span(i).End)
			}
		}
		for _, n := range card.Notes {
			allow, ok := n.Note.(*parser.Allow)
			if !ok || n.Err != nil {
				continue
			}
			a := &Allowance{
				Allow:    allow,
				Place:    Within(circuit.Place{Doc: doc, Card: i}, n.Span),
				trailing: n.Trailing && allow.On.Text == "",
				block:    source.Span{End: int32(len(doc.File.Src))},
				root:     root && len(blocks) == 0,
			}
			list, open = append(list, a), append(open, a)
		}
	}
	for len(blocks) > 0 {
		closeBlock(int32(len(doc.File.Src)))
	}
	return list
}

// covers says whether the allowance silences a finding.
func (a *Allowance) covers(f *Finding) bool {
	switch {
	case parser.Fold(a.Rule.Text) != f.Rule:
		return false
	case a.trailing:
		return a.sameCard(f.Place) || a.sameCard(f.Subject.Card)
	case a.On.Text == "":
		return a.holds(f.Place)
	}
	target := targetName(a.On.Text)
	path := parser.Fold(f.Subject.Path)
	if a.root && path != "" && circuit.Match(target, path) {
		return true
	}
	if a.holds(f.Place) {
		if path != "" && circuit.Match(target, path[strings.LastIndexByte(path, '.')+1:]) {
			return true
		}
		return a.names(f.Place, target)
	}
	return a.holds(f.Subject.Card) && a.names(f.Subject.Card, target)
}

// names says whether a place stands on the card of an element of that name.
func (a *Allowance) names(at circuit.Place, target string) bool {
	if at.Card < 0 || at.Card >= at.Doc.File.Len() {
		return false
	}
	e, ok := at.Doc.File.Card(at.Card).Stmt.(*parser.Element)
	return ok && circuit.Match(target, parser.Fold(e.Name.Text))
}

func (a *Allowance) sameCard(at circuit.Place) bool {
	return at.Doc != nil && at.Doc.Path == a.Place.Doc.Path && at.Card == a.Place.Card
}

func (a *Allowance) holds(at circuit.Place) bool {
	return at.Doc != nil && at.Doc.Path == a.Place.Doc.Path && a.block.Contains(at.Span.Start)
}

// targetName folds a target and takes the node out of `v(node)`.
func targetName(s string) string {
	s = parser.Fold(s)
	if strings.HasPrefix(s, "v(") && strings.HasSuffix(s, ")") {
		return strings.TrimSpace(s[2 : len(s)-1])
	}
	return s
}
