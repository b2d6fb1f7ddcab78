package workspace

import (
	"context"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

// collect runs the rules that the settings leave on, each at the level that they
// give it for this deck.
func (d *Deck) collect(ctx context.Context, rules []*analysis.Rule, docs []*circuit.Document) []analysis.Finding {
	set, doc := d.snap.settings(d.Root, func(string) {})
	if set == nil {
		return analysis.Collect(ctx, rules, d.input(ctx, docs))
	}
	stated := set.RulesFor(d.Root)
	var on []*analysis.Rule
	var names []string
	for _, r := range rules {
		names = append(names, r.Name)
		if stated[r.Name].Level != "off" {
			on = append(on, r)
		}
	}
	list := analysis.Collect(ctx, on, d.input(ctx, docs))
	for i := range list {
		if level, ok := severities[stated[list[i].Rule].Level]; ok {
			list[i].Severity = level
		}
	}
	for _, p := range set.UnknownRules(names) {
		list = append(list, analysis.Finding{
			Rule: "settings", Severity: analysis.Error, Place: circuit.Place{Doc: doc, Span: p.Span}, Message: p.Message,
		})
	}
	return analysis.Sort(list)
}

var severities = map[string]analysis.Severity{"error": analysis.Error, "warning": analysis.Warning, "note": analysis.Note}
