package parser

import "strings"

// comment reads the comment cards that layout tools take for facts.
func (r *reader) comment() {
	text := r.card.Text
	end := lineEnd(text, 0)
	class, first := classify(text, 0, end)
	if class != factLine {
		r.meantNote(first)
		return
	}
	word := directiveWord(text[first+1:])
	lexCard(text, cardManner{slashComment: true, fields: 1 << 30}, &r.lexed)
	if len(r.tokens) == 0 {
		return
	}
	fields := r.tokens[1:]
	switch word {
	case ".global":
		g := &Global{}
		for _, t := range fields {
			if t.kind == wordToken {
				node, _ := splitPin(r.word(t))
				g.Nodes = append(g.Nodes, node)
			}
		}
		r.card.Stmt = g
	case ".pininfo", ".pin":
		p := &PinInfo{}
		for _, t := range fields {
			if t.kind == wordToken {
				pin, dir := splitPin(r.word(t))
				p.Pins = append(p.Pins, pin)
				p.Directions = append(p.Directions, dir)
			}
		}
		r.card.Stmt = p
	default:
		o := &Other{Name: r.word(r.tokens[0]), Known: true}
		for _, t := range fields {
			o.Fields = append(o.Fields, r.word(t))
		}
		r.card.Stmt = o
	}
}

// splitPin cuts `a:I` into the pin and its direction.
func splitPin(w Word) (pin, dir Word) {
	if n := strings.LastIndexByte(w.Text, ':'); n > 0 {
		return Word{Text: w.Text[:n], Start: w.Start}, Word{Text: w.Text[n+1:], Start: w.Start + int32(n) + 1}
	}
	return w, Word{}
}
