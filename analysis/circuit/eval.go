package circuit

import (
	"math"

	"triodeck/parser"
	"triodeck/parser/source"
)

// evaluation is one expression being worked out.
type evaluation struct {
	env    *Env
	locals map[string]float64 // arguments, inside a user's function
	probes func(*parser.Probe) (float64, error)
	chain  *frame // the parameters being worked out, innermost first
	depth  int
	steps  *int
}

// frame is a definition whose value is being worked out.
type frame struct {
	env   *Env
	def   *ParamDef
	index int // among the definitions of the name
	next  *frame
}

// value works out a value as a card writes it.
func (ev *evaluation) value(v parser.Value) Value {
	switch v.Form {
	case parser.NoValue:
		return Value{}
	case parser.NumberValue:
		return Value{V: v.Num, Set: true}
	case parser.NameValue:
		x, err := ev.ref(v.Word)
		return Value{V: x, Set: true, Err: err}
	}
	x, perr := v.Expr()
	if perr != nil || x == nil {
		if v.Form == parser.StringValue {
			return Value{Set: true, Err: &EvalError{Kind: NotNumber, Name: v.Text, Span: v.Span(), Message: "the text " + v.Text + " is not a number"}}
		}
		message, sp := "the expression cannot be read", v.Span()
		if perr != nil {
			message, sp = perr.Message, perr.Span
		}
		return Value{Set: true, Err: &EvalError{Kind: Unreadable, Name: v.Text, Span: sp, Message: message}}
	}
	f, err := ev.eval(x)
	return Value{V: f, Set: true, Err: err}
}

// param works out a parameter as seen from a definition (nil: from outside any).
// A definition that names itself means the one before it, or the one around.
func (ev *evaluation) param(name string, from *frame) (Value, bool) {
	for e := ev.env; e != nil; e = e.parent {
		limit := -1
		if from != nil && from.env == e && from.def.Name == name {
			limit = from.index
		} else if v, ok := e.args[name]; ok {
			return v, true
		}
		k := e.last(name, limit)
		if k < 0 {
			continue
		}
		if limit >= 0 {
			return ev.define(e, name, k), true
		}
		e.mu.Lock()
		v, ok := e.known[name]
		e.mu.Unlock()
		if ok {
			return v, true
		}
		v = ev.define(e, name, k)
		if err := asEvalError(v.Err); err == nil || err.Kind != Excessive {
			e.mu.Lock()
			e.known[name] = v
			e.mu.Unlock()
		}
		return v, true
	}
	if from != nil && from.def.Name == name {
		return Value{Set: true, Err: cyclic([]*ParamDef{from.def})}, true
	}
	return Value{}, false
}

// define works out one definition.
func (ev *evaluation) define(e *Env, name string, k int) Value {
	def := e.scope.Params[name][k]
	if ev.depth >= maxParamDepth {
		return Value{Set: true, Err: locate(excessive(def.Value.Span()), def.Place.Doc, def.Place.Card)}
	}
	for f := ev.chain; f != nil; f = f.next {
		if f.env == e && f.def == def {
			return Value{Set: true, Err: cyclic(members(ev.chain, f))}
		}
	}
	if def.Value.Form == parser.NoValue {
		return Value{Err: &EvalError{Kind: NotNumber, Name: spelt(def), Span: def.Place.inCard(), Place: def.Place,
			Message: "parameter \"" + spelt(def) + "\" has no value"}}
	}
	in := evaluation{
		env: e, depth: ev.depth + 1, steps: ev.steps,
		chain: &frame{env: e, def: def, index: k, next: ev.chain},
	}
	v := in.value(def.Value)
	if v.Err != nil {
		v.Err = locate(v.Err, def.Place.Doc, def.Place.Card)
	}
	return v
}

// members lists the definitions of a circle, in the order in which they refer.
func members(chain, start *frame) []*ParamDef {
	var defs []*ParamDef
	for f := chain; ; f = f.next {
		defs = append([]*ParamDef{f.def}, defs...)
		if f == start {
			return defs
		}
	}
}

