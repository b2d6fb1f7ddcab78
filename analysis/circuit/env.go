package circuit

import (
	"sync"

	"triodeck/parser"
)

// Env evaluates expressions with the names of one cell: the instance's values,
// then the subckt's own parameters, then those around it. Values are worked out
// when first asked for and kept. It is safe for concurrent use.
type Env struct {
	scope      *Scope
	parent     *Env
	args       map[string]Value // what the instance gives, by folded name
	inactive   map[*Branch]bool // the conditional arms that this cell does not choose
	conditions *conditions
	failed     []error // conditional tests that did not evaluate

	mu     sync.Mutex // guards the two below; never held while evaluating
	known  map[string]Value
	models map[modelKey]*Model
}

// conditions are what every expression of a design sees.
type conditions struct{ tempC float64 }

// newEnv makes the environment of a scope and chooses its conditional arms.
func newEnv(s *Scope, parent *Env, args map[string]Value, c *conditions) *Env {
	e := &Env{scope: s, parent: parent, args: args, conditions: c, known: map[string]Value{}}
	if len(s.conds) == 0 {
		return e
	}
	// Until its conditional is decided an arm defines nothing, so that a test
	// sees the parameters that stand before it.
	e.inactive = map[*Branch]bool{}
	for _, c := range s.conds {
		for _, b := range c.Arms {
			e.inactive[b] = true
		}
	}
	for _, c := range s.conds {
		if !e.active(c.Within) {
			continue
		}
		k, failed := chooseArm(e, c.Arms)
		if failed.Err != nil {
			e.failed = append(e.failed, failed.Err)
		}
		if k >= 0 {
			delete(e.inactive, c.Arms[k])
			clear(e.known)
		}
	}
	return e
}

// active says whether the cell has what stands in a branch.
func (e *Env) active(b *Branch) bool { return b == nil || !e.inactive[b] }

// Eval gives the value of an expression in SI units. The error is an *EvalError.
func (e *Env) Eval(x parser.Expr) (float64, error) { return e.EvalWith(x, nil) }

// EvalWith is Eval with circuit quantities: probes gives the value of `v(node)`
// and the like, in volts or amperes. Without it they are unsupported.
func (e *Env) EvalWith(x parser.Expr, probes func(*parser.Probe) (float64, error)) (float64, error) {
	steps := 0
	ev := evaluation{env: e, probes: probes, steps: &steps}
	return ev.eval(x)
}

// Value gives the number that a value of a card stands for. A place in its error
// is relative to that card unless the cause stands elsewhere.
func (e *Env) Value(v parser.Value) Value {
	steps := 0
	ev := evaluation{env: e, steps: &steps}
	return ev.value(v)
}

// valueAt is Value with errors placed on the value's card.
func (e *Env) valueAt(v parser.Value, doc *Document, card int) Value {
	got := e.Value(v)
	if got.Err != nil {
		got.Err = locate(got.Err, doc, card)
	}
	return got
}

// Param gives the value of a parameter by its name; Set is false if there is none.
func (e *Env) Param(name string) Value {
	steps := 0
	ev := evaluation{env: e, steps: &steps}
	v, ok := ev.param(parser.Fold(name), nil)
	if !ok {
		return Value{}
	}
	return v
}

// Def gives the definition that counts for a parameter's name, nil if the
// instance gives the value or there is none.
func (e *Env) Def(name string) *ParamDef {
	name = parser.Fold(name)
	for ; e != nil; e = e.parent {
		if _, ok := e.args[name]; ok {
			return nil
		}
		if k := e.last(name, -1); k >= 0 {
			return e.scope.Params[name][k]
		}
	}
	return nil
}

// has says whether a parameter of the folded name exists, without evaluating it.
func (e *Env) has(name string) bool {
	for ; e != nil; e = e.parent {
		if _, ok := e.args[name]; ok || e.last(name, -1) >= 0 {
			return true
		}
	}
	return false
}

// last gives the index of the last active definition of a parameter before
// index limit (-1: any), -1 if there is none. The last one counts.
func (e *Env) last(name string, limit int) int {
	defs := e.scope.Params[name]
	if limit < 0 {
		limit = len(defs)
	}
	for k := limit - 1; k >= 0; k-- {
		if defs[k].Func == nil && e.active(defs[k].Branch) {
			return k
		}
	}
	return -1
}

// function finds a user's function and the environment that it sees.
func (e *Env) function(name string) (*ParamDef, *Env) {
	for ; e != nil; e = e.parent {
		defs := e.scope.Params[name]
		for k := len(defs) - 1; k >= 0; k-- {
			if defs[k].Func != nil && e.active(defs[k].Branch) {
				return defs[k], e
			}
		}
	}
	return nil, nil
}

// of gives the environment of a scope among this one and those around it.
func (e *Env) of(s *Scope) *Env {
	for ; e != nil; e = e.parent {
		if e.scope == s {
			return e
		}
	}
	return nil
}
