package circuit

import (
	"strings"

	"triodeck/parser"
	"triodeck/parser/source"
)

// block is a `.subckt` or `.if` that is open in a file; it must close in the
// same file or section.
type block struct {
	card   int
	scope  *Scope  // around the block
	branch *Branch // around the block
	subckt *Scope  // the subckt opened; nil for a conditional

	cond *Conditional // a conditional in a subckt's body
	top  *topCond     // a conditional at the top level
	skip bool         // the text here is not part of the design
}

// skipping says that the current text stands in an arm not chosen.
func (w *walk) skipping() bool {
	return len(w.blocks) > 0 && w.blocks[len(w.blocks)-1].skip
}

// push opens a block; false, with a problem, beyond the cap.
func (r *reading) push(w *walk, b *block, name string) bool {
	if len(w.blocks) >= maxBlocks {
		r.problems.add(TooDeep, place(w.doc, b.card, spanOf(w.doc, b.card)), name, "more than %d blocks stand inside each other: this one is not read", maxBlocks)
		w.ended, w.cut = true, true
		return false
	}
	b.scope, b.branch = r.scope, r.branch
	w.blocks = append(w.blocks, b)
	return true
}

// pop closes the innermost block.
func (r *reading) pop(w *walk) {
	b := w.blocks[len(w.blocks)-1]
	w.blocks = w.blocks[:len(w.blocks)-1]
	r.scope, r.branch = b.scope, b.branch
}

// closeBlocks closes the blocks above a depth, each a problem.
func (r *reading) closeBlocks(w *walk, depth int) {
	for len(w.blocks) > depth {
		b := w.blocks[len(w.blocks)-1]
		if !r.full && !w.cut {
			r.reportUnclosed(w, b)
		}
		r.pop(w)
	}
}

func (r *reading) reportUnclosed(w *walk, b *block) {
	if s, ok := w.doc.File.Card(b.card).Stmt.(*parser.Subckt); ok {
		r.problems.add(BlockUnclosed, place(w.doc, b.card, s.Name.Span()), s.Name.Text, "subckt %q has no .ends", s.Name.Text)
		return
	}
	r.problems.add(BlockUnclosed, place(w.doc, b.card, spanOf(w.doc, b.card)), ".if", ".if without its .endif")
}

func (r *reading) openSubckt(w *walk, i int, st *parser.Subckt) {
	s := newScope(r.scope)
	s.Name = parser.Fold(st.Name.Text)
	s.Subckt = st
	s.Ports = st.Ports
	if n := len(st.Optional); n > 0 {
		s.Ports = append([]parser.Word(nil), st.Ports...)
		for _, p := range st.Optional {
			s.Ports = append(s.Ports, p.Name)
		}
		s.Optional = n
	}
	s.Place = place(w.doc, i, st.Name.Span())
	s.Branch = r.branch
	if !r.push(w, &block{card: i, subckt: s}, st.Name.Text) {
		return
	}
	r.scope.addSubckt(s)
	r.scope, r.branch = s, nil
	r.addParams(w, i, st.Params)
}

func (r *reading) closeSubckt(w *walk, i int, st *parser.Ends) {
	at := place(w.doc, i, spanOf(w.doc, i))
	if !st.Name.IsZero() {
		at = place(w.doc, i, st.Name.Span())
	}
	name := parser.Fold(st.Name.Text)
	inner, named := -1, -1
	for k := len(w.blocks) - 1; k >= 0; k-- {
		if s := w.blocks[k].subckt; s != nil {
			if inner < 0 {
				inner = k
			}
			if s.Name == name {
				named = k
				break
			}
		}
	}
	switch {
	case inner < 0:
		r.problems.add(BlockStray, at, st.Name.Text, ".ends without the .subckt that it closes")
		return
	case name != "" && named < 0:
		r.problems.add(BlockStray, at, st.Name.Text, ".ends names %q but closes subckt %q", st.Name.Text, w.blocks[inner].subckt.Subckt.Name.Text)
	case named >= 0:
		inner = named
	}
	r.closeBlocks(w, inner+1)
	r.pop(w)
}

// spanOf is a card's text without its line end, relative to the card.
func spanOf(doc *Document, card int) source.Span {
	text := doc.File.Card(card).Text
	lead := len(text) - len(strings.TrimLeft(text, " \t\r\n\f"))
	if nl := strings.IndexAny(text[lead:], "\r\n"); nl >= 0 {
		text = text[:lead+nl]
	}
	return source.Span{Start: int32(min(lead, len(text))), End: int32(len(strings.TrimRight(text, " \t\f")))}
}
