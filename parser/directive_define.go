package parser

import (
	"fmt"
	"strings"
)

// paramDefs is `.param`; a card that only defines one function is a FuncDef.
func (r *reader) paramDefs() (Stmt, *Error) {
	if ps, ok := quickParams(&r.lexed, 1, &r.parts); ok {
		return &ParamDefs{Params: r.slabs.params(ps)}, nil
	}
	return r.grammarParamDefs()
}

func (r *reader) grammarParamDefs() (Stmt, *Error) {
	g, at, ok := parseTokens(paramDefsGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "parameters are written name=value")
	}
	r.parts.reset()
	d := &ParamDefs{}
	for _, def := range g.Defs {
		switch {
		case def.Func != nil:
			d.Funcs = append(d.Funcs, &FuncDef{
				Name: wordOf(def.Func.Name), Args: wordsOf(def.Func.Args), Body: bodyOf(valueOfToken(def.Func.Body)),
			})
		case def.Param != nil:
			r.parts.take(&itemG{Param: def.Param})
		}
	}
	d.Params = r.slabs.params(r.parts.params)
	if len(d.Funcs) == 1 && len(d.Params) == 0 {
		return d.Funcs[0], nil
	}
	return d, nil
}

// bodyOf is a function's body: an expression however it is written.
func bodyOf(v Value) Value {
	if v.Form != NumberValue {
		v.Form = ExprValue
	}
	return v
}

// funcDef is `.func`.
func (r *reader) funcDef() (Stmt, *Error) {
	g, at, ok := parseTokens(funcGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "a function is written name(arguments) {expression}")
	}
	if err := r.balance(); err != nil {
		return nil, err
	}
	first, last := wordOf(g.Body[0]), wordOf(g.Body[len(g.Body)-1])
	body := Word{Text: r.text[first.Start:last.Span().End], Start: first.Start}
	return &FuncDef{Name: wordOf(g.Name), Args: wordsOf(g.Args), Body: Value{Word: body, Form: ExprValue}}, nil
}

// model is `.model`.
func (r *reader) model() (Stmt, *Error) {
	if m, ok := quickModel(&r.lexed, &r.parts); ok {
		m.Params = r.slabs.params(r.parts.params)
		return r.modelBase(m), nil
	}
	return r.grammarModel()
}

func (r *reader) grammarModel() (Stmt, *Error) {
	g, at, ok := parseTokens(modelGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "a model is written .model name type (parameters)")
	}
	if err := r.balance(); err != nil {
		// The parameters are readable all the same.
		r.card.Errs = append(r.card.Errs, *err)
	}
	r.parts.reset()
	for _, i := range g.Items {
		r.parts.takeFlag(i)
	}
	m := &Model{Name: wordOf(g.Name), Type: wordOf(g.Type)}
	m.Params = r.slabs.params(r.parts.params)
	return r.modelBase(m), nil
}

// modelBase takes `ako:base` for what it is: the real type follows.
func (r *reader) modelBase(m *Model) *Model {
	if !foldPrefix(m.Type.Text, "ako:") {
		return m
	}
	m.Base = Word{Text: m.Type.Text[4:], Start: m.Type.Start + 4}
	if m.Base.Text == "" && len(m.Params) > 0 && m.Params[0].Value.Form == NoValue {
		m.Base = m.Params[0].Name
		m.Params = m.Params[1:]
	}
	m.Type = Word{}
	if len(m.Params) > 0 && m.Params[0].Value.Form == NoValue {
		m.Type = m.Params[0].Name
		m.Params = m.Params[1:]
	}
	return m
}

// takeFlag adds an item where a field without a value is a flag.
func (p *parts) takeFlag(g *itemG) {
	switch {
	case g.Param != nil:
		p.take(g)
	case g.Mark.Type == 0:
		p.addParam(wordOf(g.Field), Value{})
	}
}

// subckt is `.subckt name ports params`; optional ports carry a default.
func (r *reader) subckt() (Stmt, *Error) {
	g, at, ok := parseTokens(subcktGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "a subckt is written .subckt name ports parameters")
	}
	s := &Subckt{Name: wordOf(g.Name)}
	optional := false
	r.parts.reset()
	for _, i := range g.Items {
		switch {
		case i.Param != nil && optional:
			s.Optional = append(s.Optional, Param{Name: wordOf(i.Param.Name), Value: valueOfToken(i.Param.Value)})
		case i.Param != nil:
			r.parts.take(i)
		case i.Mark.Type != 0:
		default:
			f := fieldOf(i.Field)
			word := Fold(f.Text)
			switch {
			case word == "optional:":
				optional = true
			case strings.HasSuffix(word, ":") && (word == "params:" || word == "text:"):
				optional = false
			case f.kind != wordToken:
				return nil, &Error{Span: f.Span(), Message: fmt.Sprintf("%q cannot be a port of subckt %q", f.Text, s.Name.Text)}
			default:
				s.Ports = append(s.Ports, f.Word)
			}
		}
	}
	s.Params = r.slabs.params(r.parts.params)
	return s, nil
}
