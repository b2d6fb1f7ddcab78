package mos

import "math"

func compileBSIM4(p *params, g Geometry, at climate) build {
	m := &bsim4{at: at, nf: g.NF}
	checkBSIM4Selectors(p)
	width := m.geometry(p, g)
	m.oxide(p)
	if p.failed() {
		return build{}
	}
	p.bins = binsOf(p, m.leff, m.weff)
	hot := bsim4Temperature(p, at)
	stress := layoutStress(p, g, at)
	toxm := p.positive("toxm", m.toxe)
	m.doping(p, g, toxm, stress)
	m.readThreshold(p, hot, stress)
	m.readMobility(p, g, hot, stress)
	m.readOutput(p)
	rd, rs := m.resistance(p, g, hot, width)
	return build{core: m, rd: rd, rs: rs, junction: bsim4Junction(p, g, at)}
}

// checkBSIM4Selectors rejects the variants that are not modelled, rather than
// take another in their place.
func checkBSIM4Selectors(p *params) {
	for _, s := range []struct {
		name string
		top  float64
	}{{"mobmod", 2}, {"rdsmod", 1}, {"tempmod", 2}, {"mtrlmod", 0}} {
		if v := p.get(s.name, 0); v != math.Trunc(v) || v < 0 || v > s.top {
			p.fatal(s.name, "%s %g is not modelled", s.name, v)
		}
	}
	for _, name := range []string{"igcmod", "igbmod"} {
		if v := p.get(name, 0); v != 0 {
			p.warn(name, "the gate current of %s %g is not modelled: currents are the channel's alone", name, v)
		}
	}
}

// geometry sets the effective sizes of one finger (BSIM4 manual 1.9-1.12) and
// gives the width that the resistances see (1.17).
func (m *bsim4) geometry(p *params, g Geometry) (contact float64) {
	l, w := g.L+p.get("xl", 0), g.W/g.NF+p.get("xw", 0)
	wint := p.get("wint", 0)
	m.leff = l - 2*p.sizeShift("l", p.get("lint", 0), l, w)
	m.weff = w - 2*p.sizeShift("w", wint, l, w)
	effective(p, m.leff, m.weff)
	pl, pw := math.Pow(l, p.get("wln", 1)), math.Pow(w, p.get("wwn", 1))
	dwj := p.get("dwj", p.get("dwc", wint))
	dwj += p.get("wlc", p.get("wl", 0))/pl + p.get("wwc", p.get("ww", 0))/pw + p.get("wwlc", p.get("wwl", 0))/(pl*pw)
	contact = w - 2*dwj
	if contact <= 0 && m.weff > 0 {
		p.warn("dwj", "the width at the contacts is %s, not above zero: the channel's is used", engineering(contact, "m"))
		contact = m.weff
	}
	return contact
}

// oxide sets electrical and physical oxide thickness, each from the other by DTOX
// where one is missing.
func (m *bsim4) oxide(p *params) {
	dtox := p.get("dtox", 0)
	m.toxe = p.get("toxe", 3e-9)
	if !p.has("toxe") && p.has("toxp") {
		m.toxe = p.get("toxp", 0) + dtox
	}
	m.toxp = p.get("toxp", m.toxe-dtox)
	epsrox := p.positive("epsrox", 3.9)
	for _, t := range []struct {
		name  string
		value float64
	}{{"toxe", m.toxe}, {"toxp", m.toxp}} {
		if !(t.value > 0) {
			p.fatal(t.name, "%s is %s, but an oxide has a thickness above zero", t.name, engineering(t.value, "m"))
		}
	}
	m.coxe, m.coxp = epsrox*epsVacuum/m.toxe, epsrox*epsVacuum/m.toxp
	m.er = 11.7 / epsrox
}

