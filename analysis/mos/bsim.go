package mos

import "math"

// What BSIM3v3 and BSIM4 share. Sources: BSIM3v3.2.2 Users' Manual, UCB/ERL
// M99/18, and the BSIM4 Users' Manual, chapters 1 to 5.

// bins are the reciprocal sizes by which binned parameters scale: 1/Leff,
// 1/Weff and their product, per µm or per m by BINUNIT (BSIM4 manual, A.18).
type bins struct{ l, w, lw float64 }

func binsOf(p *params, leff, weff float64) bins {
	unit := 1.0
	if p.get("binunit", 1) == 1 {
		unit = 1e-6
	}
	return bins{unit / leff, unit / weff, unit * unit / (leff * weff)}
}

// binned reads P0 + LP/Leff + WP/Weff + PP/(Leff·Weff).
func (p *params) binned(name string, def float64) float64 {
	v := p.get(name, def)
	return v + p.get("l"+name, 0)*p.bins.l + p.get("w"+name, 0)*p.bins.w + p.get("p"+name, 0)*p.bins.lw
}

// binnedPositive is binned for a quantity that must be above zero.
func (p *params) binnedPositive(name string, def float64) float64 {
	v := p.binned(name, def)
	if v > 0 {
		return v
	}
	p.warn(name, "%s comes to %g at this size, but it must be above zero: %g is used", name, v, def)
	return def
}

// sizeShift is the length or width that processing takes from one side, from
// names that start with the letter of the dimension: LINT + LL/L^LLN + LW/W^LWN +
// LWL/(L^LLN W^LWN) for "l", with own for LINT. Sizes in metres (BSIM4 manual,
// 1.9-1.12).
func (p *params) sizeShift(dim string, own, l, w float64) float64 {
	pl := math.Pow(l, p.get(dim+"ln", 1))
	pw := math.Pow(w, p.get(dim+"wn", 1))
	return own + p.get(dim+"l", 0)/pl + p.get(dim+"w", 0)/pw + p.get(dim+"wl", 0)/(pl*pw)
}

// intrinsicDensity is ni in cm⁻³ (BSIM4 manual, 13.63).
func intrinsicDensity(kelvin float64) float64 {
	return niRef * math.Pow(kelvin/refKelvin, 1.5) *
		math.Exp(21.5565981-bandGap(kelvin)/(2*thermal(kelvin)))
}

// lowFieldMobility takes U0 in cm²/Vs or m²/Vs, told apart by size, to m²/Vs.
func lowFieldMobility(u0 float64) float64 {
	if u0 > 1 {
		return u0 * squareCm
	}
	return u0
}

// profile derives K1 and K2 from the doping when the card states neither:
// BSIM4 manual 2.13-2.17, and M99/18 appendix.
func (p *params) profile(phi, cox, deep, peak, k1Default, k2Default float64) (k1, k2 float64) {
	if p.has("k1") || p.has("k2") {
		return p.binned("k1", k1Default), p.binned("k2", k2Default)
	}
	body := func(n float64) float64 { return math.Sqrt(2*charge*epsSilicon*n*perCubicCm) / cox }
	gamma1 := p.binned("gamma1", body(peak))
	gamma2 := p.binned("gamma2", body(deep))
	xt := p.binned("xt", 1.55e-7)
	vbx := -math.Abs(p.binned("vbx", phi-charge*peak*perCubicCm*xt*xt/(2*epsSilicon)))
	vbm := -math.Abs(p.binned("vbm", -3))
	k2 = (gamma1 - gamma2) * (math.Sqrt(phi-vbx) - math.Sqrt(phi)) /
		(2*math.Sqrt(phi)*(math.Sqrt(phi-vbm)-math.Sqrt(phi)) + vbm)
	return gamma2 - 2*k2*math.Sqrt(phi-vbm), k2
}

// lowestBulk is Vbc, the most reverse bulk bias at which Vth still rises.
func lowestBulk(phi, k1, k2 float64) float64 {
	if k2 >= 0 {
		return -30
	}
	return math.Max(-30, math.Min(-3, 0.9*(phi-k1*k1/(4*k2*k2))))
}

// bulkSmoothing is δ1 of Vbseff, in volts.
const bulkSmoothing = 1e-3

// aboveBulk keeps Vbs smoothly above Vbc.
func aboveBulk(vbs dual, vbc float64) dual {
	t := vbs.plus(-vbc - bulkSmoothing)
	root := t.square().plus(-4 * bulkSmoothing * vbc).sqrt()
	if t.v > 0 {
		return t.add(root).times(0.5).plus(vbc)
	}
	// The same sum of two nearly equal numbers, without the cancellation.
	return root.sub(t).inv().times(-2 * bulkSmoothing * vbc).plus(vbc)
}

// The four guards continue 1 + x and 1/(1 + x) smoothly where hostile
// parameters would take them through zero; inside their limits they are exact.

// overHalf is 1 + x for x >= -0.5, and tends to 3/8 below.
func overHalf(x dual) dual {
	if x.v >= -0.5 {
		return x.plus(1)
	}
	return x.times(3).plus(1).div(x.times(8).plus(3))
}

