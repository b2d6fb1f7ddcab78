package analysis

import (
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// Foreign says that a file is no deck: it holds a byte that no text has.
func Foreign(doc *circuit.Document) bool {
	return strings.IndexByte(doc.File.Src, 0) >= 0
}

// analyses are the directives that ask a simulator for results. A file that has
// one is meant to run.
var analyses = map[string]bool{
	".op": true, ".dc": true, ".ac": true, ".tran": true, ".noise": true, ".tf": true,
	".sens": true, ".four": true, ".disto": true, ".pz": true, ".hb": true, ".pss": true,
}

func whole(d *circuit.Design) bool {
	if d.Top == nil || len(d.Top.Elements) == 0 {
		return false
	}
	for _, e := range d.Top.Elements {
		if e.Letter == 'v' || e.Letter == 'i' {
			return true
		}
	}
	for i := range d.Root.File.Len() {
		switch s := d.Root.File.Card(i).Stmt.(type) {
		case *parser.End:
			return true
		case *parser.Other:
			if analyses[parser.Fold(s.Name.Text)] {
				return true
			}
		}
	}
	return false
}

func closed(d *circuit.Design) bool {
	for _, p := range d.Problems {
		switch p.Kind {
		case circuit.IncludeMissing, circuit.SectionMissing, circuit.IncludeCircular:
			return false
		}
	}
	return d.Top == nil || !d.Top.Open
}
