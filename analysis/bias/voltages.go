package bias

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser"
)

// voltages finds the node voltages of one context.
type voltages struct {
	w       *worker
	cell    *circuit.Cell
	frame   frame
	samples int
	axes    []Axis
	nodes   []Voltage
	pending map[circuit.NetID]*claim // annotated nodes not evaluated yet
	order   []*claim
	inner   []override   // annotations on nodes of instances, evaluated
	t       [][]float64  // position of each own range, by grid point
	own     []assignment // the ranged assignments, in the order of t
}

// claim is an assignment in effect for a net of the cell, or for a node of an
// instance (net is then -1).
type claim struct {
	assignment
	net   circuit.NetID
	inner string
	layer layer
	axis  int // index into the own ranges, -1 for a point
	v     *Voltage
}

// unknownNode is the error of an expression that needs a node without voltage.
type unknownNode struct {
	net   circuit.NetID
	spelt string
}

func (e unknownNode) Error() string { return fmt.Sprintf("v(%s) is not known", e.spelt) }

// disagreement is the least difference, in volts, that makes an annotation and a
// source contradict each other: above rounding, below anything meant.
const disagreement = 1e-3

func (w *worker) voltages(cell *circuit.Cell, f frame) *voltages {
	v := &voltages{w: w, cell: cell, frame: f, pending: map[circuit.NetID]*claim{}}
	v.gather()
	v.t = grid(len(v.own), f.samples)
	v.samples = f.samples * len(v.t)
	v.nodes = make([]Voltage, len(cell.Nets))
	for _, a := range f.axes {
		v.axes = append(v.axes, Axis{a.Node, v.spread(Voltage{V: a.Values}).V})
	}
	v.given()
	v.settle()
	v.report()
	for _, c := range v.order {
		if c.axis >= 0 && c.v != nil {
			v.axes = append(v.axes, Axis{f.path + c.Node.Text, c.v.V})
		}
	}
	for i, c := range v.order {
		if c.v != nil && c.net < 0 {
			v.inner = append(v.inner, override{c.inner, *c.v, v.order[i].assignment})
		}
	}
	for _, o := range f.over {
		if strings.Contains(o.path, ".") {
			o.v = v.spread(o.v)
			v.inner = append(v.inner, o)
		}
	}
	return v
}

// gather chooses the assignment that holds for each node: a later one of the same
// kind and a stronger kind (mode over bias, corner over mode) win.
func (v *voltages) gather() {
	list, layers := v.w.statements(v.cell.Scope).inEffect(v.w.run.Mode, v.w.run.Corner)
	byName := map[string]*claim{}
	for i, a := range list {
		c := &claim{assignment: a, net: -1, layer: layers[i], axis: -1}
		name := fold(a.Node)
		if net, ok := v.cell.NetByName(name); ok {
			c.net = net
			if v.assumed(net) {
				continue // the instance's own voltage holds
			}
			name = v.cell.Nets[net].Name
		} else if v.insideInstance(name) {
			c.inner = name
		} else {
			v.w.problem(UnknownName, v.nodePlace(a), v.w.noSuchNode(v.cell, a.Node.Text))
			continue
		}
		if was := byName[name]; was != nil {
			v.repeated(was, c)
			was.assignment, was.layer = c.assignment, c.layer
			continue
		}
		byName[name] = c
		v.order = append(v.order, c)
	}
	for _, c := range v.order {
		if c.Hi != nil {
			c.axis = len(v.own)
			v.own = append(v.own, c.assignment)
		}
		if c.net >= 0 {
			v.pending[c.net] = c
		}
	}
}

// assumed says that a net is a port whose voltage the instance gives, so that a
// bias line on it is only an assumption.
func (v *voltages) assumed(net circuit.NetID) bool {
	if v.frame.ports == nil {
		return false
	}
	p := v.cell.Nets[net].Port
	return p >= 0 && p < len(v.frame.ports) && v.frame.ports[p].Source != Unknown
}

// insideInstance says that a dotted name leads to a node of an instance.
func (v *voltages) insideInstance(name string) bool {
	cell := v.cell
	for {
		head, rest, ok := strings.Cut(name, ".")
		if !ok {
			_, has := cell.NetByName(name)
			return has
		}
		inst := cell.InstanceByName(head)
		if inst == nil || inst.Cell == nil {
			return false
		}
		cell, name = inst.Cell, rest
	}
}

func (v *voltages) nodePlace(a assignment) circuit.Place {
	s := a.Node.Span()
	return placeOf(a.note, s.Start, s.End)
}

// repeated reports two assignments of one kind that say different things.
func (v *voltages) repeated(was, now *claim) {
	if was.layer != now.layer {
		return
	}
	text := func(a assignment) string { return a.note.Place.Doc.File.Src[a.place.Span.Start:a.place.Span.End] }
	if text(was.assignment) == text(now.assignment) {
		return
	}
	v.w.problem(Contradicted, now.place, fmt.Sprintf("v(%s) is annotated twice: %s holds, not %s",
		now.Node.Text, text(now.assignment), text(was.assignment)))
}

