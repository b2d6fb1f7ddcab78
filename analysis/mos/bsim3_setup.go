package mos

import "math"

func compileBSIM3(p *params, g Geometry, at climate) build {
	m := &bsim3{at: at}
	l, w := g.L+p.get("xl", 0), g.W+p.get("xw", 0)
	m.leff = l - 2*p.sizeShift("l", p.get("lint", 0), l, w)
	m.weff = w - 2*p.sizeShift("w", p.get("wint", 0), l, w)
	effective(p, m.leff, m.weff)
	m.tox = p.get("tox", 150e-10)
	toxm := p.positive("toxm", m.tox)
	if !(m.tox > 0) {
		p.fatal("tox", "tox is %s, but an oxide has a thickness above zero", engineering(m.tox, "m"))
	}
	m.mobmod = int(p.get("mobmod", 1))
	if m.mobmod < 1 || m.mobmod > 3 {
		p.fatal("mobmod", "mobmod %g is not modelled", p.get("mobmod", 1))
	}
	if p.failed() {
		return build{}
	}
	p.bins = binsOf(p, m.leff, m.weff)
	m.cox = epsOxide / m.tox
	m.doping(p, g, toxm)
	m.readThreshold(p)
	m.readMobility(p, g)
	m.readOutput(p)
	rd, rs := classicAccess(p, g, 1)
	return build{core: m, rd: rd, rs: rs, junction: bsim3Junction(p, g, at)}
}

// doping sets the potentials, the body factors and the zero-bias threshold:
// M99/18 chapter 2 and appendix B, at TNOM.
func (m *bsim3) doping(p *params, g Geometry, toxm float64) {
	vt0, ni := thermal(m.at.tnom), intrinsicDensity(m.at.tnom)
	nch := p.binnedPositive("nch", 1.7e17)
	if nch > 1e20 {
		p.warn("nch", "nch comes to %g: read as m⁻³", nch)
		nch /= perCubicCm
	}
	nsub := p.binnedPositive("nsub", 6e16)
	m.phi = math.Max(lowestPHI, 2*vt0*math.Log(nch/ni))
	m.vbi = vt0 * math.Log(nch*1e20/(ni*ni))
	m.sqrtPhi = math.Sqrt(m.phi)
	m.xdep0 = math.Sqrt(2 * epsSilicon * m.phi / (charge * nch * perCubicCm))
	m.cdep = math.Sqrt(charge * epsSilicon * nch * perCubicCm / (2 * m.phi))
	m.xj = p.binnedPositive("xj", 1.5e-7)
	m.litl = math.Sqrt(3 * m.xj * m.tox)

	var k2 float64
	m.k1, k2 = p.profile(m.phi, m.cox, nsub, nch, 0.53, -0.0186)
	m.k1ox, m.k2ox = m.k1*m.tox/toxm, k2*m.tox/toxm
	m.vbc = lowestBulk(m.phi, m.k1, k2)
	vth0, vfb := p.flatBandPair(m.at.s, m.phi, m.k1)
	m.vfbPhi = vfb + m.phi
	m.vth0 = vth0 + m.at.s*g.DelVTO
	m.poly = polyFactor(p.binned("ngate", 0), m.cox)
}

