package rules

import (
	_ "embed"
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

//go:embed not-evaluated.md
var notEvaluatedText string

// NotEvaluated says which MOSFETs have no operating point, and why: once a
// cause. It speaks only in decks that have annotations.
var NotEvaluated = &analysis.Rule{
	Name: "not-evaluated", Severity: analysis.Note, Scope: analysis.PerResult, Text: notEvaluatedText, Run: notEvaluated,
}

func notEvaluated(p *analysis.Pass) {
	if !annotated(p) {
		return
	}
	g := &blanks{pass: p, causes: map[string]*blank{}, cards: map[cardKey]bool{}}
	for m := range parts(p.Bias) {
		if m.Points == nil {
			g.device(m)
		}
	}
	for _, c := range p.Bias.Checks() {
		if c.Status == bias.NotJudged {
			g.check(c)
		}
	}
	for _, b := range g.order {
		p.Report(b.finding(p.Rule.Severity))
	}
}

// annotated says whether the writer says anything about bias.
func annotated(p *analysis.Pass) bool {
	for _, s := range p.Scopes() {
		for _, n := range s.Notes {
			switch n.Note.(type) {
			case *parser.Bias, *parser.BiasFrom, *parser.Mode, *parser.Corner, *parser.Expect:
				return true
			}
		}
	}
	return false
}

// blank is one cause with the devices that it leaves blank and the expectations
// that it leaves open.
type blank struct {
	reason string   // "" for missing voltages
	nodes  []string // to annotate, as spelt
	parts  []string
	at     circuit.Place // of the first device
	checks []bias.Check
}

type blanks struct {
	pass   *analysis.Pass
	causes map[string]*blank
	order  []*blank
	cards  map[cardKey]bool
}

func (g *blanks) cause(reason string) *blank {
	b := g.causes[reason]
	if b == nil {
		b = &blank{reason: reason}
		g.causes[reason] = b
		g.order = append(g.order, b)
	}
	return b
}

func (g *blanks) device(m part) {
	if g.cards[keyOf(m.Card)] || g.saidElsewhere(m.Device) {
		return
	}
	g.cards[keyOf(m.Card)] = true
	b := g.cause(m.Reason)
	if len(b.parts) == 0 {
		b.at = m.Name()
	}
	b.parts = append(b.parts, m.Path)
	if m.Reason == "" {
		for _, n := range m.Missing {
			b.nodes = addNew(b.nodes, n)
		}
	}
}

// saidElsewhere: an undefined model is a finding of its own, and so is the file
// that should have defined it; so is a size without a bin. An encrypted block is not: it is said here.
func (g *blanks) saidElsewhere(d *bias.Device) bool {
	if s := d.Device.Size; s != nil && s.Binless && g.pass.Closed() {
		return true
	}
	if len(g.pass.Design.Sealed) > 0 {
		return false
	}
	undefined := d.Device.Model == nil && needsModel(d.Device)
	return undefined && d.Reason != "" && (g.pass.Whole() || !g.pass.Closed())
}

// check files an expectation that was not judged. Where its device is blank for a
// cause that is said already, the expectation joins that cause.
func (g *blanks) check(c bias.Check) {
	m, known := failing(g.pass.Bias, c)
	if known && m.Points == nil {
		if g.saidElsewhere(m.Device) {
			return
		}
		b := g.cause(m.Reason)
		b.checks = append(b.checks, c)
		return
	}
	b := g.cause(c.Reason)
	b.checks = append(b.checks, c)
}

// finding stands at the first expectation left open, and is a warning then, for
// an expectation that is not judged must not pass for one that is met.
func (b *blank) finding(severity analysis.Severity) analysis.Finding {
	f := analysis.Finding{Severity: severity, Place: b.at}
	why := b.reason
	if len(b.nodes) > 0 {
		why = "annotate " + listed(voltages(b.nodes), 6)
	}
	if len(b.parts) > 0 {
		f.Message = fmt.Sprintf("%s %s not evaluated: %s", listed(b.parts, 4), plural(len(b.parts), "is", "are"), why)
		f.Subject = analysis.Subject{Path: b.parts[0], Card: b.at}
	}
	if len(b.checks) == 0 {
		return f
	}
	f.Severity = analysis.Warning
	first := b.checks[0]
	f.Place = first.Place
	if len(b.parts) == 0 {
		f.Message = fmt.Sprintf("%s of %s is not judged: %s", first.Wanted, first.Subject, why)
		f.Subject = analysis.Subject{Path: first.Subject}
		if first.Wanted == "" {
			f.Message = fmt.Sprintf("the expectation on %s is not judged: %s", first.Subject, why)
		}
	} else {
		f.Message += fmt.Sprintf("; %s not judged", plural(len(b.checks), "1 expectation is", fmt.Sprintf("%d expectations are", len(b.checks))))
	}
	for _, c := range b.checks[1:min(len(b.checks), 6)] {
		f.Related = append(f.Related, analysis.Related{Place: c.Place, Message: "not judged either"})
	}
	return f
}

func voltages(nodes []string) []string {
	out := make([]string, len(nodes))
	for i, n := range nodes {
		out[i] = "v(" + n + ")"
	}
	return out
}

func addNew(list []string, s string) []string {
	for _, have := range list {
		if have == s {
			return list
		}
	}
	return append(list, s)
}
