package main

import (
	"encoding/json"
	"errors"
	"io"
	"os"
	"os/exec"
	"slices"
	"strings"
	"testing"
)

// layer is a package with the packages of ours that it may import, and why.
type layer struct {
	may []string
	why string
}

// layers is the house: arrows go down only.
var layers = map[string]layer{
	"parser/source":      {nil, "places in a text know nothing of what the text says"},
	"parser/spelling":    {nil, "which word a misspelt one means needs only words"},
	"parser":             {[]string{"parser/source", "parser/spelling"}, "syntax knows one file and no circuit"},
	"analysis/quantity":  {nil, "writing numbers needs nothing else"},
	"analysis/mos":       {[]string{"parser/spelling"}, "device physics is a function of numbers; only the words on a card are compared"},
	"analysis/circuit":   {[]string{"analysis/quantity", "parser", "parser/source"}, "a design knows no voltages and no physics"},
	"analysis/bias":      {[]string{"analysis/circuit", "analysis/mos", "analysis/quantity", "parser", "parser/source", "parser/spelling"}, "bias stands on the circuit and the physics"},
	"analysis/settings":  {[]string{"analysis/circuit", "analysis/mos", "parser", "parser/source", "parser/spelling"}, "settings are facts about circuits, read from a text"},
	"analysis":           {[]string{"analysis/bias", "analysis/circuit", "analysis/mos", "analysis/quantity", "parser", "parser/source"}, "what a rule is does not depend on any rule"},
	"analysis/curve":     {[]string{"analysis/bias", "analysis/circuit"}, "a curve is taken out of a result"},
	"analysis/known":     {[]string{"analysis"}, "a finding is recognised by what it says and where"},
	"analysis/report":    {[]string{"analysis", "analysis/circuit", "parser", "parser/source"}, "printing findings needs only findings"},
	"analysis/rules":     {[]string{"analysis", "analysis/bias", "analysis/circuit", "analysis/mos", "analysis/quantity", "parser", "parser/source", "parser/spelling"}, "a rule sees the pass and what lies below it"},
	"analysis/workspace": {[]string{"analysis", "analysis/bias", "analysis/circuit", "analysis/report", "analysis/settings", "parser", "parser/source"}, "a snapshot is handed its rules"},
	"analysis/ide":       {[]string{"analysis", "analysis/bias", "analysis/circuit", "analysis/mos", "analysis/quantity", "analysis/workspace", "parser", "parser/source"}, "features speak in byte offsets and plain structs"},
	"lsp":                {[]string{"analysis", "analysis/circuit", "analysis/ide", "analysis/rules", "analysis/workspace", "parser", "parser/source"}, "the server converts and dispatches"},
	"cmd/triodeck":       {[]string{"analysis", "analysis/bias", "analysis/circuit", "analysis/curve", "analysis/known", "analysis/mos", "analysis/quantity", "analysis/report", "analysis/rules", "analysis/workspace", "lsp", "parser", "parser/source"}, "commands stand on everything"},
}

// only lists modules that one package alone may import.
var only = map[string]string{
	"github.com/alecthomas/participle/": "parser",
	"go.lsp.dev/":                       "lsp",
	"gonum.org/v1/gonum/":               "analysis/bias",
	"gonum.org/v1/plot":                 "cmd/triodeck",
	"github.com/alecthomas/kong":        "cmd/triodeck",
	"github.com/pelletier/go-toml/":     "analysis/settings",
	"github.com/owenrumney/go-sarif/":   "analysis/report",
}

// TestArrowsGoDown holds the imports of every package to the table above.
func TestArrowsGoDown(t *testing.T) {
	out, err := exec.Command("go", "list", "-json=ImportPath,Imports", "triodeck/...").Output()
	if err != nil {
		t.Fatalf("go list: %v", err)
	}
	seen := map[string]bool{}
	for dec := json.NewDecoder(strings.NewReader(string(out))); ; {
		var p struct {
			ImportPath string
			Imports    []string
		}
		if err := dec.Decode(&p); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		name := strings.TrimPrefix(p.ImportPath, "triodeck/")
		seen[name] = true
		l, ok := layers[name]
		if !ok {
			t.Errorf("package %s is not on the map: give it a place in layers", name)
			continue
		}
		for _, imp := range p.Imports {
			if own, ours := strings.CutPrefix(imp, "triodeck/"); ours && !slices.Contains(l.may, own) {
				t.Errorf("%s must not import %s: %s", name, own, l.why)
			}
			for module, owner := range only {
				if strings.HasPrefix(imp, module) && name != owner {
					t.Errorf("%s must not import %s: only %s does", name, imp, owner)
				}
			}
		}
	}
	for name := range layers {
		if !seen[name] {
			t.Errorf("package %s is on the map and not in the house", name)
		}
	}
}

// TestMapIsWritten holds the contributor's guide to the same table.
func TestMapIsWritten(t *testing.T) {
	guide, err := os.ReadFile("../../DEVELOPERS.md")
	if err != nil {
		t.Fatal(err)
	}
	for name := range layers {
		if !strings.Contains(string(guide), "| `"+name+"/` |") {
			t.Errorf("DEVELOPERS.md does not say what lives in %s/", name)
		}
	}
}
