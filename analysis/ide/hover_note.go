package ide

import (
	"fmt"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/parser"
)

// quantityTexts say in a few words what the quantities of annotations are; those
// of voltages between terminals need no words.
var quantityTexts = map[string]string{
	"vth":    "threshold voltage at this bias, with the body effect",
	"vov":    "overdrive: |Vgs| - |Vth|, with the body effect in Vth",
	"vdsat":  "drain-source voltage at the edge of saturation",
	"id":     "drain current, in the conducting direction",
	"gm":     "transconductance, dId/dVgs",
	"gds":    "output conductance, dId/dVds",
	"gmb":    "bulk transconductance, dId/dVbs",
	"ron":    "chord resistance Vds/Id at this bias, 1/gds as Vds goes to 0",
	"rds":    "slope resistance, 1/gds",
	"margin": "|Vds| - |Vdsat|: positive in saturation",
	"ic":     "inversion coefficient",
	"gmid":   "transconductance efficiency, gm/Id",
	"gain":   "intrinsic gain, gm/gds",
	"power":  "dissipated power, Vds·Id",
}

// hoverNote tells what an annotation claims and what became of it.
func (q query) hoverNote(p place, m mark) string {
	var b strings.Builder
	if text := quantityTexts[m.key]; m.kind == quantityMark && text != "" {
		fmt.Fprintf(&b, "%s: %s\n\n", code(m.text), text)
	}
	a := m.note
	switch n := a.Note.(type) {
	case nil:
		if a.Err != nil {
			return "This annotation is not understood: " + prose(a.Err.Message)
		}
		return ""
	case *parser.Bias:
		b.WriteString("Bias in every mode: " + p.assigned(n.Assigns))
	case *parser.BiasFrom:
		b.WriteString("Node voltages read from " + code(n.Path.Text))
	case *parser.Mode:
		fmt.Fprintf(&b, "Mode %s: %s, over the bias lines", name(n.Name.Text), p.assigned(n.Assigns))
	case *parser.Corner:
		fmt.Fprintf(&b, "Corner %s", name(n.Name.Text))
		if n.Temp != nil {
			fmt.Fprintf(&b, ", at %s °C", p.text(n.Temp))
		}
		if !n.Lib.IsZero() {
			fmt.Fprintf(&b, ", library section %s", code(n.Lib.Text))
		}
		if len(n.Assigns) > 0 {
			b.WriteString(": " + p.assigned(n.Assigns))
		}
	case *parser.Expect:
		b.WriteString(q.outcomes(a))
	case *parser.Allow:
		fmt.Fprintf(&b, "Silences the rule %s here: %s", code(n.Rule.Text), code(n.Reason.Text))
	case *parser.Rating:
		fmt.Fprintf(&b, "Absolute limits of every device whose model is named %s.", code(n.Model.Text))
	case *parser.Fit:
		fmt.Fprintf(&b, "Square-law stand-in for the model %s, where that cannot be read.", code(n.Model.Text))
	case *parser.Access:
		fmt.Fprintf(&b, "Contact and access resistance of every device whose model is named %s.", code(n.Model.Text))
	}
	return b.String()
}

// text is an expression as written.
func (p place) text(e parser.Expr) string {
	sp := e.Span()
	if sp.Start < 0 || sp.End > int32(len(p.Text)) || sp.Start > sp.End {
		return ""
	}
	return p.Text[sp.Start:sp.End]
}

// assigned are voltages as written.
func (p place) assigned(as []parser.Assign) string {
	var texts []string
	for _, a := range as {
		text := "v(" + a.Node.Text + ")=" + p.text(a.Lo)
		if a.Hi != nil {
			text += ".." + p.text(a.Hi)
		}
		texts = append(texts, code(text))
	}
	return strings.Join(texts, ", ")
}

// outcomes are the verdicts on the conditions of an expectation.
func (q query) outcomes(a *parser.Annotation) string {
	result := q.deck.Bias(q.ctx)
	if result == nil {
		return ""
	}
	var b strings.Builder
	for _, c := range result.Checks() {
		if c.Note.Annotation != a {
			continue
		}
		fmt.Fprintf(&b, "- %s %s: %s\n", name(c.Subject), code(c.Wanted), outcome(c))
	}
	if b.Len() == 0 {
		return "This expectation was not judged."
	}
	return b.String()
}

func outcome(c bias.Check) string {
	var at []string
	if c.Mode != "" {
		at = append(at, "in "+name(c.Mode))
	}
	if c.Corner != "" {
		at = append(at, "at "+name(c.Corner))
	}
	if c.At != "" {
		at = append(at, "with "+prose(c.At))
	}
	place := strings.Join(at, " ")
	switch c.Status {
	case bias.Met:
		return joined(" ", "met, worst "+c.Found, place)
	case bias.Failed:
		text := joined(" ", "**failed**: "+c.Found, place)
		if c.Fails > 1 {
			text += fmt.Sprintf(", and in %d more %s", c.Fails-1, plural(c.Fails-1, "instance"))
		}
		return text
	}
	return "not judged: " + prose(c.Reason)
}
