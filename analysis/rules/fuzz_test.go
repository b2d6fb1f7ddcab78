package rules_test

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"testing"

	"golang.org/x/tools/txtar"

	"triodeck/analysis/report"
	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
)

// FuzzLint lints any text: nothing panics, every finding stands inside its file
// with a rule and a message, and a second run prints the same bytes.
func FuzzLint(f *testing.F) {
	seeds, err := filepath.Glob(filepath.Join(casesDir, "*", "*.txtar"))
	if err != nil || len(seeds) == 0 {
		f.Fatalf("no seeds: %v", err)
	}
	for _, path := range seeds {
		a, err := txtar.ParseFile(path)
		if err != nil {
			f.Fatal(err)
		}
		for _, file := range a.Files {
			f.Add(string(file.Data))
		}
	}
	demo, err := filepath.Glob("../../testdata/demo/*")
	if err != nil {
		f.Fatal(err)
	}
	for _, path := range demo {
		data, err := os.ReadFile(path)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(string(data))
	}
	f.Fuzz(func(t *testing.T, text string) {
		if len(text) > 20_000 {
			return
		}
		once := func() []byte {
			path := filepath.Join(t.TempDir(), "deck.sp")
			files := workspace.Map{path: text}
			deck := workspace.New(files).Deck(path)
			found := deck.Findings(context.Background(), rules.All)
			for _, finding := range found {
				sp, src := finding.Place.Span, finding.Place.Doc.File.Src
				if finding.Rule == "" || finding.Message == "" || sp.Start < 0 || sp.Start > sp.End || int(sp.End) > len(src) {
					t.Fatalf("finding %+v of a text of %d bytes", finding, len(src))
				}
			}
			var b bytes.Buffer
			if err := report.Text(&b, found, report.TextOptions{Path: filepath.Base, Source: true}); err != nil {
				t.Fatal(err)
			}
			return b.Bytes()
		}
		if a, b := once(), once(); !bytes.Equal(a, b) {
			t.Errorf("two runs differ:\n%s\n%s", a, b)
		}
	})
}
