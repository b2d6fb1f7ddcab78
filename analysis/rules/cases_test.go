package rules_test

import (
	"bytes"
	"context"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"triodeck/analysis"
	"triodeck/analysis/report"
	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
)

var update = flag.Bool("update", false, "rewrite the expected findings of the cases")

const casesDir = "../../testdata/rules"

// TestCases lints the decks of every case under testdata/rules and compares what
// is printed with its `want`. In a rule's folder a deck whose name begins with
// "speaks" must give that rule, one that begins with "quiet" must not; each rule
// has at least one of the first and two of the second.
func TestCases(t *testing.T) {
	for _, r := range rules.All {
		t.Run(r.Name, func(t *testing.T) {
			files, err := filepath.Glob(filepath.Join(casesDir, r.Name, "*.txtar"))
			if err != nil {
				t.Fatal(err)
			}
			speaks, quiet := 0, 0
			for _, path := range files {
				a, err := txtar.ParseFile(path)
				if err != nil {
					t.Fatal(err)
				}
				s, q := runCase(t, path, a, r.Name)
				speaks, quiet = speaks+s, quiet+q
			}
			if speaks < 1 || quiet < 2 {
				t.Errorf("%d decks where %s must speak and %d where it must not; there must be 1 and 2", speaks, r.Name, quiet)
			}
		})
	}
}

// TestMoreCases compares the cases that belong to no one rule: allowances, kinds
// of file, limits.
func TestMoreCases(t *testing.T) {
	files, err := filepath.Glob(filepath.Join(casesDir, "*", "*.txtar"))
	if err != nil {
		t.Fatal(err)
	}
	ran := 0
	for _, path := range files {
		if rules.ByName(filepath.Base(filepath.Dir(path))) != nil {
			continue
		}
		ran++
		t.Run(filepath.Base(filepath.Dir(path))+"/"+filepath.Base(path), func(t *testing.T) {
			a, err := txtar.ParseFile(path)
			if err != nil {
				t.Fatal(err)
			}
			dir, decks := unpack(t, a, func(name string) bool { return strings.HasSuffix(name, ".sp") })
			compareWant(t, path, a, printed(t, dir, lint(t, decks)))
		})
	}
	if ran == 0 {
		t.Error("no case")
	}
}

// unpack writes the files of a case and lists those that are decks.
func unpack(t *testing.T, a *txtar.Archive, isDeck func(name string) bool) (dir string, decks []string) {
	t.Helper()
	dir = t.TempDir()
	for _, f := range a.Files {
		if f.Name == "want" {
			continue
		}
		full := filepath.Join(dir, filepath.FromSlash(f.Name))
		if err := os.MkdirAll(filepath.Dir(full), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(full, f.Data, 0o644); err != nil {
			t.Fatal(err)
		}
		if isDeck(filepath.Base(f.Name)) {
			decks = append(decks, full)
		}
	}
	if len(decks) == 0 {
		t.Error("the case has no deck")
	}
	return dir, decks
}

func lint(t *testing.T, decks []string) []analysis.Finding {
	t.Helper()
	found, _, err := workspace.New(workspace.OS()).Lint(context.Background(), decks, rules.All, nil)
	if err != nil {
		t.Fatal(err)
	}
	return found
}

// printed is what lint shows in a terminal, without colours.
func printed(t *testing.T, dir string, found []analysis.Finding) []byte {
	t.Helper()
	var b bytes.Buffer
	shown := report.Relative(dir)
	opt := report.TextOptions{Path: func(p string) string { return filepath.ToSlash(shown(p)) }, Source: true}
	if err := report.Text(&b, found, opt); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func runCase(t *testing.T, path string, a *txtar.Archive, rule string) (speaks, quiet int) {
	t.Helper()
	dir, decks := unpack(t, a, func(name string) bool { return strings.HasPrefix(name, "speaks") || strings.HasPrefix(name, "quiet") })
	found := lint(t, decks)
	said := map[string]bool{}
	for _, f := range found {
		if f.Rule == rule {
			said[f.Place.Doc.Path] = true
			if filepath.Base(f.Place.Doc.Path) == "triodeck.toml" {
				said[filepath.Join(filepath.Dir(f.Place.Doc.Path), "speaks.sp")] = true
			}
		}
	}
	for _, deck := range decks {
		switch name := filepath.Base(deck); {
		case strings.HasPrefix(name, "speaks"):
			speaks++
			if !said[deck] {
				t.Errorf("%s: %s does not speak on %s", path, rule, name)
			}
		case said[deck]:
			t.Errorf("%s: %s speaks on %s", path, rule, name)
		default:
			quiet++
		}
	}
	compareWant(t, path, a, printed(t, dir, found))
	return speaks, quiet
}

func compareWant(t *testing.T, path string, a *txtar.Archive, got []byte) {
	t.Helper()
	at := len(a.Files)
	for i, f := range a.Files {
		if f.Name == "want" {
			at = i
		}
	}
	if at == len(a.Files) {
		a.Files = append(a.Files, txtar.File{Name: "want"})
	}
	if bytes.Equal(a.Files[at].Data, got) {
		return
	}
	if !*update {
		t.Errorf("%s: findings differ (-want +got):\n%s", path, cmp.Diff(string(a.Files[at].Data), string(got)))
		return
	}
	a.Files[at].Data = got
	if err := os.WriteFile(path, txtar.Format(a), 0o644); err != nil {
		t.Fatal(err)
	}
}
