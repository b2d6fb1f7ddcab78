package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed syntax.md
var syntaxText string

// Syntax passes on what the parser could not read, except in annotations.
var Syntax = &analysis.Rule{
	Name: "syntax", Severity: analysis.Error, Scope: analysis.PerFile, Text: syntaxText, Run: syntax,
}

func syntax(p *analysis.Pass) {
	if p.Foreign(p.Doc) != "" {
		return
	}
	for i := range p.Doc.File.Len() {
		at := circuit.Place{Doc: p.Doc, Card: i}
		for _, e := range p.Doc.File.Card(i).Errs {
			p.Reportf(analysis.Within(at, e.Span), "%s", e.Message)
		}
	}
}
