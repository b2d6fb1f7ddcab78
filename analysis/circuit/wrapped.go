package circuit

import "triodeck/parser"

// Wrapper is a subckt that stands for one MOSFET, as foundries write them: the
// transistor, its model bins, perhaps series resistors and parasitic junctions on
// their own or in subckts, perhaps dummies, perhaps another wrapper in between.
type Wrapper struct {
	Path   []*Instance  // from the cell to the transistor's own; empty if they are one
	Cell   *Cell        // the transistor's own cell
	Device *Device      // the transistor
	Ports  [4]int       // the wrapper's port that each terminal (d g s b) reaches, -1 for a global net
	Series [4][]*Device // resistors, and sources of 0 V, between the terminal and that port, outermost first
}

// Wrapped gives the one MOSFET that the cell stands for; see Wrapper.
func (c *Cell) Wrapped() (*Device, bool) {
	if w := c.Wrapper(); w != nil {
		return w.Device, true
	}
	return nil, false
}

// Wrapper tells whether the cell stands for one MOSFET: nil if not. Each terminal
// must reach a port or a global net, and the geometry must come in by a parameter or
// the model stand inside; a switch that a designer put into a subckt has neither,
// and keeps its inner name, as does one with annotations inside.
func (c *Cell) Wrapper() *Wrapper {
	c.wrapOnce.Do(func() { c.wrap = c.wrapper(maxWrapping) })
	return c.wrap
}

// maxWrapping is how many wrappers may stand inside each other.
const maxWrapping = 4

func (c *Cell) wrapper(depth int) *Wrapper {
	if c.Scope.Subckt == nil || len(c.Scope.Notes) > 0 || depth == 0 {
		return nil
	}
	w := &Wrapper{Cell: c}
	var nets []NetID // of the transistor's terminals, in this cell
	for _, d := range c.Devices {
		switch d.Kind {
		case MOSFET:
			if idle(d.Nets) {
				continue
			}
			if w.Device != nil || !c.parametric(d) {
				return nil
			}
			w.Device, nets = d, d.Nets
		case Resistor, Capacitor, Diode:
		case VSource:
			if !d.shorts() {
				return nil
			}
		default:
			return nil
		}
	}
	for _, x := range c.Instances {
		if x.Cell == nil {
			return nil
		}
		if x.Cell.parasitic(depth) {
			continue
		}
		if len(x.Nets) != len(x.Cell.Ports) {
			return nil
		}
		inner := x.Cell.wrapper(depth - 1)
		if inner == nil {
			return nil
		}
		reached := make([]NetID, len(inner.Ports))
		for t, port := range inner.Ports {
			if reached[t] = -1; port >= 0 {
				reached[t] = x.Nets[port]
			}
		}
		if idle(reached) {
			continue
		}
		if w.Device != nil {
			return nil
		}
		w.Cell, w.Device, w.Series, nets = inner.Cell, inner.Device, inner.Series, reached
		w.Path = append([]*Instance{x}, inner.Path...)
	}
	if w.Device == nil {
		return nil
	}
	if len(nets) < 4 {
		return nil
	}
	for t := range w.Ports {
		port, series, ok := c.toPort(nets[t])
		if !ok {
			return nil
		}
		w.Ports[t], w.Series[t] = port, append(series, w.Series[t]...)
	}
	return w
}

// idle says that a transistor's gate, bulk and one end of the channel are one net,
// as those of the dummies at the ends of a row: it is off whatever happens.
func idle(nets []NetID) bool {
	return len(nets) == 4 && nets[1] >= 0 && nets[1] == nets[3] && (nets[0] == nets[1] || nets[2] == nets[1])
}

// parasitic says that a cell holds nothing but resistors, capacitors and junctions,
// as the subckts of well diodes and contacts do.
func (c *Cell) parasitic(depth int) bool {
	if depth == 0 {
		return false
	}
	for _, d := range c.Devices {
		switch d.Kind {
		case Resistor, Capacitor, Diode:
		default:
			return false
		}
	}
	for _, x := range c.Instances {
		if x.Cell == nil || !x.Cell.parasitic(depth-1) {
			return false
		}
	}
	return true
}

// shorts says that a source stands in the line only to measure its current.
func (d *Device) shorts() bool { return d.Kind == VSource && d.Value.Err == nil && d.Value.V == 0 }

// toPort follows series resistors from a net to a port. A net between a
// transistor and a resistor has no other current, but for parasitics.
func (c *Cell) toPort(id NetID) (port int, series []*Device, ok bool) {
	if id < 0 {
		return -1, nil, true
	}
	var last *Device
	for range 4 {
		n := &c.Nets[id]
		if n.Port >= 0 {
			return n.Port, series, true
		}
		if n.Global {
			return -1, series, true
		}
		var next *Device
		for _, p := range n.Pins {
			if p.Device != nil && (p.Device.Kind == Resistor || p.Device.shorts()) && p.Device != last {
				if next != nil {
					return 0, nil, false
				}
				next = p.Device
			}
		}
		if next == nil || len(next.Nets) < 2 {
			return 0, nil, false
		}
		series = append([]*Device{next}, series...)
		other := next.Nets[0]
		if other == id {
			other = next.Nets[1]
		}
		last, id = next, other
	}
	return 0, nil, false
}

// parametric says that a transistor takes width or length from the subckt's
// parameters, or has its model inside the subckt.
func (c *Cell) parametric(d *Device) bool {
	if m := d.Model; m != nil {
		if m.Def != nil && m.Def.Scope == c.Scope || len(m.Bins) > 0 && m.Bins[0].Scope == c.Scope {
			return true
		}
	}
	names := map[string]bool{}
	for _, p := range d.Elem.Params {
		switch parser.Fold(p.Name.Text) {
		case "w", "l", "wr", "lr", "nfin":
			valueWords(names, p.Value)
		}
	}
	for name := range names {
		if c.Scope.declares(name) {
			return true
		}
	}
	return false
}
