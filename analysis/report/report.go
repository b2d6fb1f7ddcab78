// Package report prints findings. Its one invariant: the same findings give the
// same bytes, whoever prints them; it decides nothing and looks nothing up but
// the lines that findings stand on.
package report

import (
	"path/filepath"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// Summary counts what a run covered.
type Summary struct {
	Files        int `json:"files"`
	Evaluated    int `json:"evaluated"`    // MOSFETs with an operating point in every mode and corner
	NotEvaluated int `json:"notEvaluated"` // the others
	Errors       int `json:"errors"`
	Warnings     int `json:"warnings"`
	Notes        int `json:"notes"`
}

// Tally adds the findings to the summary's counts.
func (s *Summary) Tally(findings []analysis.Finding) {
	for _, f := range findings {
		switch f.Severity {
		case analysis.Error:
			s.Errors++
		case analysis.Warning:
			s.Warnings++
		default:
			s.Notes++
		}
	}
}

// Relative gives paths relative to a folder where they lie below it, and as they
// are elsewhere.
func Relative(folder string) func(string) string {
	return func(path string) string {
		if !filepath.IsAbs(path) {
			return path
		}
		rel, err := filepath.Rel(folder, path)
		if err != nil || rel == ".." || strings.HasPrefix(rel, ".."+string(filepath.Separator)) {
			return path
		}
		return rel
	}
}

// position is a place in lines and columns, both from 1, columns in bytes.
type position struct{ line, column, endLine, endColumn int }

func positionOf(p circuit.Place) position {
	x := p.Doc.File.Lines()
	line, column := x.Position(p.Span.Start, source.Bytes)
	endLine, endColumn := x.Position(p.Span.End, source.Bytes)
	return position{line + 1, column + 1, endLine + 1, endColumn + 1}
}
