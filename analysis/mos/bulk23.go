package mos

import "math"

// bulk23 adds what levels 2 and 3 share to the common parameters: the surface
// states of weak inversion, the junction depth and the velocity limit
// (UCB/ERL M80/7).
type bulk23 struct {
	classic
	xj    float64 // m
	vmax  float64 // m/s, zero: none
	nfs   float64 // q·NFS/Cox
	weak  bool    // NFS > 0: the card has weak inversion
	beta0 float64 // A/V² at the low-field mobility
}

func readBulk23(p *params, g Geometry, at climate) bulk23 {
	m := bulk23{classic: readClassic(p, g, at, defaultTOX23)}
	m.xj = p.atLeast("xj", 0, 0)
	m.vmax = p.atLeast("vmax", 0, 0)
	nfs := p.atLeast("nfs", 0, 0)
	m.weak = nfs > 0
	if m.cox > 0 {
		m.nfs = charge * nfs * perSquareCm / m.cox
	}
	m.beta0 = m.kp * m.weff / m.leff
	return m
}

// narrow is DELTA·π·εsi/(share·Cox·Weff), the narrow-width factor.
func (m *bulk23) narrow(p *params, share float64) float64 {
	return p.atLeast("delta", 0, 0) * math.Pi * epsSilicon / (share * m.cox * m.weff)
}

// leastDepletion keeps S = sqrt(PHI - VBS) off zero, V^½, where the equations
// divide by it: deep in forward bias, beyond their meaning.
const leastDepletion = 0.01

func (m *bulk23) root(vbs dual) dual {
	return largest(m.depletion(vbs), constant(leastDepletion))
}

// turnOn splits a gate voltage at the turn-on voltage Von = Vth + n·Vt: below it
// the current is that of Von times an exponential (Swanson & Meindl 1972, as
// UCB/ERL M80/7 has it). The current is continuous, gm is not. A card without
// NFS has no such tail.
func (m *bulk23) turnOn(vgs, vth, n dual) (at, tail dual) {
	if m.weak {
		width := n.times(m.vt)
		if von := width.add(vth); vgs.v < von.v {
			return von, vgs.sub(von).div(width).exp()
		}
	}
	return vgs, constant(1)
}

// slopeFactor is n as a Point reports it.
func (m *bulk23) slopeFactor(n dual) float64 {
	if m.weak {
		return n.v
	}
	return assumedN
}
