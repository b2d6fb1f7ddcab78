package rules

import (
	_ "embed"
	"fmt"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
	"triodeck/parser"
)

//go:embed region-crossed.md
var regionCrossedText string

// RegionCrossed looks for devices that change their region over a signal range
// although nobody has said that they may.
var RegionCrossed = &analysis.Rule{
	Name: "region-crossed", Severity: analysis.Warning, Scope: analysis.PerResult, Text: regionCrossedText, Run: regionCrossed,
}

func regionCrossed(p *analysis.Pass) {
	j := judgedRegions(p.Bias)
	said := map[cardKey]bool{}
	for m := range parts(p.Bias) {
		if len(m.Points) < 2 || said[keyOf(m.Card)] || j.speaksOf(m) {
			continue
		}
		spans := crossings(m.Device)
		if len(spans) < 2 {
			continue
		}
		said[keyOf(m.Card)] = true
		p.Report(analysis.Finding{
			Severity: p.Rule.Severity, Place: m.Name(), Subject: m.subject(),
			Message: crossing(m, spans) + condition(m.Run.Mode, m.Run.Corner, ""),
		})
	}
}

// crossings lists the first sample of each region that the device clearly enters.
// Deep triode counts as triode. Weak inversion lies between on and off and is
// neither; a sample within the edge of a boundary belongs to neither side.
func crossings(d *bias.Device) []bias.RegionSpan {
	var out []bias.RegionSpan
	for s, v := range d.Verdicts {
		region := v.Region
		if region == mos.DeepTriode {
			region = mos.Triode
		}
		if region == mos.WeakInversion || strings.HasSuffix(v.Edge, "saturation") || strings.HasSuffix(v.Edge, "weak inversion") ||
			region == mos.Saturation && v.Edge != "" {
			continue
		}
		if n := len(out); n > 0 && out[n-1].Region == region {
			out[n-1].To = s
			continue
		}
		out = append(out, bias.RegionSpan{Region: region, From: s, To: s})
	}
	return out
}

// crossing names the regions and where the device is in each. On one axis the
// samples run along the range, and the two sides of the first boundary are shown.
func crossing(m part, spans []bias.RegionSpan) string {
	from, to := spans[0], spans[1]
	s := fmt.Sprintf("%s leaves %s for %s over the range: %s at %s, %s at %s", m.Path, from.Region, to.Region,
		from.Region, m.at(from.To), to.Region, m.at(to.From))
	for _, more := range spans[2:] {
		if more.Region != from.Region && more.Region != to.Region {
			return s + fmt.Sprintf(", %s at %s", more.Region, m.at(more.From))
		}
	}
	return s
}

// regionNotes are the expectations that speak of regions.
type regionNotes []bias.Check

// judgedRegions collects them, and those of any kind that fail: the writer knows
// of the device already.
func judgedRegions(r *bias.Result) regionNotes {
	var list regionNotes
	seen := map[*parser.Annotation]bool{}
	for _, c := range r.Checks() {
		e := c.Expect()
		if e == nil || e.Kind != parser.DeviceTarget || seen[c.Note.Annotation] {
			continue
		}
		if len(e.Regions) > 0 || c.Status == bias.Failed {
			seen[c.Note.Annotation] = true
			list = append(list, c)
		}
	}
	return list
}

// speaksOf says whether one of them is about a part in its mode and corner: by
// the name that any level of the hierarchy gives it.
func (list regionNotes) speaksOf(m part) bool {
	path := parser.Fold(m.Path)
	for _, c := range list {
		e := c.Expect()
		if !names(e.Modes, m.Run.Mode) || !names(e.Corners, m.Run.Corner) {
			continue
		}
		target := parser.Fold(e.Target.Text)
		if target == "" && c.Note.Subject != nil {
			target = parser.Fold(c.Note.Subject.Name.Text)
		}
		for rest, more := path, true; more; {
			head, tail, ok := strings.Cut(rest, ".")
			if circuit.Match(target, rest) || !ok && circuit.Match(target, head) {
				return true
			}
			rest, more = tail, ok
		}
	}
	return false
}

// names says whether a list of modes or corners holds one; an empty list holds all.
func names(list []parser.Word, name string) bool {
	for _, w := range list {
		if parser.Fold(w.Text) == name {
			return true
		}
	}
	return len(list) == 0
}
