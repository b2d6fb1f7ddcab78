package parser

import (
	"strings"

	"triodeck/parser/source"
)

// quantityUnits are the quantities of the annotation language with the unit that a
// limit may carry.
var quantityUnits = map[string]string{
	"vgs": "V", "vds": "V", "vbs": "V", "vgd": "V", "vgb": "V", "vsg": "V", "vsd": "V", "vsb": "V",
	"vth": "V", "vov": "V", "vdsat": "V", "margin": "V", "v": "V",
	"id": "A", "gm": "S", "gds": "S", "gmb": "S", "ron": "ohm", "rds": "ohm",
	"ic": "", "gmid": "", "gain": "", "power": "W",
}

var quantities = strings.Fields("vgs vds vbs vgd vgb vth vov vdsat id gm gds gmb ron rds margin ic gmid gain power vsg vsd vsb")

var regions = []string{"cutoff", "weak inversion", "triode", "deep triode", "saturation"}

func (n *noteReader) expect() (Note, *Error) {
	g, at, ok := parseTokens(expectGrammar(), n.lexed)
	if !ok {
		return nil, n.expectMisfit(at)
	}
	e := &Expect{}
	if err := n.target(e, g); err != nil {
		return nil, err
	}
	for _, c := range g.Claims {
		if err := n.claim(e, c); err != nil {
			return nil, err
		}
	}
	return noteOr(e, n.complete(e))
}

func (n *noteReader) target(e *Expect, g *expectG) *Error {
	switch {
	case g.Path != nil:
		e.Kind, e.Target, e.To = PathTarget, wordOf(g.Path.From), wordOf(g.Path.To)
	case g.Settle != nil:
		e.Kind, e.Target = SettleTarget, wordOf(g.Settle.Node)
	case g.Node != nil:
		e.Kind, e.Target = NodeTarget, wordOf(g.Node.Node)
		f := wordOf(g.Node.Func)
		if !foldEqual(f.Text, "v") {
			return &Error{Span: f.Span(), Message: "only v(node) can be expected of a node"}
		}
		c, err := n.cond(&condG{Quantity: g.Node.Func, Op: g.Node.Op, Lo: g.Node.Lo, Hi: g.Node.Hi})
		if err != nil {
			return err
		}
		e.Conds = append(e.Conds, c)
	default:
		e.Target = wordOf(g.Device)
		if n.trailing && !e.Target.IsZero() {
			return n.notSubject(e.Target)
		}
		if !n.trailing && e.Target.IsZero() {
			return n.say(n.tokens[0], "the expectation names no device: write `expect m1 triode`")
		}
	}
	return nil
}

// notSubject is the finding about a word behind an element where only regions and
// quantities may stand.
func (n *noteReader) notSubject(w Word) *Error {
	if hint := suggest(w.Text, append(append([]string(nil), regions...), quantities...)); hint != "" {
		return &Error{Span: w.Span(), Message: "unknown region or quantity " + quoted(w.Text) + hint}
	}
	return &Error{Span: w.Span(), Message: quoted(w.Text) + " is neither a region nor a quantity; behind an element the element itself is meant, so leave the name out"}
}

func (n *noteReader) claim(e *Expect, g *claimG) *Error {
	switch {
	case g.Region.Type != 0:
		w := RegionWish{Word: wordOf(g.Region), Not: g.Not.Type != 0}
		w.Region = strings.Join(strings.Fields(Fold(w.Text)), " ")
		e.Regions = append(e.Regions, w)
	case g.Cond != nil:
		c, err := n.cond(g.Cond)
		if err != nil {
			return err
		}
		e.Conds = append(e.Conds, c)
	case g.Within != nil:
		e.Within = g.Within.lower()
		return n.unit(e.Within, "s")
	case g.Bits != nil:
		e.Bits = g.Bits.Count.lower()
		return n.unit(e.Bits, "bit")
	default:
		e.Modes = append(e.Modes, wordsOf(g.Modes)...)
		e.Corners = append(e.Corners, wordsOf(g.Corners)...)
	}
	return nil
}

func (n *noteReader) cond(g *condG) (Compare, *Error) {
	c := Compare{Quantity: wordOf(g.Quantity), Op: g.Op.Value, Lo: g.Lo.lower()}
	c.Name = Fold(c.Quantity.Text)
	unit, known := quantityUnits[c.Name]
	if !known {
		return c, &Error{Span: c.Quantity.Span(), Message: "unknown quantity " + quoted(c.Quantity.Text) + suggest(c.Name, quantities)}
	}
	end := n.extent(c.Lo)
	if g.Hi != nil {
		c.Hi = g.Hi.lower()
		end = n.extent(c.Hi)
		if c.Op != "=" {
			op := wordOf(g.Op)
			return c, &Error{Span: op.Span(), Message: "a range is written with \"=\", not with " + quoted(op.Text)}
		}
	}
	c.Span = source.Span{Start: c.Quantity.Start, End: end}
	return c, firstError(n.unit(c.Lo, unit), n.unit(c.Hi, unit))
}

// complete says what an expectation lacks.
func (n *noteReader) complete(e *Expect) *Error {
	last := n.tokens[len(n.tokens)-1]
	settling := e.Within != nil || e.Bits != nil
	switch {
	case e.Kind == SettleTarget && (e.Within == nil || e.Bits == nil):
		return n.say(last, "settling needs a time and a resolution: write `expect settle(node) within 10n to 12bit`")
	case e.Kind != SettleTarget && settling:
		return n.say(n.tokens[0], "only settle(node) takes a time and a resolution")
	case e.Kind != DeviceTarget && len(e.Regions) > 0:
		return &Error{Span: e.Regions[0].Span(), Message: "a node or path has no region"}
	case e.Kind == PathTarget && len(e.Conds) == 0:
		return n.say(last, "nothing is expected of the path: write `expect path(a,b) ron<=200`")
	case e.Kind == DeviceTarget && len(e.Regions) == 0 && len(e.Conds) == 0:
		return n.say(last, "nothing is expected: name a region or a limit")
	}
	if e.Kind == PathTarget {
		for _, c := range e.Conds {
			if c.Name != "ron" && c.Name != "rds" {
				return &Error{Span: c.Quantity.Span(), Message: "a path has a resistance alone: write `ron<=200`"}
			}
		}
	}
	if e.Kind == NodeTarget && len(e.Conds) > 1 {
		return &Error{Span: e.Conds[1].Quantity.Span(), Message: "a node has a voltage alone; " + quoted(e.Conds[1].Quantity.Text) + " belongs to a device"}
	}
	return nil
}

// expectMisfit says what is wrong at an offset of an expectation.
func (n *noteReader) expectMisfit(at int32) *Error {
	i := tokenAt(n.lexed, at)
	if i < len(n.tokens) && i > 0 && n.parens() == nil {
		t := n.tokens[i]
		text := n.textOf(t)
		switch prev := n.tokens[i-1]; {
		case prev.kind == wordsToken && t.kind == wordToken && foldEqual(n.textOf(prev), "not"):
			return n.say(t, "unknown region %q%s", text, suggest(text, regions))
		case t.kind == wordToken && prev.kind != assignToken && prev.kind != compareToken:
			return n.say(t, "unknown region or quantity %q%s", text, suggest(text, append(append([]string(nil), regions...), quantities...)))
		case t.kind == probeToken && i > 1:
			return n.say(t, "one expectation has one target: write another line for %q", text+"(…)")
		}
	}
	return n.misfit(at, "expect target region quantity<=value in mode at corner")
}