// readThreshold reads chapter 2.1: what no bias moves is summed into vth0.
func (m *bsim3) readThreshold(p *params) {
	warm := m.at.t/m.at.tnom - 1
	nlx, w0 := p.binned("nlx", 1.74e-7), p.binned("w0", 2.5e-6)
	m.narrow = m.tox / (m.weff + w0) * m.phi
	m.k3b = p.binned("k3b", 0)
	m.vth0 += -m.k1*m.sqrtPhi + m.k1ox*(math.Sqrt(math.Max(0, 1+nlx/m.leff))-1)*m.sqrtPhi +
		p.binned("k3", 80)*m.narrow + (p.binned("kt1", -0.11)+p.binned("kt1l", 0)/m.leff)*warm
	m.kt2 = p.binned("kt2", 0.022) * warm

	m.dvt0, m.dvt1, m.dvt2 = p.binned("dvt0", 2.2), p.binned("dvt1", 0.53), p.binned("dvt2", -0.032)
	m.dvt0w, m.dvt1w, m.dvt2w = p.binned("dvt0w", 0), p.binned("dvt1w", 5.3e6), p.binned("dvt2w", -0.032)
	drout := p.binned("drout", 0.56)
	dsub := drout
	if p.has("dsub") {
		dsub = p.binned("dsub", 0)
	}
	lt0 := math.Sqrt(3 * m.tox * m.xdep0)
	m.dibl = m.short(constant(dsub * m.leff / lt0)).v
	m.thr = p.binned("pdiblc1", 0.39)*m.short(constant(drout*m.leff/lt0)).v + p.binned("pdiblc2", 0.0086)
	m.eta0, m.etab = p.binned("eta0", 0.08), p.binned("etab", -0.07)

	m.nfactor, m.cit = p.binned("nfactor", 1), p.binned("cit", 0)
	m.cdsc, m.cdscd, m.cdscb = p.binned("cdsc", 2.4e-4), p.binned("cdscd", 0), p.binned("cdscb", 0)
	m.voff = p.binned("voff", -0.08)
}

// readMobility reads chapter 2.2 and the temperature laws of its parameters.
func (m *bsim3) readMobility(p *params, g Geometry) {
	hot := m.at.t / m.at.tnom
	u0, uc, uc1 := 670.0, -4.65e-11, -5.6e-11
	if m.at.polarity == PMOS {
		u0 = 250
	}
	if m.mobmod == 3 {
		uc, uc1 = -0.0465, -0.056
	}
	m.u0 = lowFieldMobility(p.binnedPositive("u0", u0)) * math.Pow(hot, p.binned("ute", -1.5)) * g.MulU0
	m.ua = p.binned("ua", 2.25e-9) + p.binned("ua1", 4.31e-9)*(hot-1)
	m.ub = p.binned("ub", 5.87e-19) + p.binned("ub1", -7.61e-18)*(hot-1)
	m.uc = p.binned("uc", uc) + p.binned("uc1", uc1)*(hot-1)
	m.vsat = p.binnedPositive("vsat", 8e4) - p.binned("at", 3.3e4)*(hot-1)
	if m.vsat <= 0 {
		p.warn("at", "vsat falls to %g m/s at this temperature: 1000 m/s is used", m.vsat)
		m.vsat = 1000
	}
	m.prwg, m.prwb = p.binned("prwg", 0), p.binned("prwb", 0)
	rdsw := math.Max(0, p.binned("rdsw", 0)+p.binned("prt", 0)*(hot-1))
	m.rds0 = rdsw / math.Pow(m.weff*1e6, p.binned("wr", 1))
}

// readOutput reads chapters 2.3 to 2.8: bulk charge, saturation and output
// resistance.
func (m *bsim3) readOutput(p *params) {
	m.a0, m.ags = p.binned("a0", 1), p.binned("ags", 0)
	m.a1, m.a2 = p.binned("a1", 0), p.binned("a2", 1)
	m.b0, m.b1, m.keta = p.binned("b0", 0), p.binned("b1", 0), p.binned("keta", -0.047)
	m.dwg, m.dwb = p.binned("dwg", 0), p.binned("dwb", 0)
	m.delta = p.binnedPositive("delta", 0.01)
	m.pclm, m.pdiblcb = p.binned("pclm", 1.3), p.binned("pdiblcb", 0)
	m.pvag = p.binned("pvag", 0)
	m.pscbe1, m.pscbe2 = p.binned("pscbe1", 4.24e8), p.binned("pscbe2", 1e-5)
}

// bsim3Junction reads JS, JSW and NJ: M99/18 appendix A.
func bsim3Junction(p *params, g Geometry, at climate) junction {
	hot := saturationRatio(at.tnom, at.t)
	j, jsw, n := p.atLeast("js", 1e-4, 0), p.atLeast("jsw", 0, 0), p.positive("nj", 1)
	return junction{
		isd: hot * areaCurrent(j, jsw, g.AD, g.PD, defaultIS),
		iss: hot * areaCurrent(j, jsw, g.AS, g.PS, defaultIS),
		nd:  n, ns: n,
	}
}
