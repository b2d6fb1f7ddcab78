package bias

import (
	"iter"
	"math"
	"strings"
)

// Rows gives every MOSFET of a run under its hierarchical name, in card order.
func (r *Result) Rows(run *Run) iter.Seq[Row] {
	return func(yield func(Row) bool) {
		for _, c := range run.Roots {
			if !c.rows(c.Prefix(), yield) {
				return
			}
		}
	}
}

func (c *Context) rows(prefix string, yield func(Row) bool) bool {
	for _, d := range c.Devices {
		if !yield(Row{Path: prefix + d.Device.Spelt, Context: c, Device: d}) {
			return false
		}
	}
	for _, ch := range c.Children {
		if w, ok := ch.Wrapped(); ok {
			w.Path = prefix + ch.Instance.Spelt
			if !yield(w) {
				return false
			}
			continue
		}
		if ch.Context != nil && !ch.Context.rows(prefix+ch.Instance.Spelt+".", yield) {
			return false
		}
	}
	return true
}

// Prefix heads the paths of a root: the name of a subckt that stands alone.
func (c *Context) Prefix() string {
	if !c.Alone {
		return ""
	}
	return aloneName(c.Cell) + "."
}

// Contexts gives every distinct context of a run once, with the path of its
// first instance ("" for the top level, "tgate" for a subckt that stands alone).
func (r *Result) Contexts(run *Run) iter.Seq2[string, *Context] {
	return func(yield func(string, *Context) bool) {
		seen := map[*Context]bool{}
		var visit func(prefix string, c *Context) bool
		visit = func(prefix string, c *Context) bool {
			if seen[c] {
				return true
			}
			seen[c] = true
			if !yield(strings.TrimSuffix(prefix, "."), c) {
				return false
			}
			for _, ch := range c.Children {
				if ch.Context != nil && !visit(prefix+ch.Instance.Spelt+".", ch.Context) {
					return false
				}
			}
			return true
		}
		for _, c := range run.Roots {
			if !visit(c.Prefix(), c) {
				return
			}
		}
	}
}

// counts is how many instances see each context of a run, at most MaxInt32.
func (run *Run) counts() map[*Context]int {
	var order []*Context // parents before children
	done := map[*Context]bool{}
	var visit func(c *Context)
	visit = func(c *Context) {
		if done[c] {
			return
		}
		done[c] = true
		for _, ch := range c.Children {
			if ch.Context != nil {
				visit(ch.Context)
			}
		}
		order = append(order, c)
	}
	n := map[*Context]int{}
	for _, c := range run.Roots {
		visit(c)
		n[c]++
	}
	for i := len(order) - 1; i >= 0; i-- {
		for _, ch := range order[i].Children {
			if ch.Context != nil {
				n[ch.Context] = min(n[ch.Context]+n[order[i]], math.MaxInt32)
			}
		}
	}
	return n
}
