package lsp

import (
	"context"
	"maps"
	"slices"
	"strings"

	"go.lsp.dev/protocol"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/source"
)

// findings analyses every open deck; not ok if it was cancelled. A file that an
// open deck includes is analysed as part of that deck, not as a deck itself: a
// library has no title line and no bias of its own.
func (st *state) findings(ctx context.Context, rules []*analysis.Rule) (found map[string][]analysis.Finding, ok bool) {
	found = map[string][]analysis.Finding{}
	seen := map[string]bool{}
	for _, root := range st.roots(ctx) {
		for _, f := range st.snapshot.Deck(root).Findings(ctx, rules) {
			if f.Place.Doc == nil {
				continue
			}
			path := f.Place.Doc.Path
			key := strings.Join([]string{path, f.Place.Span.String(), f.Rule, f.Message}, "\x00")
			if !seen[key] {
				seen[key] = true
				found[path] = append(found[path], f)
			}
		}
		if ctx.Err() != nil {
			return nil, false
		}
	}
	return found, ctx.Err() == nil
}

// roots are the open files that no other open file includes.
func (st *state) roots(ctx context.Context) []string {
	included := map[string]bool{}
	var roots []string
	for _, path := range slices.Sorted(maps.Keys(st.open)) {
		if included[path] {
			continue
		}
		roots = append(roots, path)
		design := st.snapshot.Deck(path).Design(ctx)
		if design == nil {
			return nil
		}
		for _, doc := range design.Docs {
			if doc.Path != path {
				included[doc.Path] = true
			}
		}
	}
	return slices.DeleteFunc(roots, func(path string) bool { return included[path] })
}

// diagnostic is a finding as the protocol has it.
func (st *state) diagnostic(enc encoding, f analysis.Finding) protocol.Diagnostic {
	d := protocol.Diagnostic{
		Range:    enc.rangeOf(f.Place.Doc.File, f.Place.Span),
		Severity: severities[f.Severity],
		Code:     protocol.String(f.Rule),
		Source:   protocol.NewOptional("triodeck"),
		Message:  protocol.String(f.Message),
	}
	for _, r := range f.Related {
		if r.Place.Doc == nil {
			continue
		}
		d.RelatedInformation = append(d.RelatedInformation, protocol.DiagnosticRelatedInformation{
			Location: protocol.Location{URI: st.uri(r.Place.Doc.Path), Range: enc.rangeOf(r.Place.Doc.File, r.Place.Span)},
			Message:  r.Message,
		})
	}
	return d
}

var severities = [...]protocol.DiagnosticSeverity{
	analysis.Note:    protocol.DiagnosticSeverityInformation,
	analysis.Warning: protocol.DiagnosticSeverityWarning,
	analysis.Error:   protocol.DiagnosticSeverityError,
}

// carried are the findings of the last pass, except those of some rules, moved
// to where their text stands after an edit; what the edit touched is left out.
func carried(last publication, doc *circuit.Document, except []*analysis.Rule) []analysis.Finding {
	old, now := changed(last.file, doc.File)
	var kept []analysis.Finding
	for _, f := range last.findings {
		sp := f.Place.Span
		switch {
		case slices.ContainsFunc(except, func(r *analysis.Rule) bool { return r.Name == f.Rule }):
			continue
		case sp.End <= old.Start:
		case sp.Start >= old.End:
			sp = sp.Shift(now.End - old.End)
		default:
			continue
		}
		f.Place = circuit.Place{Doc: doc, Card: doc.File.CardAt(sp.Start), Span: sp}
		kept = append(kept, f)
	}
	return kept
}

// changed are the spans that differ between two versions of a text: everything
// but their common beginning and end.
func changed(a, b *parser.File) (old, now source.Span) {
	s, t := a.Src, b.Src
	n := min(len(s), len(t))
	start := 0
	for start < n && s[start] == t[start] {
		start++
	}
	tail := 0
	for tail < n-start && s[len(s)-1-tail] == t[len(t)-1-tail] {
		tail++
	}
	old = source.Span{Start: int32(start), End: int32(len(s) - tail)}
	return old, source.Span{Start: int32(start), End: int32(len(t) - tail)}
}
