package rules

import (
	_ "embed"
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

//go:embed floating-gate.md
var floatingGateText string

// FloatingGate looks for nets that nothing but gates touches.
var FloatingGate = &analysis.Rule{
	Name: "floating-gate", Severity: analysis.Warning, Scope: analysis.PerResult, Text: floatingGateText, Run: floatingGate,
}

func floatingGate(p *analysis.Pass) {
	known := knownNets(p.Bias)
	g := gates{memo: map[netKey]bool{}}
	for _, c := range p.Cells() {
		// The inputs of a part stand open until a deck includes it.
		if c == p.Design.Main && !(p.Whole() && p.Closed() && driven(c)) || c.Scope.IsOpen() {
			continue
		}
		for id, n := range c.Nets {
			if n.Port >= 0 || n.Global || known[netKey{c, circuit.NetID(id)}] || !g.only(c, circuit.NetID(id)) {
				continue
			}
			names := gateNames(n)
			p.Report(analysis.Finding{
				Severity: p.Rule.Severity, Place: n.Place,
				Message: fmt.Sprintf("nothing drives %q: it connects only to %s of %s", n.Spelt, plural(len(names), "the gate", "the gates"), listed(names, 4)),
				Subject: analysis.Subject{Path: n.Spelt},
			})
		}
	}
}

func plural(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}

// driven says whether a cell has a source: without one it is a circuit whose
// inputs somebody else will drive.
func driven(c *circuit.Cell) bool {
	for _, d := range c.Devices {
		if d.Kind == circuit.VSource || d.Kind == circuit.ISource {
			return true
		}
	}
	return false
}

type netKey struct {
	cell *circuit.Cell
	net  circuit.NetID
}

// knownNets are the nets that have a voltage in some run: a writer who states
// one means the net to be driven.
func knownNets(r *bias.Result) map[netKey]bool {
	known := map[netKey]bool{}
	for _, run := range r.Runs {
		for _, c := range r.Contexts(run) {
			for id, v := range c.Nodes {
				if v.V != nil {
					known[netKey{c.Cell, circuit.NetID(id)}] = true
				}
			}
		}
	}
	return known
}

func gateNames(n circuit.Net) []string {
	var names []string
	for _, pin := range n.Pins {
		if pin.Device != nil {
			names = append(names, pin.Device.Spelt)
		} else {
			names = append(names, pin.Instance.Spelt)
		}
	}
	return names
}

// gates follows nets into instances.
type gates struct{ memo map[netKey]bool }

// gateTerminal is the gate's place on a MOSFET's card: drain, gate, source, bulk.
const gateTerminal = 1

// only says whether gates and nothing else hang on a net of a cell, in the cell
// and below. What hangs on a net without pins is not known here.
func (g gates) only(c *circuit.Cell, id circuit.NetID) bool {
	key := netKey{c, id}
	if answer, ok := g.memo[key]; ok {
		return answer
	}
	g.memo[key] = false // a cell inside itself
	pins := c.Nets[id].Pins
	answer := len(pins) > 0
	for _, pin := range pins {
		switch {
		case pin.Device != nil:
			answer = answer && pin.Device.Kind == circuit.MOSFET && pin.Terminal == gateTerminal
		case pin.Instance == nil || pin.Instance.Cell == nil || pin.Terminal >= len(pin.Instance.Cell.Ports):
			answer = false
		default:
			answer = answer && g.only(pin.Instance.Cell, pin.Instance.Cell.Ports[pin.Terminal])
		}
	}
	g.memo[key] = answer
	return answer
}
