package rules

import (
	_ "embed"
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/bias"
)

//go:embed stale-annotation.md
var staleAnnotationText string

// StaleAnnotation names annotations that the circuit has left behind. It runs
// last, when it is known which allowances were needed.
var StaleAnnotation = &analysis.Rule{
	Name: "stale-annotation", Severity: analysis.Warning, Scope: analysis.Last, Text: staleAnnotationText, Run: staleAnnotation,
}

func staleAnnotation(p *analysis.Pass) {
	for _, cause := range p.Bias.Problems {
		f := analysis.Finding{Severity: p.Rule.Severity, Place: cause.Place, Message: cause.Message}
		switch cause.Kind {
		case bias.UnknownName:
			// What a misspelt name asks for is not checked: a check that never
			// runs must not pass.
			f.Severity = analysis.Error
		case bias.NeverApplies:
		default:
			continue
		}
		if !p.Closed() {
			f.Severity = analysis.Note // the name may stand in the file that is missing
		}
		p.Report(f)
	}
	for _, a := range p.Unused() {
		gone := a.Place
		f := analysis.Finding{
			Severity: p.Rule.Severity, Place: gone,
			Message: fmt.Sprintf("nothing here needs this allowance: %q finds nothing", a.Rule.Text),
		}
		p.Report(f)
	}
}
