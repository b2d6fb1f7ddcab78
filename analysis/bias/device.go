package bias

import (
	"fmt"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
)

// compiled is a device's card, geometry and temperature made ready.
type compiled struct {
	model    *mos.Device
	kind     string
	polarity mos.Polarity
	geometry mos.Geometry
	notes    []string
	reason   string // why there is no model
}

// compileKey tells compilations apart within a run.
type compileKey struct {
	device *circuit.Device
	m      float64
}

// device evaluates a MOSFET at the voltages of its context.
func (w *worker) device(cell *circuit.Cell, d *circuit.Device, c *Context, m float64) *Device {
	cc := w.compile(cell, d, m)
	out := &Device{
		Device: d, Polarity: cc.polarity, Model: d.Elem.Model.Text, ModelKind: cc.kind,
		Geometry: cc.geometry, Reason: cc.reason, Notes: cc.notes, Source: Annotated,
	}
	if len(d.Nets) < 4 {
		out.Source = Unknown
		out.Reason = "it has fewer than four terminals"
		return out
	}
	for _, id := range d.Nets[:4] {
		n := c.Nodes[id]
		out.Source = min(out.Source, n.Source)
		if n.V == nil {
			out.Missing = appendNew(out.Missing, cell.Nets[id].Spelt)
		}
	}
	if out.Reason != "" || len(out.Missing) > 0 {
		return out
	}
	drain, gate, source, bulk := c.Nodes[d.Nets[0]].V, c.Nodes[d.Nets[1]].V, c.Nodes[d.Nets[2]].V, c.Nodes[d.Nets[3]].V
	out.Points = make([]mos.Point, c.Samples)
	out.Verdicts = make([]mos.Verdict, c.Samples)
	floor := mos.LeakFloor(cc.geometry.W)
	for s := range out.Points {
		p := cc.model.Eval(gate[s]-source[s], drain[s]-source[s], bulk[s]-source[s])
		out.Points[s] = p
		out.Verdicts[s] = mos.Decide(p, floor)
	}
	return out
}

// Junctions gives the voltage across a device's bulk junctions at a sample, in
// volts, forward positive: bulk to source and bulk to drain as biased.
func (d *Device) Junctions(sample int) (source, drain float64) {
	p := d.Points[sample]
	return p.VBS, p.VBS - p.VDS
}

func appendNew(list []string, s string) []string {
	for _, have := range list {
		if have == s {
			return list
		}
	}
	return append(list, s)
}

// compile makes a device ready once a run and multiplier.
func (w *worker) compile(cell *circuit.Cell, d *circuit.Device, m float64) *compiled {
	key := compileKey{d, m}
	if c, ok := w.compiled[key]; ok {
		return c
	}
	c := &compiled{polarity: mos.NMOS}
	w.compiled[key] = c
	card, ok := w.card(cell, d, c)
	if !ok {
		return c
	}
	c.polarity = card.Polarity
	g, reason := geometry(d, m)
	c.geometry = g
	if d.Size != nil {
		c.notes = append(c.notes, d.Size.Notes...)
	}
	if reason != "" {
		c.reason = reason
		return c
	}
	w.access(cell, d, &c.geometry, c)
	model, notes := mos.Compile(card, c.geometry, w.temperature(d))
	for _, n := range notes {
		if n.Fatal {
			c.reason = n.Text
			return c
		}
	}
	c.model, c.kind = model, model.Level()
	return c
}

// temperature is a device's own, in °C: `temp=`, else the run's plus `dtemp=`.
func (w *worker) temperature(d *circuit.Device) float64 {
	if t, ok := d.Params["temp"]; ok && t.Err == nil {
		return t.V
	}
	return w.run.TempC + d.Params["dtemp"].V
}

