package mos

// mobility is µeff in m²/Vs: M99/18 section 2.2, mobMod 1 to 3.
func (m *bsim3) mobility(vgst dual, q *bsim3Bulk) dual {
	field := vgst
	if m.mobmod != 2 {
		field = vgst.add(q.vth.times(2))
	}
	field = field.times(1 / m.tox)
	var loss dual
	if m.mobmod == 3 {
		loss = field.times(m.ub).plus(m.ua).mul(field).mul(q.vbs.times(m.uc).plus(1))
	} else {
		loss = field.times(m.ub).add(q.vbs.times(m.uc)).plus(m.ua).mul(field)
	}
	return overFifth(loss).inv().times(m.u0)
}

// bulkCharge is Abulk: M99/18 section 2.3.
func (m *bsim3) bulkCharge(vgst dual, q *bsim3Bulk) dual {
	x := q.xdep.times(m.xj).sqrt().times(2).plus(m.leff).inv().times(m.leff)
	long := vgst.mul(x.square()).times(-m.ags).plus(1).mul(x).times(m.a0)
	a := q.root.inv().times(m.k1ox / 2).mul(long.plus(m.b0 / (m.weff + m.b1))).plus(1)
	return leastBulkCharge(a.div(overTenth(q.vbs.times(m.keta))))
}

// current is Id and what goes with it: M99/18 sections 2.4 to 2.8.
func (m *bsim3) current(vgst, vds dual, q *bsim3Bulk) channel {
	vt := m.at.vt
	weff := leastWidth(vgst.times(-2 * m.dwg).sub(q.rootLessPhi.times(2 * m.dwb)).plus(m.weff))
	rds := overTenth(vgst.times(m.prwg).add(q.rootLessPhi.times(m.prwb))).times(m.rds0)
	mu := m.mobility(vgst, q)
	esat := mu.inv().times(2 * m.vsat)
	s := pinch{
		vgst: vgst, v2: vgst.plus(2 * vt), abulk: m.bulkCharge(vgst, q),
		el: esat.times(m.leff), lam: nonSaturation(vgst, m.a1, m.a2),
		w: weff.mul(rds).times(m.vsat * m.cox),
	}
	vdsat := s.saturation()
	vdseff, beyond := effectiveDrain(vds, vdsat, m.delta)

	k := mu.mul(weff).times(m.cox / m.leff)
	g := k.mul(vgst).mul(s.abulk.mul(vdseff).div(s.v2).times(-0.5).plus(1)).div(vdseff.div(s.el).plus(1))
	id := g.mul(vdseff).div(rds.mul(g).plus(1))
	id = id.mul(beyond.div(m.early(&s, vdsat, beyond, esat, q)).plus(1))
	id = id.mul(substrateFactor(beyond, m.pscbe1, m.pscbe2, m.litl, m.leff))
	return channel{
		id: id, vdsat: vdsat.v, k: k.v, velocity: vgst.v / s.el.v,
		abulk: s.abulk.v, ueff: mu.v, rds: rds.v, coxeff: m.cox,
	}
}

// early is VA: saturation, channel-length modulation and DIBL of the output
// resistance, M99/18 section 2.7. It may come out infinite, for a card with
// neither effect.
func (m *bsim3) early(s *pinch, vdsat, beyond, esat dual, q *bsim3Bulk) dual {
	va := s.earlySaturation(vdsat)
	boost := overTenth(s.vgst.div(s.el).times(m.pvag))
	av := s.abulk.mul(vdsat)
	// 1/VADIBLC; zero where the card has no such effect.
	leak := dual{}
	if m.thr > 0 {
		leak = overTenth(q.vbs.times(m.pdiblcb)).times(m.thr).mul(av.add(s.v2)).div(s.v2.square())
	}
	if m.pclm <= 0 {
		if leak.v <= 0 {
			return va.plus(unlimited)
		}
		return va.add(boost.div(leak))
	}
	clm := s.abulk.mul(s.el).add(s.vgst).mul(beyond).div(s.abulk.mul(esat).times(m.pclm * m.litl))
	return va.add(boost.mul(clm).div(clm.mul(leak).plus(1)))
}

// unlimited stands for an infinite Early voltage.
const unlimited = 1e30
