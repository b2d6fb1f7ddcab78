package ide

import (
	"fmt"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/parser"
)

// maxInstances is how many instances of a subckt a hover shows, maxRows how many
// rows of them before the corners share one.
const (
	maxInstances = 6
	maxRows      = 16
)

// hoverDevice tells a MOSFET's region, resistance and bias in every mode.
func (q query) hoverDevice(card int, e *parser.Element) string {
	ops := operations(sightings(q.deck.Bias(q.ctx), q.body(card)), e)
	if len(ops) == 0 {
		return deviceHead(e, nil) + "\n\nNot evaluated: nothing in the deck leads to this card.\n"
	}
	return q.hoverOperations(card, e, ops)
}

func (q query) hoverOperations(card int, e *parser.Element, ops []operation) string {
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
		for _, line := range q.remarks(shown) {
			b.WriteString("- " + line + "\n")
		}
	}
	if left > 0 {
		fmt.Fprintf(&b, "\nand %d more %s of %s\n", left, plural(left, "instance"), code(q.body(card).Name.Text))
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
	head := code(e.Name.Text)
	if d != nil && (d.Reason == "" || d.ModelKind != "") {
		head += " · " + strings.ToUpper(d.Polarity.String())
	}
	if !e.Model.IsZero() {
		head += " · " + code(e.Model.Text)
	}
	if d == nil || d.Reason != "" && d.ModelKind == "" {
		return head
	}
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

// operatingTable has a row for each instance, mode and corner; with too many
// corners for that, their extremes share a row.
func operatingTable(ops []operation) *table {
	t := &table{head: []string{"instance", "mode", "corner", "region", "Ron", "gds", "Vov", "margin", "Id"}}
	rows := 0
	for _, o := range ops {
		rows += len(o.parts)
	}
	for _, o := range ops {
		path, mode := "", name(o.mode)
		if severalPaths(ops) {
			path = name(o.path)
		}
		if mode == "" && severalModes(ops) {
			mode = "–"
		}
		list := []operation{o}
		if rows <= maxRows {
			list = o.split()
		}
		for _, c := range list {
			corner := ""
			if len(c.parts) < len(o.parts) {
				corner = name(cornerName(c.parts[0].corner))
			}
			if len(c.evaluated()) == 0 {
				t.add(path, mode, corner, "not evaluated", "", "", "", "", "")
				continue
			}
			t.add(path, mode, corner, c.regions(), c.value("ron"), c.value("gds"), c.value("vov"), c.value("margin"), c.value("id"))
		}
	}
	return t
}

func severalPaths(ops []operation) bool {
	return slices.ContainsFunc(ops, func(o operation) bool { return o.path != ops[0].path })
}

func severalModes(ops []operation) bool {
	return slices.ContainsFunc(ops, func(o operation) bool { return o.mode != ops[0].mode })
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
			text += " in mode " + name(o.mode)
		}
		if !slices.Contains(texts, text) {
			texts = append(texts, text)
		}
	}
	return "Not evaluated: " + prose(strings.Join(texts, "; ")) + ".\n"
}
