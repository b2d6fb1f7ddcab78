package parser

import (
	"fmt"
	"strings"

	"triodeck/parser/source"
)

// dump writes a file's syntax as an indented text that a person can check:
// line:col of each word, from 1 and in bytes.
func dump(f *File) string {
	d := &dumper{f: f}
	for i := range f.Len() {
		d.card(i)
	}
	if f.Foreign != "" {
		d.line(0, "foreign: %s", f.Foreign)
	}
	for _, e := range f.Errors() {
		d.line(0, "%s: error: %s", d.range_(e.Span), e.Message)
	}
	return d.b.String()
}

type dumper struct {
	f    *File
	base int32
	b    strings.Builder
}

func (d *dumper) line(depth int, format string, args ...any) {
	d.b.WriteString(strings.Repeat("  ", depth))
	fmt.Fprintf(&d.b, format, args...)
	d.b.WriteByte('\n')
}

func (d *dumper) at(offset int32) string {
	line, col := d.f.Lines().Position(offset, source.Bytes)
	return fmt.Sprintf("%d:%d", line+1, col+1)
}

func (d *dumper) range_(sp source.Span) string { return d.at(sp.Start) + "-" + d.at(sp.End) }

func (d *dumper) w(w Word) string {
	if w.IsZero() {
		return "-"
	}
	return fmt.Sprintf("%s@%s", show(w.Text), d.at(w.Start+d.base))
}

func show(s string) string {
	if strings.ContainsAny(s, "\r\n\t\"\f") || s == "" {
		return fmt.Sprintf("%q", s)
	}
	return s
}

func (d *dumper) ws(ws []Word) string {
	var out []string
	for _, w := range ws {
		out = append(out, d.w(w))
	}
	return strings.Join(out, " ")
}

func (d *dumper) v(v Value) string {
	switch v.Form {
	case NumberValue:
		return fmt.Sprintf("%s = %g", d.w(v.Word), v.Num)
	case NameValue:
		return d.w(v.Word) + " name"
	case StringValue:
		return d.w(v.Word) + " string"
	case ExprValue:
		e, err := v.Expr()
		if err != nil {
			return d.w(v.Word) + " bad expression"
		}
		return d.w(v.Word) + " = " + exprText(e)
	}
	return "-"
}

// exprText is an expression with every parenthesis written.
func exprText(e Expr) string {
	switch e := e.(type) {
	case *NumberLit:
		return fmt.Sprintf("%g", e.Value)
	case *Ref:
		return e.Text
	case *Call:
		return e.Name.Text + "(" + exprTexts(e.Args) + ")"
	case *Probe:
		var names []string
		for _, n := range e.Names {
			names = append(names, n.Text)
		}
		return e.Func.Text + "[" + strings.Join(names, ",") + "]"
	case *Unary:
		return "(" + e.Op.Text + exprText(e.X) + ")"
	case *Binary:
		return "(" + exprText(e.X) + " " + e.Op.Text + " " + exprText(e.Y) + ")"
	case *Choice:
		return "(" + exprText(e.Test) + " ? " + exprText(e.Then) + " : " + exprText(e.Else) + ")"
	}
	return "nothing"
}

func exprTexts(es []Expr) string {
	var out []string
	for _, e := range es {
		out = append(out, exprText(e))
	}
	return strings.Join(out, ", ")
}

var kindNames = map[CardKind]string{
	BlankCard: "blank", CommentCard: "comment", TitleCard: "title", ElementCard: "element",
	DirectiveCard: "directive", AnnotationCard: "annotation", OpaqueCard: "opaque", ErrorCard: "error",
}

func (d *dumper) card(i int) {
	c := d.f.Card(i)
	d.base = d.f.Start(i)
	if c.Kind == BlankCard && len(c.Notes) == 0 {
		return
	}
	d.line(0, "%s %s", kindNames[c.Kind], d.range_(source.Span{Start: d.base, End: d.base + int32(len(strings.TrimRight(c.Text, "\r\n")))}))
	if c.Stmt != nil {
		d.stmt(c.Stmt)
	}
	for _, n := range c.Notes {
		d.note(n)
	}
}

func (d *dumper) params(depth int, label string, ps []Param) {
	for _, p := range ps {
		d.line(depth, "%s %s: %s", label, d.w(p.Name), d.v(p.Value))
	}
}

func (d *dumper) values(depth int, label string, vs []Value) {
	for _, v := range vs {
		d.line(depth, "%s %s", label, d.v(v))
	}
}

func (d *dumper) words(label string, ws []Word) {
	if len(ws) > 0 {
		d.line(2, "%s %s", label, d.ws(ws))
	}
}

func (d *dumper) word(label string, w Word) {
	if !w.IsZero() {
		d.line(2, "%s %s", label, d.w(w))
	}
}

