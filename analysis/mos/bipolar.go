package mos

import "math"

// Bipolar is the core of the Gummel-Poon model (Bell Syst. Tech. J. 49, 1970, in
// the parameters of UCB/ERL M80/7) at one temperature: transport current, base
// charge, leakage. It is meant for the forward active region; terminal
// resistances, quasi-saturation and the substrate are not in it.
type Bipolar struct {
	s              float64
	is, ise, isc   float64 // A
	bf, br         float64
	nf, nr, ne, nc float64 // emission coefficients times Vt, V
	earlyF, earlyR float64 // 1/V, zero: no Early effect
	ikf, ikr       float64 // 1/A, zero: no high injection
	m              float64
	vt             float64
}

// BipolarPoint is a Bipolar at one bias, signed as wired.
type BipolarPoint struct {
	Vbe, Vce float64 // V
	Ic, Ib   float64 // A, into the terminals
	// Derivatives by Vbe and Vce, in siemens.
	Gm, Go   float64 // of Ic
	Gpi, Gmu float64 // of Ib
	Active   bool    // forward active: the region that the core is made for
}

// bipolarNames is the parameter set of UCB/ERL M80/7 with what cards add.
var bipolarNames = words(selectors, `is bf nf vaf va ikf ik ise c2 ne br nr var vb ikr isc c4 nc rb irb rbm re rc
 cje vje pe mje me tf xtf vtf itf ptf cjc vjc pc mjc mc xcjc tr cjs vjs ps mjs ms xtb eg xti pt kf af fc
 iss ns cjcp nk nkf subs bulk rco vo gamma qco quasimod tre1 tre2 trb1 trb2 trc1 trc2 trm1 trm2 nepi
 tbf1 tbf2 tbr1 tbr2 tlev tlevc expli dcap iceo vceo icrating mfg nsub area m`)

// CompileBipolar reduces a `.model ... npn|pnp` card (NMOS polarity for npn, PMOS
// for pnp) to what evaluation needs; area and m are the instance's factors, zero
// means one. The Bipolar is nil when a note is Fatal.
func CompileBipolar(c Card, area, m, tempC float64) (*Bipolar, []Note) {
	p := &params{card: c.Params}
	if level := p.get("level", 1); level != 1 {
		p.fatal("level", "bipolar level %g is not modelled", level)
		return nil, p.notes
	}
	at := climateOf(Card{Polarity: c.Polarity}, p, tempC)
	if p.failed() {
		return nil, p.notes
	}
	p.notes = append(p.notes, unknown(c.Params, &family{label: "a bipolar transistor", names: bipolarNames})...)
	for _, r := range []string{"rb", "rc", "re"} {
		if p.get(r, 0) != 0 {
			p.warn(r, "%s is not part of the bipolar core: the currents are those of the inner transistor", r)
		}
	}
	area = orOne(area)
	hot := at.t / at.tnom
	gain := math.Pow(hot, p.get("xtb", 0))
	growth := math.Pow(hot, p.get("xti", 3)) * math.Exp(math.Min(expMax, (hot-1)*p.positive("eg", 1.11)/at.vt))
	leak := func(name, n string, def float64) (i, nvt float64) {
		e := p.positive(n, def)
		return p.atLeast(name, 0, 0) * area * math.Pow(growth, 1/e) / gain, e * at.vt
	}
	reciprocal := func(names ...string) float64 {
		for _, n := range names {
			if v := p.get(n, 0); v > 0 {
				return 1 / v
			}
		}
		return 0
	}
	q := &Bipolar{
		s: at.s, vt: at.vt, m: orOne(m),
		is: p.positive("is", 1e-16) * area * growth,
		bf: p.positive("bf", 100) * gain, br: p.positive("br", 1) * gain,
		nf: p.positive("nf", 1) * at.vt, nr: p.positive("nr", 1) * at.vt,
		earlyF: reciprocal("vaf", "va"), earlyR: reciprocal("var", "vb"),
		ikf: reciprocal("ikf", "ik") / area, ikr: reciprocal("ikr") / area,
	}
	q.ise, q.ne = leak("ise", "ne", 1.5)
	q.isc, q.nc = leak("isc", "nc", 2)
	return q, p.notes
}

// Eval evaluates the transistor at voltages signed as wired.
func (q *Bipolar) Eval(vbe, vce float64) BipolarPoint {
	be, ce, _ := bias(limited(q.s*vbe), limited(q.s*vce), 0)
	bc := be.sub(ce)
	diode := func(v dual, is, nvt float64) dual {
		return v.times(1 / nvt).exp().plus(-1).times(is)
	}
	forward, reverse := diode(be, q.is, q.nf), diode(bc, q.is, q.nr)
	// Base charge: Early effect and high injection.
	early := bc.times(-q.earlyF).sub(be.times(q.earlyR)).plus(1)
	const least = 1e-3
	q1 := largest(early, constant(least)).inv()
	q2 := forward.times(q.ikf).add(reverse.times(q.ikr))
	qb := q2.times(4).plus(1).sqrt().plus(1).times(0.5).mul(q1)

	back := reverse.times(1 / q.br)
	leakC := diode(bc, q.isc, q.nc)
	ic := forward.sub(reverse).div(qb).sub(back).sub(leakC)
	ib := forward.times(1 / q.bf).add(diode(be, q.ise, q.ne)).add(back).add(leakC)
	out := BipolarPoint{Vbe: vbe, Vce: vce, Active: be.v > 0 && bc.v < be.v/2}
	if !ic.finite() || !ib.finite() {
		out.Active = false
		return out
	}
	out.Ic, out.Ib = q.s*q.m*ic.v, q.s*q.m*ib.v
	out.Gm, out.Go = q.m*ic.g, q.m*ic.d
	out.Gpi, out.Gmu = q.m*ib.g, q.m*ib.d
	return out
}
