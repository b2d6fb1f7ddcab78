package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/source"
)

//go:embed not-a-deck.md
var notADeckText string

// NotADeck speaks of files that hold nothing to judge; all other rules are
// silent on them.
var NotADeck = &analysis.Rule{
	Name: "not-a-deck", Severity: analysis.Error, Scope: analysis.PerFile, Text: notADeckText, Run: notADeck,
}

func notADeck(p *analysis.Pass) {
	at := circuit.Place{Doc: p.Doc, Span: source.Span{}}
	if errs := p.Doc.File.Errors(); p.Doc.File.Foreign != "" && len(errs) > 0 {
		at.Span = errs[0].Span
		p.Report(analysis.Finding{Severity: analysis.Note, Place: at, Message: errs[0].Message})
		return
	}
	if why := p.Foreign(p.Doc); why != "" {
		p.Reportf(at, "%s", why)
		return
	}
	for i := range p.Doc.File.Len() {
		switch p.Doc.File.Card(i).Kind {
		case parser.BlankCard:
		default:
			return
		}
	}
	p.Report(analysis.Finding{Severity: analysis.Note, Place: at, Message: "this file is empty"})
}
