package mos

import "math"

// ekv26 is the EPFL-EKV model, version 2.6 (Bucher, Lallement, Enz, Théodoloz &
// Krummenacher, EPFL 1997): charge-based, referred to the bulk, continuous from
// weak to strong inversion.
type ekv26 struct {
	leff, weff float64 // m
	cox        float64 // F/m²
	vto        float64 // V at temperature, with the reverse short-channel shift
	gamma, phi float64
	kp         float64 // A/V², with NP
	theta      float64 // 1/V
	e0         float64 // V/m
	eta        float64 // share of the inversion charge in the vertical field
	ucrit      float64 // V/m
	vc         float64 // V, UCRIT·NS·Leff
	lambda     float64
	lc         float64 // m, characteristic length
	ns         float64
	leta, weta float64 // LETA/Leff and 3·WETA/Weff times εsi/COX
	vt         float64
}

func compileEKV26(p *params, g Geometry, at climate) build {
	m := &ekv26{vt: at.vt}
	m.leff = g.L + p.get("xl", 0) + p.get("dl", 0)
	m.weff = g.W + p.get("xw", 0) + p.get("dw", 0)
	effective(p, m.leff, m.weff)
	cox := 0.7e-3
	if tox := p.get("tox", 0); tox > 0 {
		cox = epsOxide / tox
	}
	m.cox = p.positive("cox", cox)
	m.gamma = p.atLeast("gamma", 1, 0)
	phi := p.atLeast("phi", 0.7, lowestPHI)
	m.theta = p.atLeast("theta", 0, 0)
	m.e0 = p.positive("e0", 1e12)
	m.lambda = p.atLeast("lambda", 0.5, 0)
	m.ns = p.positive("ns", 1)
	m.eta = 0.5
	if at.polarity == PMOS {
		m.eta = 1.0 / 3
	}
	// The three temperature laws of the document; PHI as in the older levels.
	hot := at.t / at.tnom
	m.kp = p.positive("kp", 50e-6) * math.Pow(hot, p.get("bex", -1.5)) * g.MulU0 * p.positive("np", 1)
	m.ucrit = p.positive("ucrit", 2e6) * math.Pow(hot, p.get("ucex", 0.8))
	m.phi = math.Max(lowestPHI, surfacePotential(phi, at.tnom, at.t))
	m.vto = at.s*(p.get("vto", at.s*0.5)+g.DelVTO) - p.get("tcv", 1e-3)*(at.t-at.tnom)
	m.vto += m.reverseShortChannel(p.get("q0", 0), p.positive("lk", 0.29e-6))

	xj := p.positive("xj", 0.1e-6)
	m.vc = m.ucrit * m.ns * m.leff
	m.lc = math.Sqrt(epsSilicon * xj / m.cox)
	m.leta = epsSilicon / m.cox * p.get("leta", 0.1) / m.leff
	m.weta = epsSilicon / m.cox * 3 * p.get("weta", 0.25) / m.weff

	rd, rs := classicAccess(p, g, 0)
	return build{core: m, rd: rd, rs: rs, junction: classicJunction(p, g, at)}
}

// reverseShortChannel is the threshold shift of Q0 over LK.
func (m *ekv26) reverseShortChannel(q0, lk float64) float64 {
	const ce = 4 * 22e-3 * 22e-3
	xi := 0.028 * (10*m.leff/lk - 1)
	d := 1 + (xi+math.Sqrt(xi*xi+ce))/2
	return 2 * q0 / m.cox / (d * d)
}

func (m *ekv26) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	vs, vd := vbs.neg(), vds.sub(vbs) // referred to the bulk
	vg := vgs.sub(vbs)
	vp, gammaS := m.pinchOffVoltage(vg, vs, vd)

	n := vp.plus(m.phi + 4*m.vt).sqrt().inv().times(m.gamma / 2).plus(1)
	forward := inversion(vp.sub(vs).times(1 / m.vt))
	reverse := inversion(vp.sub(vd).times(1 / m.vt))
	root := forward.sqrt()
	vdss := m.halfSaturation(root)
	dv := root.sub(vdss.times(1 / m.vt)).times(m.lambda).plus(1.0 / 64).sqrt().times(4 * m.vt)
	half := vds.times(0.5)

	beta := m.length(half, vdss, dv).inv().times(m.kp * m.weff)
	beta = m.mobility(beta, vp, forward, reverse)
	saturated := m.saturatedReverse(vp, vs, half, forward, root, dv)

	c := channel{n: n.v, k: beta.v, ic: forward.v, vp: vp.v, ir: saturated.v}
	c.id = n.mul(beta).mul(forward.sub(saturated)).times(2 * m.vt * m.vt)
	c.vdsat = 2*vdss.v + 4*m.vt
	x := vs.v + m.phi
	c.vth = m.vto + gammaS.v*math.Sqrt((x+math.Sqrt(x*x+16*m.vt*m.vt))/2) - m.gamma*math.Sqrt(m.phi)
	c.velocity = m.vt * root.v / m.vc
	return c
}

