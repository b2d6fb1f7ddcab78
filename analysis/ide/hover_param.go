package ide

import (
	"fmt"
	"slices"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// maxValues is how many values of a parameter a hover lists.
const maxValues = 6

// hoverParam tells a parameter's value and what it is made of.
func (q query) hoverParam(p place, m mark) string {
	name := parser.Fold(m.text)
	scope := q.scope(p.card)
	defs := scope.FindParam(name)
	if len(defs) == 0 {
		return ""
	}
	var b strings.Builder
	def := defs[len(defs)-1]
	if f := def.Func; f != nil {
		var args []string
		for _, a := range f.Args {
			args = append(args, a.Text)
		}
		return fmt.Sprintf("%s = %s · defined at %s", code(f.Name.Text+"("+strings.Join(args, ", ")+")"), code(f.Body.Text), q.where(def.Place))
	}
	values, left := q.paramValues(scope, name, m.unit)
	fmt.Fprintf(&b, "%s = ", code(m.text))
	switch {
	case len(values) == 0:
		b.WriteString(code(def.Value.Text))
	case left > 0:
		fmt.Fprintf(&b, "%s and %d more", strings.Join(values, ", "), left)
	default:
		b.WriteString(strings.Join(values, ", "))
	}
	if def.Value.Form == parser.ExprValue || def.Value.Form == parser.NameValue {
		b.WriteString(" · from " + code(def.Value.Text))
	}
	fmt.Fprintf(&b, " · defined at %s", q.where(def.Place))
	if len(values) > 1 {
		b.WriteString("\n\none value for each set of instances")
	}
	return b.String()
}

// paramValues are the values that a parameter takes in the cells of a scope.
func (q query) paramValues(scope *circuit.Scope, name, unit string) (values []string, left int) {
	for _, c := range q.cells() {
		if c.Scope != scope {
			continue
		}
		v := c.Env.Param(name)
		if !v.Set && v.Err == nil {
			continue
		}
		text := exact(v.V, unit)
		if v.Err != nil {
			text = "not evaluated (" + prose(v.Err.Error()) + ")"
		}
		if slices.Contains(values, text) {
			continue
		}
		if len(values) < maxValues {
			values = append(values, text)
		} else {
			left++
		}
	}
	return values, left
}

// hoverKey tells the value given to a parameter of an element, model or subckt.
func (q query) hoverKey(p place, m mark) string {
	e, ok := p.Stmt.(*parser.Element)
	if !ok || m.note != nil {
		if m.note != nil {
			return q.hoverNote(p, m)
		}
		return ""
	}
	var values []string
	for _, c := range q.cells() {
		if c.Scope.Subckt != q.body(p.card) {
			continue
		}
		v, found := givenValue(c, e, m.key)
		if !found {
			continue
		}
		text := exact(v.V, m.unit)
		if v.Err != nil {
			text = "not evaluated (" + prose(v.Err.Error()) + ")"
		}
		if !slices.Contains(values, text) && len(values) < maxValues {
			values = append(values, text)
		}
	}
	if len(values) == 0 {
		return ""
	}
	return fmt.Sprintf("%s of %s = %s", code(m.text), name(e.Name.Text), strings.Join(values, ", "))
}

// givenValue is the value of `key=` on the card of an element of a cell.
func givenValue(c *circuit.Cell, e *parser.Element, key string) (circuit.Value, bool) {
	for _, d := range c.Devices {
		if d.Elem == e {
			v, ok := d.Params[key]
			return v, ok
		}
	}
	for _, x := range c.Instances {
		if x.Elem == e {
			v, ok := x.Params[key]
			return v, ok
		}
	}
	return circuit.Value{}, false
}