// spread repeats outer samples over the grid of the own ranges.
func (v *voltages) spread(o Voltage) Voltage {
	if o.V == nil || len(v.t) == 1 {
		return o
	}
	out := make([]float64, 0, v.samples)
	for _, x := range o.V {
		for range v.t {
			out = append(out, x)
		}
	}
	o.V = out
	return o
}

// given sets what is known before any annotation: ground, ports, global nets,
// and what an outer level says of nodes in here.
func (v *voltages) given() {
	v.nodes[circuit.Ground] = Voltage{V: make([]float64, v.samples), Source: Fixed, Why: "ground"}
	for i, n := range v.cell.Nets {
		id := circuit.NetID(i)
		if id == circuit.Ground {
			continue
		}
		if g, ok := v.frame.globals[n.Name]; ok && n.Global {
			v.nodes[id] = v.spread(g)
		}
	}
	for i, id := range v.cell.Ports {
		if i < len(v.frame.ports) && id != circuit.Ground && v.frame.ports[i].Source != Unknown {
			v.nodes[id] = v.spread(v.frame.ports[i])
		}
	}
	for _, o := range v.frame.over {
		if id, ok := v.cell.NetByName(o.path); ok && id != circuit.Ground {
			v.nodes[id] = v.spread(o.v)
			delete(v.pending, id)
		}
	}
}

// settle evaluates annotations and follows sources until nothing new is known.
func (v *voltages) settle() {
	for progress := true; progress; {
		progress = false
		for _, c := range v.order {
			if c.v != nil || (c.net >= 0 && v.pending[c.net] != c) {
				continue
			}
			val, err := v.evaluate(c)
			var wait unknownNode
			if errors.As(err, &wait) {
				continue
			}
			progress = true
			if err != nil {
				v.fail(c, NotEvaluated, err.Error())
				continue
			}
			c.v = val
			if c.net >= 0 {
				v.nodes[c.net] = *val
				delete(v.pending, c.net)
			}
		}
		progress = v.follow() || progress
	}
}

// fail reports a claim that gives no voltage and takes it out of the way.
func (v *voltages) fail(c *claim, kind ProblemKind, message string) {
	v.w.problem(kind, c.place, message)
	c.v = &Voltage{}
	if c.net >= 0 {
		delete(v.pending, c.net)
	}
}

// report names the annotations that wait for a node that never becomes known.
func (v *voltages) report() {
	for _, c := range v.order {
		if c.v != nil || (c.net >= 0 && v.pending[c.net] != c) {
			continue
		}
		_, err := v.evaluate(c)
		var wait unknownNode
		if errors.As(err, &wait) && v.pending[wait.net] != nil {
			v.w.problem(Circular, c.place, fmt.Sprintf("v(%s) and v(%s) are annotated in terms of each other", c.Node.Text, wait.spelt))
		} else if err != nil {
			v.w.problem(NotEvaluated, c.place, err.Error())
		}
	}
	v.contradictions()
}

// evaluate gives an annotation's voltage at every sample.
func (v *voltages) evaluate(c *claim) (*Voltage, error) {
	out := &Voltage{V: make([]float64, v.samples), Source: Annotated, Why: "annotated", Place: c.place}
	for s := range out.V {
		lo, err := v.expr(c.Lo, s)
		if err != nil {
			return nil, err
		}
		out.V[s] = lo
		if c.Hi == nil {
			if _, plain := c.Lo.(*parser.NumberLit); plain {
				for i := range out.V {
					out.V[i] = lo
				}
				return out, nil
			}
			continue
		}
		hi, err := v.expr(c.Hi, s)
		if err != nil {
			return nil, err
		}
		if lo > hi {
			v.w.problem(BadRange, c.place, fmt.Sprintf("the range of v(%s) runs from %s down to %s: write the lower end first",
				c.Node.Text, quantity.Volts(lo), quantity.Volts(hi)))
			lo, hi = hi, lo
		}
		out.V[s] = lo + v.t[s%len(v.t)][c.axis]*(hi-lo)
	}
	return out, nil
}

// expr evaluates an expression of an annotation at a sample.
func (v *voltages) expr(e parser.Expr, sample int) (float64, error) {
	x, err := v.cell.Env.EvalWith(e, func(p *parser.Probe) (float64, error) {
		if parser.Fold(p.Func.Text) != "v" || len(p.Names) == 0 {
			return 0, fmt.Errorf("%s() is no voltage: annotations know v(node)", p.Func.Text)
		}
		var at [2]float64
		for i, name := range p.Names[:min(len(p.Names), 2)] {
			id, ok := v.cell.NetByName(fold(name))
			if !ok {
				return 0, errors.New(v.w.noSuchNode(v.cell, name.Text))
			}
			n := v.nodes[id]
			if n.V == nil || v.pending[id] != nil {
				return 0, unknownNode{id, name.Text}
			}
			at[i] = n.V[sample]
		}
		return at[0] - at[1], nil
	})
	if err == nil && (math.IsNaN(x) || math.IsInf(x, 0)) {
		err = errors.New("the expression has no finite value")
	}
	return x, err
}
