package bias

import (
	"maps"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/mos"
)

// quantities are the names that an annotation may use, with their units. Each
// is taken in the device's conducting direction, drain and source as biased.
var quantities = map[string]struct {
	unit string
	of   func(p *mos.Point) float64
}{
	"vgs":    {"V", func(p *mos.Point) float64 { return p.VGS }},
	"vds":    {"V", func(p *mos.Point) float64 { return p.VDS }},
	"vbs":    {"V", func(p *mos.Point) float64 { return p.VBS }},
	"vgd":    {"V", func(p *mos.Point) float64 { return p.VGS - p.VDS }},
	"vgb":    {"V", func(p *mos.Point) float64 { return p.VGS - p.VBS }},
	"vth":    {"V", func(p *mos.Point) float64 { return p.Vth }},
	"vov":    {"V", func(p *mos.Point) float64 { return p.Vov }},
	"vdsat":  {"V", func(p *mos.Point) float64 { return p.Vdsat }},
	"id":     {"A", func(p *mos.Point) float64 { return p.ID }},
	"gm":     {"S", gm},
	"gds":    {"S", gds},
	"gmb":    {"S", gmb},
	"ron":    {"Ω", func(p *mos.Point) float64 { return p.Ron }},
	"rds":    {"Ω", func(p *mos.Point) float64 { return 1 / gds(p) }},
	"margin": {"V", func(p *mos.Point) float64 { return p.Margin() }},
	"ic":     {"", func(p *mos.Point) float64 { return p.IC }},
	"gmid":   {"1/V", func(p *mos.Point) float64 { return gm(p) / p.ID }},
	"gain":   {"", func(p *mos.Point) float64 { return gm(p) / gds(p) }},
	"power":  {"W", func(p *mos.Point) float64 { return p.VDS * p.ID }},
	"ron0":   {"Ω", func(p *mos.Point) float64 { return p.Ron0 }},
}

// gm, gds and gmb undo the exchange of drain and source, so that a device
// biased backwards reads like the same device biased forwards. With the ends
// exchanged the derivatives at the terminals are gm = -gm', gmb = -gmb' and
// gds = gm' + gds' + gmb' (primes: as biased).
func gm(p *mos.Point) float64 {
	if p.Swapped {
		return -p.Gm
	}
	return p.Gm
}

func gmb(p *mos.Point) float64 {
	if p.Swapped {
		return -p.Gmb
	}
	return p.Gmb
}

func gds(p *mos.Point) float64 {
	if p.Swapped {
		return p.Gds + p.Gm + p.Gmb
	}
	return p.Gds
}

// flipped gives the name whose pair is written the other way round, as a PMOS
// is spoken of: vsg for vgs.
var flipped = map[string]string{"vsg": "vgs", "vsd": "vds", "vsb": "vbs", "vdg": "vgd", "vbg": "vgb"}

// Canonical is the quantity's own name for a spelling: "vgs" for "VSG".
func Canonical(name string) string {
	name = strings.ToLower(name)
	if c, ok := flipped[name]; ok {
		return c
	}
	return name
}

// Quantity is a quantity of a device at a sample, in SI units; ok is false if
// the device was not evaluated, the name is not known, or the quantity has no
// value there (a resistance without any current).
func Quantity(d *Device, sample int, name string) (v float64, ok bool) {
	q, known := quantities[Canonical(name)]
	if !known || sample < 0 || sample >= len(d.Points) {
		return 0, false
	}
	v = q.of(&d.Points[sample])
	return v, !math.IsNaN(v)
}

// Unit is the SI unit of a quantity, "" for a ratio.
func Unit(name string) string { return quantities[Canonical(name)].unit }

// ShownPair writes a quantity as its polarity is spoken of: voltages between
// terminals in capitals, "VSG" for the "vgs" of a PMOS; others as they are.
func ShownPair(p mos.Polarity, name string) string {
	name = Canonical(name)
	switch name {
	case "vgs", "vds", "vbs", "vgd", "vgb":
		up := strings.ToUpper(name)
		if p == mos.PMOS {
			return string([]byte{up[0], up[2], up[1]})
		}
		return up
	}
	return name
}

// Extremes are a quantity's bounds over the samples, with the samples that have
// them. An unlimited value (a resistance that is off) counts.
type Extremes struct {
	Min, Max     float64
	AtMin, AtMax int
}

// Range gives a quantity's extremes; ok as in Quantity, over all samples.
func (d *Device) Range(name string) (e Extremes, ok bool) {
	for s := range d.Points {
		v, has := Quantity(d, s, name)
		if !has {
			return Extremes{}, false
		}
		if !ok || v < e.Min {
			e.Min, e.AtMin = v, s
		}
		if !ok || v > e.Max {
			e.Max, e.AtMax = v, s
		}
		ok = true
	}
	return e, ok
}

// RegionSpan is a run of samples in one region, From to To inclusive.
type RegionSpan struct {
	Region   mos.Region
	From, To int
}

// Regions lists the runs of equal region over the samples, in order.
func (d *Device) Regions() []RegionSpan {
	var out []RegionSpan
	for s, v := range d.Verdicts {
		if n := len(out); n > 0 && out[n-1].Region == v.Region {
			out[n-1].To = s
			continue
		}
		out = append(out, RegionSpan{v.Region, s, s})
	}
	return out
}

// Known says whether a quantity of that name exists.
func Known(name string) bool {
	_, ok := quantities[Canonical(name)]
	return ok
}

// Quantities lists the names that annotations may use, sorted.
func Quantities() []string { return slices.Sorted(maps.Keys(quantities)) }
