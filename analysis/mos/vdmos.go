package mos

import "math"

// vdmos is the square law of vertical power MOSFETs as their cards use it: KP is
// the whole device's, MTRIODE multiplies the conductance of small VDS at an
// unchanged saturation current, KSUBTHRES rounds the overdrive off below
// threshold. Drift resistance, shunt and body diode stand around it. There is no
// publication to cite; the form follows from the meaning of the parameters.
type vdmos struct {
	kp, vto, lambda float64
	mtriode         float64
	round           float64 // V, KSUBTHRES
	n               float64
}

var vdmosFamily = family{label: "vdmos", names: vdmosNames, compile: compileVDMOS}

var vdmosNames = words(selectors, `pchan nchan vto vt0 vth0 kp lambda mtriode ksubthres rd rs rg rds rb is n bv ibv nbv eg xti
 bex tcvth vtotc trd1 trs1 cgdmax cgdmin a cgs cjo vj m fc tt cjsw kf af vds ron qg mfg phi
 rthjc rthca cthj mu texp0 texp1 tksubthres1 tksubthres2 trb1 trb2 trg1 trg2 trd2 trs2 cgd1 cgd2 l w`)

func compileVDMOS(p *params, g Geometry, at climate) build {
	hot, kelvins := at.t/at.tnom, at.t-at.tnom
	m := &vdmos{
		kp:      p.positive("kp", 1) * math.Pow(hot, p.get("bex", -1.5)) * g.MulU0,
		lambda:  p.inside("lambda", 0, 0, 10),
		mtriode: p.positive("mtriode", 1),
		round:   p.atLeast("ksubthres", 0, 0),
		n:       assumedN,
	}
	vto := p.get("vto", p.get("vt0", p.get("vth0", 0)))
	m.vto = at.s*(vto+g.DelVTO) - p.get("tcvth", p.get("vtotc", 0))*kelvins
	if m.round > 0 {
		// The current falls as the square of the rounded overdrive.
		m.n = m.round / (2 * at.vt)
	}
	one := func(name, slope string) access {
		return access{fixed: math.Max(0, p.atLeast(name, 0, 0)*(1+p.get(slope, 0)*kelvins))}
	}
	body := newDiode(p, at, "rb", 1, 1)
	b := build{core: m, rd: one("rd", "trd1"), rs: one("rs", "trs1"), assumed: m.round == 0}
	b.junction = junction{isd: body.is, iss: body.is, nd: body.nvt / at.vt, ns: body.nvt / at.vt}
	b.beside = &beside{body: body}
	if rds := p.atLeast("rds", 0, 0); rds > 0 {
		b.beside.shunt = 1 / rds
	}
	return b
}

func (m *vdmos) eval(gs, ds, bs float64) channel {
	vgs, vds, _ := bias(gs, ds, bs)
	vov := vgs.plus(-m.vto)
	c := channel{vth: m.vto, n: m.n, k: m.kp * m.mtriode, velocity: math.NaN(), ic: math.NaN()}
	if m.round > 0 {
		vov = vov.times(1 / m.round).softplus().times(m.round)
	}
	if vov.v <= 0 {
		return c
	}
	c.vdsat = vov.v / m.mtriode
	v := vds.times(m.mtriode)
	c.id = vov.square().times(0.5)
	if v.v < vov.v {
		c.id = vov.sub(v.times(0.5)).mul(v)
	}
	c.id = c.id.times(m.kp).mul(vds.times(m.lambda).plus(1))
	return c
}

// beside is what stands between drain and source beside the channel, per
// instance of M = 1.
type beside struct {
	body  *Diode  // anode at the source
	shunt float64 // S
}

// at is the current from drain to source in amperes and its slope, at vds of
// NMOS polarity and either sign.
func (b *beside) at(vds float64) (i, g float64) {
	i, g = b.body.Eval(-vds)
	return b.shunt*vds - i, b.shunt + g
}
