package ide

import (
	"triodeck/analysis/bias"
	"triodeck/parser"
	"triodeck/parser/source"
)

// markKind says what a word of a card stands for.
type markKind uint8

const (
	elementMark markKind = iota // the name of an element, where it stands or where it is used
	nodeMark
	modelMark
	subcktMark
	paramMark    // a use of a parameter
	paramDefMark // the name in `.param name=…` or `.subckt … name=…`
	keyMark      // the name in `w=…` of an element or `vto=…` of a model
	numberMark
	pathMark
	sectionMark
	targetMark // a device pattern in an annotation
	modeMark
	cornerMark
	regionMark
	quantityMark
	ruleMark
	noteMark // an annotation as a whole
)

// mark is a word with its meaning. Its place is relative to the card.
type mark struct {
	text string
	span source.Span
	kind markKind
	key  string             // folded name of a keyMark or paramDefMark
	unit string             // SI unit of a number or parameter, where its place tells
	num  float64            // value of a numberMark, in SI units
	note *parser.Annotation // that carries the word, if one does
}

// marks lists the words of a card. Where two cover the same place, the one that
// says more comes first.
func marks(c *parser.Card) []mark {
	var m marker
	switch s := c.Stmt.(type) {
	case *parser.Element:
		m.element(s)
	case *parser.Model:
		m.word(modelMark, s.Name)
		m.params(s.Params, keyMark, modelUnits)
	case *parser.ParamDefs:
		m.params(s.Params, paramDefMark, nil)
	case *parser.FuncDef:
		m.word(paramDefMark, s.Name)
		m.value(s.Body, "")
	case *parser.Subckt:
		m.word(subcktMark, s.Name)
		m.words(nodeMark, s.Ports)
		m.params(s.Params, paramDefMark, nil)
	case *parser.Ends:
		m.word(subcktMark, s.Name)
	case *parser.Include:
		m.word(pathMark, s.Path)
	case *parser.Lib:
		m.word(pathMark, s.Path)
		m.word(sectionMark, s.Section)
	case *parser.LibSection:
		m.word(sectionMark, s.Name)
	case *parser.EndLib:
		m.word(sectionMark, s.Name)
	case *parser.Global:
		m.words(nodeMark, s.Nodes)
	case *parser.Initial:
		m.words(nodeMark, s.Nodes)
		m.values(s.Values, "V")
	case *parser.Temp:
		m.values(s.Values, "°C")
	case *parser.Options:
		m.params(s.Params, keyMark, optionUnits)
	case *parser.Cond:
		m.value(s.Test, "")
	}
	for _, n := range c.Notes {
		m.annotation(n)
	}
	return m.list
}

// markAt is the innermost word at a place of a card.
func markAt(c *parser.Card, at int32) (mark, bool) {
	var best mark
	found := false
	for _, m := range marks(c) {
		if !m.span.Contains(at) {
			continue
		}
		// Behind the end of one word may be the start of the next, which wins.
		if !found || m.span.Len() < best.span.Len() || best.span.End == at && m.span.Start == at {
			best, found = m, true
		}
	}
	return best, found
}

type marker struct {
	list []mark
	note *parser.Annotation
}

func (m *marker) add(k mark) {
	k.note = m.note
	m.list = append(m.list, k)
}

func (m *marker) word(kind markKind, w parser.Word) {
	if !w.IsZero() {
		m.add(mark{text: w.Text, span: w.Span(), kind: kind})
	}
}

func (m *marker) words(kind markKind, ws []parser.Word) {
	for _, w := range ws {
		m.word(kind, w)
	}
}

func (m *marker) element(e *parser.Element) {
	m.word(elementMark, e.Name)
	m.words(nodeMark, e.Nodes)
	if e.Letter == 'x' {
		m.word(subcktMark, e.Model)
	} else {
		m.word(modelMark, e.Model)
	}
	m.words(elementMark, e.Control)
	m.values(e.Values, valueUnits[e.Letter])
	m.params(e.Params, keyMark, elementUnits)
	if e.Source != nil {
		m.value(e.Source.DC, valueUnits[e.Letter])
		m.values(e.Source.AC, "")
		m.values(e.Source.Args, "")
	}
}

func (m *marker) params(ps []parser.Param, kind markKind, units map[string]string) {
	for _, p := range ps {
		key := parser.Fold(p.Name.Text)
		m.add(mark{text: p.Name.Text, span: p.Name.Span(), kind: kind, key: key, unit: units[key]})
		m.value(p.Value, units[key])
	}
}

