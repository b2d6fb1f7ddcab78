package mos

// inversionCapacitance is Coxeff: the oxide in series with the centroid of the
// inversion layer (BSIM4 manual 3.5-3.6).
func (m *bsim4) inversionCapacitance(vgst dual) dual {
	field := vgst.plus(4 * m.excess).times(1 / (2 * m.toxp * 1e8)) // MV/cm
	xdc := field.pow(0.7).plus(1).inv().times(1.9e-9)
	ccen := xdc.inv().times(epsSilicon)
	return ccen.times(m.coxp).div(ccen.plus(m.coxp))
}

// mobility is µeff in m²/Vs: BSIM4 manual 5.6-5.8, mobMod 0 to 2.
func (m *bsim4) mobility(vgst dual, q *bsim4Bulk) dual {
	var loss dual
	if m.mobmod == 2 {
		field := vgst.plus(m.surface).times(1 / m.toxe)
		loss = q.vbs.times(m.uc).plus(m.ua).mul(field.pow(m.eu))
	} else {
		field := vgst.add(q.vth.times(2)).times(1 / m.toxe)
		if m.mobmod == 0 {
			loss = field.times(m.ub).add(q.vbs.times(m.uc)).plus(m.ua).mul(field)
		} else {
			loss = field.times(m.ub).plus(m.ua).mul(field).mul(q.vbs.times(m.uc).plus(1))
		}
	}
	if m.ud != 0 {
		// Coulomb scattering.
		scatter := q.vth.times(m.toxe).div(vgst.add(q.vth.square().plus(1e-4).sqrt().times(2)))
		loss = loss.add(scatter.square().times(m.ud))
	}
	return overFifth(loss).inv().times(m.u0)
}

// bulkCharge is Abulk: BSIM4 manual 5.1-5.2.
func (m *bsim4) bulkCharge(vgst dual, q *bsim4Bulk) dual {
	x := q.xdep.times(m.xj).sqrt().times(2).plus(m.leff).inv().times(m.leff)
	long := vgst.mul(x.square()).times(-m.ags).plus(1).mul(x).times(m.a0)
	slope := q.root.inv().times(m.k1ox / 2).plus(m.k2ox - m.k3b*m.narrow)
	a := slope.mul(long.plus(m.b0 / (m.weff + m.b1))).plus(1)
	return leastBulkCharge(a.div(overTenth(q.vbs.times(m.keta))))
}

// innerResistance is Rds of rdsMod 0, in ohms of one finger: BSIM4 manual 5.17.
func (m *bsim4) innerResistance(vgst dual, q *bsim4Bulk) dual {
	bracket := overTenth(vgst.times(m.prwg)).inv().add(q.rootLessPhi.times(m.prwb))
	return largest(bracket, dual{}).times(m.rdsw).plus(m.rdswmin)
}

// current is Id and what goes with it: BSIM4 manual, chapter 5.
func (m *bsim4) current(vgst, vds dual, q *bsim4Bulk) channel {
	weff := leastWidth(vgst.times(-2 * m.dwg).sub(q.rootLessPhi.times(2 * m.dwb)).plus(m.weff))
	rds := m.innerResistance(vgst, q)
	mu := m.mobility(vgst, q)
	coxeff := m.inversionCapacitance(vgst)
	esat := mu.inv().times(2 * m.vsat)
	s := pinch{
		vgst: vgst, v2: vgst.plus(2 * m.at.vt), abulk: m.bulkCharge(vgst, q),
		el: esat.times(m.leff), lam: nonSaturation(vgst, m.a1, m.a2),
		w: weff.mul(rds).times(m.vsat * m.coxe),
	}
	vdsat := s.saturation()
	vdseff, beyond := effectiveDrain(vds, vdsat, m.delta)

	k := mu.mul(coxeff).mul(weff).times(1 / m.leff)
	g := k.mul(vgst).mul(s.abulk.mul(vdseff).div(s.v2).times(-0.5).plus(1)).div(vdseff.div(s.el).plus(1))
	series := rds.mul(g).plus(1) // 1 + Rds·Ids0/Vdseff
	id := g.mul(vdseff).div(series).times(m.nf)
	if beyond.v > 0 {
		o := output{beyond: beyond, vds: vds, vdsat: vdsat, esat: esat, series: series}
		id = id.mul(m.outputFactor(&s, &o, q))
	}
	return channel{
		id: id, vdsat: vdsat.v, k: k.v * m.nf, velocity: vgst.v / s.el.v,
		abulk: s.abulk.v, ueff: mu.v, rds: rds.v, coxeff: coxeff.v,
	}
}

// output is what the output resistance is made of at one bias.
type output struct{ beyond, vds, vdsat, esat, series dual }

// outputFactor is what channel-length modulation, DIBL, pocket implants and the
// substrate current multiply the current by: BSIM4 manual 5.37-5.50.
func (m *bsim4) outputFactor(s *pinch, o *output, q *bsim4Bulk) dual {
	boost := overTenth(s.vgst.div(s.el).times(m.pvag))
	pocket := constant(1)
	if m.fprout > 0 {
		pocket = s.v2.inv().times(m.fprout).plus(1).inv()
	}
	f := constant(1)
	if m.pclm > 0 {
		clm := pocket.mul(boost).mul(o.series).mul(o.vdsat.div(o.esat).plus(m.leff)).times(1 / (m.pclm * m.litl))
		rise := clm.mul(o.beyond).div(s.earlySaturation(o.vdsat))
		f = rise.log1p().div(clm).plus(1)
	}
	if m.thr > 0 {
		av := s.abulk.mul(o.vdsat)
		va := s.v2.square().mul(boost).div(av.add(s.v2).mul(overTenth(q.vbs.times(m.pdiblcb))).times(m.thr))
		f = f.mul(o.beyond.div(va).plus(1))
	}
	if m.pdits > 0 {
		va := o.vds.times(m.pditsd).exp().times(1 + m.pditsl*m.leff).plus(1).mul(pocket).times(1 / m.pdits)
		f = f.mul(o.beyond.div(va).plus(1))
	}
	return f.mul(substrateFactor(o.beyond, m.pscbe1, m.pscbe2, m.litl, m.leff))
}