// pinchOffVoltage gives VP, and the body factor with its short- and
// narrow-channel corrections.
func (m *ekv26) pinchOffVoltage(vg, vs, vd dual) (vp, gamma dual) {
	v := vg.plus(m.phi + m.gamma*math.Sqrt(m.phi) - m.vto)
	above := func(g dual) dual { // VP + PHI
		if v.v <= 0 {
			return dual{}
		}
		half := g.times(0.5)
		return v.sub(g.mul(v.add(half.square()).sqrt().sub(half)))
	}
	smooth := func(x dual) dual { // sqrt of a softened V + PHI
		x = x.plus(m.phi)
		return x.add(x.square().plus(16 * m.vt * m.vt).sqrt()).times(0.5).sqrt()
	}
	wide := above(constant(m.gamma)).sqrt()
	g0 := smooth(vs).add(smooth(vd)).times(-m.leta).add(wide.times(m.weta)).plus(m.gamma)
	gamma = g0.add(g0.square().plus(0.1 * m.vt).sqrt()).times(0.5)
	return above(gamma).plus(-m.phi), gamma
}

// halfSaturation is VDSS, half the voltage where velocity saturation ends the
// rise of the current.
func (m *ekv26) halfSaturation(root dual) dual {
	// sqrt(1/4 + a) - 1/2, without cancellation.
	a := root.times(m.vt / m.vc)
	return a.div(a.plus(0.25).sqrt().plus(0.5)).times(m.vc)
}

// length is the equivalent channel length, in metres.
func (m *ekv26) length(half, vdss, dv dual) dual {
	inside := vdss.square().add(dv.square()).sqrt().sub(half.sub(vdss).square().add(dv.square()).sqrt())
	shrink := half.sub(inside).times(1 / (m.lc * m.ucrit)).log1p().times(m.lambda * m.lc)
	l := half.add(inside).times(1 / m.ucrit).sub(shrink).plus(m.ns * m.leff)
	least := m.ns * m.leff / 10
	return l.add(l.square().plus(least * least).sqrt()).times(0.5)
}

// mobility reduces β by the vertical field: by THETA, or by E0 and the charges.
func (m *ekv26) mobility(beta, vp, forward, reverse dual) dual {
	if m.theta > 0 {
		up := vp.add(vp.square().plus(2 * m.vt * m.vt).sqrt()).times(0.5)
		return beta.div(up.times(m.theta).plus(1))
	}
	depth := vp.plus(m.phi + 1e-6).sqrt()
	nq := depth.inv().times(m.gamma / 2).plus(1)
	xf, xr := forward.plus(0.25).sqrt(), reverse.plus(0.25).sqrt()
	sum := xf.square().add(xf.mul(xr)).add(xr.square()).div(xf.add(xr))
	qi := sum.times(4.0 / 3).plus(-1).mul(nq).neg()
	qb := depth.times(-m.gamma / m.vt).sub(nq.plus(-1).div(nq).mul(qi))
	field := qb.add(qi.times(m.eta))
	if field.v < 0 {
		field = field.neg()
	}
	unit := m.cox / (m.e0 * epsSilicon)
	return beta.times(1 + unit*m.gamma*math.Sqrt(m.phi)).div(field.times(unit * m.vt).plus(1))
}

// saturatedReverse is i_r', the reverse current limited by the saturation voltage.
func (m *ekv26) saturatedReverse(vp, vs, half, forward, root, dv dual) dual {
	a := root.sub(forward.log().times(0.75)).times(m.vt / m.vc)
	vdss := a.div(a.plus(0.25).sqrt().plus(0.5)).times(m.vc).plus(m.vt * (math.Log(m.vc/(2*m.vt)) - 0.6))
	soft := half.sub(vdss).square().add(dv.square()).sqrt().sub(vdss.square().add(dv.square()).sqrt())
	return inversion(vp.sub(half).sub(vs).add(soft).times(1 / m.vt))
}

// ekv26Names is the parameter set of the document, with the series resistances
// and junctions that cards add.
var ekv26Names = words(selectors, `vto gamma phi kp cox tox xj dl dw theta e0 ucrit lambda leta weta
 q0 lk tcv bex ucex ibba ibbb ibbt ibn ibb ns np nsub vfb uo vmax bexn af kf avto akp agamma
 ef xl xw rd rs rsh hdif ldif ld wd is js n pb cbd cbs cj mj cjsw mjsw pbsw fc tt cgso cgdo cgbo
 ibbt xqc nlevel nlev satlim ekvint acm rsc rdc trs trd tr1 tr2 update ekvdyn xti`)