// doping sets potentials, body factors and the zero-bias threshold: BSIM4 manual
// 2.11-2.24 and 2.41-2.45, at TNOM.
func (m *bsim4) doping(p *params, g Geometry, toxm float64, stress stress) {
	vt0, ni := thermal(m.at.tnom), intrinsicDensity(m.at.tnom)
	ndep := perCubicCentimetre(p, "ndep", 1.7e17, 1e20)
	nsd := perCubicCentimetre(p, "nsd", 1e20, 1e23)
	nsub := p.binnedPositive("nsub", 6e16)
	m.phi = math.Max(lowestPHI, 0.4+vt0*math.Log(ndep/ni)+p.binned("phin", 0))
	m.vbi = vt0 * math.Log(ndep*nsd/(ni*ni))
	m.sqrtPhi = math.Sqrt(m.phi)
	m.xdep0 = math.Sqrt(2 * epsSilicon * m.phi / (charge * ndep * perCubicCm))
	m.cdep = math.Sqrt(charge * epsSilicon * ndep * perCubicCm / (2 * m.phi))
	m.xj = p.binnedPositive("xj", 1.5e-7)
	m.litl = math.Sqrt(m.er * m.xj * m.toxe)

	k1, k2 := p.profile(m.phi, m.coxe, nsub, ndep, 0.5, 0)
	m.vbc = lowestBulk(m.phi, k1, k2)
	vth0, vfb := p.flatBandPair(m.at.s, m.phi, k1)
	shift := m.at.s * (g.DelVTO + stress.vth0)
	if !p.has("vth0") && p.has("vfb") {
		vfb += m.at.s * g.DelVTO
	}
	vth0 += shift
	m.vfbPhi = vfb + m.phi
	m.excess = math.Max(0, vth0-m.vfbPhi)
	m.poly = polyFactor(p.binned("ngate", 0), m.coxe)

	lpeb := math.Sqrt(math.Max(0, 1+p.binned("lpeb", 0)/m.leff))
	lpe0 := math.Sqrt(math.Max(0, 1+p.binned("lpe0", 1.74e-7)/m.leff))
	k1ox := k1 * m.toxe / toxm
	m.k1ox, m.k2ox = k1ox*lpeb, (k2+stress.k2)*m.toxe/toxm
	m.vth0 = vth0 - k1*m.sqrtPhi*lpeb + k1ox*(lpe0-1)*m.sqrtPhi
}

// perCubicCentimetre reads a doping; values above top are taken as m⁻³.
func perCubicCentimetre(p *params, name string, def, top float64) float64 {
	n := p.binnedPositive(name, def)
	if n > top {
		p.warn(name, "%s comes to %g: read as m⁻³", name, n)
		n /= perCubicCm
	}
	return n
}

// readThreshold reads the rest of chapter 2 and the sub-threshold parameters of
// chapter 3.
func (m *bsim4) readThreshold(p *params, hot bsim4Hot, stress stress) {
	m.narrow = m.toxe / (m.weff + p.binned("w0", 2.5e-6)) * m.phi
	m.k3b = p.binned("k3b", 0)
	m.vth0 += p.binned("k3", 80)*m.narrow + (p.binned("kt1", -0.11)+p.binned("kt1l", 0)/m.leff)*hot.rise
	m.kt2 = p.binned("kt2", 0.022) * hot.rise

	m.dvt0, m.dvt1, m.dvt2 = p.binned("dvt0", 2.2), p.binned("dvt1", 0.53), p.binned("dvt2", -0.032)
	m.dvt0w, m.dvt1w, m.dvt2w = p.binned("dvt0w", 0), p.binned("dvt1w", 5.3e6), p.binned("dvt2w", -0.032)
	drout := p.binned("drout", 0.56)
	dsub := drout
	if p.has("dsub") {
		dsub = p.binned("dsub", 0)
	}
	lt0 := math.Sqrt(m.er * m.toxe * m.xdep0)
	m.dibl = shortBSIM4(constant(dsub * m.leff / lt0)).v
	m.thr = p.binned("pdiblc1", 0.39)*shortBSIM4(constant(drout*m.leff/lt0)).v + p.binned("pdiblc2", 0.0086)
	m.eta0, m.etab = p.binned("eta0", 0.08)+p.binned("teta0", 0)*hot.rise+stress.eta0, p.binned("etab", -0.07)

	m.dvtp0, m.dvtp1 = p.binned("dvtp0", 0), p.binned("dvtp1", 0)
	m.ditsVt = hot.ditsVt
	m.dvtp4 = p.binned("dvtp4", 0)
	m.dvtpTanh = p.binned("dvtp5", 0) + p.binned("dvtp2", 0)/math.Pow(m.leff, p.binned("dvtp3", 0))

	m.nfactor, m.cit = p.binned("nfactor", 1)+p.binned("tnfactor", 0)*hot.rise, p.binned("cit", 0)
	m.cdsc, m.cdscd, m.cdscb = p.binned("cdsc", 2.4e-4), p.binned("cdscd", 0), p.binned("cdscb", 0)
	m.voff = p.binned("voff", -0.08)*(1+p.binned("tvoff", 0)*hot.kelvins) + p.get("voffl", 0)/m.leff
	m.mstar = 0.5 + math.Atan(p.binned("minv", 0))/math.Pi
}

