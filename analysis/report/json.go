package report

import (
	"encoding/json"
	"io"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

type jsonReport struct {
	Findings []jsonFinding `json:"findings"`
	Summary  Summary       `json:"summary"`
}

type jsonPlace struct {
	File      string `json:"file"`
	Line      int    `json:"line"`
	Column    int    `json:"column"`
	EndLine   int    `json:"endLine"`
	EndColumn int    `json:"endColumn"`
}

type jsonFinding struct {
	jsonPlace
	Severity string        `json:"severity"`
	Rule     string        `json:"rule"`
	Message  string        `json:"message"`
	Related  []jsonRelated `json:"related,omitempty"`
	Edits    []jsonEdit    `json:"edits,omitempty"`
}

type jsonRelated struct {
	jsonPlace
	Message string `json:"message"`
}

type jsonEdit struct {
	Title   string       `json:"title"`
	Safe    bool         `json:"safe"`
	Changes []jsonChange `json:"changes"`
}

type jsonChange struct {
	jsonPlace
	Text string `json:"text"`
}

// JSON prints one object with the findings and the summary. Lines and columns
// count from 1, columns in bytes, and an end is the first byte after the span.
func JSON(w io.Writer, findings []analysis.Finding, s Summary, path func(string) string) error {
	if path == nil {
		path = func(p string) string { return p }
	}
	place := func(p circuit.Place) jsonPlace {
		q := positionOf(p)
		return jsonPlace{path(p.Doc.Path), q.line, q.column, q.endLine, q.endColumn}
	}
	r := jsonReport{Findings: []jsonFinding{}, Summary: s}
	for _, f := range findings {
		j := jsonFinding{jsonPlace: place(f.Place), Severity: f.Severity.String(), Rule: f.Rule, Message: f.Message}
		for _, rel := range f.Related {
			j.Related = append(j.Related, jsonRelated{place(rel.Place), rel.Message})
		}
		for _, e := range f.Edits {
			je := jsonEdit{Title: e.Title, Safe: e.Safe}
			for _, change := range e.Edits {
				je.Changes = append(je.Changes, jsonChange{place(circuit.Place{Doc: editDoc(f, e), Span: change.Span}), change.New})
			}
			j.Edits = append(j.Edits, je)
		}
		r.Findings = append(r.Findings, j)
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(r)
}

// editDoc is the document that an edit changes: the finding's own, or that of a
// related place.
func editDoc(f analysis.Finding, e analysis.Edit) *circuit.Document {
	for _, r := range f.Related {
		if r.Place.Doc.Path == e.Path {
			return r.Place.Doc
		}
	}
	return f.Place.Doc
}
