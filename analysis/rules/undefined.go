package rules

import (
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/spelling"
)

// missing is one undefined name with the cards that use it, in order.
type missing struct {
	name  string // as first spelt
	scope *circuit.Scope
	uses  []circuit.Place // of the name
	parts []string        // the elements that use it
}

type missingKey struct {
	scope *circuit.Scope
	name  string
}

// missings collects undefined names, each scope's own once.
type missings struct {
	list []*missing
	seen map[missingKey]*missing
}

func (m *missings) add(s *circuit.Scope, card circuit.Place, e *parser.Element) {
	key := missingKey{s, parser.Fold(e.Model.Text)}
	was := m.seen[key]
	if was == nil {
		if m.seen == nil {
			m.seen = map[missingKey]*missing{}
		}
		was = &missing{name: e.Model.Text, scope: s}
		m.seen[key] = was
		m.list = append(m.list, was)
	}
	at := analysis.WordAt(card, e.Model)
	for _, u := range was.uses {
		if u == at {
			return // another cell of the same scope
		}
	}
	was.uses = append(was.uses, at)
	was.parts = append(was.parts, e.Name.Text)
}

// report says what is undefined, with a severity that follows what may be known.
// A part that others include, or a deck with a missing file, says nothing. A deck
// that defines none of the kind leaves them all to whoever simulates it: one note.
func (m *missings) report(p *analysis.Pass, what string, known []string) {
	if len(m.list) == 0 || !p.Whole() || !p.Closed() {
		return
	}
	if len(known) == 0 || !p.Supplied() {
		lacks, kind := what, ""
		if len(known) > 0 {
			lacks, kind = "model", what+" "
		}
		var names []string
		seen := map[string]bool{}
		for _, u := range m.list {
			if n := parser.Fold(u.name); !seen[n] {
				seen[n] = true
				names = append(names, u.name)
			}
		}
		p.Report(analysis.Finding{
			Severity: analysis.Note, Place: m.list[0].uses[0],
			Message: fmt.Sprintf("this deck defines no %s: %s%s must come from elsewhere", lacks, kind, listed(quoted(names), 5)),
		})
		return
	}
	for _, u := range m.list {
		f := analysis.Finding{
			Severity: p.Rule.Severity, Place: u.uses[0],
			Message: fmt.Sprintf("%s %q is not defined", what, u.name),
			Subject: analysis.Subject{Path: u.parts[0], Card: u.uses[0]},
		}
		if len(u.uses) > 1 {
			f.Message += fmt.Sprintf(", and %s use it", listed(u.parts, 4))
		}
		if near := spelling.Nearest(parser.Fold(u.name), known); near != "" {
			f.Message += fmt.Sprintf(": did you mean %q?", near)
		}
		p.Report(f)
	}
}
