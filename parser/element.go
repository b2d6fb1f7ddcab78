package parser

import (
	"fmt"
	"strings"

	"triodeck/parser/source"
)

// element reads an element card.
func (r *reader) element() {
	if r.piece.orphan {
		lexCard(r.card.Text, cardManner{}, &r.lexed)
		r.trailing(false)
		r.fail(r.mark(), `this line continues nothing: no card stands before it`)
		return
	}
	first := r.firstByte()
	if !isLetter(first) {
		lexCard(r.card.Text, cardManner{}, &r.lexed)
		r.trailing(false)
		r.fail(r.mark(), "a card begins with the letter of an element, a dot, \"*\" or \"+\", not with %q", r.card.Text[r.mark().Start:r.mark().End])
		return
	}
	letter := lower(first)
	r.lexElement(letter)
	r.trailing(true)
	e, err := r.readElement(letter)
	if err != nil {
		r.fail(err.Span, "%s", err.Message)
		return
	}
	r.card.Kind = ElementCard
	r.card.Stmt = e
	r.strayJoins()
	r.checkElement(e)
}

// firstByte is the first byte of the card's text that is no blank.
func (r *reader) firstByte() byte {
	if i := r.mark().Start; int(i) < len(r.card.Text) {
		return r.card.Text[i]
	}
	return 0
}

// mark is the span of the first character on the card.
func (r *reader) mark() source.Span {
	text := r.card.Text
	_, first := classify(text, 0, len(text))
	n := 1
	for first+n < len(text) && text[first] >= 0xC0 && text[first+n]&0xC0 == 0x80 {
		n++ // a whole UTF-8 character
	}
	return source.Span{Start: int32(first), End: int32(min(first+n, len(text)))}
}

// manner is how the card of an element is cut.
func manner(letter byte) cardManner {
	m := cardManner{starComment: letter != 'b', slashComment: true, wideValues: letter == 'b' || letter == 'e' || letter == 'g'}
	if f, ok := forms[letter]; ok {
		m.fields = len(f.fields) + 1
	} else {
		m.fields = 3
	}
	if letter == 'x' {
		m.fields = 1 << 30
	}
	return m
}

func (r *reader) lexElement(letter byte) {
	lexCard(r.card.Text, manners[letter-'a'], &r.lexed)
	if letter == 'v' || letter == 'i' {
		markStimuli(&r.lexed)
	}
}

var manners = func() (t [26]cardManner) {
	for i := range t {
		t[i] = manner(byte('a' + i))
	}
	return t
}()

// markStimuli turns the words that begin a stimulus into keywords; a node may
// have the name of one.
func markStimuli(l *lexed) {
	for i := 3; i < len(l.tokens); i++ {
		t := &l.tokens[i]
		if (t.kind == wordToken || t.kind == keyToken) && stimulusWords[Fold(l.textOf(*t))] && l.tokens[i-1].kind != assignToken {
			t.kind = wordsToken
		}
	}
}

var stimulusWords = map[string]bool{
	"dc": true, "ac": true, "pulse": true, "pwl": true, "sin": true, "sine": true, "exp": true,
	"sffm": true, "am": true, "pat": true, "pattern": true, "lfsr": true, "pwlz": true,
	"trnoise": true, "trrandom": true, "spice_noise": true, "distof1": true, "distof2": true,
}

// readElement reads the tokens of an element: by hand where the card is plain,
// through the grammar else.
func (r *reader) readElement(letter byte) (*Element, *Error) {
	if r.lostPlus() {
		t := r.tokens[0]
		return nil, &Error{Span: r.spanOf(t), Message: fmt.Sprintf(`%q is a parameter, not an element: a "+" is lost at the start of this line`, r.textOf(t)+"=")}
	}
	if !quickParts(letter, &r.lexed, &r.parts) {
		at, ok := grammarParts(letter, &r.lexed, &r.parts)
		if !ok {
			return nil, r.elementError(letter, at)
		}
		if err := r.balance(); err != nil {
			return nil, err
		}
	}
	return r.form(letter)
}

// lostPlus says whether the card begins with `key=value`, as only a continuation
// line does.
func (r *reader) lostPlus() bool { return len(r.tokens) > 1 && r.tokens[0].kind == keyToken }

