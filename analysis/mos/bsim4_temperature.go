package mos

import "math"

// bsim4Hot is the temperature law of TEMPMOD (BSIM4 manual, chapter 13).
type bsim4Hot struct {
	relative bool    // tempMod 1 and 2: coefficients per kelvin of the value
	rise     float64 // T/TNOM - 1
	kelvins  float64 // T - TNOM
	mobility float64 // U0(T)/U0
	ditsVt   float64 // V, kT/q of the pocket shift (2.21)
}

func bsim4Temperature(p *params, at climate) bsim4Hot {
	mode := p.get("tempmod", 0)
	h := bsim4Hot{
		relative: mode > 0,
		rise:     at.t/at.tnom - 1,
		kelvins:  at.t - at.tnom,
		mobility: math.Pow(at.t/at.tnom, p.binned("ute", -1.5)),
		ditsVt:   at.vt,
	}
	if mode == 2 {
		h.ditsVt = thermal(at.tnom)
	}
	return h
}

// moved takes a mobility or resistance coefficient to temperature. The manual
// leaves UB additive in tempMod 1; here it follows UA, UC and UD.
func (h bsim4Hot) moved(value, slope float64) float64 {
	if h.relative {
		return value * (1 + slope*h.kelvins)
	}
	return value + slope*h.rise
}

// fallen is moved for VSAT, whose coefficient counts downwards.
func (h bsim4Hot) fallen(value, slope float64) float64 { return h.moved(value, -slope) }
