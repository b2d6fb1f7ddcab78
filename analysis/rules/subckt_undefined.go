package rules

import (
	_ "embed"
	"maps"
	"slices"

	"triodeck/analysis"
)

//go:embed subckt-undefined.md
var subcktUndefinedText string

// SubcktUndefined looks for instances whose subckt no file defines.
var SubcktUndefined = &analysis.Rule{
	Name: "subckt-undefined", Severity: analysis.Error, Scope: analysis.PerDesign, Text: subcktUndefinedText, Run: subcktUndefined,
}

func subcktUndefined(p *analysis.Pass) {
	var m missings
	for _, c := range p.Cells() {
		for _, x := range c.Instances {
			if x.Def == nil && x.Elem.Model.Text != "" {
				m.add(c.Scope, x.Place, x.Elem)
			}
		}
	}
	names := map[string]bool{}
	for _, s := range p.Scopes() {
		for name := range s.Subckts {
			names[name] = true
		}
	}
	m.report(p, "subckt", slices.Sorted(maps.Keys(names)))
}
