// Package settings reads triodeck.toml, which says what no deck can: where
// libraries lie, what is known about models, how strict to be. Its one
// invariant: reading cannot fail; what is wrong in the file is a problem at its
// place, and the rest holds. It finds and opens no file itself.
package settings

import (
	_ "embed"
	"path/filepath"

	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// Name is the file's name; it is looked for in the deck's folder and upward.
const Name = "triodeck.toml"

// Text is the file's description, markdown.
//
//go:embed settings.md
var Text string

// File is one settings file.
type File struct {
	Path     string
	Roots    []string      // folders to look for includes in, after the including file's own
	Facts    circuit.Facts // about models and subckts, the first that states a thing counts
	Rules    []Rule        // levels and thresholds in the order of the text: the last that applies counts
	Problems []Problem     // in the order of the text
}

// Rule is what the settings say of one rule for the decks of a path.
type Rule struct {
	Path       string // pattern of paths below the file's folder, with `/`; "" for all
	Name       string
	Level      string             // error, warning, note, off; "" if not stated
	Thresholds map[string]float64 // SI, by name; nil if none
	Span       source.Span        // of the rule's name
}

// Problem is one thing wrong in the file.
type Problem struct {
	Span    source.Span
	Message string // one lower-case sentence
}

// RulesFor gives what the settings say for one deck, by the rule's name.
func (f *File) RulesFor(deck string) map[string]Rule {
	below := filepath.ToSlash(relative(filepath.Dir(f.Path), deck))
	got := map[string]Rule{}
	for _, r := range f.Rules {
		if r.Path != "" && !circuit.Match(r.Path, below) {
			continue
		}
		was := got[r.Name]
		was.Name, was.Span = r.Name, r.Span
		if r.Level != "" {
			was.Level = r.Level
		}
		merged := map[string]float64{}
		for _, from := range []map[string]float64{was.Thresholds, r.Thresholds} {
			for name, v := range from {
				merged[name] = v
			}
		}
		was.Thresholds = merged
		got[r.Name] = was
	}
	return got
}

// relative is a path below a folder, of which one may be written from the root and
// the other from the working folder.
func relative(folder, path string) string {
	if below, err := filepath.Rel(folder, path); err == nil {
		return below
	}
	from, err1 := filepath.Abs(folder)
	to, err2 := filepath.Abs(path)
	if err1 != nil || err2 != nil {
		return path
	}
	below, err := filepath.Rel(from, to)
	if err != nil {
		return path
	}
	return below
}

// UnknownRules lists the settings of rules that do not exist.
func (f *File) UnknownRules(known []string) []Problem {
	var list []Problem
	for _, r := range f.Rules {
		found := false
		for _, name := range known {
			found = found || name == r.Name
		}
		if !found {
			list = append(list, Problem{r.Span, "there is no rule \"" + r.Name + "\"" + didYouMean(r.Name, known)})
		}
	}
	return list
}
