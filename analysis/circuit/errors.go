package circuit

import (
	"errors"
	"fmt"
	"strings"

	"triodeck/parser"
	"triodeck/parser/source"
)

// EvalKind sorts the reasons why an expression has no value.
type EvalKind uint8

// Reasons why an expression has no value.
const (
	Undefined   EvalKind = iota // an unknown parameter or function
	Cyclic                      // parameters that refer to each other in a circle
	Domain                      // outside a function's domain, or beyond a float64
	NotNumber                   // a string, a keyword, nothing
	Unsupported                 // depends on what only a simulation knows
	Malformed                   // a wrong number of arguments
	Excessive                   // beyond the caps on depth and work
	Unreadable                  // not an expression: the card's own errors say why
)

// EvalError says why an expression has no value, and where the cause stands.
type EvalError struct {
	Kind    EvalKind
	Name    string      // the parameter or function concerned, as written
	Message string      // one lower-case sentence
	Span    source.Span // of the cause, relative to its card
	// Place is where the cause stands, with Span made absolute. Its Doc is nil
	// where the cause is in the very expression that the caller gave.
	Place Place
}

func (e *EvalError) Error() string { return e.Message }

func asEvalError(err error) *EvalError {
	var ev *EvalError
	if errors.As(err, &ev) {
		return ev
	}
	return nil
}

// locate gives an error without a place the card on which its expression stands.
func locate(err error, doc *Document, card int) error {
	ev := asEvalError(err)
	if ev == nil || ev.Place.Doc != nil || doc == nil {
		return err
	}
	at := *ev
	at.Place = place(doc, card, ev.Span)
	return &at
}

// asWord turns the error of a bare name that no parameter has into that of a
// word: it was not meant as a number.
func asWord(err error, text string) error {
	ev := asEvalError(err)
	if ev == nil || ev.Kind != Undefined || parser.Fold(ev.Name) != parser.Fold(text) {
		return err
	}
	word := *ev
	word.Kind, word.Message = NotNumber, "\""+text+"\" is a name, not a number"
	return &word
}

func undefined(kind, name string, sp source.Span) error {
	return &EvalError{Kind: Undefined, Name: name, Span: sp, Message: fmt.Sprintf("%s %q is not defined", kind, name)}
}

func domain(name string, sp source.Span, format string, args ...any) error {
	return &EvalError{Kind: Domain, Name: name, Span: sp, Message: fmt.Sprintf(format, args...)}
}

func malformed(name string, sp source.Span, format string, args ...any) error {
	return &EvalError{Kind: Malformed, Name: name, Span: sp, Message: fmt.Sprintf(format, args...)}
}

func excessive(sp source.Span) error {
	return &EvalError{Kind: Excessive, Span: sp, Message: fmt.Sprintf("the expression is not evaluated: it refers through more than %d levels or takes more than %d operations", maxParamDepth, maxSteps)}
}

// cyclic names the members of a circle in the order of the text, so that the
// message does not depend on where the circle was entered.
func cyclic(members []*ParamDef) error {
	first := 0
	for i, m := range members {
		if before(m.Place, members[first].Place) {
			first = i
		}
	}
	var names []string
	for i := range members {
		names = append(names, `"`+spelt(members[(first+i)%len(members)])+`"`)
	}
	d := members[first]
	message := "parameter " + names[0] + " refers to itself"
	if len(names) > 1 {
		message = "parameters " + strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1] + " refer to each other in a circle"
	}
	return &EvalError{Kind: Cyclic, Name: spelt(d), Message: message, Span: d.Place.inCard(), Place: d.Place}
}

// spelt is a parameter's name as its definition writes it.
func spelt(d *ParamDef) string { return d.Place.Text() }

// Text is what stands at the place.
func (p Place) Text() string {
	if p.Doc == nil || p.Doc.File == nil || p.Span.Start < 0 || int(p.Span.End) > len(p.Doc.File.Src) || p.Span.Start > p.Span.End {
		return ""
	}
	return p.Doc.File.Src[p.Span.Start:p.Span.End]
}

// inCard is the place's span relative to its card.
func (p Place) inCard() source.Span { return p.Span.Shift(-p.Doc.File.Start(p.Card)) }

// before orders places by document, then by offset.
func before(a, b Place) bool {
	if a.Doc != b.Doc {
		return a.Doc != nil && b.Doc != nil && a.Doc.Path < b.Doc.Path
	}
	return a.Span.Start < b.Span.Start
}

// describe turns an evaluation's error into a problem; ok is false where the
// value is merely not a number or needs a simulation, which is nobody's mistake.
func describe(err error) (kind ProblemKind, at Place, name, message string, ok bool) {
	ev := asEvalError(err)
	if ev == nil || ev.Place.Doc == nil {
		return 0, Place{}, "", "", false
	}
	switch ev.Kind {
	case Undefined:
		kind = ParamUndefined
	case Cyclic:
		kind = ParamCycle
	case Domain, Malformed, Excessive:
		kind = ParamInvalid
	default:
		return 0, Place{}, "", "", false
	}
	return kind, ev.Place, ev.Name, ev.Message, true
}
