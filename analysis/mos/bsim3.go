package mos

import "math"

// bsim3 is BSIM3v3.2 (UCB/ERL M99/18), DC current. bsim3_setup.go compiles a
// card, this file has the threshold side, bsim3_current.go the current.
type bsim3 struct {
	at         climate
	leff, weff float64 // m, weff before the bias-dependent part
	tox, cox   float64
	phi, vbi   float64 // V at TNOM
	sqrtPhi    float64
	xdep0      float64 // m
	litl, cdep float64
	vfbPhi     float64 // V, VFB + φs
	poly       float64 // V, polyFactor

	vbc                  float64 // V
	vth0                 float64 // all of Vth that no bias moves
	k1, k1ox, k2ox       float64
	k3b                  float64
	narrow               float64 // TOX/(Weff'+W0)·φs
	dvt0, dvt1, dvt2     float64
	dvt0w, dvt1w, dvt2w  float64
	dibl                 float64 // th(DSUB·Leff/lt0)
	eta0, etab, kt2      float64
	nfactor, cit         float64
	cdsc, cdscd, cdscb   float64
	voff                 float64
	u0, ua, ub, uc       float64
	mobmod               int
	vsat, a0, ags        float64
	a1, a2               float64
	b0, b1, keta, xj     float64
	rds0, prwg, prwb     float64
	dwg, dwb, delta      float64
	pclm, thr, pdiblcb   float64
	pvag, pscbe1, pscbe2 float64
}

// short is th(x) = e^(-x/2) + 2e^(-x), the decay of a short-channel effect.
func (m *bsim3) short(x dual) dual {
	e := x.times(-0.5).exp()
	return e.add(e.square().times(2))
}

// bsim3Bulk is what depends on the bulk voltage, and through n and Vth on the
// drain.
type bsim3Bulk struct {
	vbs, root   dual // Vbseff, sqrt(φs - Vbseff)
	xdep        dual
	vth, n      dual
	rootLessPhi dual // root - sqrt(φs)
}

// threshold is Vth and n, M99/18 section 2.1 and chapter 3.
func (m *bsim3) threshold(vds, vbs dual) bsim3Bulk {
	var q bsim3Bulk
	// Forward bulk bias is followed up to where the depletion layer is nearly gone.
	q.vbs = smallest(aboveBulk(vbs, m.vbc), constant(0.95*m.phi))
	q.root = q.vbs.neg().plus(m.phi).sqrt()
	q.rootLessPhi = q.root.plus(-m.sqrtPhi)
	q.xdep = q.root.times(m.xdep0 / m.sqrtPhi)

	lt := q.xdep.times(3 * m.tox).sqrt()
	ltl := lt.mul(overHalf(q.vbs.times(m.dvt2)))
	near := m.short(ltl.inv().times(m.dvt1 * m.leff))

	vth := q.root.times(m.k1ox).sub(q.vbs.times(m.k2ox)).plus(m.vth0)
	vth = vth.add(q.vbs.times(m.k3b * m.narrow)).add(q.vbs.times(m.kt2))
	vth = vth.sub(near.times(m.dvt0 * (m.vbi - m.phi)))
	if m.dvt0w != 0 {
		ltw := lt.mul(overHalf(q.vbs.times(m.dvt2w)))
		w := m.short(ltw.inv().times(m.dvt1w * m.weff * m.leff))
		vth = vth.sub(w.times(m.dvt0w * (m.vbi - m.phi)))
	}
	q.vth = vth.sub(q.vbs.times(m.etab).plus(m.eta0).mul(vds).times(m.dibl))

	couple := vds.times(m.cdscd).add(q.vbs.times(m.cdscb)).plus(m.cdsc).mul(near)
	q.n = overHalf(q.xdep.inv().times(m.nfactor * epsSilicon).add(couple).plus(m.cit).times(1 / m.cox))
	return q
}

// effectiveGate is Vgsteff, the smooth overdrive: M99/18 section 3.1.
func (m *bsim3) effectiveGate(vgs dual, q *bsim3Bulk) dual {
	vgt := polyDepletion(vgs, m.vfbPhi, m.poly).sub(q.vth)
	width := q.n.times(2 * m.at.vt)
	top := width.mul(vgt.div(width).softplus())
	tail := vgt.plus(-2 * m.voff).div(width).neg().exp()
	return top.div(tail.mul(q.n).times(2 * m.cox / m.cdep).plus(1))
}

func (m *bsim3) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	q := m.threshold(vds, vbs)
	vgst := m.effectiveGate(vgs, &q)
	c := m.current(vgst, vds, &q)
	c.vth, c.n, c.ic = q.vth.v, q.n.v, math.NaN()
	c.vgsteff = vgst.v
	return c
}
