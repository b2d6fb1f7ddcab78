package mos

import "math"

// level2 is the bulk-charge model of UCB/ERL M80/7: Ihantola & Moll 1964 for the
// channel, Frohman-Bentchkowsky & Grove 1969 for channel-length modulation, Baum
// & Beneking 1970 for the velocity limit.
type level2 struct {
	bulk23
	dn, eta     float64 // narrow-width factor, 1 + dn
	ucrit       float64 // V, UCRIT·εsi/Cox
	uexp        float64
	neff        float64
	lambdaGiven bool
}

// leastChannel is the share of the channel that modulation leaves: the published
// text guards punch-through in a way that depends on PB, this bound only keeps
// the current finite.
const leastChannel = 0.05

func compileLevel2(p *params, g Geometry, at climate) build {
	m := &level2{bulk23: readBulk23(p, g, at)}
	rd, rs := classicAccess(p, g, 1)
	b := build{core: m, rd: rd, rs: rs, junction: classicJunction(p, g, at), assumed: !m.weak}
	if p.failed() {
		return b
	}
	m.dn = m.narrow(p, 4)
	m.eta = 1 + m.dn
	m.ucrit = p.positive("ucrit", 1e4) * 100 * epsSilicon / m.cox
	m.uexp = p.atLeast("uexp", 0, 0)
	m.neff = p.positive("neff", 1)
	m.lambdaGiven = p.has("lambda")
	return b
}

func (m *level2) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	s := m.root(vbs)
	q := level2Bias{level2: m, s: s, b: s.square()}
	q.gs = m.shortGamma(q.b, vds)
	q.vbin = q.b.times(m.dn).plus(m.vbi)
	q.vth = q.vbin.add(q.gs.mul(s))
	n := q.gs.div(s).times(0.5).plus(1 + m.nfs + m.dn)
	at, tail := m.turnOn(vgs, q.vth, n)
	c := q.conduct(at, vds)
	c.id = c.id.mul(tail)
	c.vth, c.n, c.ic = q.vth.v, m.slopeFactor(n), math.NaN()
	return c
}

// level2Bias is the model at one bulk and drain voltage.
type level2Bias struct {
	*level2
	s, b, gs, vbin, vth dual
}

// shortGamma is the body factor less the charge that source and drain deplete.
func (m *level2) shortGamma(b, vds dual) dual {
	if m.xj == 0 {
		return constant(m.gamma)
	}
	wedge := func(u dual) dual { return u.sqrt().times(2 * m.xd / m.xj).plus(1).sqrt() }
	loss := wedge(b).add(wedge(b.add(vds))).plus(-2).times(m.xj / (2 * m.leff))
	gs := loss.neg().plus(1).times(m.gamma)
	return largest(gs, dual{})
}

// bulkIntegral is F(v): the channel charge integrated up to the channel voltage v.
func (q *level2Bias) bulkIntegral(vgs, v dual) dual {
	top := q.b.add(v)
	bulk := top.mul(top.sqrt()).sub(q.b.mul(q.s)).mul(q.gs).times(2.0 / 3)
	return vgs.sub(q.vbin).sub(v.times(q.eta / 2)).mul(v).sub(bulk)
}

// endCharge is dF/dv, the charge at the drain end.
func (q *level2Bias) endCharge(vgs, v dual) dual {
	return vgs.sub(q.vbin).sub(v.times(q.eta)).sub(q.gs.mul(q.b.add(v).sqrt()))
}

func (q *level2Bias) conduct(vgs, vds dual) channel {
	over := vgs.sub(q.vth)
	c := channel{k: q.beta0, velocity: math.NaN()}
	if over.v <= 0 {
		return c
	}
	slow := constant(1) // us/UO
	if field := over.inv().times(q.ucrit); field.v < 1 {
		slow = field.pow(q.uexp)
	}
	us := slow.times(q.uo)
	vdsat := q.saturation(vgs)
	if q.vmax > 0 {
		vdsat = q.velocityLimited(vgs, vdsat, us)
		c.velocity = over.v * us.v / (q.vmax * q.leff)
	}
	c.vdsat = vdsat.v
	c.k = q.beta0 * slow.v
	c.id = q.bulkIntegral(vgs, smallest(vds, vdsat)).mul(slow).times(q.beta0)
	left := q.modulation(vds, vdsat, us).times(-1 / q.leff).plus(1)
	c.id = c.id.div(largest(left, constant(leastChannel)))
	return c
}

// saturation is where the drain end pinches off: endCharge = 0.
func (q *level2Bias) saturation(vgs dual) dual {
	a := vgs.sub(q.vbin).times(1 / q.eta)
	g := q.gs.times(1 / q.eta)
	half := g.square().times(0.5)
	// a + g²/2 - sqrt(g⁴/4 + g²(a + b)): free of a division by g = 0.
	v := a.add(half).sub(half.square().add(g.square().mul(a.add(q.b))).sqrt())
	return largest(v, dual{})
}

// velocityLimited is where the channel would need more than VMAX at the drain
// end: us·F(v) = VMAX·Leff·endCharge(v), whose left side rises from zero and
// whose right side falls to zero at v0.
func (q *level2Bias) velocityLimited(vgs, v0, us dual) dual {
	if v0.v <= 0 {
		return v0
	}
	low, high := 0.0, v0.v
	v := high / 2
	limit := q.vmax * q.leff
	excess := func(v float64) (dual, float64) {
		at := constant(v)
		e := q.endCharge(vgs, at)
		slope := us.v*e.v + limit*(q.eta+q.gs.v/(2*math.Sqrt(q.b.v+v)))
		return us.mul(q.bulkIntegral(vgs, at)).sub(e.times(limit)), slope
	}
	for range maxIterations {
		g, slope := excess(v)
		if g.v > 0 {
			high = v
		} else {
			low = v
		}
		next := v - g.v/slope
		if !(next > low && next < high) {
			next = low + (high-low)/2
		}
		done := math.Abs(next-v) <= 1e-14*next
		v = next
		if done {
			break
		}
	}
	// The derivatives follow from the implicit function at the root.
	g, slope := excess(v)
	root := g.times(-1 / slope)
	root.v = v
	return root
}

// modulation is the length that the drain's space charge takes, in metres.
func (q *level2Bias) modulation(vds, vdsat, us dual) dual {
	beyond := vds.sub(vdsat)
	switch {
	case q.lambdaGiven:
		return vds.times(q.lambda * q.leff)
	case q.vmax == 0:
		u := beyond.times(0.25)
		root := u.square().plus(1).sqrt()
		if u.v < 0 {
			return root.sub(u).inv().sqrt().times(q.xd)
		}
		return root.add(u).sqrt().times(q.xd)
	case beyond.v <= 0:
		return dual{}
	}
	xd := q.xd / math.Sqrt(q.neff)
	h := us.inv().times(xd * q.vmax / 2)
	// xd(sqrt(h² + beyond) - h), written without the cancellation.
	return beyond.div(h.square().add(beyond).sqrt().add(h)).times(xd)
}
