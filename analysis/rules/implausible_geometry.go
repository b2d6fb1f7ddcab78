package rules

import (
	_ "embed"
	"fmt"
	"math"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser"
	"triodeck/parser/source"
)

//go:embed implausible-geometry.md
var implausibleGeometryText string

// ImplausibleGeometry looks for widths and lengths that no MOSFET has, most often
// a missing `u`.
var ImplausibleGeometry = &analysis.Rule{
	Name: "implausible-geometry", Severity: analysis.Warning, Scope: analysis.PerDesign, Text: implausibleGeometryText, Run: implausibleGeometry,
}

// Bounds of a drawn width or length, in metres. Common practice: no process draws
// below 1 nm, and an integrated channel is shorter than 1 mm. Power parts are wide.
const (
	leastGeometry = 1e-9
	mostGeometry  = 1e-3
	mostPower     = 5.0
	powerLength   = 1e-6
)

func implausibleGeometry(p *analysis.Pass) {
	if !p.Closed() {
		return // a missing file may set the scale
	}
	var bare, judged int
	var odd []analysis.Finding
	seen := map[circuit.Place]bool{}
	for _, c := range p.Cells() {
		for _, d := range c.Devices {
			if !plainMOSFET(d) || seen[d.Place] {
				continue
			}
			seen[d.Place] = true
			judged++
			list, micron := oddGeometry(p, d)
			if micron {
				bare++
			}
			odd = append(odd, list...)
		}
	}
	// Where every line reads in micrometres, the deck lacks one card.
	if bare > 1 && bare == judged {
		f := odd[0]
		f.Edits = nil
		f.Message = fmt.Sprintf("W and L of all %d MOSFETs read as metres: without a unit they need `.option scale=1u`", judged)
		p.Report(f)
		return
	}
	for _, f := range odd {
		p.Report(f)
	}
}

// plainMOSFET leaves out vertical power parts, decks with a scale, and devices
// whose model is not known to be an integrated one.
func plainMOSFET(d *circuit.Device) bool {
	return d.Kind == circuit.MOSFET && (d.Scale == 1 || d.Scale == 0) && d.Model != nil && d.Model.Def != nil && typeIs(d.Model.Def)
}

// oddGeometry judges W and L of one line; micron says that both are written as
// bare numbers that make sense in micrometres.
func oddGeometry(p *analysis.Pass, d *circuit.Device) (list []analysis.Finding, micron bool) {
	w, l := d.Params["w"], d.Params["l"]
	micron = true
	for _, q := range []struct {
		name string
		v    circuit.Value
		most float64
	}{{"w", w, widest(l)}, {"l", l, mostGeometry}} {
		if !q.v.Set || q.v.Err != nil {
			micron = false
			continue
		}
		written, ok := paramOf(d.Elem, q.name)
		plain := ok && bareNumber(written.Value)
		micron = micron && plain && q.v.V >= 0.01 && q.v.V < 1e5
		why := ""
		switch {
		case math.IsNaN(q.v.V):
			why = "is no number"
		case q.v.V <= 0:
			why = "is not positive"
		case q.v.V < leastGeometry:
			why = "is less than 1 nm"
		case q.v.V >= q.most:
			why = "is " + quantity.Format(q.v.V, "m")
		default:
			continue
		}
		// In a part, a name stands for what the deck around it will pass.
		if ok && (p.Whole() || written.Value.Form == parser.NumberValue) {
			list = append(list, oddity(p, d, written, q.v.V, why, plain))
		}
	}
	return list, micron
}

// widest is the largest width that passes beside a length: a long-channel part
// may be a discrete one, whose width is that of many cells.
func widest(l circuit.Value) float64 {
	if l.Set && l.Err == nil && l.V >= powerLength && l.V < mostGeometry {
		return mostPower
	}
	return mostGeometry
}

func oddity(p *analysis.Pass, d *circuit.Device, written parser.Param, v float64, why string, plain bool) analysis.Finding {
	at := analysis.WordAt(d.Place, written.Value.Word)
	f := analysis.Finding{
		Severity: p.Rule.Severity, Place: at, Subject: analysis.Subject{Path: d.Spelt, Card: d.Place},
		Message: fmt.Sprintf("%s=%s of %s %s", written.Name.Text, written.Value.Text, d.Spelt, why),
	}
	if plain && v >= mostGeometry && v < mostGeometry*1e6 {
		f.Message += fmt.Sprintf(": did you mean %su, %s?", written.Value.Text, quantity.Format(v*1e-6, "m"))
		end := at
		end.Span = source.Span{Start: at.Span.End, End: at.Span.End}
		f.Edits = []analysis.Edit{analysis.EditAt("append `u`", false, end, "u")}
	}
	return f
}

func paramOf(e *parser.Element, name string) (parser.Param, bool) {
	for _, q := range e.Params {
		if parser.Fold(q.Name.Text) == name {
			return q, true
		}
	}
	return parser.Param{}, false
}

// bareNumber says whether a value is written as a number without any suffix or
// exponent.
func bareNumber(v parser.Value) bool {
	if v.Form != parser.NumberValue {
		return false
	}
	for _, c := range v.Text {
		if (c < '0' || c > '9') && c != '.' && c != '+' && c != '-' {
			return false
		}
	}
	return true
}
