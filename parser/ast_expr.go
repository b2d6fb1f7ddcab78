package parser

import "triodeck/parser/source"

// Expr is an expression; spans are relative to the card it stands on.
type Expr interface{ Span() source.Span }

// NumberLit is a number in an expression.
type NumberLit struct {
	Word
	Value float64 // SI, suffix applied
}

// Ref is a parameter's name.
type Ref struct{ Word }

// Call is a function applied to arguments.
type Call struct {
	Name Word
	Args []Expr
	End  int32
}

// Probe is `v(node)`, `v(a,b)` or `i(element)`: a circuit quantity.
type Probe struct {
	Func  Word // v, i
	Names []Word
	End   int32
}

// Unary is `-x`, `+x`, `!x`, `~x`.
type Unary struct {
	Op Word
	X  Expr
}

// Binary is `x op y`; the operators are
// ** ^ * / % + - < <= > >= == != & && | ||
type Binary struct {
	Op   Word
	X, Y Expr
}

// Choice is `test ? then : else`.
type Choice struct{ Test, Then, Else Expr }

// Span covers the call from its name to its closing parenthesis.
func (e *Call) Span() source.Span { return source.Span{Start: e.Name.Start, End: e.End} }

// Span covers the probe from its function to its closing parenthesis.
func (e *Probe) Span() source.Span { return source.Span{Start: e.Func.Start, End: e.End} }

// Span covers operator and operand.
func (e *Unary) Span() source.Span { return source.Span{Start: e.Op.Start, End: e.X.Span().End} }

// Span covers both operands.
func (e *Binary) Span() source.Span {
	return source.Span{Start: e.X.Span().Start, End: e.Y.Span().End}
}

// Span covers test and both branches.
func (e *Choice) Span() source.Span {
	return source.Span{Start: e.Test.Span().Start, End: e.Else.Span().End}
}
