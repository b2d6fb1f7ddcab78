package bias

import (
	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
	"triodeck/parser"
)

// shortChannel is the drawn length, in metres, below which contacts and the
// access regions take a share of the voltage that nobody should leave out:
// there the channel of a square is below some tenfold of theirs. Common practice.
const shortChannel = 0.35e-6

// noAccess is the note of a short device without any.
const noAccess = "access resistance is not included"

// access adds the contact and access resistance that a card leaves out for a
// device of some names: as an annotation states it, the nearest scope first, else as the settings do. The
// note says what was done; a short device without any has one too.
func (w *worker) access(cell *circuit.Cell, names []string, g *mos.Geometry) (note string) {
	if stated := w.accessNote(cell, names); stated != nil {
		values := map[string]float64{}
		for _, p := range stated.Params {
			if v := cell.Env.Value(p.Value); v.Err == nil {
				values[fold(p.Name)] = v.V
			}
		}
		addAccess(g, values)
		return "access resistance included"
	}
	if f := w.run.Design.Options.Facts.Find(names, func(f *circuit.Fact) bool { return f.Access != nil }); f != nil {
		addAccess(g, f.Access)
		return "access resistance included: " + f.Source
	}
	if g.L > 0 && g.L < shortChannel {
		return noAccess
	}
	return ""
}

func (w *worker) accessNote(cell *circuit.Cell, names []string) *parser.Access {
	for s := cell.Scope; s != nil; s = s.Parent {
		for _, name := range names {
			for _, a := range w.statements(s).access {
				if circuit.Match(fold(a.Access.Model), name) {
					return a.Access
				}
			}
		}
	}
	return nil
}

// addAccess sets the resistances a side from rs, rd (Ω) or rsw (Ω·µm).
func addAccess(g *mos.Geometry, values map[string]float64) {
	if v, ok := values["rsw"]; ok && g.W > 0 {
		g.RS, g.RD = v*1e-6/g.W, v*1e-6/g.W
	}
	if v, ok := values["rs"]; ok {
		g.RS = v
	}
	if v, ok := values["rd"]; ok {
		g.RD = v
	}
}
