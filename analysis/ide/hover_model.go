package ide

import (
	"fmt"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// keyParams are the model parameters that a hover shows, in this order, where
// the card states them.
var keyParams = []string{
	"vto", "vt0", "vth0", "kp", "u0", "uo", "gamma", "phi", "lambda", "theta", "tox", "toxe", "toxm", "nsub", "nch", "ndep",
	"ld", "wd", "rd", "rs", "rsh", "rdsw", "vmax", "vsat", "is", "n", "bf", "br", "vaf", "tnom",
}

// hoverModel tells what a model is and its main parameters.
func (q query) hoverModel(p place, model string) string {
	scope, folded := q.scope(p.card), parser.Fold(model)
	defs := scope.FindModel(folded)
	if len(defs) == 0 {
		if bins := scope.FindBins(folded); len(bins) > 0 {
			return fmt.Sprintf("%s · %d bins · first defined at %s", code(model), len(bins), q.where(bins[0].Place))
		}
		if scope.FindSubckt(folded) != nil {
			return q.hoverSubckt(p, model)
		}
		return q.undefined(scope, "model", model)
	}
	def := defs[len(defs)-1]
	var b strings.Builder
	fmt.Fprintf(&b, "%s · %s model", code(def.Model.Name.Text), strings.ToUpper(def.Model.Type.Text))
	values := q.modelValues(def)
	if level, ok := values["level"]; ok {
		fmt.Fprintf(&b, ", level %s", level)
	} else if def.Type == "nmos" || def.Type == "pmos" {
		b.WriteString(", level 1 (not stated)")
	}
	fmt.Fprintf(&b, " · defined at %s\n\n", q.where(def.Place))
	t := &table{head: []string{"parameter", "value"}}
	for _, key := range keyParams {
		if v, ok := values[key]; ok {
			t.add(name(key), v)
		}
	}
	if len(t.rows) > 0 {
		b.WriteString(t.String())
		if n := len(values) - len(t.rows); n > 0 {
			fmt.Fprintf(&b, "\nand %d more %s\n", n, plural(n, "parameter"))
		}
	}
	return b.String()
}

// modelValues are the parameters of a model card, evaluated and spelt out.
func (q query) modelValues(def *circuit.ModelDef) map[string]string {
	out := map[string]string{}
	env := q.env(def.Scope)
	for _, p := range def.Model.Params {
		key := parser.Fold(p.Name.Text)
		v := p.Value.Num
		if p.Value.Form != parser.NumberValue {
			if env == nil {
				out[key] = code(p.Value.Text)
				continue
			}
			got := env.Value(p.Value)
			if got.Err != nil {
				out[key] = code(p.Value.Text)
				continue
			}
			v = got.V
		}
		out[key] = exact(v, modelUnits[key])
	}
	return out
}

// undefined tells that a name is not defined, unless something unread may have
// defined it.
func (q query) undefined(scope *circuit.Scope, what, name string) string {
	text := fmt.Sprintf("%s %s is not defined in this deck", what, code(name))
	if scope.IsOpen() {
		text += "; a file that is not readable may define it"
	}
	return text
}

// env evaluates in a scope: that of the first cell made of it.
func (q query) env(s *circuit.Scope) *circuit.Env {
	for _, c := range q.cells() {
		if c.Scope == s {
			return c.Env
		}
	}
	return nil
}

// cells are the elaborated cells of the deck, each once.
func (q query) cells() []*circuit.Cell {
	var list []*circuit.Cell
	seen := map[*circuit.Cell]bool{}
	add := func(c *circuit.Cell) {
		if c != nil && !seen[c] {
			seen[c] = true
			list = append(list, c)
		}
	}
	add(q.design.Main)
	for _, c := range q.design.Alone {
		add(c)
	}
	for i := 0; i < len(list); i++ {
		for _, x := range list[i].Instances {
			add(x.Cell)
		}
	}
	return list
}

// hoverSubckt tells a subckt's ports, parameters and contents.
func (q query) hoverSubckt(p place, name string) string {
	scope := q.scope(p.card)
	defs := scope.FindSubckt(parser.Fold(name))
	if len(defs) == 0 {
		if _, ok := p.Stmt.(*parser.Subckt); ok {
			defs = []*circuit.Scope{scope}
		} else {
			return q.undefined(scope, "subckt", name)
		}
	}
	def := defs[len(defs)-1]
	if def.Subckt == nil {
		return ""
	}
	var b strings.Builder
	fmt.Fprintf(&b, "%s · subckt · defined at %s\n\n", code(def.Subckt.Name.Text), q.where(def.Place))
	var ports, params []string
	for _, w := range def.Ports {
		ports = append(ports, code(w.Text))
	}
	for _, v := range def.Subckt.Params {
		params = append(params, code(v.Name.Text+"="+v.Value.Text))
	}
	for _, line := range []struct {
		name string
		list []string
	}{{"ports", ports}, {"parameters", params}} {
		if len(line.list) > 0 {
			fmt.Fprintf(&b, "- %s %s\n", line.name, strings.Join(line.list, " "))
		}
	}
	mosfets, others := 0, 0
	for _, e := range def.Elements {
		if e.Letter == 'm' {
			mosfets++
		} else {
			others++
		}
	}
	switch {
	case mosfets == 0:
		fmt.Fprintf(&b, "- holds %d %s\n", others, plural(others, "element"))
	case others == 0:
		fmt.Fprintf(&b, "- holds %d %s\n", mosfets, plural(mosfets, "MOSFET"))
	default:
		fmt.Fprintf(&b, "- holds %d %s and %d other %s\n", mosfets, plural(mosfets, "MOSFET"), others, plural(others, "element"))
	}
	return b.String()
}

// hoverInstance tells what an X line calls; where that wraps one MOSFET, the line
// is the MOSFET to its writer.
func (q query) hoverInstance(card int, e *parser.Element) string {
	if e.Model.IsZero() {
		return ""
	}
	if ops := operations(sightings(q.deck.Bias(q.ctx), q.body(card)), e); len(ops) > 0 {
		return q.hoverOperations(card, e, ops)
	}
	return q.hoverSubckt(place{card: card, Card: q.doc.File.Card(card)}, e.Model.Text)
}
