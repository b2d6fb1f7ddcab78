package main

import (
	"cmp"
	"fmt"
	"os"
	"path/filepath"
	"slices"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser/source"
)

// mend is one edit of one file, with the finding that offers it.
type mend struct {
	doc  *circuit.Document
	edit analysis.Edit
	rule string
	at   int // line, from 1
}

// mends picks the edits to write: the safe ones, and for the rules asked for by
// name the first that a finding offers. Of two that touch the same text the
// first in the file wins; the other comes up again in the next round.
func mends(findings []analysis.Finding, named []string) []mend {
	var all []mend
	for _, f := range findings {
		for _, e := range f.Edits {
			if !e.Safe && !slices.Contains(named, f.Rule) {
				continue
			}
			doc := docOf(f, e.Path)
			if doc == nil || len(e.Edits) == 0 {
				continue
			}
			line, _ := doc.File.Lines().Position(e.Edits[0].Start, source.Bytes)
			all = append(all, mend{doc, e, f.Rule, line + 1})
			break
		}
	}
	slices.SortStableFunc(all, func(a, b mend) int {
		return cmp.Or(cmp.Compare(a.doc.Path, b.doc.Path), cmp.Compare(a.edit.Edits[0].Start, b.edit.Edits[0].Start))
	})
	var out []mend
	for _, m := range all {
		if n := len(out); n > 0 && out[n-1].doc.Path == m.doc.Path {
			last := out[n-1].edit.Edits
			if m.edit.Edits[0].Start <= last[len(last)-1].End {
				continue
			}
		}
		out = append(out, m)
	}
	return out
}

func docOf(f analysis.Finding, path string) *circuit.Document {
	if f.Place.Doc.Path == path {
		return f.Place.Doc
	}
	for _, r := range f.Related {
		if r.Place.Doc.Path == path {
			return r.Place.Doc
		}
	}
	return nil
}

// writeMends writes the edits file by file and returns those that are written; a
// file that has changed since it was read is left alone.
func writeMends(list []mend) (done []mend, err error) {
	for len(list) > 0 {
		doc := list[0].doc
		n := 0
		var edits []source.Edit
		for n < len(list) && list[n].doc.Path == doc.Path {
			edits = append(edits, list[n].edit.Edits...)
			n++
		}
		if err := rewrite(doc.Path, doc.File.Src, edits); err != nil {
			return done, err
		}
		done = append(done, list[:n]...)
		list = list[n:]
	}
	return done, nil
}

// rewrite replaces a file at once, keeping its permissions; a link keeps
// pointing to the file that it names.
func rewrite(path, seen string, edits []source.Edit) error {
	target, err := filepath.EvalSymlinks(path)
	if err != nil {
		return err
	}
	info, err := os.Stat(target)
	if err != nil {
		return err
	}
	now, err := os.ReadFile(target)
	if err != nil {
		return err
	}
	if string(now) != seen {
		return fmt.Errorf("%s is not written: its bytes are not those that were checked", path)
	}
	text, err := source.Apply(seen, edits)
	if err != nil {
		return fmt.Errorf("%s is not written: %w", path, err)
	}
	return writeFile(target, info.Mode().Perm(), func(f *os.File) error {
		_, err := f.WriteString(text)
		return err
	})
}
