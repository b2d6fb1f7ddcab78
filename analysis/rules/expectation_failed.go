package rules

import (
	_ "embed"
	"fmt"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/quantity"
	"triodeck/parser"
)

//go:embed expectation-failed.md
var expectationFailedText string

// ExpectationFailed reports what the writer expects and does not hold.
var ExpectationFailed = &analysis.Rule{
	Name: "expectation-failed", Severity: analysis.Error, Scope: analysis.PerResult, Text: expectationFailedText, Run: expectationFailed,
}

func expectationFailed(p *analysis.Pass) {
	for _, c := range p.Bias.Checks() {
		if c.Status != bias.Failed {
			continue
		}
		f := analysis.Finding{Severity: p.Rule.Severity, Place: c.Place, Subject: analysis.Subject{Path: c.Subject}}
		m, known := failing(p.Bias, c)
		if known {
			f.Subject = m.subject()
			if keyOf(m.Card) != keyOf(c.Place) {
				f.Related = append(f.Related, analysis.Related{Place: m.Name(), Message: c.Subject + " stands here"})
			}
		}
		f.Message = failure(c, m, known) + condition(c.Mode, c.Corner, c.At)
		if c.Fails > 1 {
			f.Message += fmt.Sprintf("; %d instances fail, this is the worst", c.Fails)
		}
		p.Report(f)
	}
}

// failing is the MOSFET that a check speaks of.
func failing(r *bias.Result, c bias.Check) (part, bool) {
	if e := c.Expect(); e == nil || e.Kind != parser.DeviceTarget {
		return part{}, false
	}
	for _, run := range r.Runs {
		if run.Mode == c.Mode && run.Corner == c.Corner {
			return find(run, c.Subject)
		}
	}
	return part{}, false
}

// failure says what is found, then what was wanted, then the numbers behind it.
func failure(c bias.Check, m part, known bool) string {
	name, limit := split(c.Wanted)
	switch e := c.Expect(); {
	case e != nil && e.Kind == parser.NodeTarget:
		return fmt.Sprintf("%s is %s, expected %s", c.Subject, c.Found, limit)
	case name != "":
		return fmt.Sprintf("%s of %s is %s, expected %s", name, c.Subject, c.Found, limit)
	}
	s := fmt.Sprintf("%s is in %s, expected %s", c.Subject, c.Found, c.Wanted)
	if known {
		s += numbers(m, c.Sample)
	}
	return s
}

// split takes "ron<=150 Ω" apart into the quantity and the limit; a region has none.
func split(wanted string) (name, limit string) {
	i := strings.IndexAny(wanted, "<>=")
	if i < 0 {
		return "", wanted
	}
	name, limit = wanted[:i], wanted[i:]
	if limit[0] == '=' {
		limit = limit[1:]
	}
	if lo, hi, ok := strings.Cut(limit, ".."); ok {
		limit = lo + " to " + hi
	}
	return name, limit
}

// numbers are the voltages that decide the region at a sample.
func numbers(m part, sample int) string {
	if sample >= len(m.Points) {
		return ""
	}
	point, verdict := m.Points[sample], m.Verdicts[sample]
	if point.Vov <= 0 {
		return fmt.Sprintf(": %s is %s, Vth %s", bias.ShownPair(m.Polarity, "vgs"), quantity.Volts(point.VGS), quantity.Volts(point.Vth))
	}
	return fmt.Sprintf(": %s is %s, Vdsat %s", bias.ShownPair(m.Polarity, "vds"), quantity.Volts(point.VDS), quantity.Volts(verdict.Vdsat))
}