// card gives the model card as numbers, the corner's shifts applied, or a square
// law stand-in where the writer has fitted one.
func (w *worker) card(cell *circuit.Cell, d *circuit.Device, c *compiled) (mos.Card, bool) {
	name := fold(d.Elem.Model)
	if d.Model == nil || (d.Model.Def == nil && len(d.Model.Bins) == 0) {
		if fit := w.fitFor(cell, name); fit != nil {
			c.notes = append(c.notes, "a stand-in: the numbers come from the fit, not from a model card")
			return w.tweaked(fitCard(cell, fit)), true
		}
		c.reason = fmt.Sprintf("model %q is not defined", d.Elem.Model.Text)
		return mos.Card{}, false
	}
	card := mos.Card{Polarity: mos.NMOS, Params: map[string]float64{}}
	switch d.Model.Type() {
	case "nmos":
	case "pmos":
		card.Polarity = mos.PMOS
	default:
		c.reason = fmt.Sprintf("model %q is of type %q, which is no MOSFET that is modelled here", d.Elem.Model.Text, d.Model.Type())
		return mos.Card{}, false
	}
	c.polarity = card.Polarity
	if d.Model.Def == nil {
		c.reason = fmt.Sprintf("no bin of model %q fits", d.Elem.Model.Text)
		if d.Size != nil && d.Size.Reason != "" {
			c.reason = d.Size.Reason
		}
		return mos.Card{}, false
	}
	card.Name = d.Model.Def.Name
	for p, v := range d.Model.Params {
		if v.Err != nil {
			c.reason = fmt.Sprintf("parameter %q of model %q: %v", p, d.Elem.Model.Text, v.Err)
			return mos.Card{}, false
		}
		card.Params[p] = v.V
	}
	return w.tweaked(card), true
}

// aliases are the spellings that one corner shift speaks to.
var aliases = map[string][]string{
	"vto": {"vto", "vth0", "vt0"}, "vth0": {"vto", "vth0", "vt0"},
	"u0": {"u0", "uo", "kp"}, "uo": {"u0", "uo", "kp"},
}

// tweaked applies a corner's shifts of model parameters. A threshold shift is a
// shift of its magnitude; a mobility factor scales KP too, which is µ·Cox.
func (w *worker) tweaked(card mos.Card) mos.Card {
	for _, t := range w.tweaks {
		names := aliases[t.name]
		if names == nil {
			names = []string{t.name}
		}
		for _, name := range names {
			was, ok := card.Params[name]
			if !ok || (name == "kp" && t.op != '*') {
				continue
			}
			v := apply(was, t.op, t.value)
			if (t.op == '+' || t.op == '-') && card.Polarity == mos.PMOS && was < 0 {
				v = -apply(-was, t.op, t.value)
			}
			card.Params[name] = v
		}
	}
	return card
}

// fitFor finds the writer's stand-in for a model, the nearest scope first.
func (w *worker) fitFor(cell *circuit.Cell, model string) *fitAt {
	for s := cell.Scope; s != nil; s = s.Parent {
		for i, f := range w.statements(s).fits {
			if Match(fold(f.Fit.Model), model) {
				return &w.statements(s).fits[i]
			}
		}
	}
	return nil
}

func fitCard(cell *circuit.Cell, f *fitAt) mos.Card {
	card := mos.Card{Name: fold(f.Fit.Model), Polarity: mos.NMOS, Params: map[string]float64{}}
	if strings.HasPrefix(fold(f.Type), "p") {
		card.Polarity = mos.PMOS
	}
	for _, p := range f.Params {
		if v := cell.Env.Value(p.Value); v.Err == nil {
			card.Params[fold(p.Name)] = v.V
		}
	}
	return card
}

// access adds the resistance that an annotation states outside the card.
func (w *worker) access(cell *circuit.Cell, d *circuit.Device, g *mos.Geometry, c *compiled) {
	for s := cell.Scope; s != nil; s = s.Parent {
		for _, a := range w.statements(s).access {
			if !Match(fold(a.Access.Model), fold(d.Elem.Model)) {
				continue
			}
			for _, p := range a.Params {
				v := cell.Env.Value(p.Value)
				if v.Err != nil {
					continue
				}
				switch fold(p.Name) {
				case "rs":
					g.RS = v.V
				case "rd":
					g.RD = v.V
				case "rsw": // ohm·µm a side
					g.RS, g.RD = v.V*1e-6/g.W, v.V*1e-6/g.W
				}
			}
			c.notes = append(c.notes, "access resistance included")
			return
		}
	}
}
