package ide

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/mos"
	"triodeck/analysis/quantity"
	"triodeck/parser"
)

// maxInstances is how many instances of a subckt a hover shows.
const maxInstances = 6

// hoverDevice tells a MOSFET's region, resistance and bias in every mode.
func (q query) hoverDevice(card int, e *parser.Element) string {
	body := q.body(card)
	ops := operations(sightings(q.deck.Bias(q.ctx), body), e)
	if len(ops) == 0 {
		return deviceHead(e, nil) + "\n\nNot evaluated: nothing in the deck leads to this card.\n"
	}
	first := ops[0].parts[0]
	var b strings.Builder
	b.WriteString(deviceHead(e, first.Device))
	b.WriteString("\n\n")
	shown, left := capped(ops)
	if !slices.ContainsFunc(shown, func(o operation) bool { return len(o.evaluated()) > 0 }) {
		b.WriteString(notEvaluated(shown))
	} else {
		b.WriteString(operatingTable(shown).String())
		b.WriteString("\n")
		for _, line := range remarks(shown) {
			b.WriteString("- " + line + "\n")
		}
	}
	if left > 0 {
		fmt.Fprintf(&b, "\nand %d more %s of %s\n", left, plural(left, "instance"), code(body.Name.Text))
	}
	return b.String()
}

func plural(n int, noun string) string {
	if n == 1 {
		return noun
	}
	return noun + "s"
}

// capped keeps the operations of the first instances.
func capped(ops []operation) (shown []operation, left int) {
	var paths []string
	for _, o := range ops {
		if !slices.Contains(paths, o.path) {
			paths = append(paths, o.path)
		}
		if len(paths) <= maxInstances {
			shown = append(shown, o)
		}
	}
	return shown, max(0, len(paths)-maxInstances)
}

// deviceHead is the line that says what the device is.
func deviceHead(e *parser.Element, d *bias.Device) string {
	head := "**" + escape(e.Name.Text) + "**"
	if !e.Model.IsZero() {
		head += " · " + code(e.Model.Text)
	}
	if d == nil || d.Reason != "" && d.ModelKind == "" {
		return head
	}
	head += " · " + strings.ToUpper(d.Polarity.String())
	if d.ModelKind != "" {
		head += ", " + d.ModelKind
	}
	g := d.Geometry
	if g.W > 0 && g.L > 0 {
		head += fmt.Sprintf(" · W/L = %s / %s", exact(g.W, "m"), exact(g.L, "m"))
	}
	if g.M > 1 {
		head += fmt.Sprintf(" × %g", g.M)
	}
	return head
}

// escape keeps a name from being read as markdown.
func escape(s string) string {
	return strings.NewReplacer("\\", "\\\\", "*", "\\*", "_", "\\_", "`", "\\`", "<", "\\<", "[", "\\[").Replace(s)
}

func operatingTable(ops []operation) *table {
	t := &table{head: []string{"instance", "mode", "region", "Ron", "gds", "Vov", "margin", "Id", "bias"}}
	for _, o := range ops {
		path, mode := "", ""
		if o.path != "" && severalPaths(ops) {
			path = escape(o.path)
		}
		if mode = escape(o.mode); mode == "" && severalModes(ops) {
			mode = "–"
		}
		if len(o.evaluated()) == 0 {
			t.add(path, mode, "not evaluated", "", "", "", "", "", wanted(o))
			continue
		}
		t.add(path, mode, o.regions(), o.value("ron"), o.value("gds"), o.value("vov"), o.value("margin"), o.value("id"), o.pairs())
	}
	return t
}

func severalPaths(ops []operation) bool {
	return slices.ContainsFunc(ops, func(o operation) bool { return o.path != ops[0].path })
}

func severalModes(ops []operation) bool {
	return slices.ContainsFunc(ops, func(o operation) bool { return o.mode != ops[0].mode })
}

// pairs are the terminal voltages, in the conducting direction, under the names
// that the polarity is spoken of with.
func (o operation) pairs() string {
	polarity := o.evaluated()[0].Polarity
	var texts []string
	for _, name := range []string{"vgs", "vds", "vbs"} {
		texts = append(texts, bias.ShownPair(polarity, name)+" "+o.value(name))
	}
	return strings.Join(texts, ", ")
}

