package circuit_test

import (
	"errors"
	"math"
	"testing"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

func expression(t *testing.T, text string) parser.Expr {
	t.Helper()
	x, err := parser.ParseExpr(parser.Word{Text: text})
	if err != nil {
		t.Fatalf("%s: %s", text, err.Message)
	}
	return x
}

func TestExpressions(t *testing.T) {
	env := loadText(".temp 85", ".param a=2 b='a*1.5' zero=0", ".func mean(x,y)='(x+y)/2'").Main.Env
	for _, test := range []struct {
		text string
		want float64
	}{
		{"1+2*3", 7},
		{"2**3", 8},
		{"2^3", 8},
		{"-a", -2},
		{"!a + !zero", 1},
		{"7 % 4", 3},
		{"a > 1 && b < 4", 1},
		{"zero && 1/0", 0},
		{"a || 1/0", 1},
		{"a == 2 ? b : 1/0", 3},
		{"if(a == 1, 1/0, b)", 3},
		{"A*B", 6},
		{"10u*2", 20e-6},
		{"mean(a, 4)", 3},
		{"MEAN(a, mean(b, 5))", 3},
		{"sqrt(16)+abs(-1)+exp(0)", 6},
		{"ln(exp(2))+log(exp(1))+log10(100)", 5},
		{"pow(2,3)+pwr(-2,3)+pwrs(-2,3)", 8},
		{"min(3,1,2)+max(3,1,2)", 4},
		{"limit(5,0,3)+limit(-5,0,3)+limit(2,0.1)", 5},
		{"int(-2.7)+nint(2.4)+floor(-0.5)+ceil(0.5)", 0},
		{"sgn(-3)+sign(4)+sign(3,-1)", -3},
		{"sin(0)+cos(0)+tan(0)", 1},
		{"asin(1)+acos(1)+atan(0)", math.Pi / 2},
		{"atan2(1,1)", math.Pi / 4},
		{"sinh(0)+cosh(0)+tanh(0)", 1},
		{"agauss(3,1,3)+gauss(1,0.1,3)+aunif(1,2)+unif(1,2)", 6},
		{"table(1.5, 1,10, 2,20)+table(0, 1,10, 2,20)+table(9, 1,10, 2,20)", 45},
		{"temper", 85},
	} {
		got, err := env.Eval(expression(t, test.text))
		if err != nil || math.Abs(got-test.want) > 1e-12*math.Max(1, math.Abs(test.want)) {
			t.Errorf("%s is %v (%v), want %v", test.text, got, err, test.want)
		}
	}
}

func TestExpressionErrors(t *testing.T) {
	env := loadText(".param a=2 loop='loop+1' indirect='gone*2'", ".func f(x)='x+missing'").Main.Env
	for _, test := range []struct {
		text    string
		kind    circuit.EvalKind
		at      string // the text that the span covers, "" where the cause is in the deck
		message string
	}{
		{"a+nothing", circuit.Undefined, "nothing", `parameter "nothing" is not defined`},
		{"a+Sqr(2)", circuit.Undefined, "Sqr", `function "Sqr" is not defined`},
		{"1+loop", circuit.Cyclic, "", `parameter "loop" refers to itself`},
		{"indirect", circuit.Undefined, "", `parameter "gone" is not defined`},
		{"f(1)", circuit.Undefined, "", `parameter "missing" is not defined`},
		{"2+sqrt(-4)", circuit.Domain, "sqrt(-4)", `sqrt of -4 does not exist: it wants a value of zero or more`},
		{"1/(a-2)", circuit.Domain, "1/(a-2", `division by zero`},
		{"(0-8)**0.5", circuit.Domain, "", `-8 to the power of 0.5 is not a real number`},
		{"exp(1000)", circuit.Domain, "exp(1000)", `the result of "exp" is too large for a number`},
		{"sqrt(1,2)", circuit.Malformed, "sqrt(1,2)", `function "sqrt" has 2 arguments: it takes 1`},
		{"sign(1,2,3)", circuit.Malformed, "sign(1,2,3)", `function "sign" has 3 arguments: it takes 1 to 2`},
		{"time", circuit.Unsupported, "time", `"time" is known only in a simulation`},
		{"v(a)", circuit.Unsupported, "v(a)", `a voltage or current of the circuit is not known here`},
	} {
		_, err := env.Eval(expression(t, test.text))
		var got *circuit.EvalError
		if !errors.As(err, &got) {
			t.Errorf("%s: no error", test.text)
			continue
		}
		if got.Kind != test.kind || got.Message != test.message {
			t.Errorf("%s: kind %d %q, want kind %d %q", test.text, got.Kind, got.Message, test.kind, test.message)
		}
		if test.at != "" && (got.Place.Doc != nil || test.text[got.Span.Start:got.Span.End] != test.at) {
			t.Errorf("%s: the error stands at %v, want %q", test.text, got.Span, test.at)
		}
	}
}

func TestErrorStandsAtItsCause(t *testing.T) {
	d := loadText(".param indirect='gone*2'", ".param third='indirect'")
	_, err := d.Main.Env.Eval(expression(t, "third"))
	var got *circuit.EvalError
	if !errors.As(err, &got) || got.Place.Doc != d.Root || got.Place.Text() != "gone" {
		t.Errorf("error %v at %q", err, got.Place.Text())
	}
}

func TestProbes(t *testing.T) {
	env := loadText(".param drop=10m").Main.Env
	probes := func(p *parser.Probe) (float64, error) {
		if p.Names[0].Text == "in" {
			return 0.9, nil
		}
		return 0, errors.New("unknown node")
	}
	got, err := env.EvalWith(expression(t, "v(in)-drop"), probes)
	if err != nil || math.Abs(got-0.89) > 1e-15 {
		t.Errorf("v(in)-drop is %v (%v)", got, err)
	}
	if _, err = env.EvalWith(expression(t, "v(out)"), probes); err == nil || err.Error() != "unknown node" {
		t.Errorf("v(out): %v", err)
	}
}
