package main

import (
	"fmt"
	"io"
	"slices"
	"strings"
	"text/tabwriter"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

// opNode is a node's voltage in one mode at one corner.
type opNode struct {
	Node   string `json:"node"`
	Mode   string `json:"mode"`
	Corner string `json:"corner"`
	V      amount `json:"v"`
	Source string `json:"source"`
	why    string
}

// opNodes lists every node of a run once, under the highest name that it has: a
// port of an instance is the parent's node, a global one belongs to the top.
func opNodes(run *bias.Run) []opNode {
	var out []opNode
	globals := map[string]bool{}
	var visit func(prefix string, c *bias.Context, top bool)
	visit = func(prefix string, c *bias.Context, top bool) {
		for i, net := range c.Cell.Nets {
			name := prefix + net.Spelt
			switch {
			case circuit.NetID(i) == circuit.Ground, net.Port >= 0 && !top, globals[net.Name]:
				continue
			case net.Global:
				globals[net.Name], name = true, net.Spelt
			}
			out = append(out, newOpNode(run, name, c.Nodes[i]))
		}
		for _, ch := range c.Children {
			if ch.Context != nil {
				visit(prefix+ch.Instance.Spelt+".", ch.Context, false)
			}
		}
	}
	for _, c := range run.Roots {
		visit(c.Prefix(), c, true)
	}
	return out
}

func newOpNode(run *bias.Run, name string, n bias.Voltage) opNode {
	node := opNode{Node: name, Mode: run.Mode, Corner: run.Corner, Source: n.Source.String(), why: n.Why}
	for s, v := range n.V {
		if s == 0 {
			node.V = amount{v, v, true}
		}
		node.V.min, node.V.max = min(node.V.min, v), max(node.V.max, v)
	}
	return node
}

// nodeTable prints each node once a distinct voltage, with where it comes from
// and, if that is not so everywhere, the modes and corners in which it holds.
func (r opReport) nodeTable(w io.Writer) error {
	if len(r.Nodes) == 0 {
		return nil
	}
	type key struct{ node, voltage, from string }
	var order []string
	held := map[string][]key{}    // of a node, in order of appearance
	where := map[key][]string{}   // the runs in which a node is so
	runs := map[string]struct{}{} // all of them
	for _, n := range r.Nodes {
		k := key{n.Node, n.V.show("V"), n.why}
		if k.from == "" {
			k.from = "unknown: annotate it"
		}
		if held[n.Node] == nil {
			order = append(order, n.Node)
		}
		if !slices.Contains(held[n.Node], k) {
			held[n.Node] = append(held[n.Node], k)
		}
		where[k] = append(where[k], runName(n.Mode, n.Corner))
		runs[runName(n.Mode, n.Corner)] = struct{}{}
	}
	fmt.Fprintln(w)
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprint(t, "node\tvoltage\tfrom")
	if len(runs) > 1 {
		fmt.Fprint(t, "\tin")
	}
	for _, node := range order {
		for _, k := range held[node] {
			fmt.Fprintf(t, "\n%s\t%s\t%s", node, k.voltage, k.from)
			switch {
			case len(runs) == 1:
			case len(where[k]) == len(runs):
				fmt.Fprint(t, "\tevery mode and corner")
			default:
				fmt.Fprint(t, "\t", strings.Join(where[k], ", "))
			}
		}
	}
	fmt.Fprintln(t)
	return t.Flush()
}

// runName names a mode and corner as annotations do: "track at slow".
func runName(mode, corner string) string {
	switch {
	case corner == "":
		return dash(mode)
	case mode == "":
		return "at " + corner
	}
	return mode + " at " + corner
}
