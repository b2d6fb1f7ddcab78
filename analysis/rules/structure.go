package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed structure.md
var structureText string

// Structure passes on blocks that do not close, close twice, or contain
// themselves.
var Structure = &analysis.Rule{
	Name: "structure", Severity: analysis.Error, Scope: analysis.PerDesign, Text: structureText, Run: structure,
}

func structure(p *analysis.Pass) {
	for _, cause := range p.Design.Problems {
		switch cause.Kind {
		case circuit.BlockUnclosed, circuit.BlockStray, circuit.Recursion:
			p.Reportf(cause.Place, "%s", cause.Message)
		case circuit.TooDeep:
			p.Report(analysis.Finding{Severity: analysis.Warning, Place: cause.Place, Message: cause.Message})
		}
	}
}
