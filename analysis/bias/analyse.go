package bias

import (
	"context"
	"maps"
	"slices"
	"strconv"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// analyser carries one analysis; it is used by one goroutine and then dropped.
type analyser struct {
	ctx    context.Context
	result *Result
	stmts  map[*circuit.Scope]*statements
	seen   map[problemKey]bool
}

type problemKey struct {
	doc     *circuit.Document
	start   int32
	message string
}

// Analyse evaluates a design in each of its modes at each of its corners. It
// calls load for the plain design, and once more for each corner that swaps a
// library section or sets a parameter. It cannot fail; when ctx ends early, the
// result holds the runs done so far.
func Analyse(ctx context.Context, load func(circuit.Options) *circuit.Design) *Result {
	a := &analyser{ctx: ctx, stmts: map[*circuit.Scope]*statements{}, seen: map[problemKey]bool{}}
	plain := load(circuit.Options{})
	a.result = &Result{Design: plain}
	roots := a.roots(plain)
	a.result.Modes = union(roots, func(r root) []string { return r.modes })
	a.result.Corners = union(roots, func(r root) []string { return r.corners })
	for _, corner := range a.result.Corners {
		design, tweaks := a.atCorner(plain, corner, load)
		cornerRoots := roots
		if design != plain {
			cornerRoots = a.roots(design)
		}
		for _, mode := range a.result.Modes {
			if ctx.Err() != nil {
				return a.result
			}
			run := &Run{Mode: mode, Corner: corner, TempC: a.tempAt(design, corner), Design: design}
			w := newWorker(a, run, tweaks)
			for _, r := range cornerRoots {
				if slices.Contains(r.modes, mode) && slices.Contains(r.corners, corner) {
					run.Roots = append(run.Roots, w.root(r.cell, r.cell != design.Main))
				}
			}
			if len(run.Roots) > 0 {
				a.result.Runs = append(a.result.Runs, run)
			}
		}
	}
	a.checkNames(plain)
	return a.result
}

// root is a cell that is analysed for itself, with the modes and corners that
// its annotations define; the top level's corners hold for every root.
type root struct {
	cell           *circuit.Cell
	modes, corners []string
}

func (a *analyser) roots(d *circuit.Design) []root {
	top := a.statements(d.Top)
	corners := []string{""}
	for _, c := range top.corners {
		corners = append(corners, c.name)
	}
	var out []root
	if len(d.Main.Devices)+len(d.Main.Instances) > 0 || len(d.Alone) == 0 {
		out = append(out, root{d.Main, orPlain(top.modes), corners})
	}
	for _, cell := range d.Alone {
		st := a.statements(cell.Scope)
		own := slices.Clone(corners)
		for _, c := range st.corners {
			own = append(own, c.name)
		}
		out = append(out, root{cell, orPlain(st.modes), own})
	}
	return out
}

func orPlain(modes []string) []string {
	if len(modes) == 0 {
		return []string{""}
	}
	return modes
}

// union keeps the order of first appearance.
func union(roots []root, of func(root) []string) []string {
	var out []string
	seen := map[string]bool{}
	for _, r := range roots {
		for _, name := range of(r) {
			if !seen[name] {
				seen[name] = true
				out = append(out, name)
			}
		}
	}
	return out
}

func (a *analyser) statements(s *circuit.Scope) *statements {
	st, ok := a.stmts[s]
	if !ok {
		st = collect(s)
		a.stmts[s] = st
	}
	return st
}

// problem records a problem once, however many runs meet it.
func (a *analyser) problem(kind ProblemKind, place circuit.Place, message string) {
	key := problemKey{place.Doc, place.Span.Start, message}
	if a.seen[key] {
		return
	}
	a.seen[key] = true
	a.result.Problems = append(a.result.Problems, Problem{kind, place, message})
}

// tweaks are a corner's changes to model parameters.
type tweaks []tweak

type tweak struct {
	name  string // folded
	op    byte
	value float64
}

// atCorner gives the design at a corner: the plain one unless the corner swaps a
// section or sets top-level parameters. What names no parameter of the deck is a
// change to model parameters.
func (a *analyser) atCorner(plain *circuit.Design, name string, load func(circuit.Options) *circuit.Design) (*circuit.Design, tweaks) {
	opt := circuit.Options{Params: map[string]string{}}
	var out tweaks
	for _, c := range a.allCorners(plain) {
		if c.name != name {
			continue
		}
		if !c.Lib.IsZero() {
			opt.Section = c.Lib.Text
		}
		for _, t := range c.Tweaks {
			v, err := plain.Main.Env.Eval(t.Value)
			if err != nil {
				a.problem(NotEvaluated, placeOf(c.note, t.Value.Span().Start, t.Value.Span().End), err.Error())
				continue
			}
			folded := parser.Fold(t.Name.Text)
			if len(plain.Top.Params[folded]) == 0 {
				out = append(out, tweak{folded, t.Op, v})
				continue
			}
			was := plain.Main.Env.Param(folded)
			opt.Params[folded] = strconv.FormatFloat(apply(was.V, t.Op, v), 'g', -1, 64)
		}
	}
	if opt.Section == "" && len(opt.Params) == 0 {
		return plain, out
	}
	return load(opt), out
}

// apply sets, shifts or scales.
func apply(was float64, op byte, v float64) float64 {
	switch op {
	case '+':
		return was + v
	case '-':
		return was - v
	case '*':
		return was * v
	}
	return v
}

// allCorners lists the corners of the top level and of the subckts analysed alone.
func (a *analyser) allCorners(d *circuit.Design) []cornerAt {
	out := slices.Clone(a.statements(d.Top).corners)
	for _, cell := range d.Alone {
		out = append(out, a.statements(cell.Scope).corners...)
	}
	return out
}

// tempAt is the temperature in °C of a corner: the corner's own, or the deck's.
func (a *analyser) tempAt(d *circuit.Design, name string) float64 {
	t := d.TempC
	for _, c := range a.allCorners(d) {
		if c.name != name || c.Temp == nil {
			continue
		}
		v, err := d.Main.Env.Eval(c.Temp)
		if err != nil {
			a.problem(NotEvaluated, placeOf(c.note, c.Temp.Span().Start, c.Temp.Span().End), err.Error())
			continue
		}
		t = v
	}
	return t
}

// known lists the folded mode and corner names that annotations of a scope may
// speak of: those of the scope itself, of its parents, and of the top level.
func (a *analyser) known(d *circuit.Design, s *circuit.Scope) (modes, corners map[string]bool) {
	modes, corners = map[string]bool{}, map[string]bool{}
	add := func(s *circuit.Scope) {
		st := a.statements(s)
		maps.Copy(modes, setOf(st.modes))
		for _, c := range st.corners {
			corners[c.name] = true
		}
	}
	for ; s != nil; s = s.Parent {
		add(s)
	}
	add(d.Top)
	return modes, corners
}

func setOf(list []string) map[string]bool {
	out := map[string]bool{}
	for _, s := range list {
		out[s] = true
	}
	return out
}
