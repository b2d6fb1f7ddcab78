package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

//go:embed title-element.md
var titleElementText string

// TitleElement looks for an element lost to the title line.
var TitleElement = &analysis.Rule{
	Name: "title-element", Severity: analysis.Warning, Scope: analysis.PerDesign, Text: titleElementText, Run: titleElement,
}

func titleElement(p *analysis.Pass) {
	root := p.Design.Root
	if !p.Whole() || root.File.Len() == 0 || root.File.Card(0).Kind != parser.TitleCard {
		return
	}
	at := circuit.Place{Doc: root}
	switch s := root.File.Card(0).Stmt.(type) {
	case nil:
	case *parser.Element:
		start := analysis.WordAt(at, s.Name)
		start.Span.End = start.Span.Start
		p.Report(analysis.Finding{
			Severity: p.Rule.Severity, Place: analysis.WordAt(at, s.Name),
			Message: "the first line is the title and no part of the circuit, yet it reads as element \"" + s.Name.Text + "\"",
			Edits:   []analysis.Edit{analysis.EditAt("put a title line above", false, start, "* title\n")},
		})
	default:
		p.Reportf(analysis.CardAt(root, 0), "the first line is the title and no part of the circuit, yet it reads as a directive")
	}
}
