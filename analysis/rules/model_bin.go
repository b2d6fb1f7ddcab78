package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed model-bin.md
var modelBinText string

// ModelBin passes on sizes that no bin of their model covers, and bins that cover
// the same size.
var ModelBin = &analysis.Rule{
	Name: "model-bin", Severity: analysis.Error, Scope: analysis.PerDesign, Text: modelBinText, Run: modelBin,
}

func modelBin(p *analysis.Pass) {
	for _, cause := range p.Design.Problems {
		f := analysis.Finding{Severity: p.Rule.Severity, Place: cause.Place, Message: cause.Message}
		switch cause.Kind {
		case circuit.BinMissing:
			if !p.Closed() {
				continue // a missing file may hold further bins, or the scale
			}
			f.Subject = analysis.Subject{Path: cause.Place.Text(), Card: cause.Place}
		case circuit.BinOverlap:
			f.Severity = analysis.Warning
		default:
			continue
		}
		p.Report(f)
	}
}
