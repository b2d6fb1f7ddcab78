package mos

import "math"

// defaultVTH0 is the zero-bias threshold of BSIM cards that state neither VTH0
// nor VFB, in volts of NMOS polarity.
const defaultVTH0 = 0.7

// flatBandPair gives VTH0 and VFB, each from the other where the card states only
// one (BSIM4 manual 2.3-2.4), in NMOS polarity.
func (p *params) flatBandPair(s, phi, k1 float64) (vth0, vfb float64) {
	gap := phi + k1*math.Sqrt(phi)
	switch {
	case p.has("vth0"), p.has("vtho"), p.has("vt0"):
		vth0 = s * p.binned("vth0", p.get("vtho", p.get("vt0", 0)))
		vfb = vth0 - gap
		if p.has("vfb") {
			vfb = s * p.binned("vfb", 0)
		}
	case p.has("vfb"):
		vfb = s * p.binned("vfb", 0)
		vth0 = vfb + gap
	default:
		vth0 = s * p.binned("vth0", s*defaultVTH0)
		vfb = vth0 - gap
	}
	return vth0, vfb
}