func (d *dumper) stmt(s Stmt) {
	d.line(1, "%s", strings.ToLower(strings.TrimPrefix(fmt.Sprintf("%T", s), "*parser.")))
	switch s := s.(type) {
	case *Element:
		d.element(s)
	case *Model:
		d.word("name", s.Name)
		d.word("type", s.Type)
		d.word("base", s.Base)
		d.params(2, "param", s.Params)
	case *ParamDefs:
		d.params(2, "param", s.Params)
		for _, f := range s.Funcs {
			d.line(2, "func %s(%s): %s", d.w(f.Name), d.ws(f.Args), d.v(f.Body))
		}
	case *FuncDef:
		d.line(2, "func %s(%s): %s", d.w(s.Name), d.ws(s.Args), d.v(s.Body))
	case *Subckt:
		d.word("name", s.Name)
		d.words("ports", s.Ports)
		d.params(2, "optional", s.Optional)
		d.params(2, "param", s.Params)
	case *Ends:
		d.word("name", s.Name)
	case *Include:
		d.word("path", s.Path)
	case *Lib:
		d.word("path", s.Path)
		d.word("section", s.Section)
	case *LibSection:
		d.word("name", s.Name)
	case *EndLib:
		d.word("name", s.Name)
	case *Global:
		d.words("nodes", s.Nodes)
	case *PinInfo:
		for i, p := range s.Pins {
			d.line(2, "pin %s %s", d.w(p), d.w(s.Directions[i]))
		}
	case *Initial:
		for i, n := range s.Nodes {
			d.line(2, "v(%s): %s", d.w(n), d.v(s.Values[i]))
		}
	case *Temp:
		d.values(2, "value", s.Values)
	case *Options:
		d.params(2, "option", s.Params)
	case *Cond:
		d.line(2, "%s %s", []string{"if", "elseif", "else", "endif"}[s.Kind], d.v(s.Test))
	case *Other:
		d.line(2, "%s known=%v", d.w(s.Name), s.Known)
		d.words("fields", s.Fields)
	}
}

func (d *dumper) element(e *Element) {
	d.line(2, "%c %s", e.Letter, d.w(e.Name))
	d.words("nodes", e.Nodes)
	d.word("model", e.Model)
	d.words("control", e.Control)
	d.values(2, "value", e.Values)
	d.params(2, "param", e.Params)
	d.params(2, "pin", e.Pins)
	if s := e.Source; s != nil {
		if s.DC.Form != NoValue {
			d.line(2, "dc %s", d.v(s.DC))
		}
		d.values(2, "ac", s.AC)
		d.word("func", s.Func)
		d.values(2, "arg", s.Args)
	}
}

func (d *dumper) note(n *Annotation) {
	trailing := ""
	if n.Trailing {
		trailing = " trailing"
	}
	d.line(1, "note %s%s", d.range_(n.Span.Shift(d.base)), trailing)
	assigns := func(as []Assign) {
		for _, a := range as {
			d.line(2, "v(%s) = %s", d.w(a.Node), d.limits(a.Lo, a.Hi))
		}
	}
	conds := func(cs []Compare) {
		for _, c := range cs {
			d.line(2, "%s %s %s %s", c.Name, d.w(c.Quantity), c.Op, d.limits(c.Lo, c.Hi))
		}
	}
	switch x := n.Note.(type) {
	case nil:
		d.line(2, "unreadable")
	case *Bias:
		d.line(2, "bias")
		assigns(x.Assigns)
	case *BiasFrom:
		d.line(2, "bias from %s", d.w(x.Path))
	case *Mode:
		d.line(2, "mode %s", d.w(x.Name))
		assigns(x.Assigns)
	case *Corner:
		d.line(2, "corner %s", d.w(x.Name))
		if x.Temp != nil {
			d.line(2, "temp %s", exprText(x.Temp))
		}
		d.word("lib", x.Lib)
		assigns(x.Assigns)
		for _, t := range x.Tweaks {
			op := "set"
			if t.Op != 0 {
				op = string(t.Op)
			}
			d.line(2, "tweak %s %s %s", d.w(t.Name), op, exprText(t.Value))
		}
	case *Expect:
		d.line(2, "expect %s %s %s", []string{"device", "node", "path", "settle"}[x.Kind], d.w(x.Target), d.w(x.To))
		for _, r := range x.Regions {
			not := ""
			if r.Not {
				not = "not "
			}
			d.line(2, "region %s%s@%s", not, r.Region, d.at(r.Start+d.base))
		}
		conds(x.Conds)
		if x.Within != nil {
			d.line(2, "within %s", exprText(x.Within))
		}
		if x.Bits != nil {
			d.line(2, "bits %s", exprText(x.Bits))
		}
		d.words("in", x.Modes)
		d.words("at", x.Corners)
	case *Rating:
		d.line(2, "rating %s", d.w(x.Model))
		conds(x.Conds)
	case *Fit:
		d.line(2, "fit %s %s", d.w(x.Model), d.w(x.Type))
		d.params(2, "param", x.Params)
	case *Access:
		d.line(2, "access %s", d.w(x.Model))
		d.params(2, "param", x.Params)
	case *Allow:
		d.line(2, "allow %s on %s because %s", d.w(x.Rule), d.w(x.On), d.w(x.Reason))
	}
}

func (d *dumper) limits(lo, hi Expr) string {
	if hi == nil {
		return exprText(lo)
	}
	return exprText(lo) + " .. " + exprText(hi)
}
