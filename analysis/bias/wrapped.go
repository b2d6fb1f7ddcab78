package bias

import "slices"

// Wrapped gives the MOSFET that an instance stands for: to its writer the X line
// is the device, as foundries wrap their transistors. The row's path is the
// instance's local name; ok is false if the instance is no wrapper.
func (ch Child) Wrapped() (row Row, ok bool) {
	if ch.Context == nil || ch.Context.Cell == nil {
		return Row{}, false
	}
	w := ch.Context.Cell.Wrapper()
	if w == nil {
		return Row{}, false
	}
	c := ch.Context
	for _, inner := range w.Path { // parasitics may stand beside it
		at := slices.IndexFunc(c.Children, func(x Child) bool { return x.Instance == inner })
		if at < 0 || c.Children[at].Context == nil {
			return Row{}, false
		}
		c = c.Children[at].Context
	}
	for _, d := range c.Devices {
		if d.Device == w.Device {
			return Row{Path: ch.Instance.Spelt, Wrapper: ch.Context.Cell.Scope.Name, Shell: ch.Context.Cell.Scope.Subckt.Name.Text, Context: c, Device: d}, true
		}
	}
	return Row{}, false
}
