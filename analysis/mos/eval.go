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

	c := d.core.eval(gs, ds, bs)
	p.Vth, p.Vdsat, p.N = c.vth, c.vdsat, c.n
	p.Vov = gs - c.vth
	p.Internal = Inner{VGS: gs, VDS: ds, VBS: bs}
	if d.resists {
		d.throughAccess(&c, &p.Internal, rd, rs)
	}
	p.Internal.Vth, p.Internal.Vdsat = c.vth, c.vdsat
	if d.beside != nil {
		d.addBeside(&c.id, ds, p.Swapped)
	}
	if !c.id.finite() {
		c.id, p.Failed = dual{}, true
	}
	c.id = c.id.times(d.m)
	p.wire(d.s, c.id)
	p.describe(d.m, &c)
	return p
}

// limited keeps voltages within biasLimit; a NaN becomes zero.
func limited(v float64) float64 {
	switch {
	case v != v:
		return 0
	case v > biasLimit:
		return biasLimit
	case v < -biasLimit:
		return -biasLimit
	}
	return v
}

// throughAccess replaces the channel at the outer voltages, in, by the one
// behind the access resistances; its current is that of the outer terminals.
func (d *Device) throughAccess(c *channel, in *Inner, rd, rs access) {
	gs, ds, bs := bias(in.VGS, in.VDS, in.VBS)
	rsv := rs.at(gs, bs)
	rdv := rd.at(gs.sub(ds), bs.sub(ds))
	id, inner := solve(d.core, in.VGS, in.VDS, in.VBS, rdv, rsv)
	in.VGS -= id.v * rsv.v
	in.VBS -= id.v * rsv.v
	in.VDS = math.Max(0, in.VDS-id.v*(rsv.v+rdv.v))
	*c = inner
	c.id = id
}

// addBeside adds what conducts between drain and source beside the channel.
func (d *Device) addBeside(id *dual, vds float64, swapped bool) {
	if swapped {
		i, g := d.beside.at(-vds)
		id.v, id.d = id.v-i, id.d+g
		return
	}
	i, g := d.beside.at(vds)
	id.v, id.d = id.v+i, id.d+g
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

// describe fills the rest of the second group of a Point, in the conducting
// direction.
func (p *Point) describe(m float64, c *channel) {
	p.ID = math.Abs(c.id.v)
	p.K = m * c.k
	p.VelSat = c.velocity
	p.IC = c.ic
	if p.IC != p.IC {
		p.IC = Inversion((p.Internal.VGS - c.vth) / (c.n * p.Vt))
	}
	p.Rds, p.Ron0 = math.Inf(1), math.Inf(1)
	if c.id.d != 0 {
		p.Rds = 1 / c.id.d
	}
	if p.Vov > 0 && p.K > 0 {
		p.Ron0 = 1 / (p.K * p.Vov)
	}
	p.Ron = p.VDS / p.ID
	if p.VDS == 0 {
		p.Ron = p.Rds
	}
	p.Slope = c.id.d * p.VDS / p.ID
	if p.ID == 0 {
		p.Slope = math.NaN()
	}
}
