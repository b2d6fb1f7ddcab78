package bias

import (
	"fmt"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
)

// geometry reads an instance line's numbers; lengths and areas are scaled by
// `.option scale`. The multipliers of the instances around it count. The string
// says why there is none.
func geometry(d *circuit.Device, m float64) (mos.Geometry, string) {
	g := mos.Unstated()
	g.M = m
	scale := d.Scale
	if scale == 0 {
		scale = 1
	}
	area := scale * scale
	for _, f := range []struct {
		to    *float64
		scale float64
		names []string
	}{
		{&g.W, scale, []string{"w", "wr"}}, {&g.L, scale, []string{"l", "lr"}},
		{&g.NF, 1, []string{"nf", "ng", "nfin", "nr"}},
		{&g.AD, area, []string{"ad"}}, {&g.AS, area, []string{"as"}},
		{&g.PD, scale, []string{"pd"}}, {&g.PS, scale, []string{"ps"}},
		{&g.NRD, 1, []string{"nrd"}}, {&g.NRS, 1, []string{"nrs"}},
		{&g.SA, scale, []string{"sa"}}, {&g.SB, scale, []string{"sb"}}, {&g.SD, scale, []string{"sd"}},
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
	for _, f := range []struct {
		to   *float64
		name string
	}{{&g.W, "w"}, {&g.L, "l"}} {
		if *f.to != 0 || d.Model == nil {
			continue
		}
		if v, ok := d.Model.Params[f.name]; ok && v.Err == nil {
			*f.to = v.V
		}
	}
	switch {
	case g.W == 0 && g.L == 0:
		return g, "neither the line nor the model states W and L"
	case g.W == 0:
		return g, "neither the line nor the model states W"
	case g.L == 0:
		return g, "neither the line nor the model states L"
	}
	return g, ""
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
