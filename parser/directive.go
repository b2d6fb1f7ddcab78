package parser

import (
	"fmt"
	"strings"

	"triodeck/parser/source"
)

// directiveKind tells how a directive is read.
type directiveKind uint8

const (
	otherDirective directiveKind = iota // kept, not read
	paramDirective
	funcDirective
	modelDirective
	subcktDirective
	endsDirective
	includeDirective
	libDirective
	endlDirective
	globalDirective
	initialDirective
	tempDirective
	optionDirective
	condDirective
	endDirective
)

// directives are the words that the trade uses.
var directives = map[string]directiveKind{
	".param": paramDirective, ".params": paramDirective, ".csparam": paramDirective, ".parameter": paramDirective,
	".func": funcDirective, ".model": modelDirective, ".subckt": subcktDirective, ".macro": subcktDirective,
	".ends": endsDirective, ".eom": endsDirective,
	".include": includeDirective, ".inc": includeDirective, ".incl": includeDirective,
	".lib": libDirective, ".endl": endlDirective, ".global": globalDirective,
	".ic": initialDirective, ".nodeset": initialDirective, ".temp": tempDirective, ".temperature": tempDirective,
	".option": optionDirective, ".options": optionDirective, ".opt": optionDirective,
	".if": condDirective, ".elseif": condDirective, ".elif": condDirective, ".else": condDirective, ".endif": condDirective,
	".end": endDirective,
}

// keptDirectives are those that have no bearing on a bias.
var keptDirectives = func() map[string]bool {
	m := map[string]bool{}
	for _, w := range strings.Fields(`ac dc tran op tf pz noise disto sens four fft mc wcase wc step meas measure
		print plot probe save width end data enddata alter del delete protect unprotect prot unprot control endc
		title connect hdl va veriloga load store restart sp lin hb hbac hbnoise pss pac pnoise psp stb snac
		biaschk check dout vec stim stimulus distribution malias alias unalias backanno net ports iplot view
		global_param enddist graph let set echo tnom wave watch text simdate lprint vector aliases autostop
		inherit simulator hier cell endcell pat ptran acmatch dcmatch dcvolt spf dspf variation endvariation`) {
		m["."+w] = true
	}
	return m
}()

// directive reads a dot card.
func (r *reader) directive() {
	text := r.card.Text
	_, first := classify(text, 0, len(text))
	word := directiveWord(text[first:])
	kind := directives[word]
	lexCard(text, directiveManner(word, kind), &r.lexed)
	r.trailing(false)
	if len(r.tokens) == 0 || word == "." {
		r.fail(r.mark(), "a dot stands alone: no directive follows it")
		return
	}
	stmt, err := r.readDirective(word, kind)
	if err != nil {
		r.fail(err.Span, "%s", err.Message)
		return
	}
	r.card.Stmt = stmt
	r.strayJoins()
	r.checkDirective(stmt)
}

func directiveManner(word string, kind directiveKind) cardManner {
	m := cardManner{slashComment: true}
	switch kind {
	case paramDirective, funcDirective, condDirective:
		m.wideValues = true
	case includeDirective, libDirective:
		m.path, m.slashComment = true, false
	case subcktDirective, endsDirective, endlDirective, globalDirective, tempDirective, endDirective:
		m.starComment = true
		m.fields = 1 << 30
	}
	return m
}

func (r *reader) readDirective(word string, kind directiveKind) (Stmt, *Error) {
	switch kind {
	case paramDirective:
		return r.paramDefs()
	case funcDirective:
		return r.funcDef()
	case modelDirective:
		return r.model()
	case subcktDirective:
		return r.subckt()
	case includeDirective:
		return r.include()
	case libDirective:
		return r.lib()
	case initialDirective:
		return r.initial(word == ".nodeset")
	case optionDirective:
		return r.options()
	case condDirective:
		return r.cond(word)
	case endsDirective, endlDirective, globalDirective, tempDirective:
		return r.wordsDirective(kind)
	case endDirective:
		return &End{}, nil
	}
	return r.otherDirective(word), nil
}

// directiveError says why the tokens do not fit, where the grammar stopped.
func (r *reader) directiveError(at int32, missing string) *Error {
	if err := r.tokenError(); err != nil {
		return err
	}
	if err := r.balance(); err != nil {
		return err
	}
	i := tokenAt(&r.lexed, at)
	if i >= len(r.tokens) {
		return &Error{Span: source.Span{Start: at, End: at}, Message: missing}
	}
	t := r.tokens[i]
	return &Error{Span: r.spanOf(t), Message: fmt.Sprintf("%q has no place here: %s", r.textOf(t), missing)}
}

