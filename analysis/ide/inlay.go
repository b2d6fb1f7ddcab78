package ide

import (
	"context"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/mos"
	"triodeck/analysis/quantity"
	"triodeck/analysis/workspace"
	"triodeck/parser"
	"triodeck/parser/source"
)

// Hint is a text to show in a line of a file.
type Hint struct {
	Offset        int32 // behind the last text of a card
	Text, Tooltip string
}

// maxModes is how many modes a hint tells apart.
const maxModes = 3

// InlayHints tells the region and on-resistance of every MOSFET whose card
// touches a span of a file.
func InlayHints(ctx context.Context, deck *workspace.Deck, path string, span source.Span) []Hint {
	q, ok := ask(ctx, deck, path)
	if !ok {
		return nil
	}
	result := deck.Bias(ctx)
	if result == nil {
		return nil
	}
	f := q.doc.File
	if f.Len() == 0 {
		return nil
	}
	first, last := max(0, f.CardAt(span.Start)), min(f.CardAt(span.End), f.Len()-1)
	seen := map[*parser.Subckt]map[*parser.Element][]spotted{}
	var hints []Hint
	body := q.body(first)
	for i := first; i <= last; i++ {
		if q.turnsBody(i) {
			body = q.body(i)
		}
		e, ok := f.Card(i).Stmt.(*parser.Element)
		if !ok || e.Letter != 'm' && e.Letter != 'x' || f.Card(i).Kind != parser.ElementCard {
			continue
		}
		if _, ok := seen[body]; !ok {
			seen[body] = byElement(sightings(result, body))
		}
		if text := hintText(grouped(seen[body][e])); text != "" {
			hints = append(hints, Hint{Offset: f.Start(i) + textEnd(f.Card(i).Text), Text: text})
		}
	}
	return hints
}

// textEnd is the end of the last line of a card that continues it: comments and
// blank lines between cards belong to the card before, but the hint does not.
func textEnd(text string) int32 {
	end := 0
	for at, i := 0, 0; at < len(text); i++ {
		line, _, _ := strings.Cut(text[at:], "\n")
		trimmed := strings.TrimRight(line, " \t\r")
		if lead := strings.TrimLeft(trimmed, " \t"); i == 0 || strings.HasPrefix(lead, "+") {
			end = at + len(trimmed)
		}
		at += len(line) + 1
	}
	return int32(end)
}

// hintText is the text for a device: "deep triode · 112 Ω", one a mode where
// they differ. Instances that differ make ranges.
func hintText(ops []operation) string {
	type entry struct{ mode, text string }
	var entries []entry
	for _, o := range merged(ops) {
		entries = append(entries, entry{o.mode, o.brief()})
	}
	if len(entries) == 0 {
		return ""
	}
	if !slices.ContainsFunc(entries, func(e entry) bool { return e.text != entries[0].text }) {
		return entries[0].text
	}
	var texts []string
	for _, e := range entries[:min(len(entries), maxModes)] {
		texts = append(texts, joined(": ", e.mode, e.text))
	}
	if len(entries) > maxModes {
		texts = append(texts, "…")
	}
	return strings.Join(texts, " · ")
}

// merged takes the instances of each mode together.
func merged(ops []operation) []operation {
	var out []operation
	for _, o := range ops {
		i := slices.IndexFunc(out, func(x operation) bool { return x.mode == o.mode })
		if i < 0 {
			out = append(out, operation{mode: o.mode})
			i = len(out) - 1
		}
		out[i].parts = append(out[i].parts, o.parts...)
	}
	return out
}

// brief is an operation in a few words; "" if it could not be evaluated at all.
func (o operation) brief() string {
	parts := o.evaluated()
	if len(parts) == 0 {
		return "not evaluated"
	}
	var names []string
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, p := range parts {
		for s, v := range p.Verdicts {
			if !slices.Contains(names, v.Region.String()) {
				names = append(names, v.Region.String())
			}
			// The chord resistance tells nothing where the channel is no resistor.
			if v.Region == mos.Triode || v.Region == mos.DeepTriode {
				if r, ok := bias.Quantity(p.Device, s, "ron"); ok {
					lo, hi = extremes(lo, hi, r)
				}
			}
		}
	}
	text := strings.Join(names, "/")
	if !math.IsInf(lo, 0) {
		text += " " + resistance(lo, hi)
	}
	return text
}

// resistance is a range of resistances for a hint.
func resistance(lo, hi float64) string {
	if math.IsInf(hi, 0) {
		return quantity.Format(lo, "Ω") + "…"
	}
	return spread(lo, hi, "Ω")
}
