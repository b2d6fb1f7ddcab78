package mos

import "math"

// biasLimit bounds the voltages that reach the equations; no device of these
// models survives it, and no expression overflows inside it.
const biasLimit = 1e4

// Eval evaluates the device at the voltages of its outer terminals, signed as
// wired, for any sign of vds. It never panics and does not allocate. Currents
// and conductances are finite for finite voltages; see Point.Failed.
func (d *Device) Eval(vgs, vds, vbs float64) Point {
	p := Point{Vgs: vgs, Vds: vds, Vbs: vbs, Vt: d.vt, NAssumed: d.assumed}
	gs, ds, bs := limited(d.s*vgs), limited(d.s*vds), limited(d.s*vbs)
	rd, rs := d.rd, d.rs
	if ds < 0 {
		// The device is symmetric: name the ends by their potential.
		p.Swapped = true
		gs, ds, bs = gs-ds, -ds, bs-ds
		rd, rs = rs, rd
	}
	p.VGS, p.VDS, p.VBS = gs, ds, bs

	outer := d.core.eval(gs, ds, bs)
	inner, id := outer, outer.id
	p.Internal = Inner{VGS: gs, VDS: ds, VBS: bs}
	if d.resists {
		id, inner = d.throughAccess(gs, ds, bs, rd, rs, &p.Internal)
	}
	p.Internal.Vth, p.Internal.Vdsat = inner.vth, inner.vdsat
	if !id.finite() {
		id, p.Failed = dual{}, true
	}
	id = id.times(d.m)
	p.wire(d.s, id)
	p.describe(d.m, id, outer, inner)
	return p
}

// limited keeps voltages within biasLimit; a NaN becomes zero.
func limited(v float64) float64 {
	if v != v {
		return 0
	}
	return math.Max(-biasLimit, math.Min(biasLimit, v))
}

// throughAccess evaluates behind the access resistances.
func (d *Device) throughAccess(vgs, vds, vbs float64, rd, rs access, in *Inner) (dual, channel) {
	gs, ds, bs := bias(vgs, vds, vbs)
	rsv := rs.at(gs, bs)
	rdv := rd.at(gs.sub(ds), bs.sub(ds))
	id, inner := solve(d.core, vgs, vds, vbs, rdv, rsv)
	in.VGS -= id.v * rsv.v
	in.VBS -= id.v * rsv.v
	in.VDS = math.Max(0, vds-id.v*(rsv.v+rdv.v))
	return id, inner
}

// wire turns the current and its derivatives back to the terminals as wired.
func (p *Point) wire(s float64, id dual) {
	if p.Swapped {
		// I_D = -I(VGS - VDS, -VDS, VBS - VDS), differentiated.
		id = dual{-id.v, -id.g, id.g + id.d + id.b, -id.b}
	}
	// Polarity turns voltages and current alike, so conductances keep theirs.
	p.Id, p.Gm, p.Gds, p.Gmb = s*id.v, id.g, id.d, id.b
}

// describe fills the second group of a Point, in the conducting direction.
func (p *Point) describe(m float64, id dual, outer, inner channel) {
	p.ID = math.Abs(id.v)
	p.Vth, p.Vdsat, p.N = outer.vth, outer.vdsat, outer.n
	p.Vov = p.VGS - p.Vth
	p.K = m * inner.k
	p.VelSat = inner.velocity
	p.IC = inner.ic
	if p.IC != p.IC {
		p.IC = Inversion((p.Internal.VGS - inner.vth) / (inner.n * p.Vt))
	}
	p.Rds = 1 / id.d
	if id.d == 0 {
		p.Rds = math.Inf(1)
	}
	p.Ron = p.VDS / p.ID
	if p.VDS == 0 {
		p.Ron = p.Rds
	}
	p.Ron0 = math.Inf(1)
	if p.Vov > 0 && p.K > 0 {
		p.Ron0 = 1 / (p.K * p.Vov)
	}
	p.Slope = id.d * p.VDS / p.ID
	if p.ID == 0 {
		p.Slope = math.NaN()
	}
}
