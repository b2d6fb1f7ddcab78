package mos

import "math"

// level3 is the semi-empirical model of UCB/ERL M80/7, after Dang (IEEE J.
// Solid-State Circuits SC-14, 1979). Its gds jumps at Vdsat and its gm at the
// turn-on voltage: properties of the model.
type level3 struct {
	bulk23
	sigma float64 // DIBL: Vth per VDS
	fn    float64 // narrow-width factor
	theta float64 // 1/V
	kappa float64
}

// staticFeedback is the constant of ETA in SI units, F·m.
const staticFeedback = 8.15e-22

func compileLevel3(p *params, g Geometry, at climate) build {
	m := &level3{bulk23: readBulk23(p, g, at)}
	rd, rs := classicAccess(p, g, 1)
	b := build{core: m, rd: rd, rs: rs, junction: classicJunction(p, g, at), assumed: !m.weak}
	if p.failed() {
		return b
	}
	m.sigma = staticFeedback * p.get("eta", 0) / (m.cox * m.leff * m.leff * m.leff)
	m.fn = m.narrow(p, 2)
	m.theta = p.atLeast("theta", 0, 0)
	m.kappa = p.atLeast("kappa", 0.2, 0)
	return b
}

func (m *level3) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	s := m.root(vbs)
	body := m.shortFactor(s).times(m.gamma) // GAMMA·Fs
	charge := body.mul(s).add(s.square().times(m.fn))
	q := level3Bias{
		level3: m,
		vth:    charge.plus(m.vbi).sub(vds.times(m.sigma)),
		fb:     body.div(s).times(0.25).plus(m.fn),
	}
	n := charge.div(s.square()).times(0.5).plus(1 + m.nfs)
	at, tail := m.turnOn(vgs, q.vth, n)
	c := q.conduct(at, vds)
	c.id = c.id.mul(tail)
	c.vth, c.n, c.ic = q.vth.v, m.slopeFactor(n), math.NaN()
	return c
}

// shortFactor is Fs of Dang: the share of the depletion charge that the gate
// keeps, from a trapezoid with cylindrical junctions.
func (m *level3) shortFactor(s dual) dual {
	if m.xj == 0 || m.xd == 0 {
		return constant(1)
	}
	wp := s.times(m.xd)
	x := wp.times(1 / m.xj)
	wc := x.square().times(-0.01110777).add(x.times(0.8013292)).plus(0.0631353).times(m.xj)
	flank := wp.div(wp.plus(m.xj)).square().neg().plus(1).sqrt()
	loss := wc.plus(m.ld).times(1 / m.xj).mul(flank).plus(-m.ld / m.xj)
	fs := loss.times(-m.xj / m.leff).plus(1)
	return largest(fs, dual{})
}

// level3Bias is the model at one bulk and drain voltage.
type level3Bias struct {
	*level3
	vth, fb dual
}

func (q *level3Bias) conduct(vgs, vds dual) channel {
	over := vgs.sub(q.vth)
	c := channel{k: q.beta0, velocity: math.NaN()}
	if over.v <= 0 {
		return c
	}
	slow := over.times(q.theta).plus(1)
	beta := slow.inv().times(q.beta0)
	taper := q.fb.plus(1)
	vdsat := over.div(taper)
	var vc dual // VMAX·Leff/us, the voltage that velocity saturation sets
	if q.vmax > 0 {
		vc = slow.times(q.vmax * q.leff / q.uo)
		va := vdsat
		// va + vc - sqrt(va² + vc²) = 2·va·vc/(va + vc + sqrt(...)).
		sum := va.add(vc)
		vdsat = va.mul(vc).times(2).div(sum.add(va.square().add(vc.square()).sqrt()))
		c.velocity = over.v / vc.v
	}
	v := smallest(vds, vdsat)
	c.vdsat, c.k = vdsat.v, beta.v
	c.id = over.sub(taper.mul(v).times(0.5)).mul(v).mul(beta)
	if q.vmax > 0 {
		c.id = c.id.div(v.div(vc).plus(1))
	}
	if vds.v > vdsat.v {
		c.id = c.id.div(q.modulation(vds.sub(vdsat), vdsat, vc).times(-1 / q.leff).plus(1))
	}
	return c
}

// modulation is the length that the drain's space charge takes, in metres; it
// stays below Leff by construction.
func (q *level3Bias) modulation(beyond, vdsat, vc dual) dual {
	reach := beyond.times(q.kappa * q.xd * q.xd)
	dl := reach.sqrt()
	if q.vmax > 0 {
		// Field at the saturation point, Idsat/(gdsat·Leff).
		field := vc.mul(vc.add(vdsat)).div(vdsat).times(1 / q.leff)
		h := field.times(q.xd * q.xd / 2)
		if h.v > 0 {
			dl = reach.div(h.square().add(reach).sqrt().add(h))
		}
	}
	if dl.v > q.leff/2 {
		dl = dl.inv().times(-q.leff * q.leff / 4).plus(q.leff)
	}
	return dl
}
