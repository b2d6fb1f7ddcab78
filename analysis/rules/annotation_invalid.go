package rules

import (
	_ "embed"
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/spelling"
)

//go:embed annotation-invalid.md
var annotationInvalidText string

// AnnotationInvalid names annotations that cannot be read or that contradict
// themselves or the circuit. Nothing that a writer annotates is silently ignored.
var AnnotationInvalid = &analysis.Rule{
	Name: "annotation-invalid", Severity: analysis.Error, Scope: analysis.PerResult, Text: annotationInvalidText, Run: annotationInvalid,
}

func annotationInvalid(p *analysis.Pass) {
	for _, doc := range p.Design.Docs {
		for i := range doc.File.Len() {
			at := circuit.Place{Doc: doc, Card: i}
			for _, n := range doc.File.Card(i).Notes {
				if n.Err != nil {
					p.Reportf(analysis.Within(at, n.Err.Span), "%s", n.Err.Message)
				} else if allow, ok := n.Note.(*parser.Allow); ok {
					allowed(p, at, allow)
				}
			}
		}
	}
	for _, cause := range p.Bias.Problems {
		f := analysis.Finding{Severity: p.Rule.Severity, Place: cause.Place, Message: cause.Message}
		switch cause.Kind {
		case bias.BadRange, bias.Circular, bias.NotEvaluated:
		case bias.Contradicted:
			f.Severity = analysis.Warning
		case bias.NotBuilt:
			f.Severity = analysis.Note
		default:
			continue // the names that do not exist are stale
		}
		p.Report(f)
	}
}

// allowed checks the rule's name of an allowance.
func allowed(p *analysis.Pass, at circuit.Place, a *parser.Allow) {
	name := parser.Fold(a.Rule.Text)
	if name == analysis.LimitRule {
		return
	}
	var known []string
	for _, r := range p.Rules {
		if r.Name == name {
			return
		}
		known = append(known, r.Name)
	}
	message := fmt.Sprintf("there is no rule %q", a.Rule.Text)
	if near := spelling.Nearest(name, known); near != "" {
		message += fmt.Sprintf(": did you mean %q?", near)
	}
	p.Reportf(analysis.WordAt(at, a.Rule), "%s", message)
}
