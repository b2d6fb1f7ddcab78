package mos

import "math"

// stress is what the length of diffusion does to a device: BSIM4 manual,
// chapter 14. A card or instance without stress data gives ones and zeros.
type stress struct {
	mobility, velocity float64 // factors
	vth0, k2, eta0     float64 // additions; vth0 signed as on the card
}

// layoutStress follows 14.3 to 14.9. It is off unless SA and SB are stated above
// zero, and SD too for more than one finger.
func layoutStress(p *params, g Geometry, at climate) stress {
	s := stress{mobility: 1, velocity: 1}
	if !(g.SA > 0 && g.SB > 0) {
		return s
	}
	if g.NF > 1 && !(g.SD > 0) {
		p.warn("sd", "sa and sb are stated but sd is not, so the stress of %g fingers is left out", g.NF)
		return s
	}
	inv := meanInverse(g.SA, g) + meanInverse(g.SB, g)
	ref := 1/(p.positive("saref", 1e-6)+g.L/2) + 1/(p.positive("sbref", 1e-6)+g.L/2)

	l, w := g.L+p.get("xl", 0), g.W/g.NF+p.get("xw", 0)+p.get("wlod", 0)
	size := func(lk, wk, pk, lexp, wexp string) float64 {
		pl, pw := math.Pow(l, p.get(lexp, 0)), math.Pow(w, p.get(wexp, 0))
		return 1 + p.get(lk, 0)/pl + p.get(wk, 0)/pw + p.get(pk, 0)/(pl*pw)
	}
	ku := size("lku0", "wku0", "pku0", "llodku0", "wlodku0") * (1 + p.get("tku0", 0)*(at.t/at.tnom-1))
	kv := size("lkvth0", "wkvth0", "pkvth0", "llodvth", "wlodvth")

	mu, muRef := p.get("ku0", 0)/ku*inv, p.get("ku0", 0)/ku*ref
	kvsat := p.get("kvsat", 0)
	s.mobility = (1 + mu) / (1 + muRef)
	s.velocity = (1 + kvsat*mu) / (1 + kvsat*muRef)
	s.vth0 = p.get("kvth0", 0) / kv * (inv - ref)
	s.k2 = p.get("stk2", 0) / math.Pow(kv, p.get("lodk2", 1)) * (inv - ref)
	s.eta0 = p.get("steta0", 0) / math.Pow(kv, p.get("lodeta0", 1)) * (inv - ref)
	if !(s.mobility > 0) || !(s.velocity > 0) || math.IsInf(s.mobility+s.velocity, 0) || !isFinite(s.vth0+s.k2+s.eta0) {
		p.warn("ku0", "the stress parameters give no usable factor at this layout: stress is left out")
		return stress{mobility: 1, velocity: 1}
	}
	return s
}

// meanInverse is the mean over the fingers of 1/(distance + L/2), in 1/m.
func meanInverse(distance float64, g Geometry) float64 {
	n := int(math.Min(math.Max(1, math.Round(g.NF)), 1e6))
	sum := 0.0
	for i := range n {
		d := distance + g.L/2
		if i > 0 {
			d += float64(i) * (g.SD + g.L)
		}
		sum += 1 / d
	}
	return sum / float64(n)
}

func isFinite(v float64) bool { return v-v == 0 }
