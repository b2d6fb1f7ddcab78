package rules

import (
	_ "embed"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed settings.md
var settingsText string

// Settings passes on what is wrong in the settings file that holds for the deck.
var Settings = &analysis.Rule{
	Name: "settings", Severity: analysis.Error, Scope: analysis.PerDesign, Text: settingsText, Run: settingsFile,
}

func settingsFile(p *analysis.Pass) {
	for _, cause := range p.Design.Problems {
		if cause.Kind == circuit.SettingInvalid {
			p.Reportf(cause.Place, "%s", cause.Message)
		}
	}
}
