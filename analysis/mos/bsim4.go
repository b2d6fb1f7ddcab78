package mos

import "math"

// bsim4 is BSIM4 (4.5 to 4.8, BSIM4 Users' Manual), DC channel current of one
// finger. bsim4_setup.go and bsim4_temperature.go compile a card, this file has
// the threshold side, bsim4_current.go the current.
type bsim4 struct {
	at         climate
	nf         float64
	leff, weff float64 // m, of one finger, weff before the bias-dependent part
	toxe, coxe float64
	toxp, coxp float64
	phi, vbi   float64 // V at TNOM
	sqrtPhi    float64
	xdep0      float64
	litl, cdep float64
	er         float64 // εsi/εox
	vfbPhi     float64 // V, VFB + φs
	excess     float64 // V, VTH0 - VFB - φs, at least 0
	poly       float64 // V

	vbc                     float64
	vth0                    float64 // all of Vth that no bias moves
	k1ox, k2ox              float64 // k1ox with the LPEB factor
	k3b, narrow             float64 // narrow: TOXE/(Weff'+W0)·φs
	dvt0, dvt1, dvt2        float64
	dvt0w, dvt1w, dvt2w     float64
	dibl                    float64
	eta0, etab, kt2         float64
	dvtp0, dvtp1            float64
	ditsVt                  float64 // V
	dvtp4, dvtpTanh         float64
	nfactor, cit            float64
	cdsc, cdscd, cdscb      float64
	voff, mstar             float64
	u0, ua, ub, uc, ud, eu  float64
	mobmod                  int
	vsat, a0, ags, a1, a2   float64
	b0, b1, keta, xj        float64
	rdsw, rdswmin           float64 // Ω, for this width
	prwg, prwb              float64
	dwg, dwb, delta         float64
	pclm, thr, pdiblcb      float64
	fprout, pvag            float64
	pdits, pditsl, pditsd   float64
	pscbe1, pscbe2, surface float64 // surface: C0·(VTH0 - VFB - φs) of mobMod 2
}

// shortBSIM4 is TH(x) = 1/2/(cosh x - 1), the decay of a short-channel effect
// (BSIM4 manual 2.26-2.39), held where x has run to zero.
func shortBSIM4(x dual) dual {
	const least = 1e-3
	if x.v < least {
		x = constant(least)
	}
	e := x.neg().exp()
	return e.div(e.neg().plus(1).square())
}

// bsim4Bulk is what depends on bulk and drain voltage alone.
type bsim4Bulk struct {
	vbs, root   dual // Vbseff, sqrt(φs - Vbseff)
	rootLessPhi dual
	xdep        dual
	vth, n      dual
}

// effectiveBulk is Vbseff: BSIM4 manual 2.43 and 2.45.
func (m *bsim4) effectiveBulk(vbs dual) dual {
	top := 0.95 * m.phi
	u := aboveBulk(vbs, m.vbc).neg().plus(top - bulkSmoothing)
	return u.add(u.square().plus(4 * bulkSmoothing * top).sqrt()).times(-0.5).plus(top)
}

// threshold is Vth and n: BSIM4 manual, chapter 2 and 3.21-3.22.
func (m *bsim4) threshold(vds, vbs dual) bsim4Bulk {
	var q bsim4Bulk
	q.vbs = m.effectiveBulk(vbs)
	q.root = q.vbs.neg().plus(m.phi).sqrt()
	q.rootLessPhi = q.root.plus(-m.sqrtPhi)
	q.xdep = q.root.times(m.xdep0 / m.sqrtPhi)

	lt := q.xdep.times(m.er * m.toxe).sqrt()
	near := shortBSIM4(lt.mul(overHalf(q.vbs.times(m.dvt2))).inv().times(m.dvt1 * m.leff))
	couple := vds.times(m.cdscd).add(q.vbs.times(m.cdscb)).plus(m.cdsc).mul(near)
	q.n = overHalf(q.xdep.inv().times(m.nfactor * epsSilicon).add(couple).plus(m.cit).times(1 / m.coxe))

	vth := q.root.times(m.k1ox).plus(m.vth0)
	vth = vth.add(q.vbs.times(m.k3b*m.narrow - m.k2ox + m.kt2))
	vth = vth.sub(near.times(m.dvt0 * (m.vbi - m.phi)))
	if m.dvt0w != 0 {
		ltw := lt.mul(overHalf(q.vbs.times(m.dvt2w)))
		w := shortBSIM4(ltw.inv().times(m.dvt1w * m.weff * m.leff))
		vth = vth.sub(w.times(m.dvt0w * (m.vbi - m.phi)))
	}
	vth = vth.sub(q.vbs.times(m.etab).plus(m.eta0).mul(vds).times(m.dibl))
	q.vth = vth.add(m.pocketShift(vds, q.n))
	return q
}

// pocketShift is the drain-induced shift of long channels with pocket implants
// (BSIM4 manual 2.20-2.21).
func (m *bsim4) pocketShift(vds, n dual) dual {
	var shift dual
	if m.dvtp0 > 0 {
		reach := vds.times(-m.dvtp1).exp().plus(1).times(m.dvtp0 / m.leff)
		shift = n.times(m.ditsVt).mul(reach.log1p())
	}
	if m.dvtpTanh != 0 {
		shift = shift.sub(vds.times(m.dvtp4).tanh().times(m.dvtpTanh))
	}
	return shift
}

// effectiveGate is Vgsteff: BSIM4 manual 3.7-3.8.
func (m *bsim4) effectiveGate(vgs dual, q *bsim4Bulk) dual {
	vgt := polyDepletion(vgs, m.vfbPhi, m.poly).sub(q.vth)
	nvt := q.n.times(m.at.vt)
	top := nvt.mul(vgt.times(m.mstar).div(nvt).softplus())
	tail := vgt.times(1 - m.mstar).plus(-m.voff).div(nvt).neg().exp()
	return top.div(tail.mul(q.n).times(m.coxe / m.cdep).plus(m.mstar))
}

func (m *bsim4) eval(gs, ds, bs float64) channel {
	vgs, vds, vbs := bias(gs, ds, bs)
	q := m.threshold(vds, vbs)
	vgst := m.effectiveGate(vgs, &q)
	c := m.current(vgst, vds, &q)
	c.vth, c.n, c.ic = q.vth.v, q.n.v, math.NaN()
	c.vgsteff = vgst.v
	return c
}
