package bias

import (
	"encoding/binary"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// worker evaluates the contexts of one run.
type worker struct {
	*analyser
	run      *Run
	tweaks   tweaks
	memo     map[contextKey]*Context
	compiled map[compileKey]*compiled
}

func newWorker(a *analyser, run *Run, t tweaks) *worker {
	return &worker{a, run, t, map[contextKey]*Context{}, map[compileKey]*compiled{}}
}

// frame is what a context is given from outside.
type frame struct {
	samples int
	axes    []Axis
	ports   []Voltage          // nil for a root
	globals map[string]Voltage // by folded name
	over    []override         // annotations of an outer level on nodes in here
	m       float64            // product of the instances' multipliers
	path    string             // of the first instance, for axis names
	within  []string           // folded names of the subckts that wrap the cell's MOSFET, outermost first
}

// override is an outer annotation on an inner node: path is relative to the
// context, folded: "mid", "xsw.mid".
type override struct {
	path string
	v    Voltage
	from assignment
}

func (w *worker) root(cell *circuit.Cell, alone bool) *Context {
	prefix := ""
	if alone {
		prefix = aloneName(cell) + "."
	}
	c := w.context(cell, frame{samples: 1, m: 1, path: prefix})
	c.Alone = alone
	return c
}

// aloneName heads the paths of a subckt analysed without an instance.
func aloneName(cell *circuit.Cell) string {
	if s := cell.Scope.Subckt; s != nil {
		return s.Name.Text
	}
	return ""
}

// context evaluates a cell in a frame, or finds that it has been.
func (w *worker) context(cell *circuit.Cell, f frame) *Context {
	f = f.compressed()
	key := contextKey{cell, f.key()}
	if c, ok := w.memo[key]; ok {
		return c
	}
	v := w.voltages(cell, f)
	c := &Context{Cell: cell, Samples: v.samples, Axes: v.axes, Nodes: v.nodes, within: f.within}
	w.memo[key] = c
	for _, d := range cell.Devices {
		if d.Kind == circuit.MOSFET {
			c.Devices = append(c.Devices, w.device(cell, d, c, f.m))
		}
	}
	c.index()
	globals := f.globals
	if f.ports == nil {
		globals = map[string]Voltage{}
		for i, n := range cell.Nets {
			if n.Global && i != int(circuit.Ground) {
				globals[n.Name] = c.Nodes[i]
			}
		}
	}
	for _, inst := range cell.Instances {
		c.Children = append(c.Children, Child{inst, w.child(c, inst, v, f, globals)})
	}
	return c
}

// child evaluates what an instance calls; nil if that is not known.
func (w *worker) child(c *Context, inst *circuit.Instance, v *voltages, f frame, globals map[string]Voltage) *Context {
	if inst.Cell == nil {
		return nil
	}
	inner := frame{
		samples: c.Samples, axes: c.Axes, globals: globals,
		m: f.m * multiplier(inst), path: f.path + inst.Spelt + ".",
		ports: make([]Voltage, len(inst.Cell.Ports)),
	}
	if inst.Cell.Wrapper() != nil {
		inner.within = append(slices.Clip(f.within), inst.Cell.Scope.Name)
	}
	for i := range inner.ports {
		if i < len(inst.Nets) {
			inner.ports[i] = c.Nodes[inst.Nets[i]]
		}
	}
	for _, o := range v.inner {
		if rest, ok := strings.CutPrefix(o.path, inst.Name+"."); ok {
			o.path = rest
			inner.over = append(inner.over, o)
		}
	}
	return w.context(inst.Cell, inner)
}

// multiplier is an instance's `m=`, 1 if it states none that evaluates.
func multiplier(inst *circuit.Instance) float64 {
	if inst.M.Err != nil || !inst.M.Set {
		return 1
	}
	return inst.M.V
}

type contextKey struct {
	cell  *circuit.Cell
	frame string
}

// compressed drops the samples of a frame in which nothing varies: a block far
// from the swept node is evaluated once.
func (f frame) compressed() frame {
	varies := func(v Voltage) bool {
		return slices.ContainsFunc(v.V, func(x float64) bool { return x != v.V[0] })
	}
	if f.samples == 1 || slices.ContainsFunc(f.ports, varies) ||
		slices.ContainsFunc(f.over, func(o override) bool { return varies(o.v) }) {
		return f
	}
	for _, g := range f.globals {
		if varies(g) {
			return f
		}
	}
	one := func(v Voltage) Voltage {
		if v.V != nil {
			v.V = v.V[:1]
		}
		return v
	}
	out := frame{samples: 1, m: f.m, path: f.path, within: f.within}
	for _, p := range f.ports {
		out.ports = append(out.ports, one(p))
	}
	if out.ports == nil && f.ports != nil {
		out.ports = []Voltage{}
	}
	if f.globals != nil {
		out.globals = map[string]Voltage{}
		for name, g := range f.globals {
			out.globals[name] = one(g)
		}
	}
	for _, o := range f.over {
		o.v = one(o.v)
		out.over = append(out.over, o)
	}
	return out
}

// key tells frames apart by the bits of their voltages.
func (f frame) key() string {
	var b []byte
	num := func(v float64) { b = binary.LittleEndian.AppendUint64(b, math.Float64bits(v)) }
	volt := func(v Voltage) {
		b = append(b, byte(v.Source), byte(min(len(v.V), 1)))
		for _, x := range v.V {
			num(x)
		}
		b = append(b, v.Why...)
		b = append(b, 0)
	}
	num(f.m)
	num(float64(f.samples))
	if f.ports == nil {
		b = append(b, 'r')
	}
	for _, p := range f.ports {
		volt(p)
	}
	names := make([]string, 0, len(f.globals))
	for name := range f.globals {
		names = append(names, name)
	}
	slices.Sort(names)
	for _, name := range names {
		b = append(append(b, name...), '=')
		volt(f.globals[name])
	}
	for _, o := range f.over {
		b = append(append(b, o.path...), '=')
		volt(o.v)
	}
	for _, name := range f.within {
		b = append(append(b, '/'), name...)
	}
	return string(b)
}

// isPattern says that a name has wildcards.
func isPattern(name string) bool { return strings.ContainsAny(name, "*?") }

// fold is short for the names of annotations.
func fold(w parser.Word) string { return parser.Fold(w.Text) }
