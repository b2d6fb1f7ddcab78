package rules

import (
	_ "embed"
	"maps"
	"slices"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

//go:embed model-undefined.md
var modelUndefinedText string

// ModelUndefined looks for devices whose model no file defines.
var ModelUndefined = &analysis.Rule{
	Name: "model-undefined", Severity: analysis.Error, Scope: analysis.PerDesign, Text: modelUndefinedText, Run: modelUndefined,
}

func modelUndefined(p *analysis.Pass) {
	var m missings
	for _, c := range p.Cells() {
		for _, d := range c.Devices {
			if d.Model == nil && needsModel(d) && !fitted(c.Scope, d.Elem.Model.Text) && !known(p.Design, c, d) {
				m.add(c.Scope, d.Place, d.Elem)
			}
		}
	}
	names := map[string]bool{}
	for _, s := range p.Scopes() {
		for name := range s.Models {
			names[circuit.BaseName(name)] = true
		}
	}
	m.report(p, "model", slices.Sorted(maps.Keys(names)))
}

// needsModel says whether a device cannot do without. A resistor's third word
// may be a value in a form that is not read, and is left alone.
func needsModel(d *circuit.Device) bool {
	switch d.Kind {
	case circuit.MOSFET, circuit.Diode, circuit.Bipolar:
		return d.Elem.Model.Text != ""
	}
	return false
}

// known says whether the settings give a stand-in for the model.
func known(design *circuit.Design, c *circuit.Cell, d *circuit.Device) bool {
	return design.Options.Facts.Find(c.FactNames(d), func(f *circuit.Fact) bool { return f.Fit != nil }) != nil
}

// fitted says whether the writer gives a stand-in for the model.
func fitted(s *circuit.Scope, model string) bool {
	for ; s != nil; s = s.Parent {
		for _, n := range s.Notes {
			if fit, ok := n.Note.(*parser.Fit); ok && circuit.Match(parser.Fold(fit.Model.Text), parser.Fold(model)) {
				return true
			}
		}
	}
	return false
}