// readMobility reads chapters 5.2 and 5.3 at temperature.
func (m *bsim4) readMobility(p *params, g Geometry, hot bsim4Hot, stress stress) {
	m.mobmod = int(p.get("mobmod", 0))
	u0, eu, c0 := 0.067, 1.67, 2.0
	if m.at.polarity == PMOS {
		u0, eu, c0 = 0.025, 1.0, 2.5
	}
	ua, uc, uc1 := 1e-9, -0.0465e-9, -0.056e-9
	switch m.mobmod {
	case 1:
		uc, uc1 = -0.0465, -0.056
	case 2:
		ua = 1e-15
	}
	short := 1 - p.binned("up", 0)*math.Exp(-m.leff/p.binnedPositive("lp", 1e-8))
	m.u0 = lowFieldMobility(p.binnedPositive("u0", u0)) * short * hot.mobility * g.MulU0 * stress.mobility
	m.ua = hot.moved(p.binned("ua", ua), p.binned("ua1", 1e-9))
	m.ub = hot.moved(p.binned("ub", 1e-19), p.binned("ub1", -1e-18))
	m.uc = hot.moved(p.binned("uc", uc), p.binned("uc1", uc1))
	m.ud = hot.moved(p.binned("ud", 0), p.binned("ud1", 0))
	m.eu = p.binned("eu", eu)
	m.surface = c0 * m.excess
	m.vsat = hot.fallen(p.binnedPositive("vsat", 8e4), p.binned("at", 3.3e4)) * stress.velocity
	if m.vsat <= 0 {
		p.warn("at", "vsat falls to %g m/s at this temperature: 1000 m/s is used", m.vsat)
		m.vsat = 1000
	}
}

// readOutput reads chapters 5.1 and 5.4 to 5.6: bulk charge, saturation, output
// resistance.
func (m *bsim4) readOutput(p *params) {
	m.a0, m.ags = p.binned("a0", 1), p.binned("ags", 0)
	m.a1 = p.binned("a1", 0)
	m.a2 = math.Max(0.01, math.Min(1, p.binned("a2", 1)))
	m.b0, m.b1, m.keta = p.binned("b0", 0), p.binned("b1", 0), p.binned("keta", -0.047)
	m.dwg, m.dwb = p.binned("dwg", 0), p.binned("dwb", 0)
	m.delta = p.binnedPositive("delta", 0.01)
	m.pclm, m.pdiblcb = p.binned("pclm", 1.3), p.binned("pdiblcb", 0)
	m.pvag = p.binned("pvag", 0)
	m.fprout = p.binned("fprout", 0) * math.Sqrt(m.leff)
	m.pdits, m.pditsl, m.pditsd = p.binned("pdits", 0), p.get("pditsl", 0), p.binned("pditsd", 0)
	m.pscbe1, m.pscbe2 = p.binned("pscbe1", 4.24e8), p.binned("pscbe2", 1e-5)
}

// bsim4Junction reads the DC side of chapter 11: densities by area and isolation
// sidewall.
func bsim4Junction(p *params, g Geometry, at climate) junction {
	hot := saturationRatio(at.tnom, at.t)
	js, jsw := p.atLeast("jss", 1e-4, 0), p.atLeast("jsws", 0, 0)
	n := p.positive("njs", 1)
	return junction{
		isd: hot * areaCurrent(p.atLeast("jsd", js, 0), p.atLeast("jswd", jsw, 0), g.AD, g.PD, defaultIS),
		iss: hot * areaCurrent(js, jsw, g.AS, g.PS, defaultIS),
		nd:  p.positive("njd", n), ns: n,
	}
}
