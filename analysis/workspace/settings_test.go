package workspace_test

import (
	"context"
	"path/filepath"
	"strings"
	"testing"

	"triodeck/analysis/bias"
	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
	"triodeck/parser"
)

const settingsDeck = `settings at work
.include "models.inc"
M1 d g 0 0 nch W=2u L=0.18u nf=2
X1 d g 0 0 sealed w=2u l=0.18u
*@ bias v(d)=1.8 v(g)=1.8
`

const settingsText = `[include]
roots = ["pdk"]
[[model]]
name = "nch"
width = "per finger"
access = { rsw = 100 }
rating = { vds = 1.5 }
source = "process manual"
[[model]]
name = "sealed"
class = "nmos"
fit = { type = "nmos", vto = 0.4, kp = "280u" }
source = "bench data"
[rules]
`

func settingsFiles(text string) workspace.Map {
	files := workspace.Map{
		"chip/blocks/deck.sp":     settingsDeck,
		"chip/pdk/models.inc":     ".model nch nmos level=1 vto=0.4 kp=280u\n",
		"chip/triodeck.toml":      text,
		"elsewhere/triodeck.toml": "[include]\nroots = [\"nothing\"]\n",
	}
	native := workspace.Map{}
	for path, text := range files {
		native[filepath.FromSlash(path)] = text
	}
	return native
}

func devicesOf(t *testing.T, s *workspace.Snapshot) map[string]bias.Row {
	t.Helper()
	r := s.Deck(filepath.FromSlash("chip/blocks/deck.sp")).Bias(context.Background())
	got := map[string]bias.Row{}
	for row := range r.Rows(r.Runs[0]) {
		got[row.Path] = row
	}
	return got
}

// What the settings state reaches the devices, each with its source.
func TestSettingsReachDevices(t *testing.T) {
	got := devicesOf(t, workspace.New(settingsFiles(settingsText)))
	m1, x1 := got["M1"], got["X1"]
	if m1.Points == nil || x1.Points == nil {
		t.Fatalf("not evaluated: %q, %q", m1.Reason, x1.Reason)
	}
	if m1.Geometry.W != 4e-6 || m1.Geometry.RS != 25 {
		t.Errorf("M1 has W %g and RS %g, want 4 µm and 25 Ω", m1.Geometry.W, m1.Geometry.RS)
	}
	notes := strings.Join(append(m1.Notes, x1.Notes...), "\n")
	for _, want := range []string{"W is that of one finger: process manual", "access resistance included: process manual", "a stand-in: the numbers come from the fit, not from a model card: bench data"} {
		if !strings.Contains(notes, want) {
			t.Errorf("no note %q in:\n%s", want, notes)
		}
	}
}

// A rating and a mistake in the file are findings, the mistake in the file itself.
func TestSettingsFindings(t *testing.T) {
	s := workspace.New(settingsFiles(settingsText + "[modle]\n"))
	var got []string
	for _, f := range s.Deck(filepath.FromSlash("chip/blocks/deck.sp")).Findings(context.Background(), rules.All) {
		got = append(got, filepath.ToSlash(f.Place.Doc.Path)+": "+f.Message+" ["+f.Rule+"]")
	}
	all := strings.Join(got, "\n")
	for _, want := range []string{
		`chip/triodeck.toml: unknown key "modle": did you mean "model"? [settings]`,
		`chip/blocks/deck.sp: VDS of M1 reaches 1.800 V, beyond its rating of 1.500 V for "nch" (process manual) [rating-exceeded]`,
	} {
		if strings.Count(all, want) != 1 {
			t.Errorf("want once: %s\ngot:\n%s", want, all)
		}
	}
}

// A change of the settings changes what follows from them, and so does a nearer
// file that appears.
func TestSettingsFollowEdits(t *testing.T) {
	s := workspace.New(settingsFiles(settingsText))
	if w := devicesOf(t, s)["M1"].Geometry.W; w != 4e-6 {
		t.Fatalf("W is %g", w)
	}
	s = s.With(filepath.FromSlash("chip/triodeck.toml"), parser.Parse([]byte(strings.Replace(settingsText, "per finger", "total", 1))))
	if w := devicesOf(t, s)["M1"].Geometry.W; w != 2e-6 {
		t.Errorf("after the edit W is %g, want 2 µm", w)
	}
	s = s.With(filepath.FromSlash("chip/blocks/triodeck.toml"), parser.Parse([]byte("[include]\nroots = [\"../pdk\"]\n")))
	if _, ok := devicesOf(t, s)["X1"]; ok {
		t.Error("the nearer settings say nothing of X1, and it is still a transistor")
	}
}

// Levels hold for the decks of their path; a rule that does not exist is said.
func TestSettingsLevels(t *testing.T) {
	for _, test := range []struct{ rules, want, not string }{
		{"rating-exceeded = \"note\"", "note VDS of M1", "error VDS of M1"},
		{"rating-exceeded = \"off\"", "", "VDS of M1"},
		{"rating-exceed = \"off\"", `error there is no rule "rating-exceed"`, "note VDS"},
		{"rating-exceeded = \"warning\"\n[[path]]\nmatch = \"other/*\"\nrules = { rating-exceeded = \"off\" }", "warning VDS of M1", "error"},
	} {
		s := workspace.New(settingsFiles(settingsText + test.rules + "\n"))
		var got []string
		for _, f := range s.Deck(filepath.FromSlash("chip/blocks/deck.sp")).Findings(context.Background(), rules.All) {
			got = append(got, f.Severity.String()+" "+f.Message)
		}
		all := strings.Join(got, "\n")
		if !strings.Contains(all, test.want) || strings.Contains(all, test.not) {
			t.Errorf("%s: want %q and not %q in:\n%s", test.rules, test.want, test.not, all)
		}
	}
}
