package circuit

import (
	"math"

	"triodeck/parser"
	"triodeck/parser/source"
)

// builtin is a function of the expression language. Arguments are evaluated
// before; min and max count them, max -1 being any number.
type builtin struct {
	min, max int
	f        func(a []float64) float64
	legal    func(a []float64) bool // nil: everywhere
	wants    string                 // what legal asks, in words
}

func one(f func(float64) float64) builtin {
	return builtin{min: 1, max: 1, f: func(a []float64) float64 { return f(a[0]) }}
}

func nominal(least, most int) builtin {
	return builtin{min: least, max: most, f: func(a []float64) float64 { return a[0] }}
}

func (b builtin) where(wants string, legal func(a []float64) bool) builtin {
	b.wants, b.legal = wants, legal
	return b
}

var (
	positive = func(a []float64) bool { return a[0] > 0 }
	unit     = func(a []float64) bool { return math.Abs(a[0]) <= 1 }
)

// builtins are the functions known without a definition. The statistical ones
// stand at their nominal value: a spread belongs to a simulation of many runs.
var builtins = map[string]builtin{
	"sqrt":  one(math.Sqrt).where("a value of zero or more", func(a []float64) bool { return a[0] >= 0 }),
	"abs":   one(math.Abs),
	"exp":   one(math.Exp),
	"ln":    one(math.Log).where("a positive value", positive),
	"log":   one(math.Log).where("a positive value", positive),
	"log10": one(math.Log10).where("a positive value", positive),
	"int":   one(math.Trunc),
	"trunc": one(math.Trunc),
	"nint":  one(math.Round),
	"floor": one(math.Floor),
	"ceil":  one(math.Ceil),
	"sgn":   one(sign),
	"sign":  {min: 1, max: 2, f: signOf},
	"sin":   one(math.Sin),
	"cos":   one(math.Cos),
	"tan":   one(math.Tan),
	"asin":  one(math.Asin).where("a value from -1 to 1", unit),
	"acos":  one(math.Acos).where("a value from -1 to 1", unit),
	"atan":  one(math.Atan),
	"atan2": {min: 2, max: 2, f: func(a []float64) float64 { return math.Atan2(a[0], a[1]) }},
	"sinh":  one(math.Sinh),
	"cosh":  one(math.Cosh),
	"tanh":  one(math.Tanh),
	"asinh": one(math.Asinh),
	"acosh": one(math.Acosh).where("a value of 1 or more", func(a []float64) bool { return a[0] >= 1 }),
	"atanh": one(math.Atanh).where("a value between -1 and 1", func(a []float64) bool { return math.Abs(a[0]) < 1 }),
	"hypot": {min: 2, max: 2, f: func(a []float64) float64 { return math.Hypot(a[0], a[1]) }},
	// pwr drops the sign of the base and pwrs puts it back.
	"pwr":  {min: 2, max: 2, f: func(a []float64) float64 { return math.Pow(math.Abs(a[0]), a[1]) }},
	"pwrs": {min: 2, max: 2, f: func(a []float64) float64 { return sign(a[0]) * math.Pow(math.Abs(a[0]), a[1]) }},
	"min":  {min: 1, max: -1, f: func(a []float64) float64 { return fold(a, math.Min) }},
	"max":  {min: 1, max: -1, f: func(a []float64) float64 { return fold(a, math.Max) }},
	// With two arguments limit is a distribution around the first.
	"limit":  {min: 2, max: 3, f: clamp},
	"table":  {min: 3, max: -1, f: table},
	"agauss": nominal(2, 4), "gauss": nominal(2, 4),
	"aunif": nominal(2, 3), "unif": nominal(2, 3),
}

func sign(x float64) float64 {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}

// signOf is the sign of x, or with two arguments the size of the first with the
// sign of the second.
func signOf(a []float64) float64 {
	if len(a) == 2 {
		return math.Abs(a[0]) * sign(a[1])
	}
	return sign(a[0])
}

func fold(a []float64, f func(x, y float64) float64) float64 {
	r := a[0]
	for _, x := range a[1:] {
		r = f(r, x)
	}
	return r
}

