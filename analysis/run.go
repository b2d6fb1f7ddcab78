package analysis

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strings"
	"unicode"

	"triodeck/analysis/circuit"
	"triodeck/parser"
	"triodeck/parser/source"
)

// Run looks for everything that the rules know and gives the findings in the
// order of path, place and rule, without those that the deck allows, and no more
// than MaxPerFile a file. A cancelled context ends it early with what was found
// so far; the caller asks the context.
func Run(ctx context.Context, rules []*Rule, in Input) []Finding {
	return Limit(Collect(ctx, rules, in))
}

// Collect is Run without the limit, for callers that join several decks first.
func Collect(ctx context.Context, rules []*Rule, in Input) []Finding {
	r := &run{rules: rules, in: in, facts: NewFacts(in.Design, in.Bias), ran: map[string]bool{}}
	r.collect()
	for scope := PerFile; scope <= Last; scope++ {
		for _, rule := range rules {
			if rule.Scope != scope {
				continue
			}
			if ctx.Err() != nil {
				return Sort(r.found)
			}
			r.apply(rule)
		}
	}
	return Sort(r.found)
}

type run struct {
	rules      []*Rule
	in         Input
	facts      *Facts
	allowances []*Allowance
	ran        map[string]bool
	found      []Finding
}

// collect reads the allowances of every file concerned, each file once.
func (r *run) collect() {
	docs := r.in.Docs
	if d := r.in.Design; d != nil {
		docs = append(slices.Clone(d.Docs), docs...)
	}
	seen := map[string]bool{}
	for _, doc := range docs {
		if doc == nil || doc.File == nil || seen[doc.Path] {
			continue
		}
		seen[doc.Path] = true
		root := r.in.Design == nil || r.in.Design.Root == nil || r.in.Design.Root.Path == doc.Path
		r.allowances = append(r.allowances, allowances(doc, root)...)
	}
}

func (r *run) apply(rule *Rule) {
	switch rule.Scope {
	case PerFile:
		for _, doc := range r.in.Docs {
			r.pass(rule, doc)
		}
	case PerDesign:
		if r.in.Design == nil {
			return
		}
		r.pass(rule, nil)
	default:
		if r.in.Design == nil || r.in.Bias == nil {
			return
		}
		r.pass(rule, nil)
	}
	r.ran[rule.Name] = true
}

// pass runs a rule once. A rule that panics loses its own findings of this
// pass and is named; the others go on.
func (r *run) pass(rule *Rule, doc *circuit.Document) {
	before := len(r.found)
	p := &Pass{Facts: r.facts, Rule: rule, Doc: doc, Rules: r.rules, unused: r.unused}
	p.report = func(f Finding) {
		if f = r.tidy(f, doc); f.Place.Doc != nil && (rule.Scope == PerFile || r.facts.Foreign(f.Place.Doc) == "") {
			r.add(f)
		}
	}
	defer func() {
		if cause := recover(); cause != nil {
			r.found = r.found[:before]
			r.add(r.tidy(Finding{
				Rule: rule.Name, Severity: Warning,
				Message: fmt.Sprintf("the rule failed on this file and says nothing about it; please report this: %v", cause),
			}, doc))
		}
	}()
	rule.Run(p)
}

// add keeps a finding unless the deck allows it. Every allowance that covers it
// counts as used.
func (r *run) add(f Finding) {
	silent := false
	for _, a := range r.allowances {
		if a.covers(&f) {
			a.used, silent = true, true
		}
	}
	if !silent {
		r.found = append(r.found, f)
	}
}

// tidy gives a finding a place inside a file and a message that is one line of
// valid text.
func (r *run) tidy(f Finding, doc *circuit.Document) Finding {
	if f.Place.Doc == nil {
		if f.Place.Doc = doc; doc == nil && r.in.Design != nil {
			f.Place.Doc = r.in.Design.Root
		}
	}
	if f.Place.Doc != nil {
		n := int32(len(f.Place.Doc.File.Src))
		sp := &f.Place.Span
		sp.Start = min(max(sp.Start, 0), n)
		sp.End = min(max(sp.End, sp.Start), n)
	}
	f.Message = printable(f.Message)
	for i := range f.Related {
		f.Related[i].Message = printable(f.Related[i].Message)
	}
	return f
}

func printable(s string) string {
	return strings.Map(func(c rune) rune {
		if unicode.IsControl(c) {
			return unicode.ReplacementChar
		}
		return c
	}, strings.ToValidUTF8(s, string(unicode.ReplacementChar)))
}

// unused lists idle allowances of the root deck: those of an included file may
// serve another deck. Nothing is said where a file is missing or the rule did
// not run, for then nobody knows.
func (r *run) unused() []*Allowance {
	if r.in.Design == nil || !r.facts.Closed() {
		return nil
	}
	var list []*Allowance
	for _, a := range r.allowances {
		if !a.used && r.ran[parser.Fold(a.Rule.Text)] && a.Place.Doc.Path == r.in.Design.Root.Path {
			list = append(list, a)
		}
	}
	return list
}

// Sort orders findings by path, place and rule, and drops repetitions.
func Sort(list []Finding) []Finding {
	slices.SortStableFunc(list, compare)
	return slices.CompactFunc(list, func(a, b Finding) bool { return compare(a, b) == 0 })
}

func compare(a, b Finding) int {
	return cmp.Or(
		cmp.Compare(a.Place.Doc.Path, b.Place.Doc.Path),
		compareSpans(a.Place.Span, b.Place.Span),
		cmp.Compare(a.Rule, b.Rule),
		cmp.Compare(a.Message, b.Message),
	)
}

func compareSpans(a, b source.Span) int {
	return cmp.Or(cmp.Compare(a.Start, b.Start), cmp.Compare(a.End, b.End))
}
