package parser

import (
	"fmt"
	"slices"
	"strings"

	"triodeck/parser/source"
)

// annotationCard reads a `*@` line and its `*@+` lines.
func (r *reader) annotationCard() {
	text := r.card.Text
	_, first := classify(text, 0, len(text))
	sp := trimmed(text, first, len(text))
	n := r.addNote(sp, false)
	if r.piece.orphan {
		n.Note, n.Err = nil, &Error{Span: source.Span{Start: sp.Start, End: sp.Start + 3}, Message: `"*@+" continues nothing: no "*@" line stands before it`}
	}
}

// trailing reads the annotations behind an element, and those on lines of their own
// between its lines. Only an element carries the former.
func (r *reader) trailing(carries bool) {
	notes := r.notes
	for _, sp := range notes {
		text := r.card.Text
		sp = trimmed(text, int(sp.Start), int(sp.End))
		behind := text[sp.Start] != '*'
		n := r.addNote(sp, behind)
		mark := source.Span{Start: sp.Start, End: sp.Start + 2}
		switch {
		case strings.HasPrefix(text[sp.Start:], "*@+"):
			n.Note, n.Err = nil, &Error{Span: source.Span{Start: sp.Start, End: sp.Start + 3}, Message: `"*@+" continues nothing: no "*@" line stands before it`}
		case behind && r.ownLine(sp.Start):
			n.Note, n.Err = nil, &Error{Span: mark, Message: `an annotation on a line of its own begins with "*@"`}
		case behind && !carries:
			n.Note, n.Err = nil, &Error{Span: mark, Message: fmt.Sprintf(`%q stands behind no element: write the annotation on a line of its own that begins with "*@"`, text[mark.Start:mark.End])}
		}
	}
}

// ownLine says that nothing stands before an offset on its physical line.
func (r *reader) ownLine(at int32) bool {
	for i := int(at) - 1; i >= 0 && !lineBreak(r.card.Text[i]); i-- {
		if !blank(r.card.Text[i]) {
			return false
		}
	}
	return true
}

// meantNote finds a comment line that was meant as an annotation.
func (r *reader) meantNote(first int) {
	text := r.card.Text
	if strings.HasPrefix(text[first:], ";@") || strings.HasPrefix(text[first:], "$@") {
		sp := trimmed(text, first, len(text))
		n := r.addNote(sp, true)
		n.Note, n.Err = nil, &Error{Span: source.Span{Start: sp.Start, End: sp.Start + 2}, Message: `an annotation on a line of its own begins with "*@"`}
	}
}

// trimmed is a span without the blanks and line breaks at its end.
func trimmed(text string, start, end int) source.Span {
	for end > start && (blank(text[end-1]) || lineBreak(text[end-1])) {
		end--
	}
	return source.Span{Start: int32(start), End: int32(end)}
}

// addNote reads the annotation in a span; its mark is two bytes long.
func (r *reader) addNote(sp source.Span, trailing bool) *Annotation {
	n := &Annotation{Span: sp, Trailing: trailing}
	r.card.Notes = append(r.card.Notes, n)
	text := r.card.Text
	at := int(sp.Start) + 2
	if strings.HasPrefix(text[sp.Start:], "*@+") {
		at++
	}
	mark := text[sp.Start:at]
	if at < int(sp.End) && !blank(text[at]) && !lineBreak(text[at]) {
		end := wordEnd(text[:sp.End], at)
		if !slices.Contains(statements, Fold(text[at:end])) {
			// A comment that happens to begin so, like many a banner, says nothing to us.
			r.card.Notes = r.card.Notes[:len(r.card.Notes)-1]
			return n
		}
		n.Err = &Error{Span: source.Span{Start: sp.Start, End: int32(end)}, Message: fmt.Sprintf("a blank is missing behind %q", mark)}
		return n
	}
	n.Note, n.Err = r.readNote(text, at, int(sp.End), trailing)
	return n
}

// noteReader reads one statement of the annotation language.
type noteReader struct {
	*lexed
	trailing bool
	word     string // the statement's word as spelt
}

// statements of the annotation language, in the order in which they are told.
var statements = []string{"bias", "mode", "corner", "expect", "rating", "fit", "access", "allow"}

func (r *reader) readNote(text string, start, end int, trailing bool) (Note, *Error) {
	lexNote(text, start, end, strings.HasPrefix(Fold(strings.TrimSpace(text[start:end])), "expect"), &r.note)
	n := noteReader{lexed: &r.note, trailing: trailing}
	if len(n.tokens) == 0 {
		return nil, &Error{Span: source.Span{Start: int32(start) - 2, End: int32(start)}, Message: "the annotation says nothing"}
	}
	for _, t := range n.tokens {
		if t.kind == brokenToken {
			return nil, n.say(t, "the quote '\"' is not closed")
		}
	}
	if err := boundExpr(n.lexed); err != nil {
		return nil, err
	}
	n.word = n.textOf(n.tokens[0])
	switch Fold(n.word) {
	case "bias":
		if len(n.tokens) > 1 && foldEqual(n.textOf(n.tokens[1]), "from") {
			return n.biasFrom()
		}
		return n.bias()
	case "mode":
		return n.mode()
	case "corner":
		return n.corner()
	case "expect":
		return n.expect()
	case "rating":
		return n.rating()
	case "fit":
		return n.fit()
	case "access":
		return n.access()
	case "allow":
		return n.allow()
	}
	return nil, n.say(n.tokens[0], "unknown annotation %q%s", n.word, suggest(n.word, statements))
}

func (n *noteReader) say(t token, format string, args ...any) *Error {
	return &Error{Span: n.spanOf(t), Message: fmt.Sprintf(format, args...)}
}

// misfit says why the grammar stopped at an offset; form is how the statement is
// written.
func (n *noteReader) misfit(at int32, form string) *Error {
	i := tokenAt(n.lexed, at)
	if err := n.parens(); err != nil {
		return err
	}
	if i >= len(n.tokens) {
		last := n.tokens[len(n.tokens)-1]
		switch last.kind {
		case assignToken, compareToken, rangeToken, opToken:
			return n.say(last, "a value is missing after %q", n.textOf(last))
		}
		return n.say(last, "%q ends too early: it is written `%s`", n.word, form)
	}
	t := n.tokens[i]
	text := n.textOf(t)
	if t.kind == strayToken {
		return n.say(t, "%q has no place in an annotation", text)
	}
	if i > 0 {
		switch n.tokens[i-1].kind {
		case assignToken, compareToken, rangeToken, opToken:
			return n.say(t, "a value is missing before %q", text)
		}
	}
	return n.say(t, "%q has no place here: %q is written `%s`", text, n.word, form)
}

// parens finds a parenthesis without its other half.
func (n *noteReader) parens() *Error {
	var open []token
	for _, t := range n.tokens {
		switch t.kind {
		case openToken:
			open = append(open, t)
		case closeToken:
			if len(open) == 0 {
				return n.say(t, `")" closes nothing`)
			}
			open = open[:len(open)-1]
		}
	}
	if len(open) > 0 {
		return n.say(open[len(open)-1], `"(" is not closed`)
	}
	return nil
}
