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
func (q query) hoverNode(p place, node string) string {
	levels := q.nodeLevels(p, node)
	if len(levels) == 0 {
		return ""
	}
	several := slices.ContainsFunc(levels, func(l level) bool { return l.path != levels[0].path })
	t := &table{head: []string{"instance", "mode", "voltage", "from"}}
	for i, rows := range byInstance(levels) {
		if i == maxInstances {
			break
		}
		path := ""
		if several {
			path = name(rows[0].path)
		}
		differ := slices.ContainsFunc(rows, func(l level) bool { return l.text() != rows[0].text() || q.levelFrom(l) != q.levelFrom(rows[0]) })
		if !differ && len(rows) > 1 {
			t.add(path, "every", rows[0].text(), q.levelFrom(rows[0]))
			continue
		}
		for _, l := range rows {
			t.add(path, name(l.mode), l.text(), q.levelFrom(l))
		}
	}
	cell, net := levels[0].context.Cell, levels[0].net
	spelt := cell.Nets[net].Spelt
	if strings.Contains(node, ".") {
		spelt = node // through instances
	}
	title := code("v(" + spelt + ")")
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

// byInstance groups levels by instance, in the order of their first mention.
func byInstance(levels []level) [][]level {
	var groups [][]level
	for _, l := range levels {
		i := slices.IndexFunc(groups, func(g []level) bool { return g[0].path == l.path })
		if i < 0 {
			i = len(groups)
			groups = append(groups, nil)
		}
		groups[i] = append(groups[i], l)
	}
	return groups
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

func (q query) nodeLevels(p place, node string) []level {
	var out []level
	for _, s := range sightings(q.deck.Bias(q.ctx), q.body(p.card)) {
		net, context, ok := nodeIn(s.context, parser.Fold(node))
		if !ok {
			continue
		}
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
func nodeIn(c *bias.Context, name string) (circuit.NetID, *bias.Context, bool) {
	for {
		if net, ok := c.Cell.NetByName(name); ok {
			return net, c, true
		}
		head, rest, ok := strings.Cut(name, ".")
		if !ok {
			return 0, nil, false
		}
		i := slices.IndexFunc(c.Children, func(ch bias.Child) bool { return ch.Instance.Name == head })
		if i < 0 || c.Children[i].Context == nil {
			return 0, nil, false
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

func (q query) levelFrom(l level) string {
	if !l.known {
		return "annotate it: " + code("*@ bias v("+l.context.Cell.Nets[l.net].Spelt+")=…")
	}
	why, at := q.voltageFrom(l.source)
	return joined(" at ", why, at)
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
			return code(d.Spelt) + " " + names[p.Terminal]
		}
		return code(d.Spelt)
	}
	if x := p.Instance; x != nil {
		if x.Def != nil && p.Terminal < len(x.Def.Ports) {
			return code(x.Spelt + "." + x.Def.Ports[p.Terminal].Text)
		}
		return code(x.Spelt)
	}
	return ""
}
