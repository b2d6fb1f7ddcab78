package circuit

import (
	"path/filepath"

	"triodeck/parser"
)

// condKey names a conditional at the top level. A file read twice has one key
// and one answer, which is right: its test sees the same names both times.
type condKey struct {
	path string
	card int
}

// topCond is a top-level conditional being read.
type topCond struct {
	arm     int // index of the arm being read
	chosen  int
	pending *pendingCond // nil once decided
}

// pendingCond is a top-level conditional without a decision.
type pendingCond struct {
	key  condKey
	arms []*Branch
}

// refusal is a test that did not evaluate, kept between rounds.
type refusal struct {
	key     condKey
	at      Place
	kind    ProblemKind
	name    string
	message string
}

// cond reads `.if`, `.elseif`, `.else` or `.endif`.
func (r *reading) cond(w *walk, i int, c *parser.Cond) {
	if c.Kind == parser.If {
		r.openCond(w, i, c)
		return
	}
	at := place(w.doc, i, spanOf(w.doc, i))
	if n := len(w.blocks); n == 0 || w.blocks[n-1].subckt != nil {
		r.problems.add(BlockStray, at, condWord(c.Kind), "%s without its .if", condWord(c.Kind))
		return
	}
	b := w.blocks[len(w.blocks)-1]
	if c.Kind == parser.EndIf {
		r.pop(w)
		return
	}
	arm := &Branch{Cond: b.cond, Else: c.Kind == parser.Else, Test: c.Test, Place: at}
	switch {
	case b.cond != nil:
		b.cond.Arms = append(b.cond.Arms, arm)
		r.branch = arm
	case b.top != nil:
		b.top.arm++
		if b.top.pending != nil {
			b.top.pending.arms = append(b.top.pending.arms, arm)
		}
		b.skip = b.top.pending != nil || b.top.arm != b.top.chosen
	}
}

func (r *reading) openCond(w *walk, i int, c *parser.Cond) {
	b := &block{card: i, skip: w.skipping()}
	if !r.push(w, b, ".if") || b.skip {
		return
	}
	arm := &Branch{Test: c.Test, Place: place(w.doc, i, spanOf(w.doc, i))}
	if r.scope.Subckt != nil {
		b.cond = &Conditional{Place: arm.Place, Within: r.branch, Arms: []*Branch{arm}}
		arm.Cond = b.cond
		r.scope.conds = append(r.scope.conds, b.cond)
		r.branch = arm
		return
	}
	key := condKey{filepath.Clean(w.doc.Path), i}
	b.top = &topCond{}
	if chosen, ok := r.chosen[key]; ok {
		b.top.chosen = chosen
		b.skip = chosen != 0
		return
	}
	b.top.pending = &pendingCond{key: key, arms: []*Branch{arm}}
	b.skip = true
	r.pending = append(r.pending, b.top.pending)
}

// decide chooses the arms of the pending conditionals. A test that names a
// parameter not known yet waits for a later round, in which another arm may have
// defined it; when none can be decided, or in the last round, those left choose none.
func (r *reading) decide(last bool) {
	env := newEnv(r.design.Top, nil, r.topArgs(), &conditions{tempC: r.tempC()})
	var waiting []*pendingCond
	errs := map[*pendingCond]Value{}
	for _, p := range r.pending {
		arm, failed := chooseArm(env, p.arms)
		if ev := asEvalError(failed.Err); ev != nil && ev.Kind == Undefined && !last {
			waiting = append(waiting, p)
			errs[p] = failed
			continue
		}
		r.settle(p, arm, failed)
	}
	if len(waiting) == len(r.pending) {
		for _, p := range waiting {
			r.settle(p, -1, errs[p])
		}
	}
}

func (r *reading) settle(p *pendingCond, arm int, failed Value) {
	r.chosen[p.key] = arm
	if failed.Err == nil {
		return
	}
	if r.design.Top.IsOpen() {
		return // the name may well be in the file that is missing
	}
	if kind, at, name, message, ok := describe(failed.Err); ok {
		r.refused = append(r.refused, refusal{p.key, at, kind, name, message})
	}
}

// chooseArm gives the index of the first arm whose test is true, -1 if none is.
// A test that does not evaluate ends the search, since what follows depends on it.
func chooseArm(env *Env, arms []*Branch) (int, Value) {
	for k, b := range arms {
		if b.Else {
			return k, Value{}
		}
		v := env.valueAt(b.Test, b.Place.Doc, b.Place.Card)
		if v.Err != nil {
			return -1, v
		}
		if v.V != 0 {
			return k, v
		}
	}
	return -1, Value{}
}

func condWord(k parser.CondKind) string {
	return [...]string{".if", ".elseif", ".else", ".endif"}[k]
}
