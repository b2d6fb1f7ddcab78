// Package known holds findings that a team has seen and lives with, so that only
// new ones count. Its one invariant: a finding is recognised by its rule, its
// file and the text of its line, never by its number; who changes the line sees
// the finding again.
package known

import (
	"cmp"
	"encoding/json"
	"fmt"
	"io"
	"path/filepath"
	"slices"
	"strings"

	"triodeck/analysis"
)

// Entry is one recorded finding, or several that read alike.
type Entry struct {
	File  string `json:"file"` // with slashes, relative to the working folder where it lies below it
	Rule  string `json:"rule"`
	Line  string `json:"line"` // the line's text, blanks collapsed
	Count int    `json:"count"`
}

type list struct {
	About string  `json:"about"`
	Known []Entry `json:"known"`
}

const about = "Findings that were here when this was recorded; `triodeck lint --known FILE` passes over them. Rewrite with --record."

type key struct{ file, rule, line string }

// Of lists the findings as entries, sorted. Path says how a file is named.
func Of(findings []analysis.Finding, path func(string) string) []Entry {
	count := map[key]int{}
	for _, f := range findings {
		count[keyOf(f, path)]++
	}
	out := make([]Entry, 0, len(count))
	for k, n := range count {
		out = append(out, Entry{k.file, k.rule, k.line, n})
	}
	slices.SortFunc(out, func(a, b Entry) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Rule, b.Rule), cmp.Compare(a.Line, b.Line))
	})
	return out
}

// Write prints the entries as JSON, one a line so that a change reads well.
func Write(w io.Writer, entries []Entry) error {
	var b strings.Builder
	fmt.Fprintf(&b, "{\n  \"about\": %s,\n  \"known\": [", quoted(about))
	for i, e := range entries {
		if i > 0 {
			b.WriteString(",")
		}
		fmt.Fprintf(&b, "\n    {\"file\": %s, \"rule\": %s, \"line\": %s, \"count\": %d}", quoted(e.File), quoted(e.Rule), quoted(e.Line), e.Count)
	}
	if len(entries) > 0 {
		b.WriteString("\n  ")
	}
	b.WriteString("]\n}\n")
	_, err := io.WriteString(w, b.String())
	return err
}

func quoted(s string) string {
	var b strings.Builder
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	_ = enc.Encode(s) // a string always encodes
	return strings.TrimSuffix(b.String(), "\n")
}

// Read reads what Write wrote.
func Read(r io.Reader) ([]Entry, error) {
	var l list
	dec := json.NewDecoder(r)
	dec.DisallowUnknownFields()
	if err := dec.Decode(&l); err != nil {
		return nil, err
	}
	for i, e := range l.Known {
		if e.Count < 1 || e.Rule == "" {
			return nil, fmt.Errorf("entry %d names no rule or counts nothing", i+1)
		}
	}
	return l.Known, nil
}

// Split parts the findings into new ones and the number that are known, and
// lists the entries that nothing answers to any more.
func Split(findings []analysis.Finding, entries []Entry, path func(string) string) (fresh []analysis.Finding, known int, gone []Entry) {
	left := map[key]int{}
	for _, e := range entries {
		left[key{e.File, e.Rule, e.Line}] += e.Count
	}
	for _, f := range findings {
		if k := keyOf(f, path); left[k] > 0 {
			left[k]--
			known++
			continue
		}
		fresh = append(fresh, f)
	}
	for _, e := range entries {
		k := key{e.File, e.Rule, e.Line}
		if n := left[k]; n > 0 {
			e.Count = min(n, e.Count)
			left[k] -= e.Count
			gone = append(gone, e)
		}
	}
	return fresh, known, gone
}

func keyOf(f analysis.Finding, path func(string) string) key {
	x := f.Place.Doc.File.Lines()
	sp := x.LineSpan(x.Line(f.Place.Span.Start))
	line := strings.ToValidUTF8(f.Place.Doc.File.Src[sp.Start:sp.End], "�")
	return key{filepath.ToSlash(path(f.Place.Doc.Path)), f.Rule, strings.Join(strings.Fields(line), " ")}
}
