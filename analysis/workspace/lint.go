package workspace

import (
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"runtime"
	"slices"
	"sync"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/analysis/report"
	"triodeck/parser"
)

// Lint looks over many decks: those that Find gives for the paths. A file that
// another includes is judged as part of that one. The findings are sorted, each
// once, whatever the number of cores. The error joins the paths that could not be
// read with a cancelled context; the findings of the rest come all the same.
// Progress is called after each deck, from any goroutine, one call at a time; it
// may be nil.
func (s *Snapshot) Lint(ctx context.Context, paths []string, rules []*analysis.Rule, progress func(done, total int)) ([]analysis.Finding, report.Summary, error) {
	files, err := Find(paths)
	errs := []error{err}
	var readable []string
	for _, o := range each(ctx, files, nil, func(path string) error { _, err := s.File(path); return err }) {
		if o.out != nil {
			errs = append(errs, fmt.Errorf("%s cannot be read: %w", o.in, reason(o.out)))
		} else {
			readable = append(readable, o.in)
		}
	}
	// A library that many decks include is looked over as a file once.
	var claims asked
	judge := func(root string) judged { return s.judge(ctx, root, rules, &claims) }
	roots := s.roots(readable)
	all := each(ctx, roots, progress, judge)

	// A file may be named by an include that is never reached, in a section that
	// nobody calls; such a one is judged by itself.
	reached := map[string]bool{}
	for _, o := range all {
		for _, path := range o.out.docs {
			reached[path] = true
		}
	}
	var left []string
	for _, path := range readable {
		if !reached[path] && !slices.Contains(roots, path) {
			left = append(left, path)
		}
	}
	all = append(all, each(ctx, left, progress, judge)...)

	sum := report.Summary{Files: len(readable)}
	var findings []analysis.Finding
	for _, o := range all {
		findings = append(findings, o.out.findings...)
		sum.Evaluated += o.out.evaluated
		sum.NotEvaluated += o.out.notEvaluated
	}
	findings = analysis.Limit(analysis.Sort(findings))
	sum.Tally(findings)
	return findings, sum, errors.Join(append(errs, ctx.Err())...)
}

type judged struct {
	docs                    []string
	findings                []analysis.Finding
	evaluated, notEvaluated int
}

func (s *Snapshot) judge(ctx context.Context, root string, rules []*analysis.Rule, claims *asked) (j judged) {
	// The deck stays out of the snapshot's memory: a tree of thousands is looked
	// at once, and only the findings are kept.
	d := newDeck(root, s)
	design := d.Design(ctx)
	if design == nil {
		return j
	}
	var docs []*circuit.Document
	for _, doc := range design.Docs {
		path := filepath.Clean(doc.Path)
		j.docs = append(j.docs, path)
		if claims.add(path) || path == root {
			docs = append(docs, doc)
		}
	}
	j.findings = d.collect(ctx, rules, docs)
	j.evaluated, j.notEvaluated = coverage(d.Bias(ctx))
	return j
}

// coverage counts the MOSFETs of a result, each instance for itself: with an
// operating point in every run, and without.
func coverage(r *bias.Result) (evaluated, not int) {
	if r == nil || len(r.Runs) == 0 {
		return 0, 0
	}
	total := 0
	evaluated = -1
	for _, run := range r.Runs {
		memo := map[*bias.Context][2]int{}
		good, all := 0, 0
		for _, root := range run.Roots {
			n := tally(root, memo)
			good, all = good+n[0], all+n[1]
		}
		if total = max(total, all); evaluated < 0 || good < evaluated {
			evaluated = good
		}
	}
	return evaluated, total - evaluated
}

func tally(c *bias.Context, memo map[*bias.Context][2]int) [2]int {
	if n, ok := memo[c]; ok {
		return n
	}
	var n [2]int
	for _, d := range c.Devices {
		n[1]++
		if d.Points != nil {
			n[0]++
		}
	}
	for _, x := range c.Children {
		if x.Context != nil {
			inner := tally(x.Context, memo)
			n[0], n[1] = n[0]+inner[0], n[1]+inner[1]
		}
	}
	memo[c] = n
	return n
}

// roots are the files that no other file of the list includes.
func (s *Snapshot) roots(files []string) []string {
	included := map[string]bool{}
	for _, path := range files {
		f, err := s.File(path)
		if err != nil {
			continue
		}
		folders := []string{filepath.Dir(path)}
		if set := s.Settings(path); set != nil {
			folders = append(folders, set.Roots...)
		}
		for i := range f.Len() {
			var target parser.Word
			switch stmt := f.Card(i).Stmt.(type) {
			case *parser.Include:
				target = stmt.Path
			case *parser.Lib:
				target = stmt.Path
			default:
				continue
			}
			to := filepath.FromSlash(target.Text)
			for _, folder := range folders {
				at := to
				if !filepath.IsAbs(to) {
					at = filepath.Join(folder, to)
				}
				if at = filepath.Clean(at); at != path {
					included[at] = true
				}
			}
		}
	}
	var roots []string
	for _, path := range files {
		if !included[path] {
			roots = append(roots, path)
		}
	}
	return roots
}

type outcome[In, Out any] struct {
	in  In
	out Out
}

// each does a job for every item on all cores; the outcomes keep the order of
// the items. Items that a cancelled context leaves over are missing.
func each[In, Out any](ctx context.Context, items []In, progress func(done, total int), job func(In) Out) []outcome[In, Out] {
	results := make([]*outcome[In, Out], len(items))
	var group sync.WaitGroup
	var mu sync.Mutex
	next, done := 0, 0
	for range min(runtime.GOMAXPROCS(0), len(items)) {
		group.Go(func() {
			for {
				mu.Lock()
				i := next
				next++
				mu.Unlock()
				if i >= len(items) || ctx.Err() != nil {
					return
				}
				r := &outcome[In, Out]{in: items[i], out: job(items[i])}
				mu.Lock()
				results[i] = r
				if done++; progress != nil {
					progress(done, len(items))
				}
				mu.Unlock()
			}
		})
	}
	group.Wait()
	var list []outcome[In, Out]
	for _, r := range results {
		if r != nil {
			list = append(list, *r)
		}
	}
	return list
}
