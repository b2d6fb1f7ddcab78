package mos

import "math"

// level1 is the square law of Shichman & Hodges (IEEE J. Solid-State Circuits
// SC-3, 1968) in the form of UCB/ERL M80/7: channel-length modulation multiplies
// the current in triode too, so current and gds are continuous at Vdsat.
type level1 struct {
	classic
	beta float64 // A/V²
}

// assumedN is the slope factor that stands in where a model has no weak
// inversion: common practice, 1.3 to 1.5.
const assumedN = 1.35

func compileLevel1(p *params, g Geometry, at climate) build {
	m := &level1{classic: readClassic(p, g, at, 0)}
	m.beta = m.kp * m.weff / m.leff
	rd, rs := classicAccess(p, g, 1)
	return build{core: m, rd: rd, rs: rs, junction: classicJunction(p, g, at), assumed: true}
}

func (m *level1) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	vth := m.depletion(vbs).times(m.gamma).plus(m.vbi)
	vov := vgs.sub(vth)
	c := channel{vth: vth.v, n: assumedN, k: m.beta, velocity: math.NaN(), ic: math.NaN()}
	if vov.v <= 0 {
		return c
	}
	c.vdsat = vov.v
	c.id = vov.square().times(m.beta / 2)
	if ds < vov.v {
		c.id = vov.sub(vds.times(0.5)).mul(vds).times(m.beta)
	}
	c.id = c.id.mul(vds.times(m.lambda).plus(1))
	return c
}
