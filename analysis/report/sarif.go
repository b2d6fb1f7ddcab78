package report

import (
	"encoding/json"
	"io"
	"net/url"
	"path/filepath"

	"github.com/owenrumney/go-sarif/v3/pkg/report/v210/sarif"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// SARIFOptions say what a log tells beside the findings.
type SARIFOptions struct {
	Path    func(string) string // how a path is shown; nil for as it is
	Version string              // of the program
	Rules   []*analysis.Rule    // every rule of the run
}

// SARIF prints the findings as a log of the OASIS Static Analysis Results
// Interchange Format, version 2.1.0. Columns count code points.
func SARIF(w io.Writer, findings []analysis.Finding, o SARIFOptions) error {
	if o.Path == nil {
		o.Path = func(p string) string { return p }
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(sarifLog(findings, o))
}

func sarifLog(findings []analysis.Finding, o SARIFOptions) *sarif.Report {
	driver := sarif.NewToolComponent().WithName("triodeck").WithVersion(o.Version)
	index := map[string]int{}
	for i, r := range o.Rules {
		index[r.Name] = i
		driver.Rules = append(driver.Rules, sarif.NewReportingDescriptor().WithID(r.Name).
			WithShortDescription(sarif.NewMultiformatMessageString().WithText(r.Summary())).
			WithHelp(sarif.NewMultiformatMessageString().WithText(r.Text).WithMarkdown(r.Text)).
			WithDefaultConfiguration(sarif.NewReportingConfiguration().WithLevel(r.Severity.String())))
	}
	run := sarif.NewRun().WithTool(sarif.NewTool().WithDriver(driver)).WithColumnKind("unicodeCodePoints")
	run.Results = []*sarif.Result{}
	for _, f := range findings {
		result := sarif.NewResult().WithRuleID(f.Rule).WithLevel(f.Severity.String()).
			WithMessage(sarif.NewMessage().WithText(f.Message)).
			WithLocations([]*sarif.Location{sarifLocation(f.Place, o.Path)})
		if i, ok := index[f.Rule]; ok {
			result.WithRuleIndex(i)
		}
		for _, r := range f.Related {
			result.RelatedLocations = append(result.RelatedLocations,
				sarifLocation(r.Place, o.Path).WithMessage(sarif.NewMessage().WithText(r.Message)))
		}
		for _, e := range f.Edits {
			result.Fixes = append(result.Fixes, sarifFix(f, e, o.Path))
		}
		run.Results = append(run.Results, result)
	}
	return sarif.NewReport().AddRun(run)
}

func sarifLocation(p circuit.Place, path func(string) string) *sarif.Location {
	return sarif.NewLocation().WithPhysicalLocation(sarif.NewPhysicalLocation().
		WithArtifactLocation(sarifFile(path(p.Doc.Path))).WithRegion(sarifRegion(p)))
}

// sarifFile writes a path as a URI: relative ones stay so.
func sarifFile(path string) *sarif.ArtifactLocation {
	u := url.URL{Path: filepath.ToSlash(path)}
	if filepath.IsAbs(path) {
		u.Scheme = "file"
		if u.Path[0] != '/' {
			u.Path = "/" + u.Path // a drive's letter
		}
	}
	return sarif.NewArtifactLocation().WithURI(u.String())
}

func sarifRegion(p circuit.Place) *sarif.Region {
	x := p.Doc.File.Lines()
	line, column := x.Position(p.Span.Start, source.UTF32)
	endLine, endColumn := x.Position(p.Span.End, source.UTF32)
	return sarif.NewRegion().WithStartLine(line + 1).WithStartColumn(column + 1).WithEndLine(endLine + 1).WithEndColumn(endColumn + 1).
		WithByteOffset(int(p.Span.Start)).WithByteLength(int(p.Span.Len()))
}

func sarifFix(f analysis.Finding, e analysis.Edit, path func(string) string) *sarif.Fix {
	doc := editDoc(f, e)
	change := sarif.NewArtifactChange().WithArtifactLocation(sarifFile(path(doc.Path)))
	for _, c := range e.Edits {
		change.Replacements = append(change.Replacements, sarif.NewReplacement().
			WithDeletedRegion(sarifRegion(circuit.Place{Doc: doc, Span: c.Span})).
			WithInsertedContent(sarif.NewArtifactContent().WithText(c.New)))
	}
	return sarif.NewFix().WithDescription(sarif.NewMessage().WithText(e.Title)).WithArtifactChanges([]*sarif.ArtifactChange{change})
}
