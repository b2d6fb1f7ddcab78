package curve

import (
	"slices"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

// drain and source as a MOSFET's terminals are ordered.
const (
	drain  = 0
	source = 2
)

// parallel is the resistance of all series together, if they are devices that
// join the same two nodes, as those of a transmission gate do. With bands, the
// bounds are those of all devices at their best and at their worst.
func parallel(c *Curve, rows []bias.Row) (Series, bool) {
	if c.Quantity != "ron" || len(rows) < 2 {
		return Series{}, false
	}
	first := ends(rows[0])
	for _, row := range rows[1:] {
		if row.Context != rows[0].Context || ends(row) != first {
			return Series{}, false
		}
	}
	p := Series{Name: "parallel", Lo: make([]float64, len(c.X)), Hi: make([]float64, len(c.X)), Regions: make([]string, len(c.X))}
	for i := range c.X {
		var most, least float64 // conductance, S
		for _, s := range c.Series {
			most += 1 / s.Lo[i]
			least += 1 / s.Hi[i]
		}
		p.Lo[i], p.Hi[i] = 1/most, 1/least
	}
	return p, true
}

// ends are the two nodes that a device's channel joins, in a fixed order.
func ends(row bias.Row) [2]circuit.NetID {
	e := []circuit.NetID{row.Device.Device.Nets[drain], row.Device.Device.Nets[source]}
	slices.Sort(e)
	return [2]circuit.NetID(e)
}