// wanted says what an operation lacks, in a few words.
func wanted(o operation) string {
	if r := o.reason(); r != "" {
		return r
	}
	var texts []string
	for _, n := range o.missing() {
		texts = append(texts, code("v("+n+")"))
	}
	if len(texts) == 0 {
		return ""
	}
	return "annotate " + strings.Join(texts, ", ")
}

// notEvaluated is the text where no row of the table would hold a number.
func notEvaluated(ops []operation) string {
	var texts []string
	for _, o := range ops {
		text := wanted(o)
		if text == "" {
			text = "no operating point"
		}
		if severalModes(ops) && o.mode != "" {
			text += " in mode " + escape(o.mode)
		}
		if !slices.Contains(texts, text) {
			texts = append(texts, text)
		}
	}
	return "Not evaluated: " + strings.Join(texts, "; ") + ".\n"
}

// remarks are the lines under the table: where the extremes lie, how far the
// small-Vds law holds, where the voltages come from, and what else to know.
func remarks(ops []operation) []string {
	var lines []string
	for _, o := range ops {
		lines = append(lines, o.named(ops, append(o.turns(), o.worst(), o.law())...)...)
	}
	lines = append(lines, origins(ops)...)
	for _, o := range ops {
		for _, p := range o.parts {
			for _, note := range p.Notes {
				if !slices.Contains(lines, note) {
					lines = append(lines, note)
				}
			}
		}
	}
	return lines
}

// named puts the instance and mode before texts, where there are several.
func (o operation) named(all []operation, texts ...string) []string {
	prefix := ""
	if severalPaths(all) {
		prefix = escape(o.path)
	}
	if severalModes(all) {
		prefix = joined(" ", prefix, escape(o.mode))
	}
	var out []string
	for _, t := range texts {
		if t != "" {
			out = append(out, joined(": ", prefix, t))
		}
	}
	return out
}

// turns tells where over its range the device changes region.
func (o operation) turns() []string {
	var out []string
	for _, p := range o.evaluated() {
		spans := p.Regions()
		if len(spans) < 2 || p.context.At(0) == "" {
			continue
		}
		var texts []string
		for _, r := range spans[:min(len(spans), 4)] {
			texts = append(texts, fmt.Sprintf("%s from %s", r.Region, p.context.AtDevice(p.Device, r.From)))
		}
		if len(spans) > 4 {
			texts = append(texts, "…")
		}
		text := strings.Join(texts, ", ")
		if len(o.parts) > 1 {
			text = cornerName(p.corner) + ": " + text
		}
		out = append(out, text)
	}
	return out
}

// worst tells where Ron is lowest and highest, for a device that conducts.
func (o operation) worst() string {
	lo, hi, ok := o.bounds("ron")
	if !ok || lo.at == hi.at || lo.v == hi.v || math.IsInf(lo.v, 1) {
		return ""
	}
	return fmt.Sprintf("Ron %s at %s, %s at %s", quantity.Format(lo.v, "Ω"), lo.at, quantity.Format(hi.v, "Ω"), hi.at)
}

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
	text := fmt.Sprintf("small-Vds law 1/(k·Vov) %s; the chord Ron is ", spread(lo, hi, "Ω"))
	if lo != hi {
		text += "up to "
	}
	if off < 0 {
		return text + fmt.Sprintf("%.2g %% below it", -100*off)
	}
	return text + fmt.Sprintf("%.2g %% above it", 100*off)
}

// origins tells how the voltages are known: one line, or one a mode where they
// differ.
func origins(ops []operation) []string {
	var lines []string
	source := func(o operation) string {
		weakest := bias.Annotated
		for _, p := range o.parts {
			weakest = min(weakest, p.Source)
		}
		text := "voltages " + weakest.String()
		if weakest > bias.Unknown && weakest < bias.Annotated {
			text = "voltages " + weakest.String() + " or better"
		}
		if o.parts[0].context.Alone {
			text += ", the subckt taken alone"
		}
		return text
	}
	same := !slices.ContainsFunc(ops, func(o operation) bool { return source(o) != source(ops[0]) })
	for _, o := range ops {
		if same {
			return []string{source(o)}
		}
		lines = append(lines, o.named(ops, source(o))...)
	}
	return lines
}