// balance finds a parenthesis without its other half.
func (r *reader) balance() *Error {
	var open []token
	for _, t := range r.tokens {
		switch t.kind {
		case openToken:
			open = append(open, t)
		case closeToken:
			if len(open) == 0 {
				return &Error{Span: r.spanOf(t), Message: `")" closes nothing`}
			}
			open = open[:len(open)-1]
		}
	}
	if len(open) > 0 {
		return &Error{Span: r.spanOf(open[len(open)-1]), Message: `"(" is not closed`}
	}
	return nil
}

// elementError says why the tokens of a card do not fit, where the grammar stopped
// at an offset.
func (r *reader) elementError(letter byte, at int32) *Error {
	if err := r.tokenError(); err != nil {
		return err
	}
	i := tokenAt(&r.lexed, at)
	if i >= len(r.tokens) {
		return &Error{Span: source.Span{Start: at, End: at}, Message: "the card ends too early"}
	}
	t := r.tokens[i]
	return &Error{Span: r.spanOf(t), Message: fmt.Sprintf("%q has no place here", r.textOf(t))}
}

// tokenError is the first thing that is wrong whatever the statement: something
// not closed, a `=` without a name before it or a value behind it.
func (r *reader) tokenError() *Error {
	for i, t := range r.tokens {
		text := r.textOf(t)
		switch t.kind {
		case brokenToken:
			return &Error{Span: r.spanOf(t), Message: fmt.Sprintf("%s is not closed", quoteName(text[0]))}
		case assignToken:
			if i == 0 || r.tokens[i-1].kind != keyToken && r.tokens[i-1].kind != wordsToken {
				return &Error{Span: r.spanOf(t), Message: `"=" has no parameter name before it`}
			}
			if i+1 == len(r.tokens) || !valueKind(r.tokens[i+1].kind) {
				name := r.tokens[i-1]
				return &Error{Span: r.spanOf(name), Message: fmt.Sprintf("parameter %q has no value", r.textOf(name))}
			}
		}
	}
	return nil
}

func valueKind(k tokenKind) bool {
	switch k {
	case wordToken, quoteToken, braceToken, parenToken, stringToken, bareToken, fieldToken, wordsToken, brokenToken:
		return true
	}
	return false
}

func quoteName(c byte) string {
	switch c {
	case '\'':
		return `the quote "'"`
	case '"':
		return "the quote '\"'"
	case '{':
		return `the brace "{"`
	}
	return `the parenthesis "("`
}

// strayJoins reports the marks of continuation that other languages use.
func (r *reader) strayJoins() {
	for _, sp := range r.joins {
		text := r.card.Text[sp.Start:sp.End]
		r.errorf(sp, "%q at the end of a line does not continue it: begin the next line with \"+\"", text)
	}
}

// checkElement reports what is wrong with a readable element's values.
func (r *reader) checkElement(e *Element) {
	for _, v := range e.Values {
		r.checkValue(v)
	}
	r.checkParams(e.Params)
	if s := e.Source; s != nil {
		r.checkValue(s.DC)
		for _, v := range s.AC {
			r.checkValue(v)
		}
		for _, v := range s.Args {
			r.checkValue(v)
		}
	}
	r.decimalCommas(e.Params)
}

// decimalCommas finds `w=38,17u`, which reads as a list of two.
func (r *reader) decimalCommas(ps []Param) {
	for i := 1; i < len(ps); i++ {
		p, next := ps[i-1], ps[i]
		if !next.Name.IsZero() || p.Name.IsZero() || p.Value.Form != NumberValue || next.Value.Form != NumberValue {
			continue
		}
		if listParams[Fold(p.Name.Text)] || i+1 < len(ps) && ps[i+1].Name.IsZero() {
			continue
		}
		sp := source.Span{Start: p.Value.Start, End: next.Value.Span().End}
		text := r.card.Text[sp.Start:sp.End]
		if len(text) == len(p.Value.Text)+1+len(next.Value.Text) && !strings.ContainsAny(next.Value.Text, "+-.") {
			r.errorf(sp, "%q has a decimal comma: write %q", text, p.Value.Text+"."+next.Value.Text)
		}
	}
}

// listParams take several values.
var listParams = map[string]bool{"tc": true, "ic": true, "ac": true, "poly": true}
