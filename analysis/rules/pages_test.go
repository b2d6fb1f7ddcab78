package rules_test

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"triodeck/analysis"
	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
)

// headings are those of every page, in this order.
var headings = []string{"Why", "Flags", "Accepts", "Fix", "Limits", "Sources"}

var (
	codeBlock = regexp.MustCompile("(?s)```spice\n(.*?)```")
	fileMark  = regexp.MustCompile(`(?m)^-- (\S+) --\n`)
)

// TestPages runs the decks of every rule's page: those under Flags must give the
// rule and no other, those under Accepts nothing, those under Fix not the rule.
func TestPages(t *testing.T) {
	for _, r := range rules.All {
		t.Run(r.Name, func(t *testing.T) {
			parts := sections(t, r.Text)
			for _, heading := range headings {
				if strings.TrimSpace(parts[heading]) == "" {
					t.Errorf("nothing under %s", heading)
				}
			}
			check := func(heading string, judge func(found []analysis.Finding) string) {
				blocks := codeBlock.FindAllStringSubmatch(parts[heading], -1)
				if len(blocks) == 0 {
					t.Errorf("no deck under %s", heading)
				}
				for i, b := range blocks {
					found := lintBlock(t, b[1])
					if why := judge(found); why != "" {
						t.Errorf("deck %d under %s %s:\n%s\nit gives:\n%s", i+1, heading, why, b[1], shown(found))
					}
				}
			}
			check("Flags", func(found []analysis.Finding) string {
				if len(found) == 0 {
					return "gives nothing"
				}
				for _, f := range found {
					if f.Rule != r.Name {
						return "gives another rule"
					}
				}
				return ""
			})
			silent := func(found []analysis.Finding) string {
				if len(found) > 0 {
					return "is not silent"
				}
				return ""
			}
			check("Accepts", silent)
			check("Fix", silent)
		})
	}
}

// sections cuts a page at its headings and checks that they are all there.
func sections(t *testing.T, text string) map[string]string {
	t.Helper()
	summary, rest, _ := strings.Cut(text, "\n")
	if summary == "" || !strings.HasSuffix(summary, ".") || len(summary) > 120 {
		t.Errorf("the first line is no short sentence: %q", summary)
	}
	out := map[string]string{}
	var order []string
	for _, part := range strings.Split("\n"+rest, "\n## ")[1:] {
		name, body, _ := strings.Cut(part, "\n")
		out[name] = body
		order = append(order, name)
	}
	if fmt.Sprint(order) != fmt.Sprint(headings) {
		t.Errorf("headings are %v, want %v", order, headings)
	}
	return out
}

// lintBlock lints one block: one deck, or several files under `-- name --` marks
// of which the first is the deck.
func lintBlock(t *testing.T, block string) []analysis.Finding {
	t.Helper()
	dir := t.TempDir()
	first := ""
	write := func(name, text string) {
		if first == "" {
			first = filepath.Join(dir, name)
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	marks := fileMark.FindAllStringSubmatchIndex(block, -1)
	if len(marks) == 0 {
		write("deck.sp", block)
	}
	for i, m := range marks {
		end := len(block)
		if i+1 < len(marks) {
			end = marks[i+1][0]
		}
		write(block[m[2]:m[3]], block[m[1]:end])
	}
	found, _, err := workspace.New(workspace.OS()).Lint(context.Background(), []string{first}, rules.All, nil)
	if err != nil {
		t.Fatal(err)
	}
	return found
}

func shown(found []analysis.Finding) string {
	var b strings.Builder
	for _, f := range found {
		fmt.Fprintf(&b, "  %s: %s [%s]\n", f.Severity, f.Message, f.Rule)
	}
	return b.String()
}
