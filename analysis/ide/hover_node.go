package ide

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// maxPins is how many terminals a hover lists.
const maxPins = 12

// hoverNode tells a node's voltage in every mode, where it comes from, and what
// hangs on it.
func (q query) hoverNode(p place, name string) string {
	levels := q.nodeLevels(p, name)
	if len(levels) == 0 {
		return ""
	}
	t := &table{head: []string{"instance", "mode", "voltage", "from"}}
	several, modes := false, false
	for _, l := range levels {
		several = several || l.path != levels[0].path
		modes = modes || l.mode != ""
	}
	paths := map[string]bool{}
	for _, l := range levels {
		if paths[l.path] = true; len(paths) > maxInstances {
			break
		}
		path, mode := "", ""
		if several {
			path = escape(l.path)
		}
		if modes {
			mode = escape(l.mode)
		}
		t.add(path, mode, l.text(), l.from())
	}
	cell, net := levels[0].context.Cell, levels[0].net
	title := "**" + code("v("+cell.Nets[net].Spelt+")") + "**"
	switch n := cell.Nets[net]; {
	case net == circuit.Ground:
		title += " · ground"
	case n.Port >= 0 && cell.Scope.Subckt != nil:
		title += " · port " + fmt.Sprint(n.Port+1) + " of " + code(cell.Scope.Subckt.Name.Text)
	case n.Global:
		title += " · global"
	}
	return title + "\n\n" + t.String() + "\n" + hanging(cell, net)
}

// level is a node's voltage in one mode, as one instance sees it, over corners
// and range.
type level struct {
	path, mode string
	context    *bias.Context
	net        circuit.NetID
	lo, hi     float64
	known      bool
	source     bias.Voltage // of the first corner
}

func (q query) nodeLevels(p place, name string) []level {
	var out []level
	for _, s := range sightings(q.deck.Bias(q.ctx), q.body(p.card)) {
		cell, net, context, ok := nodeIn(s.context, parser.Fold(name))
		if !ok {
			continue
		}
		_ = cell
		v := context.Nodes[net]
		i := slices.IndexFunc(out, func(l level) bool { return l.path == s.path && l.mode == s.run.Mode })
		if i < 0 {
			i = len(out)
			out = append(out, level{path: s.path, mode: s.run.Mode, context: context, net: net, lo: math.Inf(1), hi: math.Inf(-1), source: v})
		}
		for _, x := range v.V {
			out[i].lo, out[i].hi = extremes(out[i].lo, out[i].hi, x)
			out[i].known = true
		}
	}
	return out
}

// nodeIn finds a node by its name in a context, through instances if the name
// has dots.
func nodeIn(c *bias.Context, name string) (*circuit.Cell, circuit.NetID, *bias.Context, bool) {
	for {
		if net, ok := c.Cell.NetByName(name); ok {
			return c.Cell, net, c, true
		}
		head, rest, ok := strings.Cut(name, ".")
		if !ok {
			return nil, 0, nil, false
		}
		i := slices.IndexFunc(c.Children, func(ch bias.Child) bool { return ch.Instance.Name == head })
		if i < 0 || c.Children[i].Context == nil {
			return nil, 0, nil, false
		}
		c, name = c.Children[i].Context, rest
	}
}

func (l level) text() string {
	if !l.known {
		return "not known"
	}
	return voltSpread(l.lo, l.hi)
}

func (l level) from() string {
	if !l.known {
		return "annotate it: " + code("*@ bias v("+l.context.Cell.Nets[l.net].Spelt+")=…")
	}
	text := l.source.Why
	if text == "" {
		text = l.source.Source.String()
	}
	if at := where(l.source.Place); at != "" {
		text += ", " + at
	}
	return text
}

// hanging lists the terminals on a net.
func hanging(cell *circuit.Cell, net circuit.NetID) string {
	pins := cell.Nets[net].Pins
	var texts []string
	for _, p := range pins[:min(len(pins), maxPins)] {
		texts = append(texts, pinText(p))
	}
	if n := len(pins) - maxPins; n > 0 {
		texts = append(texts, fmt.Sprintf("and %d more", n))
	}
	if len(texts) == 0 {
		return ""
	}
	return "connects " + strings.Join(texts, ", ") + "\n"
}

// terminals names the pins of the kinds of device whose pins differ.
var terminals = map[circuit.Kind][]string{
	circuit.MOSFET:  {"drain", "gate", "source", "bulk"},
	circuit.Bipolar: {"collector", "base", "emitter", "substrate"},
	circuit.Diode:   {"anode", "cathode"},
	circuit.VSource: {"+", "−"},
	circuit.ISource: {"from", "to"},
}

func pinText(p circuit.Pin) string {
	if d := p.Device; d != nil {
		if names := terminals[d.Kind]; p.Terminal < len(names) {
			return escape(d.Spelt) + " " + names[p.Terminal]
		}
		return escape(d.Spelt)
	}
	if x := p.Instance; x != nil {
		if x.Def != nil && p.Terminal < len(x.Def.Ports) {
			return escape(x.Spelt + "." + x.Def.Ports[p.Terminal].Text)
		}
		return escape(x.Spelt)
	}
	return ""
}
