package bias

import (
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
)

// standIn gives the card of a stand-in for a model that cannot be used: the
// nearest annotation's, else the settings'. The note says where it comes from.
func (w *worker) standIn(cell *circuit.Cell, names []string) (card mos.Card, note string, ok bool) {
	const says = "a stand-in: the numbers come from the fit, not from a model card"
	for s := cell.Scope; s != nil; s = s.Parent {
		for _, name := range names {
			for i, f := range w.statements(s).fits {
				if circuit.Match(fold(f.Fit.Model), name) {
					return w.tweaked(fitCard(cell, &w.statements(s).fits[i])), says, true
				}
			}
		}
	}
	fact := w.run.Design.Options.Facts.Find(names, func(f *circuit.Fact) bool { return f.Fit != nil })
	if fact == nil {
		return mos.Card{}, "", false
	}
	card = mos.Card{Name: names[0], Polarity: mos.NMOS, Params: map[string]float64{}}
	if fact.Fit.Type == "pmos" {
		card.Polarity = mos.PMOS
	}
	for name, v := range fact.Fit.Params {
		card.Params[name] = v
	}
	return w.tweaked(card), says + ": " + fact.Source, true
}

func fitCard(cell *circuit.Cell, f *fitAt) mos.Card {
	card := mos.Card{Name: fold(f.Fit.Model), Polarity: mos.NMOS, Params: map[string]float64{}}
	if strings.HasPrefix(fold(f.Type), "p") {
		card.Polarity = mos.PMOS
	}
	for _, p := range f.Params {
		if v := cell.Env.Value(p.Value); v.Err == nil {
			card.Params[fold(p.Name)] = v.V
		}
	}
	return card
}
