package circuit_test

import (
	"fmt"
	"sort"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser/source"
)

// dump writes a design as a person would read it: files, names, cells, problems.
func dump(d *circuit.Design) string {
	var b strings.Builder
	for _, doc := range d.Docs {
		fmt.Fprintf(&b, "file %s\n", doc.Path)
	}
	if d.TempC != 27 || d.TnomC != 27 {
		fmt.Fprintf(&b, "temp %g tnom %g\n", d.TempC, d.TnomC)
	}
	for _, s := range d.Scopes() {
		dumpScope(&b, s)
	}
	seen := map[*circuit.Cell]bool{}
	dumpCell(&b, d.Main, "cell", seen)
	for _, c := range d.Alone {
		dumpCell(&b, c, "alone", seen)
	}
	for _, doc := range d.Docs {
		for _, e := range doc.File.Errors() {
			fmt.Fprintf(&b, "unread %s: %s\n", where(circuit.Place{Doc: doc, Span: e.Span}), e.Message)
		}
	}
	for _, p := range d.Problems {
		fmt.Fprintf(&b, "problem %s %s: %s\n", kindWords[p.Kind], where(p.Place), p.Message)
	}
	return b.String()
}

var kindWords = map[circuit.ProblemKind]string{
	circuit.IncludeMissing: "include-missing", circuit.IncludeCircular: "include-circular",
	circuit.SectionMissing: "section-missing", circuit.BlockUnclosed: "block-unclosed",
	circuit.BlockStray: "block-stray", circuit.Recursion: "recursion", circuit.TooDeep: "too-deep",
	circuit.ParamCycle: "param-cycle", circuit.ParamUndefined: "param-undefined", circuit.ParamInvalid: "param-invalid",
	circuit.BinMissing: "bin-missing", circuit.BinOverlap: "bin-overlap",
	circuit.SettingInvalid: "setting-invalid",
}

// where is a place as path:line:column and the text there.
func where(p circuit.Place) string {
	line, col := p.Doc.File.Lines().Position(p.Span.Start, source.UTF8)
	text, _, more := strings.Cut(p.Text(), "\n")
	if more {
		text += "…"
	}
	return fmt.Sprintf("%s:%d:%d %q", p.Doc.Path, line+1, col+1, text)
}

func dumpScope(b *strings.Builder, s *circuit.Scope) {
	name, open := "(top)", ""
	if s.Subckt != nil {
		name = s.Name
		for p := s.Parent; p.Subckt != nil; p = p.Parent {
			name = p.Name + "." + name
		}
	}
	if s.Open {
		open = " open"
	}
	var ports []string
	for _, p := range s.Ports {
		ports = append(ports, p.Text)
	}
	fmt.Fprintf(b, "scope %s%s%s\n", strings.Join(append([]string{name}, ports...), " "), branch(s.Branch), open)
	for _, p := range s.ParamList() {
		switch {
		case p.Func != nil:
			fmt.Fprintf(b, "  func %s/%d = %s%s\n", p.Name, len(p.Func.Args), p.Value.Text, branch(p.Branch))
		default:
			fmt.Fprintf(b, "  param %s = %s%s\n", p.Name, p.Value.Text, branch(p.Branch))
		}
	}
	for _, m := range s.ModelList() {
		fmt.Fprintf(b, "  model %s %s%s\n", m.Name, m.Type, branch(m.Branch))
	}
	for _, name := range keys(s.Globals) {
		fmt.Fprintf(b, "  global %s\n", name)
	}
	for _, i := range s.Initials {
		word := ".ic"
		if i.Nodeset {
			word = ".nodeset"
		}
		for k, n := range i.Nodes {
			fmt.Fprintf(b, "  %s %s = %s%s\n", word, n.Text, i.Values[k].Text, branch(i.Branch))
		}
	}
	for _, n := range s.Notes {
		subject := ""
		if n.Subject != nil {
			subject = " on " + n.Subject.Name.Text
		}
		fmt.Fprintf(b, "  note%s: %s\n", subject, n.Place.Text())
	}
}

func branch(br *circuit.Branch) string {
	switch {
	case br == nil:
		return ""
	case br.Else:
		return " (else)"
	}
	return " (if " + br.Test.Text + ")"
}

