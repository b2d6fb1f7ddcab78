package rules

import (
	_ "embed"
	"fmt"
	"maps"
	"slices"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

//go:embed duplicate-name.md
var duplicateNameText string

// DuplicateName looks for two things of one name in one scope.
var DuplicateName = &analysis.Rule{
	Name: "duplicate-name", Severity: analysis.Error, Scope: analysis.PerDesign, Text: duplicateNameText, Run: duplicateName,
}

func duplicateName(p *analysis.Pass) {
	d := duplicates{pass: p, again: map[*circuit.Document]bool{}}
	for _, s := range p.Scopes() {
		d.begin(s)
		for _, e := range s.Elements {
			d.see(named{"", e.Name.Text, analysis.WordAt(e.Place, e.Name), e.Branch})
		}
		for _, name := range slices.Sorted(maps.Keys(s.Models)) {
			for _, m := range s.Models[name] {
				d.see(named{"model", m.Model.Name.Text, m.Place, m.Branch})
			}
		}
		for _, c := range s.Children {
			d.see(named{"subckt", c.Subckt.Name.Text, c.Place, c.Branch})
		}
	}
}

// named is a thing that has a name; what is "" for an element.
type named struct {
	what, name string
	at         circuit.Place
	branch     *circuit.Branch
}

// slot is what may be taken once: a name in one arm of a conditional, or outside.
type slot struct {
	what, name string
	branch     *circuit.Branch
}

type duplicates struct {
	pass  *analysis.Pass
	scope *circuit.Scope
	first map[slot]named
	again map[*circuit.Document]bool // files already said to be read twice
}

func (d *duplicates) begin(s *circuit.Scope) { d.scope, d.first = s, map[slot]named{} }

func (d *duplicates) see(n named) {
	key := slot{n.what, parser.Fold(n.name), n.branch}
	was, taken := d.first[key]
	switch {
	case !taken:
		d.first[key] = n
	case was.at.Doc == n.at.Doc && was.at.Span == n.at.Span:
		d.readTwice(n)
	default:
		d.report(was, n)
	}
}

func (d *duplicates) report(was, n named) {
	f := analysis.Finding{
		Severity: d.pass.Rule.Severity, Place: n.at,
		Related: []analysis.Related{{Place: was.at, Message: "the first stands here"}},
	}
	where := ""
	if d.scope.Subckt != nil {
		where = fmt.Sprintf(" in subckt %q", d.scope.Subckt.Name.Text)
	}
	if n.what == "" {
		f.Message = fmt.Sprintf("there is a %q already%s", n.name, where)
		f.Subject = analysis.Subject{Path: n.name, Card: n.at}
	} else {
		// Libraries override each other's definitions on purpose at times.
		f.Severity = analysis.Warning
		f.Message = fmt.Sprintf("there is a %s %q already%s: which of the two counts depends on the simulator", n.what, n.name, where)
	}
	d.pass.Report(f)
}

// readTwice is one finding for a file that two includes name: everything in it
// exists twice. Models and subckts read twice are equal and do no harm.
func (d *duplicates) readTwice(n named) {
	if n.what == "" && !d.again[n.at.Doc] {
		d.again[n.at.Doc] = true
		d.pass.Reportf(n.at, "this file is read twice into one scope, so %q and what else it holds exist twice", n.name)
	}
}
