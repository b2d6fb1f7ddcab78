package settings

import (
	"fmt"
	"math"
	"path/filepath"
	"sort"
	"strings"

	"triodeck/parser"
	"triodeck/parser/source"
)

// Parse reads a settings file; path is where it lies, for what it names relative
// to itself.
func Parse(path string, src []byte) *File {
	r := &reader{file: &File{Path: path}}
	root, bad := parseTree(src)
	if bad != nil {
		r.file.Problems = append(r.file.Problems, *bad)
		return r.file
	}
	r.table(root, "", fields{
		"include": func(n *node) { r.table(n, "include", fields{"roots": r.roots}) },
		"model":   func(n *node) { r.each(n, r.model) },
		"rules":   func(n *node) { r.rules(n, "") },
		"path":    func(n *node) { r.each(n, r.path) },
	})
	sort.SliceStable(r.file.Problems, func(a, b int) bool { return r.file.Problems[a].Span.Start < r.file.Problems[b].Span.Start })
	return r.file
}

// reader turns the tree into settings.
type reader struct{ file *File }

// fields says what to do with each key of a table.
type fields map[string]func(*node)

func (r *reader) problem(at source.Span, format string, args ...any) {
	r.file.Problems = append(r.file.Problems, Problem{at, fmt.Sprintf(format, args...)})
}

// table hands each field to its reader; a key that has none is a problem.
func (r *reader) table(n *node, name string, known fields) bool {
	if n.kind != tableValue {
		r.problem(n.span, "%q is to be a table", name)
		return false
	}
	for _, f := range n.fields {
		read, ok := known[f.key]
		if !ok {
			where := ""
			if name != "" {
				where = fmt.Sprintf(" in %q", name)
			}
			r.problem(f.at, "unknown key %q%s%s", f.key, where, didYouMean(f.key, keys(known)))
			continue
		}
		read(f)
	}
	return true
}

// each reads the tables of `[[key]]`.
func (r *reader) each(n *node, read func(*node)) {
	if n.kind != arrayValue {
		r.problem(n.at, "%q stands for a list of tables: write [[%s]]", n.key, n.key)
		return
	}
	for _, item := range n.items {
		if item.kind != tableValue {
			r.problem(item.span, "%q stands for a list of tables: write [[%s]]", n.key, n.key)
			continue
		}
		read(item)
	}
}

func (r *reader) roots(n *node) {
	for _, folder := range r.texts(n) {
		if folder = filepath.FromSlash(folder); !filepath.IsAbs(folder) {
			folder = filepath.Join(filepath.Dir(r.file.Path), folder)
		}
		r.file.Roots = append(r.file.Roots, folder)
	}
}

// texts reads a list of strings, or one.
func (r *reader) texts(n *node) []string {
	if n.kind == stringValue {
		return []string{n.text}
	}
	if n.kind != arrayValue {
		r.problem(n.span, "%q is to be a list of texts", n.key)
		return nil
	}
	var list []string
	for _, item := range n.items {
		if item.kind != stringValue {
			r.problem(item.span, "%q is to be a list of texts", n.key)
			continue
		}
		list = append(list, item.text)
	}
	return list
}

func (r *reader) text(n *node) (string, bool) {
	if n.kind != stringValue {
		r.problem(n.span, "%q is to be a text in quotes", n.key)
		return "", false
	}
	return n.text, true
}

// word reads one of a few words.
func (r *reader) word(n *node, known ...string) (string, bool) {
	got, ok := r.text(n)
	if !ok {
		return "", false
	}
	folded := parser.Fold(got)
	for _, k := range known {
		if folded == k {
			return k, true
		}
	}
	r.problem(n.span, "%q is none of %s%s", got, strings.Join(known, ", "), didYouMean(folded, known))
	return "", false
}

// number reads a number, or a text that is one with an engineering suffix.
func (r *reader) number(n *node) (float64, bool) {
	if n.kind == numberValue && !math.IsInf(n.number, 0) && !math.IsNaN(n.number) {
		return n.number, true
	}
	if n.kind == stringValue {
		if x, ok := parser.ParseNumber(n.text); ok {
			return x.Value, true
		}
	}
	r.problem(n.span, "%q is to be a number, such as 0.42 or \"280u\"", n.key)
	return 0, false
}

// numbers reads a table of numbers; without known names any are taken.
func (r *reader) numbers(n *node, known ...string) map[string]float64 {
	got := map[string]float64{}
	if n.kind != tableValue {
		r.problem(n.span, "%q is to be a table of numbers", n.key)
		return nil
	}
	for _, f := range n.fields {
		name := parser.Fold(f.key)
		if len(known) > 0 && !contains(known, name) {
			r.problem(f.at, "unknown key %q in %q%s", f.key, n.key, didYouMean(name, known))
			continue
		}
		if x, ok := r.number(f); ok {
			got[name] = x
		}
	}
	return got
}

func contains(list []string, s string) bool {
	for _, have := range list {
		if have == s {
			return true
		}
	}
	return false
}

func keys(known fields) []string {
	var list []string
	for k := range known {
		list = append(list, k)
	}
	sort.Strings(list)
	return list
}
