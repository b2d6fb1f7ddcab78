package parser

import "strings"

// title reads the first line of a text. It stays a title; if it also reads as an
// element without any doubt, Stmt holds that, for the caller knows whether the text
// is a deck of its own or a part of one.
func (r *reader) title() {
	letter := lower(r.firstByte())
	if !isLetter(letter) {
		lexCard(r.card.Text, cardManner{}, &r.lexed)
		r.trailing(false)
		return
	}
	r.lexElement(letter)
	e, err := r.readElement(letter)
	if err == nil && plausible(e) {
		r.card.Stmt = e
		r.checkElement(e)
		r.trailing(true)
		return
	}
	r.trailing(false)
}

// plausible says that an element is one and no prose that begins with the same
// letter: "Resistor divider with 10k" is a title, "R1 in out 10k" is not.
func plausible(e *Element) bool {
	numbered := strings.ContainsAny(e.Name.Text, "0123456789")
	switch e.Letter {
	case 'm':
		return len(e.Nodes) == 4 && (len(e.Params) > 0 || numbered && grounded(e))
	case 'r', 'c', 'l':
		if len(e.Values) == 1 && e.Model.IsZero() && len(e.Params) == 0 {
			return e.Values[0].Form != NameValue && (numbered || grounded(e))
		}
		return len(e.Params) > 0 && len(e.Nodes) == 2
	case 'v', 'i':
		s := e.Source
		stated := s.DC.Form != NoValue && s.DC.Form != NameValue || len(s.AC) > 0 || s.Func.Text != "" && len(s.Args) > 1
		return stated && len(e.Values) == 0 && (numbered || grounded(e))
	case 'x':
		return len(e.Nodes) >= 2 && (len(e.Params) > 0 || numbered && grounded(e))
	case 'd', 'q', 'j':
		return len(e.Values) == 0 && (numbered && grounded(e) || len(e.Params) > 0)
	case 'e', 'g', 'f', 'h':
		return len(e.Values) == 1 && e.Values[0].Form != NameValue && (numbered || grounded(e))
	case 'k':
		return len(e.Control) == 2 && len(e.Values) == 1
	}
	return false
}

// grounded says that one of the nodes is the ground.
func grounded(e *Element) bool {
	for _, n := range e.Nodes {
		if n.Text == "0" || foldEqual(n.Text, "gnd") || foldEqual(n.Text, "vss") {
			return true
		}
	}
	return false
}
