package bias

import (
	"fmt"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
)

// geometry reads an instance line's numbers in SI units; see circuit.Size for what
// a 1 stands for. The multipliers of the instances around it count. The string
// says why there is none.
func geometry(d *circuit.Device, m float64) (mos.Geometry, string) {
	g := mos.Unstated()
	g.M = m
	if d.Size == nil {
		return g, "its size is not known"
	}
	g.W, g.L, g.NF = d.Size.W, d.Size.L, d.Size.NF
	unit := d.Size.Unit
	area := unit * unit
	for _, f := range []struct {
		to    *float64
		scale float64
		names []string
	}{
		{&g.AD, area, []string{"ad"}}, {&g.AS, area, []string{"as"}},
		{&g.PD, unit, []string{"pd"}}, {&g.PS, unit, []string{"ps"}},
		{&g.NRD, 1, []string{"nrd"}}, {&g.NRS, 1, []string{"nrs"}},
		{&g.SA, unit, []string{"sa"}}, {&g.SB, unit, []string{"sb"}}, {&g.SD, unit, []string{"sd"}},
		{&g.DelVTO, 1, []string{"delvto", "delvt0"}}, {&g.MulU0, 1, []string{"mulu0"}},
	} {
		v, name, ok := firstParam(d.Params, f.names...)
		if !ok {
			continue
		}
		if v.Err != nil {
			return g, fmt.Sprintf("%s: %v", name, v.Err)
		}
		*f.to = v.V * f.scale
	}
	if v, name, ok := firstParam(d.Params, "m", "mult", "multi", "par"); ok {
		if v.Err != nil {
			return g, fmt.Sprintf("%s: %v", name, v.Err)
		}
		g.M *= v.V
	}
	return g, d.Size.Reason
}

// firstParam is the first of several spellings that a card states.
func firstParam(params map[string]circuit.Value, names ...string) (circuit.Value, string, bool) {
	for _, name := range names {
		if v, ok := params[name]; ok {
			return v, name, true
		}
	}
	return circuit.Value{}, "", false
}
