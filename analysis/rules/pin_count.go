package rules

import (
	_ "embed"
	"fmt"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

//go:embed pin-count.md
var pinCountText string

// PinCount compares an instance's nodes with the ports of its subckt.
var PinCount = &analysis.Rule{
	Name: "pin-count", Severity: analysis.Error, Scope: analysis.PerDesign, Text: pinCountText, Run: pinCount,
}

func pinCount(p *analysis.Pass) {
	for _, c := range p.Cells() {
		for _, x := range c.Instances {
			if x.Def == nil {
				continue
			}
			if n, most := len(x.Elem.Nodes), len(x.Def.Ports); n <= most && n >= most-x.Def.Optional {
				continue
			}
			p.Report(analysis.Finding{
				Severity: p.Rule.Severity,
				Place:    analysis.WordAt(x.Place, x.Elem.Name),
				Message: fmt.Sprintf("%s connects %s, but subckt %q has %s%s", x.Spelt, counted(len(x.Elem.Nodes), "node"),
					x.Def.Subckt.Name.Text, counted(len(x.Def.Ports), "port"), portNames(x.Def)),
				Related: []analysis.Related{{Place: x.Def.Place, Message: "the subckt is defined here"}},
				Subject: analysis.Subject{Path: x.Spelt, Card: x.Place},
			})
		}
	}
}

// portNames lists a few ports, so that the reader sees which one is left over.
func portNames(s *circuit.Scope) string {
	const most = 8
	if len(s.Ports) == 0 || len(s.Ports) > most {
		return ""
	}
	var names []string
	for _, w := range s.Ports {
		names = append(names, w.Text)
	}
	return ": " + strings.Join(names, " ")
}
