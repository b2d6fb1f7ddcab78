package parser

// source is a V or I element.
func (r *reader) source(e *Element) *Error {
	p := &r.parts
	if err := r.need(e.Letter, 2); err != nil {
		return err
	}
	e.Nodes = r.slabs.nodes(p.lead[:2])
	s := &Source{}
	e.Source = s
	if rest := values(p.lead[2:]); len(rest) > 0 {
		s.DC = rest[0]
		e.Values = rest[1:]
	}
	for _, st := range p.stimuli {
		vs := values(st.fields)
		switch Fold(st.word.Text) {
		case "dc":
			if len(vs) > 0 {
				s.DC = vs[0]
				e.Values = append(e.Values, vs[1:]...)
			}
		case "ac":
			n := min(len(vs), 2)
			s.AC = vs[:n:n]
			e.Values = append(e.Values, vs[n:]...)
		default:
			s.Func = st.word
			s.Args = vs
		}
	}
	if len(e.Values) == 0 {
		e.Values = nil
	}
	return nil
}

// controlled is E, G, F or H.
func (r *reader) controlled(e *Element) *Error {
	p := &r.parts
	if err := r.need(e.Letter, 2); err != nil {
		return err
	}
	if len(p.lead) == 2 && len(p.params) == 0 {
		return r.need(e.Letter, 3)
	}
	lead := p.lead
	n, pair := 2, 2
	if e.Letter == 'f' || e.Letter == 'h' {
		pair = 1
	}
	controls := 1
	keyed := false
	if len(lead) > 2 && lead[2].kind == wordToken {
		switch Fold(lead[2].Text) {
		case "poly":
			keyed = true
			controls = 0
			if len(lead) > 3 {
				if v := lead[3].value(); v.Form == NumberValue && v.Num >= 1 && v.Num < 1e4 {
					controls = int(v.Num)
				}
			}
			n = min(4, len(lead))
		case "vcvs", "vccs", "cccs", "ccvs":
			keyed = true
			n = 3
		case "value", "vol", "cur", "table", "laplace", "freq", "pole", "opamp", "transformer",
			"delay", "vcr", "vccap", "npwl", "ppwl", "pwl", "foster", "chebyshev":
			controls = 0
		}
	}
	end := n + controls*pair
	if controls > 0 && (len(lead) < end || !words(lead[n:end])) {
		if keyed || len(p.params) == 0 {
			return r.need(e.Letter, max(3, len(lead)+1))
		}
		controls, end = 0, n // the control stands in a parameter
	}
	if controls == 0 {
		n, end = 2, 2
	}
	e.Nodes = make([]Word, 0, 2+end-n)
	for _, f := range lead[:2] {
		e.Nodes = append(e.Nodes, f.Word)
	}
	for _, f := range lead[n:end] {
		if pair == 2 {
			e.Nodes = append(e.Nodes, f.Word)
		} else {
			e.Control = append(e.Control, f.Word)
		}
	}
	if keyed && controls > 0 {
		e.Values = values(lead[2:n])
	}
	e.Values = append(e.Values, values(lead[end:])...)
	return nil
}

// words says that all fields are plain words, which names must be.
func words(fs []field) bool {
	for _, f := range fs {
		if f.kind != wordToken {
			return false
		}
	}
	return true
}

// coupling is K: the names of two or more inductors and the coefficient.
func (r *reader) coupling(e *Element) *Error {
	lead := r.parts.lead
	n := len(lead)
	for n > 0 && !lead[n-1].isName() {
		n--
	}
	if n < 2 && len(lead) > n && len(lead) >= 3 && len(r.parts.params) == 0 {
		n = len(lead) - 1
	}
	if n < 2 {
		r.parts.lead = lead[:n]
		return r.need('k', 2)
	}
	for _, f := range lead[:n] {
		e.Control = append(e.Control, f.Word)
	}
	e.Values = values(lead[n:])
	return nil
}

// other is an element that is kept: the nodes are known where the form tells.
func (r *reader) other(e *Element) *Error {
	lead := r.parts.lead
	nodes, model := 0, 0
	switch e.Letter {
	case 'b':
		nodes = 2
	case 's':
		nodes, model = min(4, len(lead)-1), 1
	case 'w':
		nodes = 2
		if len(lead) > 3 {
			e.Control = []Word{lead[2].Word}
			e.Model = lead[3].Word
			e.Nodes = r.slabs.nodes(lead[:2])
			e.Values = values(lead[4:])
			return r.need('w', 2)
		}
	case 't':
		nodes = min(4, len(lead))
	case 'o':
		nodes, model = min(4, len(lead)-1), 1
	default:
		e.Values = values(lead)
		return nil
	}
	if err := r.need(e.Letter, 2); err != nil {
		return err
	}
	nodes = max(nodes, 1)
	e.Nodes = r.slabs.nodes(lead[:nodes])
	if model > 0 && len(lead) > nodes {
		e.Model = lead[nodes].Word
		nodes++
	}
	e.Values = values(lead[nodes:])
	return nil
}
