package settings_test

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/rogpeppe/go-internal/txtar"

	"triodeck/analysis/circuit"
	"triodeck/analysis/settings"
	"triodeck/parser/source"
)

var update = flag.Bool("update", false, "rewrite what the cases expect")

// TestSettings reads the file of each case and compares what it says.
func TestSettings(t *testing.T) {
	cases, err := filepath.Glob("../../testdata/settings/*.txtar")
	if err != nil || len(cases) == 0 {
		t.Fatalf("no cases: %v", err)
	}
	for _, path := range cases {
		t.Run(strings.TrimSuffix(filepath.Base(path), ".txtar"), func(t *testing.T) {
			ar, err := txtar.ParseFile(path)
			if err != nil {
				t.Fatal(err)
			}
			src := ar.Files[0].Data
			got := dump(settings.Parse("chip/triodeck.toml", src), src)
			if *update {
				ar.Files = append(ar.Files[:1], txtar.File{Name: "want", Data: []byte(got)})
				if err := os.WriteFile(path, txtar.Format(ar), 0o666); err != nil {
					t.Fatal(err)
				}
				return
			}
			if diff := cmp.Diff(string(ar.Files[1].Data), got); diff != "" {
				t.Errorf("the settings differ (-want +got):\n%s", diff)
			}
		})
	}
}

// TestDescriptionIsValid holds the described file to the reader.
func TestDescriptionIsValid(t *testing.T) {
	_, rest, _ := strings.Cut(settings.Text, "```toml\n")
	block, _, ok := strings.Cut(rest, "```")
	if !ok {
		t.Fatal("the description shows no file")
	}
	f := settings.Parse("triodeck.toml", []byte(block))
	for _, p := range f.Problems {
		t.Errorf("%s: %s", where([]byte(block), p.Span), p.Message)
	}
	if len(f.Facts) != 2 || len(f.Rules) != 3 || len(f.Roots) != 2 {
		t.Errorf("%d facts, %d rules, %d roots", len(f.Facts), len(f.Rules), len(f.Roots))
	}
}

// The last setting that applies to a deck counts, level and thresholds apart.
func TestRulesFor(t *testing.T) {
	f := settings.Parse(filepath.FromSlash("chip/triodeck.toml"), []byte(`
[rules]
bulk-bias = { level = "error", margin = "100m" }
[[path]]
match = "old/*"
rules = { bulk-bias = "off" }
`))
	for deck, want := range map[string]string{"chip/a.sp": "error", "chip/old/deep/a.sp": "off", "chip/older/a.sp": "error"} {
		got := f.RulesFor(filepath.FromSlash(deck))["bulk-bias"]
		if got.Level != want || got.Thresholds["margin"] != 0.1 {
			t.Errorf("%s: %+v, want level %s", deck, got, want)
		}
	}
	unknown := f.UnknownRules([]string{"bulk-bios"})
	if len(unknown) != 2 || !strings.Contains(unknown[0].Message, `did you mean "bulk-bios"?`) {
		t.Errorf("unknown rules: %+v", unknown)
	}
}

// FuzzParse: any text is read, and every problem stands inside it.
func FuzzParse(f *testing.F) {
	cases, _ := filepath.Glob("../../testdata/settings/*.txtar")
	for _, path := range cases {
		if ar, err := txtar.ParseFile(path); err == nil {
			f.Add(ar.Files[0].Data)
		}
	}
	f.Add([]byte("model=[[{}]]\nrules=1\npath=[1]\n[include]\nroots=[[]]"))
	f.Fuzz(func(t *testing.T, src []byte) {
		for _, p := range settings.Parse("t.toml", src).Problems {
			if p.Span.Start < 0 || p.Span.End > int32(len(src)) || p.Span.Start > p.Span.End || p.Message == "" {
				t.Fatalf("problem %+v of a text of %d bytes", p, len(src))
			}
		}
	})
}

func where(src []byte, sp source.Span) string {
	line, col := source.NewLineIndex(string(src)).Position(sp.Start, source.UTF8)
	return fmt.Sprintf("%d:%d %q", line+1, col+1, src[sp.Start:sp.End])
}

func dump(f *settings.File, src []byte) string {
	var b strings.Builder
	for _, r := range f.Roots {
		fmt.Fprintf(&b, "root %s\n", filepath.ToSlash(r))
	}
	for _, fact := range f.Facts {
		fmt.Fprintf(&b, "model %s", fact.Pattern)
		if fact.Width != circuit.WidthUnstated {
			fmt.Fprintf(&b, " width=%s", map[circuit.WidthMeaning]string{circuit.WidthTotal: "total", circuit.WidthFinger: "finger"}[fact.Width])
		}
		if fact.Bare != 0 {
			fmt.Fprintf(&b, " bare=%g", fact.Bare)
		}
		if fact.Pins != nil {
			fmt.Fprintf(&b, " pins=%v", fact.Pins)
		}
		if fact.Class != "" {
			fmt.Fprintf(&b, " class=%s", fact.Class)
		}
		if fact.Fit != nil {
			fmt.Fprintf(&b, " fit=%s %s", fact.Fit.Type, values(fact.Fit.Params))
		}
		fmt.Fprintf(&b, "%s%s source=%q\n", part(" access ", fact.Access), part(" rating ", fact.Rating), fact.Source)
	}
	for _, r := range f.Rules {
		fmt.Fprintf(&b, "rule %s path=%q level=%q%s\n", r.Name, r.Path, r.Level, part(" ", r.Thresholds))
	}
	for _, p := range f.Problems {
		fmt.Fprintf(&b, "problem %s: %s\n", where(src, p.Span), p.Message)
	}
	return b.String()
}

func part(head string, m map[string]float64) string {
	if len(m) == 0 {
		return ""
	}
	return head + values(m)
}

func values(m map[string]float64) string {
	var list []string
	for name, v := range m {
		list = append(list, fmt.Sprintf("%s=%g", name, v))
	}
	sort.Strings(list)
	return strings.Join(list, " ")
}
