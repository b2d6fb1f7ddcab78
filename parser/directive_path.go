package parser

import (
	"fmt"
	"strings"
)

// include is `.include path`; without quotes the path reaches to the card's end.
func (r *reader) include() (Stmt, *Error) {
	if err := r.brokenPath(); err != nil {
		return nil, err
	}
	path := r.restFrom(1)
	if len(r.tokens) > 1 {
		if k := r.tokens[1].kind; k == stringToken || k == quoteToken {
			path = unquote(r.word(r.tokens[1]))
		}
	}
	if path.Text == "" {
		return nil, &Error{Span: r.spanOf(r.tokens[0]), Message: fmt.Sprintf("%q names no file", r.textOf(r.tokens[0]))}
	}
	return &Include{Path: path}, nil
}

// lib is the call of a section, `.lib path section`, or the start of one, `.lib section`.
func (r *reader) lib() (Stmt, *Error) {
	if err := r.brokenPath(); err != nil {
		return nil, err
	}
	ts := r.tokens[1:]
	if len(ts) == 0 {
		return nil, &Error{Span: r.spanOf(r.tokens[0]), Message: `".lib" names neither a file nor a section`}
	}
	if k := ts[0].kind; k == stringToken || k == quoteToken {
		l := &Lib{Path: unquote(r.word(ts[0]))}
		if len(ts) > 1 {
			l.Section = unquote(r.word(ts[1]))
		}
		if l.Path.Text == "" {
			return nil, &Error{Span: r.spanOf(ts[0]), Message: `".lib" names no file: the quotes are empty`}
		}
		return l, nil
	}
	if len(ts) == 1 {
		w := r.word(ts[0])
		if strings.ContainsAny(w.Text, `./\~$`) {
			return &Lib{Path: w}, nil
		}
		return &LibSection{Name: w}, nil
	}
	last := ts[len(ts)-1]
	path := r.word(token{wordToken, ts[0].start, ts[len(ts)-2].end})
	return &Lib{Path: path, Section: unquote(r.word(last))}, nil
}

func (r *reader) brokenPath() *Error {
	for _, t := range r.tokens {
		if t.kind == brokenToken {
			return &Error{Span: r.spanOf(t), Message: fmt.Sprintf("%s is not closed", quoteName(r.textOf(t)[0]))}
		}
	}
	return nil
}
