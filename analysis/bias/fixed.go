package bias

import (
	"fmt"
	"math"

	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser/spelling"
)

// follow carries known voltages across voltage sources to nodes that are not
// annotated; it says whether a node became known.
func (v *voltages) follow() (progress bool) {
	for _, d := range v.cell.Devices {
		if d.Kind != circuit.VSource || len(d.Nets) < 2 {
			continue
		}
		dc, ok := sourceDC(v.cell, d)
		if !ok {
			continue
		}
		plus, minus := d.Nets[0], d.Nets[1]
		switch p, m := v.nodes[plus], v.nodes[minus]; {
		case p.V == nil && m.V != nil && v.pending[plus] == nil:
			v.nodes[plus] = v.fixedBy(d, m, dc)
		case m.V == nil && p.V != nil && v.pending[minus] == nil:
			v.nodes[minus] = v.fixedBy(d, p, -dc)
		default:
			continue
		}
		progress = true
	}
	return progress
}

// fixedBy is a voltage held dc above a known one by a source. A chain is as weak
// as its weakest part, so a node that hangs on an annotated one is fixed.
func (v *voltages) fixedBy(d *circuit.Device, from Voltage, dc float64) Voltage {
	out := Voltage{V: make([]float64, v.samples), Source: min(from.Source, Fixed), Why: "fixed by " + d.Spelt, Place: d.Place}
	for s := range out.V {
		out.V[s] = from.V[s] + dc
	}
	return out
}

// sourceDC is the voltage that a source holds at rest: its DC value, else the
// start of its waveform, else 0 V as SPICE has it.
func sourceDC(cell *circuit.Cell, d *circuit.Device) (float64, bool) {
	if d.Value.Err != nil {
		return 0, false
	}
	if d.Value.Set || d.Elem.Source == nil || d.Elem.Source.Func.IsZero() {
		return d.Value.V, true
	}
	args := d.Elem.Source.Args
	first := 0
	switch fold(d.Elem.Source.Func) {
	case "pwl":
		first = 1 // time, value pairs
	case "pulse", "sin", "sine", "exp", "sffm":
	default:
		return 0, false
	}
	if len(args) <= first {
		return 0, false
	}
	x := cell.Env.Value(args[first])
	return x.V, x.Err == nil
}

// contradictions compares annotated nodes with the DC sources across them. Only
// plain bias lines count: a mode or a corner is meant to override, a waveform is
// meant to move, and a range that holds the source's value agrees with it.
func (v *voltages) contradictions() {
	for _, d := range v.cell.Devices {
		if d.Kind != circuit.VSource || len(d.Nets) < 2 || !d.Value.Set || d.Value.Err != nil ||
			d.Elem.Source == nil || !d.Elem.Source.Func.IsZero() {
			continue
		}
		plus, minus := d.Nets[0], d.Nets[1]
		p, m := v.nodes[plus], v.nodes[minus]
		c := v.claimOf(plus)
		if c == nil {
			c = v.claimOf(minus)
		}
		if p.V == nil || m.V == nil || c == nil {
			continue
		}
		worst, agrees := 0.0, false
		for s := range p.V {
			off := p.V[s] - m.V[s] - d.Value.V
			agrees = agrees || math.Abs(off) <= disagreement
			worst = max(worst, math.Abs(off))
		}
		inside := c.axis >= 0 && spans(p.V, m.V, d.Value.V)
		if agrees || inside || worst <= disagreement {
			continue
		}
		v.w.problem(Contradicted, c.place, fmt.Sprintf("v(%s) is annotated %s away from what %s holds (%s across it): the annotation is used",
			c.Node.Text, quantity.Volts(worst), d.Spelt, quantity.Volts(d.Value.V)))
	}
}

// spans says that the difference takes the value dc somewhere between samples.
func spans(p, m []float64, dc float64) bool {
	lo, hi := math.Inf(1), math.Inf(-1)
	for s := range p {
		lo, hi = min(lo, p[s]-m[s]), max(hi, p[s]-m[s])
	}
	return lo <= dc && dc <= hi
}

// claimOf is the plain bias line in effect for a net, nil if there is none.
func (v *voltages) claimOf(net circuit.NetID) *claim {
	for _, c := range v.order {
		if c.net == net && c.layer == biasLayer && c.v != nil {
			return c
		}
	}
	return nil
}

// noSuchNode is the message for a node that a cell does not have.
func (a *analyser) noSuchNode(cell *circuit.Cell, name string) string {
	msg := fmt.Sprintf("there is no node %q here", name)
	if s := cell.Scope.Subckt; s != nil {
		msg = fmt.Sprintf("subckt %q has no node %q", s.Name.Text, name)
	}
	names := make([]string, 0, len(cell.Nets))
	for _, n := range cell.Nets[1:] {
		names = append(names, n.Spelt)
	}
	if near := spelling.Nearest(name, names); near != "" {
		msg += fmt.Sprintf(": did you mean %q?", near)
	}
	return msg
}
