package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed parameter.md
var parameterText string

// Parameter passes on parameters that are not defined, refer to each other in a
// circle, or have no value.
var Parameter = &analysis.Rule{
	Name: "parameter", Severity: analysis.Error, Scope: analysis.PerDesign, Text: parameterText, Run: parameter,
}

func parameter(p *analysis.Pass) {
	for _, cause := range p.Design.Problems {
		f := analysis.Finding{Severity: p.Rule.Severity, Place: cause.Place, Message: cause.Message}
		switch cause.Kind {
		case circuit.ParamCycle:
		case circuit.ParamUndefined:
			// Whoever includes a part or brings the models may define it, and so may a missing file.
			if !p.Whole() || !p.Closed() || !p.Supplied() {
				continue
			}
		case circuit.ParamInvalid:
			f.Severity = analysis.Warning
		default:
			continue
		}
		p.Report(f)
	}
}