func (r *reader) wordsDirective(kind directiveKind) (Stmt, *Error) {
	g, at, ok := parseTokens(wordsGrammar(), &r.lexed)
	word := r.textOf(r.tokens[0])
	if !ok {
		return nil, r.directiveError(at, fmt.Sprintf("%q takes words", word))
	}
	fields := wordsOf(g.Fields)
	first := Word{}
	if len(fields) > 0 {
		first = fields[0]
	}
	switch kind {
	case endsDirective:
		return &Ends{Name: first}, nil
	case endlDirective:
		return &EndLib{Name: unquote(first)}, nil
	case globalDirective:
		return &Global{Nodes: fields}, nil
	}
	t := &Temp{}
	for _, f := range g.Fields {
		if kindOf(f) != commaToken {
			t.Values = append(t.Values, valueOfToken(f))
		}
	}
	if len(t.Values) == 0 {
		return nil, &Error{Span: r.spanOf(r.tokens[0]), Message: fmt.Sprintf("%q states no temperature", word)}
	}
	return t, nil
}

// otherDirective keeps what stands on the card.
func (r *reader) otherDirective(word string) *Other {
	o := &Other{Name: r.word(r.tokens[0]), Known: keptDirectives[word]}
	for _, t := range r.tokens[1:] {
		o.Fields = append(o.Fields, r.word(t))
	}
	return o
}

// initial is `.ic` or `.nodeset`.
func (r *reader) initial(nodeset bool) (Stmt, *Error) {
	g, at, ok := parseTokens(initialGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "node voltages are written v(node)=value")
	}
	s := &Initial{Nodeset: nodeset}
	for _, p := range g.Pairs {
		s.Nodes = append(s.Nodes, wordOf(p.Node))
		s.Values = append(s.Values, valueOfToken(p.Value))
	}
	return s, nil
}

// options reads `.option`; values are kept as spelt.
func (r *reader) options() (Stmt, *Error) {
	g, at, ok := parseTokens(optionsGrammar(), &r.lexed)
	if !ok {
		return nil, r.directiveError(at, "options are written key or key=value")
	}
	o := &Options{}
	for _, i := range g.Items {
		switch {
		case i.Param != nil:
			v := valueOfToken(i.Param.Value)
			switch k := kindOf(i.Param.Value); {
			case v.Form == ExprValue && k == wordToken:
				v.Form = NameValue // a path or a list, not arithmetic
			case k == quoteToken:
				v.Form = StringValue
			}
			o.Params = append(o.Params, Param{Name: wordOf(i.Param.Name), Value: v})
		case i.Mark.Type == 0:
			o.Params = append(o.Params, Param{Name: wordOf(i.Field)})
		}
	}
	return o, nil
}

// cond is `.if (test)`, `.elseif (test)`, `.else` or `.endif`.
func (r *reader) cond(word string) (Stmt, *Error) {
	c := &Cond{Kind: map[string]CondKind{".if": If, ".elseif": ElseIf, ".elif": ElseIf, ".else": Else, ".endif": EndIf}[word]}
	if c.Kind == Else || c.Kind == EndIf {
		return c, nil
	}
	rest := r.restFrom(1)
	if rest.IsZero() {
		return nil, &Error{Span: r.spanOf(r.tokens[0]), Message: fmt.Sprintf("%q has no condition", r.textOf(r.tokens[0]))}
	}
	c.Test = Value{Word: rest, Form: ExprValue}
	return c, nil
}

// restFrom is the text from token i to the last one as one word.
func (r *reader) restFrom(i int) Word {
	if i >= len(r.tokens) {
		return Word{}
	}
	return r.word(token{wordToken, r.tokens[i].start, r.tokens[len(r.tokens)-1].end})
}

// checkDirective reports what is wrong with a readable directive's values.
func (r *reader) checkDirective(s Stmt) {
	switch s := s.(type) {
	case *ParamDefs:
		r.checkParams(s.Params)
		for _, f := range s.Funcs {
			r.checkValue(f.Body)
		}
		r.decimalCommas(s.Params)
	case *FuncDef:
		r.checkValue(s.Body)
	case *Model:
		r.checkParams(s.Params)
		r.decimalCommas(s.Params)
	case *Subckt:
		r.checkParams(s.Params)
	case *Cond:
		r.checkValue(s.Test)
	case *Initial:
		for _, v := range s.Values {
			r.checkValue(v)
		}
	case *Temp:
		for _, v := range s.Values {
			r.checkValue(v)
		}
	}
}