// ref works out a name.
func (ev *evaluation) ref(w parser.Word) (float64, error) {
	name := parser.Fold(w.Text)
	if x, ok := ev.locals[name]; ok {
		return x, nil
	}
	var from *frame
	if ev.locals == nil {
		from = ev.chain
	}
	if v, ok := ev.param(name, from); ok {
		return v.V, v.Err
	}
	switch name {
	case "temper":
		return ev.env.conditions.tempC, nil
	case "pi":
		return math.Pi, nil
	case "hertz", "time":
		return 0, &EvalError{Kind: Unsupported, Name: w.Text, Span: w.Span(), Message: "\"" + w.Text + "\" is known only in a simulation"}
	}
	return 0, undefined("parameter", w.Text, w.Span())
}

func (ev *evaluation) eval(x parser.Expr) (float64, error) {
	if *ev.steps++; *ev.steps > maxSteps || ev.depth > 2*maxParamDepth {
		return 0, excessive(x.Span())
	}
	switch x := x.(type) {
	case *parser.NumberLit:
		return x.Value, nil
	case *parser.Ref:
		return ev.ref(x.Word)
	case *parser.Unary:
		return ev.unary(x)
	case *parser.Binary:
		return ev.binary(x)
	case *parser.Choice:
		return ev.choice(x.Test, x.Then, x.Else)
	case *parser.Call:
		return ev.call(x)
	case *parser.Probe:
		if ev.probes != nil {
			return ev.probes(x)
		}
		return 0, &EvalError{Kind: Unsupported, Name: x.Func.Text, Span: x.Span(), Message: "a voltage or current of the circuit is not known here"}
	}
	return 0, malformed("", x.Span(), "the expression cannot be evaluated")
}

func (ev *evaluation) choice(test, then, other parser.Expr) (float64, error) {
	t, err := ev.eval(test)
	if err != nil {
		return 0, err
	}
	if t != 0 {
		return ev.eval(then)
	}
	return ev.eval(other)
}

func (ev *evaluation) unary(x *parser.Unary) (float64, error) {
	v, err := ev.eval(x.X)
	if err != nil {
		return 0, err
	}
	switch x.Op.Text {
	case "-":
		return -v, nil
	case "!", "~":
		return truth(v == 0), nil
	}
	return v, nil
}

func (ev *evaluation) binary(x *parser.Binary) (float64, error) {
	a, err := ev.eval(x.X)
	if err != nil {
		return 0, err
	}
	switch x.Op.Text { // the right side of these may be senseless where the left decides
	case "&&", "&":
		if a == 0 {
			return 0, nil
		}
	case "||", "|":
		if a != 0 {
			return 1, nil
		}
	}
	b, err := ev.eval(x.Y)
	if err != nil {
		return 0, err
	}
	return operate(x.Op, a, b, x.Span())
}

func operate(op parser.Word, a, b float64, sp source.Span) (float64, error) {
	var r float64
	switch op.Text {
	case "+":
		r = a + b
	case "-":
		r = a - b
	case "*":
		r = a * b
	case "/", "%":
		if b == 0 {
			return 0, domain(op.Text, sp, "division by zero")
		}
		if r = a / b; op.Text == "%" {
			r = math.Mod(a, b)
		}
	case "**", "^":
		return power(a, b, op.Text, sp)
	case "<":
		r = truth(a < b)
	case "<=":
		r = truth(a <= b)
	case ">":
		r = truth(a > b)
	case ">=":
		r = truth(a >= b)
	case "==":
		r = truth(a == b)
	case "!=":
		r = truth(a != b)
	case "&&", "&", "||", "|":
		r = truth(b != 0)
	default:
		return 0, malformed(op.Text, sp, "operator %q cannot be evaluated", op.Text)
	}
	return finite(r, op.Text, sp)
}

// power is a to the b; a negative base wants a whole exponent.
func power(a, b float64, name string, sp source.Span) (float64, error) {
	switch {
	case a == 0 && b < 0:
		return 0, domain(name, sp, "zero to the power of %g is infinite", b)
	case a < 0 && b != math.Trunc(b):
		return 0, domain(name, sp, "%g to the power of %g is not a real number", a, b)
	}
	return finite(math.Pow(a, b), name, sp)
}

func finite(x float64, name string, sp source.Span) (float64, error) {
	if math.IsInf(x, 0) || math.IsNaN(x) {
		return 0, domain(name, sp, "the result of %q is too large for a number", name)
	}
	return x, nil
}

func truth(b bool) float64 {
	if b {
		return 1
	}
	return 0
}
