package bias

import (
	"fmt"
	"slices"
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
	within string
}

// device evaluates a MOSFET at the voltages of its context.
func (w *worker) device(cell *circuit.Cell, d *circuit.Device, c *Context, m float64) *Device {
	cc := w.compile(cell, d, m, c.within)
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
func (w *worker) compile(cell *circuit.Cell, d *circuit.Device, m float64, within []string) *compiled {
	key := compileKey{d, m, strings.Join(within, "/")}
	if c, ok := w.compiled[key]; ok {
		return c
	}
	c := &compiled{polarity: mos.NMOS}
	w.compiled[key] = c
	g, reason := geometry(d, m)
	c.geometry = g
	if d.Size != nil {
		c.notes = append(c.notes, d.Size.Notes...)
	}
	temp, badTemp := w.temperature(d)
	if reason == "" {
		reason = badTemp
	}
	names := append(slices.Clip(within), cell.FactNames(d)...) // what the writer sees first
	access := w.access(cell, names, &c.geometry)
	if card, ok := w.card(cell, d, c); ok {
		c.polarity = card.Polarity
		if c.reason = reason; reason == "" {
			c.use(card, temp)
		}
	}
	// What cannot be read, has no bin or is not modelled may have a stand-in.
	if c.model == nil && reason == "" || d.Model != nil && d.Model.Def == nil {
		if card, note, ok := w.standIn(cell, names); ok {
			c.polarity, c.reason = card.Polarity, ""
			c.notes = append(c.notes, note)
			c.use(card, temp)
			if access == noAccess {
				access = "" // a fit is of the whole device
			}
		}
	}
	if access != "" && c.model != nil {
		c.notes = append(c.notes, access)
	}
	return c
}

// use compiles a card for the geometry, or says why it cannot.
func (c *compiled) use(card mos.Card, temp float64) {
	model, notes := mos.Compile(card, c.geometry, temp)
	for _, n := range notes {
		if n.Fatal {
			c.reason = n.Text
			return
		}
	}
	c.model, c.kind = model, model.Level()
}

// temperature is a device's own, in °C: `temp=`, else the run's plus `dtemp=`.
// The string says why it is not known.
func (w *worker) temperature(d *circuit.Device) (float64, string) {
	if t, ok := d.Params["temp"]; ok {
		if t.Err != nil {
			return 0, fmt.Sprintf("temp: %v", t.Err)
		}
		return t.V, ""
	}
	if t := d.Params["dtemp"]; t.Err != nil {
		return 0, fmt.Sprintf("dtemp: %v", t.Err)
	}
	return w.run.TempC + d.Params["dtemp"].V, ""
}

// card gives the model card as numbers, the corner's shifts applied.
func (w *worker) card(cell *circuit.Cell, d *circuit.Device, c *compiled) (mos.Card, bool) {
	if d.Model == nil || (d.Model.Def == nil && len(d.Model.Bins) == 0) {
		c.reason = fmt.Sprintf("model %q is not defined", d.Elem.Model.Text)
		if len(w.run.Design.Sealed) > 0 {
			c.reason = fmt.Sprintf("model %q is not in the text that can be read, and a block of it is encrypted: `*@ fit` gives a stand-in", d.Elem.Model.Text)
		}
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
	if c.reason = numbers(&card, d.Elem.Model.Text, d.Model.Params); c.reason != "" {
		return mos.Card{}, false
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
