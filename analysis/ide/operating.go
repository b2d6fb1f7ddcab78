package ide

import (
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/parser"
)

// operation is one MOSFET in one mode, as one instance sees it, over the corners.
type operation struct {
	path  string // of the instance, "" at the top level
	mode  string
	parts []part // one a corner
}

// part is the device at one corner.
type part struct {
	corner  string
	context *bias.Context
	*bias.Device
	call *call // of a wrapped device
}

// call is an instance line that stands for the one MOSFET inside, with the context
// in which it is written.
type call struct {
	outer *bias.Context
	bias.Child
}

// node is the node at a terminal, as the writer of the card names it, with its
// voltage.
func (p part) node(terminal int) (string, bias.Voltage) {
	net := p.Device.Device.Nets[terminal]
	n := p.context.Cell.Nets[net]
	if p.call != nil && p.call.Context == p.context && n.Port >= 0 && n.Port < len(p.call.Instance.Nets) {
		outer := p.call.Instance.Nets[n.Port]
		return p.call.outer.Cell.Nets[outer].Spelt, p.call.outer.Nodes[outer]
	}
	return n.Spelt, p.context.Nodes[net]
}

// operations lists what the card of a MOSFET, or of an instance that wraps one,
// does: in every mode, in every distinct instance of the subckt around it.
func operations(seen []sighting, e *parser.Element) []operation {
	return grouped(byElement(seen)[e])
}

// spotted is a device where one run and instance sees it.
type spotted struct {
	sighting
	device *bias.Device
	call   *call
}

// byElement sorts every device of a body by its card.
func byElement(seen []sighting) map[*parser.Element][]spotted {
	out := map[*parser.Element][]spotted{}
	for _, s := range seen {
		for _, d := range s.context.Devices {
			out[d.Device.Elem] = append(out[d.Device.Elem], spotted{s, d, nil})
		}
		for _, ch := range s.context.Children {
			if w, ok := ch.Wrapped(); ok {
				inner := sighting{s.run, s.path, w.Context}
				out[ch.Instance.Elem] = append(out[ch.Instance.Elem], spotted{inner, w.Device, &call{s.context, ch}})
			}
		}
	}
	return out
}

// grouped makes operations of one device's sightings.
func grouped(list []spotted) []operation {
	var out []operation
	for _, s := range list {
		p := part{s.run.Corner, s.context, s.device, s.call}
		i := slices.IndexFunc(out, func(o operation) bool { return o.path == s.path && o.mode == s.run.Mode })
		if i < 0 {
			i = len(out)
			out = append(out, operation{path: s.path, mode: s.run.Mode})
		}
		out[i].parts = append(out[i].parts, p)
	}
	// An instance's modes together, instances in the order of their first mention.
	order := map[string]int{}
	for _, o := range out {
		if _, ok := order[o.path]; !ok {
			order[o.path] = len(order)
		}
	}
	slices.SortStableFunc(out, func(a, b operation) int { return order[a.path] - order[b.path] })
	return out
}

// split is the operation corner by corner.
func (o operation) split() []operation {
	var out []operation
	for _, p := range o.parts {
		out = append(out, operation{o.path, o.mode, []part{p}})
	}
	return out
}

// evaluated are the corners at which the device has an operating point.
func (o operation) evaluated() []part {
	return slices.DeleteFunc(slices.Clone(o.parts), func(p part) bool { return len(p.Points) == 0 })
}

// bound is an extreme value of a quantity and where it is taken.
type bound struct {
	v  float64
	at string
}

// bounds are the extremes of a quantity over corners and range; not ok if the
// device is evaluated nowhere or has no such quantity.
func (o operation) bounds(name string) (lo, hi bound, ok bool) {
	lo, hi = bound{v: math.Inf(1)}, bound{v: math.Inf(-1)}
	for _, p := range o.evaluated() {
		for s := range p.Points {
			v, has := bias.Quantity(p.Device, s, name)
			if !has {
				continue
			}
			if !ok || v < lo.v {
				lo = bound{v, o.at(p, s)}
			}
			if !ok || v > hi.v {
				hi = bound{v, o.at(p, s)}
			}
			ok = true
		}
	}
	return lo, hi, ok
}

// at names a sample: the corner, if there are several, and the ranged nodes.
func (o operation) at(p part, sample int) string {
	at := p.context.AtDevice(p.Device, sample)
	if len(o.parts) < 2 {
		return at
	}
	return joined(", ", cornerName(p.corner), at)
}

// cornerName is how a corner is spoken of; that without a name is the nominal.
func cornerName(corner string) string {
	if corner == "" {
		return "nominal"
	}
	return corner
}

// joined joins the texts that are not empty.
func joined(sep string, texts ...string) string {
	return strings.Join(slices.DeleteFunc(texts, func(s string) bool { return s == "" }), sep)
}

// value is the range of a quantity, with its unit; "" if there is none.
func (o operation) value(name string) string {
	lo, hi, ok := o.bounds(name)
	if !ok {
		return ""
	}
	return spread(lo.v, hi.v, bias.Unit(name))
}

// regions are the names of the regions that the device is in, each once. With
// one only, its nearness to another is told.
func (o operation) regions() string {
	var names []string
	last := ""
	for _, p := range o.evaluated() {
		for _, v := range p.Verdicts {
			last = v.String()
			if name := v.Region.String(); !slices.Contains(names, name) {
				names = append(names, name)
			}
		}
	}
	parts := o.evaluated()
	if len(names) == 1 && len(parts) == 1 && len(parts[0].Verdicts) == 1 {
		return last
	}
	return strings.Join(names, " / ")
}

// missing are the nodes to annotate before the device can be evaluated.
func (o operation) missing() []string {
	var nodes []string
	for _, p := range o.parts {
		for _, n := range p.Missing {
			if !slices.Contains(nodes, n) {
				nodes = append(nodes, n)
			}
		}
	}
	return nodes
}

// reason is why the device is not evaluated, if unknown nodes are not the cause.
func (o operation) reason() string {
	for _, p := range o.parts {
		if p.Reason != "" {
			return p.Reason
		}
	}
	return ""
}
