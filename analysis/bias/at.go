package bias

import (
	"fmt"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
)

// At tells the ranged nodes' voltages at a sample: "v(in)=1.600 V"; "" if
// nothing is ranged.
func (c *Context) At(sample int) string {
	return c.at(sample, func(int) bool { return true })
}

// AtDevice is At with only those ranged nodes that move a terminal of the device.
func (c *Context) AtDevice(d *Device, sample int) string { return c.atNets(sample, d.Device.Nets) }

// atNets is At with only those ranged nodes that move one of the nets.
func (c *Context) atNets(sample int, nets []circuit.NetID) string {
	if len(c.Axes) < 2 {
		return c.At(sample)
	}
	return c.at(sample, func(axis int) bool { return c.Moves(axis, nets) })
}

func (c *Context) at(sample int, take func(axis int) bool) string {
	var parts []string
	for i, a := range c.Axes {
		if sample >= 0 && sample < len(a.Values) && take(i) {
			parts = append(parts, "v("+a.Node+")="+quantity.Volts(a.Values[sample]))
		}
	}
	return strings.Join(parts, ", ")
}

// Moves says whether a net changes between two samples that differ in the axis
// alone; where no two samples do, the axis is taken to matter.
func (c *Context) Moves(axis int, nets []circuit.NetID) bool {
	first := map[string]int{} // the other axes' values, to a sample that has them
	compared := false
	for s := range c.Samples {
		var key strings.Builder
		for i, a := range c.Axes {
			if i != axis {
				fmt.Fprint(&key, a.Values[s], ";")
			}
		}
		other, met := first[key.String()]
		if !met {
			first[key.String()] = s
			continue
		}
		compared = true
		for _, n := range nets {
			if v := c.Nodes[n].V; v != nil && v[s] != v[other] {
				return true
			}
		}
	}
	return !compared
}