// overTenth is 1 + x for x >= -0.9, and tends to 1/20 below.
func overTenth(x dual) dual {
	if x.v >= -0.9 {
		return x.plus(1)
	}
	return x.plus(0.8).div(x.times(20).plus(17))
}

// overFifth is 1 + x for x >= -0.8, and tends to 1/10 below.
func overFifth(x dual) dual {
	if x.v >= -0.8 {
		return x.plus(1)
	}
	return x.plus(0.6).div(x.times(10).plus(7))
}

// leastBulkCharge keeps Abulk above 1/20, exactly itself from 0.1 up.
func leastBulkCharge(a dual) dual {
	if a.v >= 0.1 {
		return a
	}
	return a.neg().plus(0.2).div(a.times(-20).plus(3))
}

// leastWidth keeps Weff above 10 nm, exactly itself from 20 nm up.
func leastWidth(w dual) dual {
	if w.v >= 2e-8 {
		return w
	}
	return w.neg().plus(4e-8).times(2e-8).div(w.times(-2).plus(6e-8))
}

// polyDepletion is Vgse, the gate voltage less what the polysilicon drops
// (BSIM4 manual, 1.7). a is q·εsi·NGATE/Cox², zero for a gate without depletion.
func polyDepletion(vgs dual, vfbPhi, a float64) dual {
	x := vgs.plus(-vfbPhi)
	if a <= 0 || x.v <= 0 {
		return vgs
	}
	root := x.times(2 / a).plus(1).sqrt()
	return x.times(2).div(root.plus(1)).plus(vfbPhi)
}

// polyFactor is a of polyDepletion for a gate doping in cm⁻³.
func polyFactor(ngate, cox float64) float64 {
	if ngate <= 1e18 || ngate >= 1e25 {
		return 0
	}
	return charge * epsSilicon * ngate * perCubicCm / (cox * cox)
}

// pinch is the drain side at one bias: what Vdsat and VAsat are made of.
type pinch struct {
	vgst, v2 dual // Vgsteff, Vgsteff + 2Vt
	abulk    dual
	el       dual // Esat·Leff
	lam      dual // λ of the non-saturation effect, A1·Vgsteff + A2
	w        dual // Weff·VSAT·Cox·Rds
}

// saturation is Vdsat: M99/18 chapter 3, BSIM4 manual 5.27-5.32.
func (s *pinch) saturation() dual {
	inv := s.lam.inv()
	a := s.abulk.square().mul(s.w).add(s.abulk.mul(inv.plus(-1)))
	b := s.v2.mul(inv.times(2).plus(-1)).add(s.abulk.mul(s.el)).add(s.abulk.mul(s.v2).mul(s.w).times(3))
	c := s.v2.mul(s.el).add(s.v2.square().mul(s.w).times(2))
	return c.times(2).div(b.add(b.square().sub(a.mul(c).times(4)).sqrt()))
}

// earlySaturation is VAsat.
func (s *pinch) earlySaturation(vdsat dual) dual {
	half := s.abulk.mul(vdsat).div(s.v2).times(-0.5).plus(1)
	top := s.el.add(vdsat).add(s.w.mul(s.vgst).mul(half).times(2))
	return top.div(s.lam.inv().times(2).plus(-1).add(s.w.mul(s.abulk)))
}

// effectiveDrain is Vdseff, which goes smoothly from Vds to Vdsat, and
// Vds - Vdseff; both without cancellation, so that Vdseff is exactly 0 at Vds = 0.
func effectiveDrain(vds, vdsat dual, delta float64) (vdseff, beyond dual) {
	t := vdsat.sub(vds).plus(-delta)
	root := t.square().add(vdsat.times(4 * delta)).sqrt()
	sum := vdsat.add(vds).plus(delta).add(root)
	vdseff = vdsat.mul(vds).times(2).div(sum)
	gap := root.sub(t)
	if t.v > 0 {
		gap = vdsat.times(4 * delta).div(root.add(t))
	}
	return vdseff, vds.mul(gap).div(sum)
}

// leastDrop is the Vds - Vdseff below which the exponent of the substrate
// current effect is past any use.
const leastDrop = 1e-9

// substrateFactor is 1 + (Vds - Vdseff)/VASCBE (BSIM4 manual, 5.47).
func substrateFactor(beyond dual, pscbe1, pscbe2, litl, leff float64) dual {
	if pscbe2 <= 0 || beyond.v <= leastDrop {
		return constant(1)
	}
	return beyond.inv().times(-pscbe1 * litl).exp().times(pscbe2 / leff).mul(beyond).plus(1)
}

// nonSaturation is λ = A1·Vgsteff + A2, kept where 2/λ - 1 has its meaning.
func nonSaturation(vgst dual, a1, a2 float64) dual {
	lam := vgst.times(a1).plus(a2)
	switch {
	case lam.v < 0.01:
		return constant(0.01)
	case lam.v > 1.9:
		return constant(1.9)
	}
	return lam
}
