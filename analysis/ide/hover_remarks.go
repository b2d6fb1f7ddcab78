package ide

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/mos"
	"triodeck/analysis/quantity"
)

// remark is a line under the table, about an instance in a mode.
type remark struct{ path, mode, text string }

// remarks are the lines under the table: the bias, where the extremes lie, how
// far the small-Vds law holds, where the voltages come from, and what else to
// know.
func (q query) remarks(ops []operation) []string {
	var list []remark
	add := func(o operation, texts ...string) {
		for _, t := range texts {
			if t != "" {
				list = append(list, remark{o.path, o.mode, t})
			}
		}
	}
	for _, o := range ops {
		if len(o.evaluated()) == 0 {
			add(o, wanted(o))
			continue
		}
		add(o, o.pairs())
		add(o, o.turns()...)
		add(o, o.worst(), o.law())
	}
	for i, o := range ops {
		if i == 0 || ops[i-1].path != o.path {
			text := q.origin(slices.DeleteFunc(slices.Clone(ops), func(x operation) bool { return x.path != o.path }))
			list = append(list, remark{o.path, everyMode, text})
		}
	}
	lines := headed(list, ops)
	for _, o := range ops {
		for _, p := range o.parts {
			for _, note := range p.Notes {
				if note = prose(note); !slices.Contains(lines, note) {
					lines = append(lines, note)
				}
			}
		}
	}
	return lines
}

// everyMode stands for the name of a mode where a remark holds in all of them.
const everyMode = "*"

// headed puts the instance and mode before remarks, where there are several; a
// remark that holds in every mode of an instance comes once.
func headed(list []remark, ops []operation) []string {
	var lines []string
	for _, r := range list {
		modes, same := 0, 0
		for _, o := range ops {
			if o.path == r.path {
				modes++
			}
		}
		for _, x := range list {
			if x.path == r.path && x.text == r.text {
				same++
			}
		}
		prefix := ""
		if severalPaths(ops) {
			prefix = name(r.path)
		}
		if severalModes(ops) && r.mode != everyMode && (modes == 1 || same < modes) {
			prefix = joined(" ", prefix, name(r.mode))
		}
		if line := joined(": ", prefix, prose(r.text)); !slices.Contains(lines, line) {
			lines = append(lines, line)
		}
	}
	return lines
}

// pairs are the terminal voltages, in the conducting direction, under the names
// that the polarity is spoken of with.
func (o operation) pairs() string {
	polarity := o.evaluated()[0].Polarity
	var texts []string
	for _, pair := range []string{"vgs", "vds", "vbs"} {
		texts = append(texts, bias.ShownPair(polarity, pair)+" "+o.value(pair))
	}
	return strings.Join(texts, ", ")
}

// maxTurns is how many changes of region a line tells.
const maxTurns = 4

// turns tells where over its range the device changes region.
func (o operation) turns() []string {
	var out []string
	for _, p := range o.evaluated() {
		spans := p.Regions()
		if len(spans) < 2 || p.context.AtDevice(p.Device, 0) == "" {
			continue
		}
		var texts []string
		for _, r := range spans {
			// With several ranged nodes, a sweep of one comes again for each
			// value of the others.
			text := fmt.Sprintf("%s from %s", r.Region, p.context.AtDevice(p.Device, r.From))
			if slices.Contains(texts, text) {
				continue
			}
			if len(texts) == maxTurns {
				texts = append(texts, "…")
				break
			}
			texts = append(texts, text)
		}
		text := strings.Join(texts, ", ")
		if len(o.parts) > 1 {
			text = name(cornerName(p.corner)) + ": " + text
		}
		out = append(out, text)
	}
	return out
}

