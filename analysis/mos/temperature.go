package mos

import "math"

// thermal is kT/q in volts at an absolute temperature.
func thermal(kelvin float64) float64 { return kOverQ * kelvin }

// bandGap is the gap of silicon in eV (Varshni form of UCB/ERL M80/7).
func bandGap(kelvin float64) float64 {
	return 1.16 - 7.02e-4*kelvin*kelvin/(kelvin+1108)
}

// surfacePotential carries 2φF from the card's temperature to another
// (UCB/ERL M80/7, temperature section).
func surfacePotential(phi, tnom, t float64) float64 {
	r := t / tnom
	vt := thermal(t)
	return r*phi - 3*vt*math.Log(r) - r*bandGap(tnom) + bandGap(t)
}

// saturationRatio is IS(T)/IS(TNOM) of a junction (UCB/ERL M80/7).
func saturationRatio(tnom, t float64) float64 {
	return math.Exp(bandGap(tnom)/thermal(tnom) - bandGap(t)/thermal(t))
}
