package parser

import "triodeck/parser/source"

func (n *noteReader) bias() (Note, *Error) {
	g, at, ok := parseTokens(biasGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "bias v(node)=volts")
	}
	as, err := n.assigns(g.Assigns)
	return noteOr(&Bias{Assigns: as}, err)
}

// noteOr keeps a nil pointer from becoming a Note.
func noteOr(n Note, err *Error) (Note, *Error) {
	if err != nil {
		return nil, err
	}
	return n, nil
}

func (n *noteReader) biasFrom() (Note, *Error) {
	g, at, ok := parseTokens(biasFromGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, `bias from "file.csv"`)
	}
	return &BiasFrom{Path: unquote(wordOf(g.Path))}, nil
}

func (n *noteReader) assigns(gs []*assignG) ([]Assign, *Error) {
	as := make([]Assign, 0, len(gs))
	for _, g := range gs {
		a, err := n.assign(g)
		if err != nil {
			return nil, err
		}
		as = append(as, a)
	}
	return as, nil
}

func (n *noteReader) assign(g *assignG) (Assign, *Error) {
	f := wordOf(g.Func)
	if !foldEqual(f.Text, "v") {
		return Assign{}, &Error{Span: f.Span(), Message: "a bias is a voltage: only v(node) can be stated"}
	}
	a := Assign{Node: wordOf(g.Node), Lo: g.Lo.lower()}
	end := n.extent(a.Lo)
	if g.Hi != nil {
		a.Hi = g.Hi.lower()
		end = n.extent(a.Hi)
	}
	a.Span = source.Span{Start: f.Start, End: end}
	return a, firstError(n.unit(a.Lo, "V"), n.unit(a.Hi, "V"))
}

// extent is where an expression ends, the parentheses around it included.
func (n *noteReader) extent(e Expr) int32 {
	end := e.Span().End
	for _, t := range n.tokens {
		if t.start == end && t.kind == closeToken {
			end = t.end
		}
	}
	return end
}

func firstError(errs ...*Error) *Error {
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

func (n *noteReader) mode() (Note, *Error) {
	g, at, ok := parseTokens(modeGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "mode name v(node)=volts")
	}
	as, err := n.assigns(g.Assigns)
	return noteOr(&Mode{Name: wordOf(g.Name), Assigns: as}, err)
}

func (n *noteReader) corner() (Note, *Error) {
	g, at, ok := parseTokens(cornerGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "corner name temp=125 lib=section v(node)=volts name=value")
	}
	c := &Corner{Name: wordOf(g.Name)}
	for _, i := range g.Items {
		switch {
		case i.Assign != nil:
			a, err := n.assign(i.Assign)
			if err != nil {
				return nil, err
			}
			c.Assigns = append(c.Assigns, a)
		case i.Tweak != nil:
			if err := n.tweak(c, i.Tweak); err != nil {
				return nil, err
			}
		default:
			c.Lib = unquote(wordOf(i.Lib))
		}
	}
	return c, nil
}

func (n *noteReader) tweak(c *Corner, g *tweakG) *Error {
	w := Tweak{Name: wordOf(g.Name), Value: g.Value.lower()}
	op := wordOf(g.Op)
	if !op.IsZero() {
		w.Op = op.Text[0]
	}
	if foldEqual(w.Name.Text, "temp") || foldEqual(w.Name.Text, "temperature") {
		c.Temp = w.Value
		switch w.Op {
		case '-', '+':
			c.Temp = &Unary{Op: op, X: w.Value}
		case '*':
			return &Error{Span: op.Span(), Message: `a temperature is stated in °C: "*" has no place here`}
		}
		return n.unit(w.Value, "C")
	}
	c.Tweaks = append(c.Tweaks, w)
	return nil
}
