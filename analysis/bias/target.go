package bias

import (
	"fmt"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// target is a device that an expectation speaks of.
type target struct {
	path    string
	context *Context
	device  *Device
}

// reason says why the device cannot be judged, "" if it can.
func (t target) reason() string {
	switch d := t.device; {
	case d.Points != nil:
		return ""
	case d.Reason != "":
		return d.Reason
	default:
		return "annotate " + voltagesOf(d.Missing)
	}
}

// nets are the device's terminals.
func (t target) nets() []circuit.NetID { return t.device.Device.Nets }

// voltagesOf lists nodes as an annotation would name them: "v(a), v(b)".
func voltagesOf(nodes []string) string {
	return "v(" + strings.Join(nodes, "), v(") + ")"
}

// targets finds the MOSFETs that an expectation speaks of in a context: by local
// name, by a dotted name through instances, or by wildcards in either.
func targets(path string, c *Context, n circuit.NoteAt, e *parser.Expect) []target {
	pattern := fold(e.Target)
	if e.Target.IsZero() && n.Subject != nil {
		pattern = fold(n.Subject.Name)
	}
	prefix := ""
	if path != "" {
		prefix = path + "."
	}
	return c.find(prefix, pattern)
}

// manyDevices is from where on a cell has an index of its devices' names: flat
// decks name thousands of them, one by one.
const manyDevices = 16

func (c *Context) index() {
	if len(c.Devices) < manyDevices {
		return
	}
	c.named = make(map[string][]*Device, len(c.Devices))
	for _, d := range c.Devices {
		c.named[d.Device.Name] = append(c.named[d.Device.Name], d)
	}
}

// candidates are the devices of a cell that may fit a pattern.
func (c *Context) candidates(pattern string) []*Device {
	if c.named == nil || isPattern(pattern) {
		return c.Devices
	}
	return c.named[pattern]
}

func (c *Context) find(prefix, pattern string) []target {
	var out []target
	for _, d := range c.candidates(pattern) {
		if circuit.Match(pattern, d.Device.Name) {
			out = append(out, target{prefix + d.Device.Spelt, c, d})
		}
	}
	for _, ch := range c.Children {
		if ch.Context == nil {
			continue
		}
		inner := prefix + ch.Instance.Spelt + "."
		if w, ok := ch.Wrapped(); ok && circuit.Match(pattern, ch.Instance.Name) {
			out = append(out, target{prefix + ch.Instance.Spelt, w.Context, w.Device})
			continue
		}
		if pattern == ch.Instance.Name && len(ch.Context.Devices) == 1 && len(ch.Context.Children) == 0 {
			// An instance around one MOSFET is that MOSFET to its writer.
			out = append(out, target{inner + ch.Context.Devices[0].Device.Spelt, ch.Context, ch.Context.Devices[0]})
		}
		if head, rest, ok := strings.Cut(pattern, "."); ok && circuit.Match(head, ch.Instance.Name) {
			out = append(out, ch.Context.find(inner, rest)...)
		}
	}
	return out
}

// findNode leads a dotted node name through instances.
func findNode(c *Context, name string) (*Context, circuit.NetID, bool) {
	if id, ok := c.Cell.NetByName(name); ok {
		return c, id, true
	}
	head, rest, ok := strings.Cut(name, ".")
	if !ok {
		return nil, 0, false
	}
	for _, ch := range c.Children {
		if ch.Instance.Name == head && ch.Context != nil {
			return findNode(ch.Context, rest)
		}
	}
	return nil, 0, false
}

// checkNames reports what expectations name and the design does not have.
func (a *analyser) checkNames(d *circuit.Design) {
	for _, run := range a.result.Runs {
		for path, c := range a.result.Contexts(run) {
			for _, n := range a.statements(c.Cell.Scope).expects {
				a.checkExpect(d, path, c, n, n.Note.(*parser.Expect))
			}
			for _, n := range a.statements(c.Cell.Scope).unbuilt {
				a.problem(NotBuilt, placeOf(n, n.Span.Start, n.Span.End), "this statement is read but not evaluated: nothing is checked by it")
			}
		}
	}
}

func (a *analyser) checkExpect(d *circuit.Design, path string, c *Context, n circuit.NoteAt, e *parser.Expect) {
	modes, corners := a.known(d, c.Cell.Scope)
	for _, w := range e.Modes {
		if !modes[fold(w)] {
			a.problem(UnknownName, placeOf(n, w.Start, w.Span().End), fmt.Sprintf("there is no mode %q", w.Text))
		}
	}
	for _, w := range e.Corners {
		if !corners[fold(w)] {
			a.problem(UnknownName, placeOf(n, w.Start, w.Span().End), fmt.Sprintf("there is no corner %q", w.Text))
		}
	}
	switch e.Kind {
	case parser.NodeTarget:
		if _, _, ok := findNode(c, fold(e.Target)); !ok {
			a.problem(UnknownName, placeOf(n, e.Target.Start, e.Target.Span().End), a.noSuchNode(c.Cell, e.Target.Text))
		}
	case parser.DeviceTarget:
		if len(targets(path, c, n, e)) == 0 {
			a.noTarget(c, n, e)
		}
	}
}

// noTarget tells a device that does not exist from one that is no MOSFET.
func (a *analyser) noTarget(c *Context, n circuit.NoteAt, e *parser.Expect) {
	w := e.Target
	place := placeOf(n, n.Span.Start, n.Span.End)
	if w.IsZero() {
		if n.Subject == nil {
			return // the element's card was not understood, which is told
		}
		w = n.Subject.Name
	} else {
		place = placeOf(n, w.Start, w.Span().End)
	}
	if c.Cell.DeviceByName(fold(w)) != nil {
		a.problem(NeverApplies, place, fmt.Sprintf("%s is no MOSFET: the expectation never applies", w.Text))
		return
	}
	if inst := c.Cell.InstanceByName(fold(w)); inst != nil && inst.Cell != nil {
		a.problem(NeverApplies, place, fmt.Sprintf("%s holds more than one MOSFET: name the one that is meant, as in %s.m1", w.Text, w.Text))
		return
	}
	a.problem(UnknownName, place, fmt.Sprintf("there is no device %q here", w.Text))
}
