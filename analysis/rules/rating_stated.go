package rules

import (
	"maps"
	"slices"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// statedExcesses are the limits that the settings state for a part and that it
// passes, in the alphabet of the quantities.
func statedExcesses(m part, d *circuit.Design) []*excess {
	names := []string{circuit.BaseName(parser.Fold(m.Model)), m.Wrapper}
	fact := d.Options.Facts.Find(names, func(f *circuit.Fact) bool { return f.Rating != nil })
	if fact == nil {
		return nil
	}
	var list []*excess
	for _, name := range slices.Sorted(maps.Keys(fact.Rating)) {
		x := &excess{m: m, cond: parser.Compare{Name: name}, source: fact.Source}
		if x.reaches(fact.Rating[name]) {
			list = append(list, x)
		}
	}
	return list
}
