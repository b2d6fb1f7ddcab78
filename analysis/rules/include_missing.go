package rules

import (
	_ "embed"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed include-missing.md
var includeMissingText string

// IncludeMissing names files and sections that the deck asks for in vain. It is
// the one finding for everything that they would have defined.
var IncludeMissing = &analysis.Rule{
	Name: "include-missing", Severity: analysis.Warning, Scope: analysis.PerDesign, Text: includeMissingText, Run: includeMissing,
}

func includeMissing(p *analysis.Pass) {
	for _, cause := range p.Design.Problems {
		f := analysis.Finding{Severity: p.Rule.Severity, Place: cause.Place, Message: cause.Message}
		switch cause.Kind {
		case circuit.IncludeMissing:
			// A path with a variable is set by the place where the simulator runs.
			if strings.ContainsAny(cause.Name, "$~") {
				f.Severity = analysis.Note
			}
		case circuit.SectionMissing:
		case circuit.IncludeCircular:
			f.Severity = analysis.Error
		default:
			continue
		}
		p.Report(f)
	}
}
