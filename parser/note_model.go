package parser

func (n *noteReader) rating() (Note, *Error) {
	g, at, ok := parseTokens(ratingGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "rating model vgs<=volts")
	}
	r := &Rating{Model: wordOf(g.Model)}
	for _, c := range g.Conds {
		cond, err := n.cond(c)
		if err != nil {
			return nil, err
		}
		r.Conds = append(r.Conds, cond)
	}
	return r, nil
}

func (n *noteReader) fit() (Note, *Error) {
	g, at, ok := parseTokens(fitGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "fit model nmos vto=volts kp=value")
	}
	f := &Fit{Model: wordOf(g.Model), Type: wordOf(g.Type), Params: n.settings(g.Params)}
	if t := Fold(f.Type.Text); t != "nmos" && t != "pmos" {
		return nil, &Error{Span: f.Type.Span(), Message: "a fit is for nmos or pmos, not for " + quoted(f.Type.Text)}
	}
	return f, nil
}

func (n *noteReader) access() (Note, *Error) {
	g, at, ok := parseTokens(accessGrammar(), n.lexed)
	if !ok {
		return nil, n.misfit(at, "access model rs=ohms rd=ohms")
	}
	a := &Access{Model: wordOf(g.Model), Params: n.settings(g.Params)}
	for _, p := range a.Params {
		switch Fold(p.Name.Text) {
		case "rs", "rd", "rsw":
		default:
			return nil, &Error{Span: p.Name.Span(), Message: "unknown resistance " + quoted(p.Name.Text) + suggest(p.Name.Text, []string{"rs", "rd", "rsw"})}
		}
	}
	return a, nil
}

// settings are `name=value` with a value that may be an expression.
func (n *noteReader) settings(gs []*settingG) []Param {
	ps := make([]Param, 0, len(gs))
	for _, g := range gs {
		start, end := n.tokensOf(g)
		w := n.lexed.word(token{wordToken, start, end})
		v := Value{Word: w, Form: ExprValue}
		if num, ok := ParseNumber(w.Text); ok {
			v.Form, v.Num = NumberValue, num.Value
		}
		ps = append(ps, Param{Name: wordOf(g.Name), Value: v})
	}
	return ps
}

// tokensOf is where a setting's value begins and ends.
func (n *noteReader) tokensOf(g *settingG) (start, end int32) {
	i := tokenAt(n.lexed, spanOf(g.Name).End) + 1 // behind "="
	start = n.tokens[i].start
	for ; i < len(n.tokens) && n.tokens[i].kind != keyToken; i++ {
		end = n.tokens[i].end
	}
	return start, end
}

func (n *noteReader) allow() (Note, *Error) {
	g, at, ok := parseTokens(allowGrammar(), n.lexed)
	if !ok {
		if i := tokenAt(n.lexed, at); i >= len(n.tokens) && len(n.tokens) > 1 {
			return nil, n.say(n.tokens[len(n.tokens)-1], "the reason is missing: write `allow rule on target \"why\"`")
		}
		return nil, n.misfit(at, `allow rule on target "why"`)
	}
	a := &Allow{Rule: wordOf(g.Rule), On: wordOf(g.On), Reason: unquote(wordOf(g.Reason))}
	if a.Reason.Text == "" {
		return nil, &Error{Span: spanOf(g.Reason), Message: "the reason is empty"}
	}
	return a, nil
}
