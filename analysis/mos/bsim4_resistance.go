package mos

import "math"

// resistance reads RDSMOD: 0 puts the access resistance into the current
// equation, 1 outside the channel (BSIM4 manual 5.17, 5.19). The width is that
// at the contacts, of one finger.
func (m *bsim4) resistance(p *params, g Geometry, hot bsim4Hot, width float64) (rd, rs access) {
	rd, rs = classicAccess(p, g, 0)
	m.prwg, m.prwb = p.binned("prwg", 1), p.binned("prwb", 0)
	share := math.Pow(width*1e6, p.binned("wr", 1))
	prt := p.binned("prt", 0)
	at := func(name string, def float64, binned bool) float64 {
		v := p.get(name, def)
		if binned {
			v = p.binned(name, def)
		}
		return math.Max(0, hot.moved(v, prt)) / share
	}
	if p.get("rdsmod", 0) == 0 {
		m.rdsw, m.rdswmin = at("rdsw", 200, true), at("rdswmin", 0, false)
		return rd, rs
	}
	flat := 0.0
	if ngate := p.binned("ngate", 0); ngate > 0 {
		flat = m.at.vt*math.Log(ngate/p.binnedPositive("nsd", 1e20)) + p.binned("vfbsdoff", 0)
	}
	rd.biased = &biasedAccess{
		fixed: at("rdwmin", 0, false) / g.NF, bracket: at("rdw", 100, true) / g.NF,
		prwg: m.prwg, prwb: m.prwb, flat: flat,
	}
	rs.biased = &biasedAccess{
		fixed: at("rswmin", 0, false) / g.NF, bracket: at("rsw", 100, true) / g.NF,
		prwg: m.prwg, prwb: m.prwb, flat: flat,
	}
	return rd, rs
}

// biasedAccess is Rd or Rs of rdsMod 1, in ohms. The published text does not say
// on which side of the resistance its voltages are taken: here, the outer.
type biasedAccess struct {
	fixed, bracket float64 // Ω
	prwg, prwb     float64
	flat           float64 // V, Vfbsd
}

// overlapSmoothing bounds the gate drive of the overlap from below, in V².
const overlapSmoothing = 1e-4

func (b *biasedAccess) at(gate, bulk dual) dual {
	over := gate.plus(-b.flat)
	over = over.add(over.square().plus(overlapSmoothing).sqrt()).times(0.5)
	bracket := overTenth(over.times(b.prwg)).inv().sub(bulk.times(b.prwb))
	return largest(bracket, dual{}).times(b.bracket).plus(b.fixed)
}