func clamp(a []float64) float64 {
	if len(a) == 2 {
		return a[0]
	}
	return math.Max(math.Min(a[1], a[2]), math.Min(math.Max(a[1], a[2]), a[0]))
}

// table interpolates between points, and holds the end values outside them.
func table(a []float64) float64 {
	x, points := a[0], a[1:]
	if x <= points[0] {
		return points[1]
	}
	for i := 2; i+1 < len(points); i += 2 {
		x0, y0, x1, y1 := points[i-2], points[i-1], points[i], points[i+1]
		if x <= x1 {
			if x1 == x0 {
				return y1
			}
			return y0 + (y1-y0)*(x-x0)/(x1-x0)
		}
	}
	return points[len(points)/2*2-1]
}

// call works out a function: the user's own before the built-in of its name.
func (ev *evaluation) call(x *parser.Call) (float64, error) {
	name := parser.Fold(x.Name.Text)
	if def, env := ev.env.function(name); def != nil {
		return ev.user(x, def, env)
	}
	if name == "if" {
		if len(x.Args) != 3 {
			return 0, argumentCount(x, 3, 3)
		}
		return ev.choice(x.Args[0], x.Args[1], x.Args[2])
	}
	f, ok := builtins[name]
	if name == "pow" {
		f, ok = builtin{min: 2, max: 2}, true
	}
	if !ok {
		return 0, undefined("function", x.Name.Text, x.Name.Span())
	}
	if len(x.Args) < f.min || f.max >= 0 && len(x.Args) > f.max {
		return 0, argumentCount(x, f.min, f.max)
	}
	args, err := ev.arguments(x)
	if err != nil {
		return 0, err
	}
	if name == "pow" {
		return power(args[0], args[1], x.Name.Text, x.Span())
	}
	if f.legal != nil && !f.legal(args) {
		return 0, domain(x.Name.Text, x.Span(), "%s of %g does not exist: it wants %s", x.Name.Text, args[0], f.wants)
	}
	return finite(f.f(args), x.Name.Text, x.Span())
}

func (ev *evaluation) arguments(x *parser.Call) ([]float64, error) {
	args := make([]float64, len(x.Args))
	for i, a := range x.Args {
		v, err := ev.eval(a)
		if err != nil {
			return nil, err
		}
		args[i] = v
	}
	return args, nil
}

// user works out a function that the deck defines; its body sees its arguments
// and the names where it stands.
func (ev *evaluation) user(x *parser.Call, def *ParamDef, env *Env) (float64, error) {
	names := def.Func.Args
	if len(x.Args) != len(names) {
		return 0, argumentCount(x, len(names), len(names))
	}
	if ev.depth >= maxParamDepth {
		return 0, excessive(x.Span())
	}
	args, err := ev.arguments(x)
	if err != nil {
		return 0, err
	}
	locals := make(map[string]float64, len(names))
	for i, n := range names {
		locals[parser.Fold(n.Text)] = args[i]
	}
	in := evaluation{env: env, locals: locals, probes: ev.probes, chain: ev.chain, depth: ev.depth + 1, steps: ev.steps}
	v := in.value(def.Value)
	if !v.Set {
		return 0, malformed(x.Name.Text, x.Span(), "function %q has no body", x.Name.Text)
	}
	if v.Err != nil {
		return 0, locate(v.Err, def.Place.Doc, def.Place.Card)
	}
	return v.V, nil
}

func argumentCount(x *parser.Call, least, most int) error {
	var sp source.Span = x.Span()
	switch {
	case most < 0:
		return malformed(x.Name.Text, sp, "function %q has %d arguments: it takes at least %d", x.Name.Text, len(x.Args), least)
	case least == most:
		return malformed(x.Name.Text, sp, "function %q has %d arguments: it takes %d", x.Name.Text, len(x.Args), least)
	}
	return malformed(x.Name.Text, sp, "function %q has %d arguments: it takes %d to %d", x.Name.Text, len(x.Args), least, most)
}
