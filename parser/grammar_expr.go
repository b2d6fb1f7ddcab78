package parser

import "github.com/alecthomas/participle/v2/lexer"

// exprG is an expression: operands with operators between them, and the choice
// `test ? then : else`. Which operator binds tighter is a table, not grammar.
type exprG struct {
	Head *operandG `parser:"@@"`
	Tail []*opG    `parser:"@@*"`
	Pick *choiceG  `parser:"@@?"`
}

type opG struct {
	Op lexer.Token `parser:"@Op"`
	X  *operandG   `parser:"@@"`
}

type choiceG struct {
	Then *exprG `parser:"'?' @@"`
	Else *exprG `parser:"':' @@"`
}

// operandG is a primary with the signs before it.
type operandG struct {
	Signs  []lexer.Token `parser:"@( ( '+' | '-' | Not )+ )?"`
	Number lexer.Token   `parser:"(  @Number"`
	Probe  *probeG       `parser:" | @@"`
	Name   *nameG        `parser:" | @@"`
	Group  *exprG        `parser:" | Open @@ Close"`
	Quoted *exprG        `parser:" | Tick @@ Tick )"`
}

// probeG is v(node), v(a,b) or i(element).
type probeG struct {
	Func  lexer.Token   `parser:"@Probe '('"`
	Names []lexer.Token `parser:"@( Node ( ',' Node )* )"`
	Close lexer.Token   `parser:"@')'"`
}

// nameG is a parameter, or a function with arguments.
type nameG struct {
	Name  lexer.Token  `parser:"@Name"`
	Args  []*exprG     `parser:"( '(' ( @@ ( ',' @@ )* )?"`
	Close *lexer.Token `parser:"  @')' )?"`
}

var exprGrammar = grammarFor[exprG]()

// precedence is how tight a binary operator binds; ** and ^ bind tightest, to the
// right.
func precedence(op string) int {
	switch op {
	case "||":
		return 1
	case "&&":
		return 2
	case "|":
		return 3
	case "&":
		return 4
	case "==", "!=":
		return 5
	case "<", "<=", ">", ">=":
		return 6
	case "+", "-":
		return 7
	case "*", "/", "%":
		return 8
	case "**", "^":
		return 10
	}
	return 0
}

const signPrecedence = 9 // -a**2 is -(a**2), -a*b is (-a)*b

// lower is the expression as the public tree.
func (g *exprG) lower() Expr {
	c := climber{tail: g.Tail}
	e := c.climb(c.operand(g.Head, 0), 1)
	if g.Pick != nil {
		return &Choice{Test: e, Then: g.Pick.Then.lower(), Else: g.Pick.Else.lower()}
	}
	return e
}

// climber turns a flat list of operands and operators into a tree by precedence.
type climber struct {
	tail []*opG
}

// climb takes operators that bind at least as tight as level.
func (c *climber) climb(left Expr, level int) Expr {
	for len(c.tail) > 0 {
		next := c.tail[0]
		p := precedence(next.Op.Value)
		if p < level || p == 0 {
			return left
		}
		c.tail = c.tail[1:]
		right := c.operand(next.X, 0)
		if p == 10 {
			right = c.climb(right, p)
		} else {
			right = c.climb(right, p+1)
		}
		left = &Binary{Op: wordOf(next.Op), X: left, Y: right}
	}
	return left
}

// operand is a primary under its signs; a power behind it belongs under them.
func (c *climber) operand(g *operandG, sign int) Expr {
	if sign < len(g.Signs) {
		x := c.operand(g, sign+1)
		if sign+1 == len(g.Signs) {
			x = c.climb(x, signPrecedence)
		}
		return &Unary{Op: wordOf(g.Signs[sign]), X: x}
	}
	switch {
	case g.Probe != nil:
		return &Probe{Func: wordOf(g.Probe.Func), Names: wordsOf(g.Probe.Names), End: spanOf(g.Probe.Close).End}
	case g.Name != nil && g.Name.Close != nil:
		call := &Call{Name: wordOf(g.Name.Name), End: spanOf(*g.Name.Close).End}
		for _, a := range g.Name.Args {
			call.Args = append(call.Args, a.lower())
		}
		return call
	case g.Name != nil:
		return &Ref{wordOf(g.Name.Name)}
	case g.Group != nil:
		return g.Group.lower()
	case g.Quoted != nil:
		return g.Quoted.lower()
	}
	w := wordOf(g.Number)
	n, _ := ParseNumber(w.Text)
	return &NumberLit{Word: w, Value: n.Value}
}
