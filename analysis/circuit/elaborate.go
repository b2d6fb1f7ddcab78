package circuit

import (
	"sort"
	"strconv"
	"strings"

	"triodeck/parser"
)

// cellKey identifies a cell: the subckt, what stands around it, and the values
// of its parameters.
type cellKey struct {
	scope  *Scope
	around *Env
	params string
}

// elaborator makes cells out of scopes.
type elaborator struct {
	*reading
	conditions *conditions
	cells      map[cellKey]*Cell
	made       map[*Scope]bool
	open       []*Scope // the cells being made, outermost first
	elements   int
	over       bool // a cap was met, and said
	binless    bool // a MOSFET has no bin
}

// elaborate makes the main cell with its hierarchy, then the subckts of the root
// document that stand alone.
func (r *reading) elaborate() {
	el := &elaborator{
		reading:    r,
		conditions: &conditions{tempC: r.design.TempC},
		cells:      map[cellKey]*Cell{},
		made:       map[*Scope]bool{},
	}
	d := r.design
	env := newEnv(d.Top, nil, r.topArgs(), el.conditions)
	d.Main = el.build(d.Top, env, "")
	el.ownParams(d.Main)

	used := map[*Scope]bool{}
	d.Top.Walk(func(s *Scope) {
		for _, e := range s.Elements {
			if !e.Model.IsZero() {
				for _, def := range s.FindSubckt(parser.Fold(e.Model.Text)) {
					used[def] = true
				}
			}
		}
	})
	// Those that nothing uses first, so that each takes what it calls along; then
	// what is left, which calls itself in a circle or lies in an arm not chosen.
	for _, alone := range []bool{true, false} {
		for _, s := range d.Top.Children {
			if s.Place.Doc != d.Root || el.made[s] || alone && used[s] {
				continue
			}
			if c := el.instantiate(s, env, nil); c != nil {
				d.Alone = append(d.Alone, c)
			}
		}
	}
}

// instantiate gives the cell of a subckt for the values that an instance passes;
// nil beyond the caps.
func (el *elaborator) instantiate(s *Scope, around *Env, args map[string]Value) *Cell {
	env := newEnv(s, around, args, el.conditions)
	key := cellKey{s, around, canonical(env, args)}
	if c, ok := el.cells[key]; ok {
		return c
	}
	if len(el.cells) >= maxCells {
		el.tooLarge(s.Place)
		return nil
	}
	c := el.build(s, env, key.params)
	el.cells[key] = c
	first := !el.made[s]
	el.made[s] = true
	for _, err := range env.failed {
		el.report(s, err)
	}
	if first {
		el.ownParams(c)
	}
	return c
}

// canonical writes the values of a subckt's parameters, and of what an instance
// passes beyond them, in one text.
func canonical(env *Env, args map[string]Value) string {
	names := make([]string, 0, len(env.scope.Params)+len(args))
	for name := range env.scope.Params {
		if env.last(name, -1) >= 0 {
			names = append(names, name)
		}
	}
	for name := range args {
		if len(env.scope.Params[name]) == 0 || env.last(name, -1) < 0 {
			names = append(names, name)
		}
	}
	sort.Strings(names)
	var b strings.Builder
	for _, name := range names {
		v := env.Param(name)
		if b.Len() > 0 {
			b.WriteByte(' ')
		}
		b.WriteString(name)
		b.WriteByte('=')
		switch {
		case v.Err != nil:
			// Not the cell's fault: two unknowns read alike in every cell.
			b.WriteByte('?')
		default:
			b.WriteString(strconv.FormatFloat(v.V, 'g', -1, 64))
		}
	}
	return b.String()
}

func (el *elaborator) tooLarge(at Place) {
	if !el.over {
		el.over = true
		el.problems.add(TooDeep, at, "", "the design is larger than %d distinct cells or %d elements: the rest is left out", maxCells, maxElements)
	}
}

// build makes a cell. Its cost is linear in the scope's cards.
func (el *elaborator) build(s *Scope, env *Env, key string) *Cell {
	el.open = append(el.open, s)
	defer func() { el.open = el.open[:len(el.open)-1] }()

	b := &builder{elaborator: el, cell: &Cell{Scope: s, Key: key, Env: env}}
	b.start()
	for i := range s.Elements {
		e := &s.Elements[i]
		if !env.active(e.Branch) {
			continue
		}
		if el.elements++; el.elements > maxElements {
			el.tooLarge(e.Place)
			break
		}
		if el.elements%4096 == 0 && el.ctx.Err() != nil {
			break
		}
		b.element(e)
	}
	b.finish()
	if el.binless {
		b.reportBinless()
	}
	return b.cell
}

// report notes the cause of a value's absence, once: a name that is not defined
// counts once a design, and not at all where a missing file may define it.
func (r *reading) report(s *Scope, err error) {
	kind, at, name, message, ok := describe(err)
	if !ok {
		return
	}
	if kind == ParamUndefined {
		if s.IsOpen() {
			return
		}
		folded := parser.Fold(name)
		if r.undefined[folded] {
			return
		}
		if r.undefined == nil {
			r.undefined = map[string]bool{}
		}
		r.undefined[folded] = true
	}
	r.problems.add(kind, at, name, "%s", message)
}

// ownParams evaluates the parameters that the root document defines in a cell's
// scope, so that a mistake is said even where nothing uses the value yet.
func (el *elaborator) ownParams(c *Cell) {
	for _, p := range c.Scope.params {
		if p.Place.Doc != el.design.Root || p.Func != nil || p.Value.Form == parser.NoValue || !c.Env.active(p.Branch) {
			continue
		}
		if c.Env.Def(p.Name) == p {
			if v := c.Env.Param(p.Name); v.Err != nil {
				el.report(c.Scope, v.Err)
			}
		}
	}
}