func (m *marker) values(vs []parser.Value, unit string) {
	for _, v := range vs {
		m.value(v, unit)
	}
}

func (m *marker) value(v parser.Value, unit string) {
	switch v.Form {
	case parser.NumberValue:
		m.add(mark{text: v.Text, span: v.Span(), kind: numberMark, unit: unit, num: v.Num})
	case parser.NameValue:
		m.add(mark{text: v.Text, span: v.Span(), kind: paramMark, unit: unit})
	case parser.ExprValue:
		if e, err := v.Expr(); err == nil {
			m.expr(e, unit)
		}
	}
}

// expr marks the words of an expression. The unit of the whole is that of a
// number only if it stands there alone: in `2*0.9u` the 2 has none.
func (m *marker) expr(e parser.Expr, unit string) {
	switch e := e.(type) {
	case *parser.NumberLit:
		m.add(mark{text: e.Text, span: e.Span(), kind: numberMark, unit: unit, num: e.Value})
	case *parser.Ref:
		m.add(mark{text: e.Text, span: e.Span(), kind: paramMark, unit: unit})
	case *parser.Call:
		m.word(paramMark, e.Name)
		for _, a := range e.Args {
			m.expr(a, "")
		}
	case *parser.Probe:
		kind := nodeMark
		if parser.Fold(e.Func.Text) == "i" {
			kind = elementMark
		}
		m.words(kind, e.Names)
	case *parser.Unary:
		m.expr(e.X, unit)
	case *parser.Binary:
		m.expr(e.X, sumUnit(e.Op.Text, unit))
		m.expr(e.Y, sumUnit(e.Op.Text, unit))
	case *parser.Choice:
		m.expr(e.Test, "")
		m.expr(e.Then, unit)
		m.expr(e.Else, unit)
	}
}

// sumUnit is the unit of an operand: terms of a sum have that of the whole.
func sumUnit(op, unit string) string {
	if op == "+" || op == "-" {
		return unit
	}
	return ""
}

func (m *marker) annotation(a *parser.Annotation) {
	m.note = a
	defer func() { m.note = nil }()
	switch n := a.Note.(type) {
	case *parser.Bias:
		m.assigns(n.Assigns)
	case *parser.BiasFrom:
		m.word(pathMark, n.Path)
	case *parser.Mode:
		m.word(modeMark, n.Name)
		m.assigns(n.Assigns)
	case *parser.Corner:
		m.word(cornerMark, n.Name)
		m.optional(n.Temp, "°C")
		m.assigns(n.Assigns)
		for _, t := range n.Tweaks {
			m.word(keyMark, t.Name)
			m.optional(t.Value, modelUnits[parser.Fold(t.Name.Text)])
		}
	case *parser.Expect:
		m.expect(n)
	case *parser.Rating:
		m.word(modelMark, n.Model)
		m.conds(n.Conds)
	case *parser.Fit:
		m.word(modelMark, n.Model)
		m.params(n.Params, keyMark, modelUnits)
	case *parser.Access:
		m.word(modelMark, n.Model)
		m.params(n.Params, keyMark, modelUnits)
	case *parser.Allow:
		m.word(ruleMark, n.Rule)
		m.word(targetMark, n.On)
	}
	m.add(mark{span: a.Span, kind: noteMark})
}

func (m *marker) optional(e parser.Expr, unit string) {
	if e != nil {
		m.expr(e, unit)
	}
}

func (m *marker) assigns(as []parser.Assign) {
	for _, a := range as {
		m.word(nodeMark, a.Node)
		m.optional(a.Lo, "V")
		m.optional(a.Hi, "V")
	}
}

func (m *marker) conds(cs []parser.Compare) {
	for _, c := range cs {
		unit := "V"
		if !c.Quantity.IsZero() && c.Name != "v" {
			m.add(mark{text: c.Quantity.Text, span: c.Quantity.Span(), kind: quantityMark, key: c.Name})
			unit = bias.Unit(c.Name)
		}
		m.optional(c.Lo, unit)
		m.optional(c.Hi, unit)
	}
}

func (m *marker) expect(e *parser.Expect) {
	target := targetMark
	if e.Kind != parser.DeviceTarget {
		target = nodeMark
	}
	m.word(target, e.Target)
	m.word(nodeMark, e.To)
	for _, r := range e.Regions {
		m.word(regionMark, r.Word)
	}
	m.conds(e.Conds)
	m.optional(e.Within, "s")
	m.optional(e.Bits, "")
	m.words(modeMark, e.Modes)
	m.words(cornerMark, e.Corners)
}
