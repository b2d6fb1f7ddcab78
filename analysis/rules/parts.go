package rules

import (
	"iter"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// part is a MOSFET where its writer placed it: on its own line, or, where a
// subckt wraps one MOSFET as process libraries do, on the instance's line.
type part struct {
	*bias.Device
	Path    string          // hierarchical name, as spelt
	Card    circuit.Place   // the card of the device or instance
	Elem    *parser.Element // likewise
	Wrapper string          // folded name of the subckt around it, "" if none
	Run     *bias.Run
	Context *bias.Context
}

// Name is the place of the part's name on its card.
func (m part) Name() circuit.Place { return analysis.WordAt(m.Card, m.Elem.Name) }

func (m part) subject() analysis.Subject { return analysis.Subject{Path: m.Path, Card: m.Card} }

// cardKey tells cards apart.
type cardKey struct {
	path string
	card int
}

func keyOf(at circuit.Place) cardKey { return cardKey{at.Doc.Path, at.Card} }

// parts gives the MOSFETs of every run. A context that several instances share
// comes once in each run, under the first instance's path.
func parts(r *bias.Result) iter.Seq[part] {
	return func(yield func(part) bool) {
		for _, run := range r.Runs {
			w := &partWalk{run: run, yield: yield, seen: map[*bias.Context]bool{}}
			for _, root := range run.Roots {
				if !w.context(root.Prefix(), root) {
					return
				}
			}
		}
	}
}

// at tells the ranged nodes that move the device, at a sample.
func (m part) at(sample int) string { return m.Context.AtDevice(m.Device, sample) }

type partWalk struct {
	run   *bias.Run
	yield func(part) bool
	seen  map[*bias.Context]bool
}

func (w *partWalk) context(prefix string, c *bias.Context) bool {
	if w.seen[c] {
		return true
	}
	w.seen[c] = true
	for _, d := range c.Devices {
		m := part{Device: d, Path: prefix + d.Device.Spelt, Card: d.Device.Place, Elem: d.Device.Elem, Run: w.run, Context: c}
		if !w.yield(m) {
			return false
		}
	}
	for _, x := range c.Children {
		if x.Context == nil {
			continue
		}
		if row, ok := x.Wrapped(); ok {
			m := part{
				Device: row.Device, Path: prefix + row.Path, Card: x.Instance.Place, Elem: x.Instance.Elem,
				Wrapper: row.Wrapper, Run: w.run, Context: row.Context,
			}
			if !w.yield(m) {
				return false
			}
			continue
		}
		if !w.context(prefix+x.Instance.Spelt+".", x.Context) {
			return false
		}
	}
	return true
}

// find is the MOSFET of a hierarchical name in one run.
func find(run *bias.Run, path string) (part, bool) {
	for m := range parts(&bias.Result{Runs: []*bias.Run{run}}) {
		if m.Path == path {
			return m, true
		}
	}
	return part{}, false
}
