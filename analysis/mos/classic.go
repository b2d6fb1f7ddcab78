package mos

import "math"

// classic holds what levels 1, 2 and 3 share: the processing of their common
// parameters, after UCB/ERL M80/7 (Vladimirescu & Liu 1980), at the evaluation
// temperature. Voltages are of NMOS polarity.
type classic struct {
	leff, weff float64 // m
	tox, cox   float64 // m, F/m²; zero when a level-1 card gives no TOX
	kp, uo     float64 // A/V², m²/Vs
	gamma      float64 // V^½
	phi        float64 // V
	vbi        float64 // V, Vth = vbi + gamma·S
	xd         float64 // m/V^½, sqrt(2 εsi / q NSUB); zero without NSUB
	lambda     float64 // 1/V
	ld         float64 // m
	vt         float64 // V
}

// Defaults of UCB/ERL M80/7.
const (
	defaultKP    = 2e-5 // A/V²
	defaultUO    = 600  // cm²/Vs
	defaultPHI   = 0.6  // V
	lowestPHI    = 0.1  // V
	defaultTOX23 = 1e-7 // m, levels 2 and 3
)

// readClassic reads the common parameters; defaultTOX is zero for level 1,
// which has none.
func readClassic(p *params, g Geometry, at climate, defaultTOX float64) classic {
	c := classic{vt: at.vt, lambda: p.inside("lambda", 0, 0, 10)}
	c.ld = p.get("ld", 0)
	c.leff = g.L + p.get("xl", 0) - 2*c.ld
	c.weff = g.W + p.get("xw", 0) - 2*p.get("wd", 0)
	effective(p, c.leff, c.weff)

	c.tox = p.get("tox", defaultTOX)
	if p.has("tox") && c.tox <= 0 {
		if defaultTOX > 0 {
			p.fatal("tox", "tox is %s, but an oxide has a thickness above zero", engineering(c.tox, "m"))
		} else {
			p.warn("tox", "tox is %s, but an oxide has a thickness above zero: nothing is derived from it", engineering(c.tox, "m"))
		}
		c.tox = 0
	}
	if c.tox > 0 {
		c.cox = epsOxide / c.tox
	}
	c.uo = p.positive("uo", p.positive("u0", defaultUO)) * squareCm
	c.kp = defaultKP
	if c.cox > 0 {
		c.kp = c.uo * c.cox
	}
	c.kp = p.positive("kp", c.kp)
	c.threshold(p, at)
	c.vbi += at.s * g.DelVTO // signed like the card's VTO

	// Mobility falls as T^-1.5 in both of its places.
	hot := math.Pow(at.t/at.tnom, -1.5) * g.MulU0
	c.kp *= hot
	c.uo *= hot
	return c
}

// threshold derives GAMMA, PHI and VTO where the card leaves them out, and moves
// them to the evaluation temperature.
func (c *classic) threshold(p *params, at climate) {
	nsub := p.get("nsub", 0)
	if p.has("nsub") && nsub <= niRef {
		p.warn("nsub", "nsub is %g cm⁻³, not above the intrinsic %g cm⁻³: nothing is derived from it", nsub, niRef)
		nsub = 0
	}
	phi := defaultPHI
	gamma := 0.0
	if nsub > 0 {
		phi = math.Max(lowestPHI, 2*thermal(at.tnom)*math.Log(nsub/niRef))
		c.xd = math.Sqrt(2 * epsSilicon / (charge * nsub * perCubicCm))
		if c.cox > 0 {
			gamma = math.Sqrt(2*epsSilicon*charge*nsub*perCubicCm) / c.cox
		}
	}
	phi = p.atLeast("phi", phi, lowestPHI)
	c.gamma = p.atLeast("gamma", gamma, 0)

	var vto float64
	switch {
	case p.has("vto"), p.has("vt0"):
		vto = at.s * p.get("vto", p.get("vt0", 0))
	case nsub > 0 && c.cox > 0:
		vto = at.s*c.flatBand(p, at, phi) + phi + c.gamma*math.Sqrt(phi)
	}
	vbi := vto - c.gamma*math.Sqrt(phi)

	c.phi = surfacePotential(phi, at.tnom, at.t)
	if c.phi < lowestPHI {
		p.warn("phi", "phi falls to %s at this temperature: %s is used", engineering(c.phi, "V"), engineering(lowestPHI, "V"))
		c.phi = lowestPHI
	}
	// The gap term keeps its sign for PMOS in the signed VTO of the publication,
	// which takes an n+ gate on both types.
	c.vbi = vbi + at.s*(bandGap(at.tnom)-bandGap(at.t))/2 + (c.phi-phi)/2
}

// flatBand is VFB as signed for the card: work function difference by TPG, and
// the charge of NSS.
func (c *classic) flatBand(p *params, at climate, phi float64) float64 {
	eg := bandGap(at.tnom)
	phims := -at.s * (p.get("tpg", 1)*eg/2 + phi/2)
	if p.get("tpg", 1) == 0 {
		phims = -0.05 - eg/2 - at.s*phi/2
	}
	return phims - charge*p.get("nss", 0)*perSquareCm/c.cox
}

// depletion is S = sqrt(PHI - VBS) of the body effect, continued as its tangent
// for a forward-biased bulk and floored at zero.
func (c *classic) depletion(vbs dual) dual {
	if vbs.v <= 0 {
		return vbs.neg().plus(c.phi).sqrt()
	}
	root := math.Sqrt(c.phi)
	s := vbs.times(-0.5 / root).plus(root)
	if s.v <= 0 {
		return dual{}
	}
	return s
}

// effective rejects an empty channel.
func effective(p *params, leff, weff float64) {
	if !(leff > 0) {
		p.fatal("l", "the effective channel length is %s, not above zero", engineering(leff, "m"))
	}
	if !(weff > 0) {
		p.fatal("w", "the effective channel width is %s, not above zero", engineering(weff, "m"))
	}
}

// classicAccess reads RD and RS, or RSH with the squares of the instance. A
// card with RSH and an instance without squares counts one each (M80/7).
func classicAccess(p *params, g Geometry, unstatedSquares float64) (rd, rs access) {
	rsh := p.atLeast("rsh", 0, 0)
	squares := func(name string, n float64) float64 {
		if n >= 0 && !math.IsInf(n, 0) {
			return n
		}
		if rsh > 0 && unstatedSquares > 0 {
			p.warn(name, "%s is not stated, so rsh counts %g square", name, unstatedSquares)
		}
		return unstatedSquares
	}
	one := func(name, count string, n float64) access {
		if p.has(name) {
			return access{fixed: p.atLeast(name, 0, 0)}
		}
		return access{fixed: rsh * squares(count, n)}
	}
	return one("rd", "nrd", g.NRD), one("rs", "nrs", g.NRS)
}