// worst tells where Ron is lowest and highest, for a device that conducts.
func (o operation) worst() string {
	lo, hi, ok := o.bounds("ron")
	if !ok || lo.at == hi.at || math.IsInf(lo.v, 1) {
		return ""
	}
	least, most := quantity.Format(lo.v, "Ω"), quantity.Format(hi.v, "Ω")
	if least == most {
		return ""
	}
	return fmt.Sprintf("Ron %s at %s; %s at %s", least, lo.at, most, hi.at)
}

// negligible is a departure from the small-Vds law, relative, that is not worth
// telling: it is below the three digits that are shown.
const negligible = 5e-4

// law compares Ron with the small-Vds law of the square-law channel,
// 1/(k·Vov) (Shichman & Hodges 1968), wherever the device is in triode.
func (o operation) law() string {
	lo, hi, off := math.Inf(1), 0.0, 0.0
	for _, p := range o.evaluated() {
		for s, pt := range p.Points {
			r := p.Verdicts[s].Region
			if r != mos.Triode && r != mos.DeepTriode || math.IsInf(pt.Ron0, 0) || math.IsInf(pt.Ron, 0) {
				continue
			}
			lo, hi = extremes(lo, hi, pt.Ron0)
			if d := pt.Ron/pt.Ron0 - 1; math.Abs(d) > math.Abs(off) {
				off = d
			}
		}
	}
	if hi == 0 {
		return ""
	}
	text := "small-Vds law 1/(k·Vov) " + spread(lo, hi, "Ω")
	if math.Abs(off) < negligible {
		return text + "; Ron agrees"
	}
	text += "; Ron is "
	if lo != hi {
		text += "up to "
	}
	if off < 0 {
		return text + fmt.Sprintf("%.2g %% below", -100*off)
	}
	return text + fmt.Sprintf("%.2g %% above", 100*off)
}

// origin names the nodes of an instance's terminals by what their voltages come
// from: "v(s), v(in) annotated at line 9; v(clk) fixed by Vclk at line 4".
func (q query) origin(modes []operation) string {
	first := modes[0].parts[0]
	var order []string
	nodes := map[string][]string{}
	for i := range first.Device.Device.Nets {
		from := q.originOf(modes, i)
		node, _ := first.node(i)
		node = code("v(" + node + ")")
		if nodes[from] == nil {
			order = append(order, from)
		}
		if !slices.Contains(nodes[from], node) {
			nodes[from] = append(nodes[from], node)
		}
	}
	var texts []string
	for _, from := range order {
		texts = append(texts, strings.Join(nodes[from], ", ")+" "+from)
	}
	if first.context.Alone {
		texts = append(texts, "the subckt is taken alone")
	}
	return strings.Join(texts, "; ")
}

// originOf says where the voltage of a terminal comes from, mode by mode if the
// modes differ.
func (q query) originOf(modes []operation, terminal int) string {
	var whys, places, each []string
	for _, o := range modes {
		p := o.parts[0]
		if terminal >= len(p.Device.Device.Nets) {
			return "not known"
		}
		_, v := p.node(terminal)
		why, at := q.voltageFrom(v)
		whys = append(whys, why)
		places = append(places, at)
		each = append(each, joined(" at ", why, at)+" in "+name(o.mode))
	}
	sameWhy, samePlace := len(slices.Compact(slices.Clone(whys))) == 1, len(slices.Compact(slices.Clone(places))) == 1
	switch {
	case sameWhy && samePlace:
		return joined(" at ", whys[0], places[0])
	case sameWhy && !slices.Contains(places, ""):
		var texts []string
		for i, o := range modes {
			texts = append(texts, places[i]+" in "+name(o.mode))
		}
		return whys[0] + " at " + strings.Join(texts, ", ")
	}
	return strings.Join(each, ", ")
}

// voltageFrom says where a voltage comes from.
func (q query) voltageFrom(v bias.Voltage) (why, at string) {
	if v.V == nil {
		return "not known", ""
	}
	if why = v.Why; why == "" {
		why = v.Source.String()
	}
	return prose(why), q.where(v.Place)
}