func dumpCell(b *strings.Builder, c *circuit.Cell, word string, seen map[*circuit.Cell]bool) {
	if seen[c] {
		return
	}
	seen[c] = true
	name := "(top)"
	if c.Scope.Subckt != nil {
		name = c.Scope.Name
	}
	fmt.Fprintf(b, "%s %s", word, name)
	if c.Key != "" {
		fmt.Fprintf(b, " [%s]", c.Key)
	}
	b.WriteByte('\n')
	for i, n := range c.Nets {
		if len(n.Pins) == 0 && n.Port < 0 {
			continue
		}
		fmt.Fprintf(b, "  net %s", n.Spelt)
		if n.Port >= 0 {
			fmt.Fprintf(b, " port %d", n.Port)
		}
		if n.Global && circuit.NetID(i) != circuit.Ground {
			b.WriteString(" global")
		}
		b.WriteByte(':')
		for _, p := range n.Pins {
			if p.Device != nil {
				fmt.Fprintf(b, " %s.%d", p.Device.Name, p.Terminal)
			} else {
				fmt.Fprintf(b, " %s.%d", p.Instance.Name, p.Terminal)
			}
		}
		b.WriteByte('\n')
	}
	for _, d := range c.Devices {
		dumpDevice(b, c, d)
	}
	for _, x := range c.Instances {
		dumpInstance(b, c, x)
	}
	dumpWrapper(b, c)
	for _, x := range c.Instances {
		if x.Cell != nil {
			dumpCell(b, x.Cell, "cell", seen)
		}
	}
}

// dumpWrapper says which transistor the cell stands for.
func dumpWrapper(b *strings.Builder, c *circuit.Cell) {
	w := c.Wrapper()
	if w == nil {
		return
	}
	b.WriteString("  stands for ")
	for _, x := range w.Path {
		b.WriteString(x.Name + ".")
	}
	b.WriteString(w.Device.Name)
	for t, word := range []string{"drain", "gate", "source", "bulk"} {
		fmt.Fprintf(b, " %s=%d", word, w.Ports[t])
		for _, r := range w.Series[t] {
			fmt.Fprintf(b, "+%s", r.Name)
		}
	}
	b.WriteByte('\n')
}

func dumpDevice(b *strings.Builder, c *circuit.Cell, d *circuit.Device) {
	fmt.Fprintf(b, "  %s %s(%s)", d.Name, d.Kind, nets(c, d.Nets))
	if d.Value.Set {
		fmt.Fprintf(b, " %s", value(d.Value))
	}
	writeValues(b, d.Params)
	if d.Scale != 1 {
		fmt.Fprintf(b, " scale=%g", d.Scale)
	}
	if m := d.Model; m != nil {
		fmt.Fprintf(b, " : %s", m.Type())
		if m.Def != nil {
			fmt.Fprintf(b, " %s", m.Def.Name)
		}
		if len(m.Bins) > 0 {
			fmt.Fprintf(b, " of %d bins", len(m.Bins))
		}
		writeValues(b, m.Params)
	}
	b.WriteByte('\n')
	if s := d.Size; s != nil && (d.Scale != 1 || len(s.Notes) > 0) {
		fmt.Fprintf(b, "    L %s W %s fingers %g\n", quantity.Digits(s.L, "m", 4), quantity.Digits(s.W, "m", 4), s.NF)
	}
	if s := d.Size; s != nil {
		for _, note := range s.Notes {
			fmt.Fprintf(b, "    note %s\n", note)
		}
	}
}

func dumpInstance(b *strings.Builder, c *circuit.Cell, x *circuit.Instance) {
	fmt.Fprintf(b, "  %s %s(%s)", x.Name, x.Elem.Model.Text, nets(c, x.Nets))
	if x.M != (circuit.Value{V: 1}) {
		fmt.Fprintf(b, " times %s", value(x.M))
	}
	switch {
	case x.Def == nil:
		b.WriteString(" undefined")
	case x.Cell == nil:
		b.WriteString(" without cell")
	case x.Cell.Key != "":
		fmt.Fprintf(b, " [%s]", x.Cell.Key)
	}
	b.WriteByte('\n')
}

func nets(c *circuit.Cell, ids []circuit.NetID) string {
	var names []string
	for _, id := range ids {
		names = append(names, c.Nets[id].Name)
	}
	return strings.Join(names, " ")
}

func writeValues(b *strings.Builder, values map[string]circuit.Value) {
	for _, name := range keys(values) {
		fmt.Fprintf(b, " %s=%s", name, value(values[name]))
	}
}

func value(v circuit.Value) string {
	if v.Err != nil {
		return "<" + v.Err.Error() + ">"
	}
	return fmt.Sprintf("%.6g", v.V)
}

func keys[V any](m map[string]V) []string {
	var names []string
	for name := range m {
		names = append(names, name)
	}
	sort.Strings(names)
	return names
}
