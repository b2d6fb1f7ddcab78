package mos

import "math"

// junction is the bulk diode at one end of the channel, per instance of M = 1.
type junction struct {
	isd, iss float64 // A, saturation currents of drain and source junctions
	nd, ns   float64 // emission coefficients
}

// Defaults of the bulk junctions, UCB/ERL M80/7.
const (
	defaultIS = 1e-14 // A
	defaultN  = 1.0
)

// classicJunction reads IS, JS and N: the current is JS times the area where both
// are known, else IS.
func classicJunction(p *params, g Geometry, at climate) junction {
	hot := saturationRatio(at.tnom, at.t)
	is := p.atLeast("is", defaultIS, 0) * hot
	js := p.atLeast("js", 0, 0) * hot
	n := p.positive("n", defaultN)
	pick := func(area float64) float64 {
		if js > 0 && area > 0 {
			return js * area
		}
		return is
	}
	return junction{isd: pick(g.AD), iss: pick(g.AS), nd: n, ns: n}
}

// areaCurrent is the saturation current of a junction by its area and sidewall
// densities, or the least one where it has no stated size (M99/18 appendix A,
// BSIM4 manual chapter 11).
func areaCurrent(j, jsw, area, perimeter, least float64) float64 {
	if is := j*area + jsw*perimeter; is > 0 {
		return is
	}
	return least
}

// JunctionCurrent is IS·(exp(V/nVt) - 1) in amperes, bounded so that no voltage
// overflows it.
func JunctionCurrent(v, is, nvt float64) float64 {
	return is * math.Expm1(math.Min(v/nvt, expMax))
}

// JunctionState judges the bias of a bulk junction.
type JunctionState uint8

// The judgements: common practice, after the sizes of the voltages and of the
// current beside the channel's.
const (
	JunctionReverse JunctionState = iota // at or below zero
	JunctionNear                         // forward, but not conducting to speak of
	JunctionForward                      // conducts, or is about to
)

// Limits of the judgement.
const (
	forwardVolts    = 0.3  // V: above it a junction counts as forward biased
	forwardShare    = 1e-3 // of the channel current
	forwardCurrent  = 1e-9 // A
	junctionNothing = 1e-9 // V: noise of subtracting node voltages
)

// Junction is one bulk junction at one bias.
type Junction struct {
	V     float64 // V, bulk to channel end, > 0 is forward
	I     float64 // A
	State JunctionState
}

// Junctions judges both bulk junctions at a Point of this device: to the
// terminals written as source and as drain.
func (d *Device) Junctions(p Point) (source, drain Junction) {
	vs, vd := d.s*p.Vbs, d.s*(p.Vbs-p.Vds)
	j := d.junction
	source = judge(vs, d.m*JunctionCurrent(vs, j.iss, j.ns*d.vt), p.ID)
	drain = judge(vd, d.m*JunctionCurrent(vd, j.isd, j.nd*d.vt), p.ID)
	return source, drain
}

func judge(v, i, channel float64) Junction {
	j := Junction{V: v, I: i}
	switch {
	case v > forwardVolts, i > math.Max(forwardShare*channel, forwardCurrent):
		j.State = JunctionForward
	case v > junctionNothing:
		j.State = JunctionNear
	}
	return j
}
