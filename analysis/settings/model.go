package settings

import (
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// classes are what a device may be where no card can be read.
var classes = []string{"nmos", "pmos", "resistor", "capacitor", "inductor", "diode", "npn", "pnp", "ignore"}

// ratings are the quantities that have a limit.
var ratings = []string{"vgs", "vds", "vbs", "vgd", "vgb", "id", "power"}

// model reads one `[[model]]`.
func (r *reader) model(n *node) {
	fact := circuit.Fact{}
	named := n.field("name")
	r.table(n, "model", fields{
		"name":   func(f *node) { fact.Pattern, _ = r.text(f); fact.Pattern = parser.Fold(fact.Pattern) },
		"source": func(f *node) { fact.Source, _ = r.text(f); fact.Source = strings.TrimSpace(fact.Source) },
		"width": func(f *node) {
			switch w, _ := r.word(f, "total", "per finger"); w {
			case "total":
				fact.Width = circuit.WidthTotal
			case "per finger":
				fact.Width = circuit.WidthFinger
			}
		},
		"bare": func(f *node) {
			switch u, _ := r.word(f, "m", "um", "µm"); u {
			case "m":
				fact.Bare = 1
			case "um", "µm":
				fact.Bare = 1e-6
			}
		},
		"pins":   func(f *node) { fact.Pins = r.pins(f) },
		"class":  func(f *node) { fact.Class, _ = r.word(f, classes...) },
		"fit":    func(f *node) { fact.Fit = r.fit(f) },
		"access": func(f *node) { fact.Access = r.numbers(f, "rs", "rd", "rsw") },
		"rating": func(f *node) { fact.Rating = r.numbers(f, ratings...) },
	})
	if fact.Pattern == "" {
		if named == nil {
			r.problem(n.span, "the model has no name: `name = \"nch*\"` says which models or subckts it is about")
		}
		return
	}
	if fact.Source == "" {
		at := n.span
		if s := n.field("source"); s != nil {
			at = s.span
		}
		r.problem(at, "what is stated about %q has no source: `source = \"…\"` says where it is known from; it is left out", named.text)
		return
	}
	r.file.Facts = append(r.file.Facts, fact)
}

// pins reads the roles of a line's nodes: "d g s b" in some order.
func (r *reader) pins(n *node) []int {
	text, ok := r.text(n)
	if !ok {
		return nil
	}
	var pins []int
	seen := map[int]bool{}
	for _, word := range strings.Fields(parser.Fold(text)) {
		role := strings.Index("dgsb", word)
		if len(word) != 1 || role < 0 || seen[role] {
			r.problem(n.span, "%q names no order of pins: write each of d g s b once, in the order of the line", text)
			return nil
		}
		seen[role] = true
		pins = append(pins, role)
	}
	if len(pins) != 4 {
		r.problem(n.span, "%q names no order of pins: write each of d g s b once, in the order of the line", text)
		return nil
	}
	return pins
}

// fit reads a stand-in: its type, and parameters of a model card.
func (r *reader) fit(n *node) *circuit.FitFact {
	if n.kind != tableValue {
		r.problem(n.span, "\"fit\" is to be a table: type, vto, kp, …")
		return nil
	}
	fit := &circuit.FitFact{}
	rest := &node{kind: tableValue, key: n.key}
	for _, f := range n.fields {
		if f.key == "type" {
			fit.Type, _ = r.word(f, "nmos", "pmos")
		} else {
			rest.fields = append(rest.fields, f)
		}
	}
	fit.Params = r.numbers(rest)
	if fit.Type == "" {
		if n.field("type") == nil {
			r.problem(n.span, "the fit has no type: nmos or pmos")
		}
		return nil
	}
	return fit
}
