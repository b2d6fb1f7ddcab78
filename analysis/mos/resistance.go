package mos

import "math"

// access is the resistance between a terminal and its end of the channel, in
// ohms: a constant, plus (BSIM4 rdsMod 1) a part that follows the bias.
type access struct {
	fixed  float64
	biased *biasedAccess
}

func (a access) plus(r float64) access {
	a.fixed += r
	return a
}

func (a access) present() bool { return a.fixed > 0 || a.biased != nil }

// at is the resistance for the voltages of gate and bulk to this terminal.
func (a access) at(gate, bulk dual) dual {
	r := constant(a.fixed)
	if a.biased != nil {
		r = r.add(a.biased.at(gate, bulk))
	}
	return r
}

// Convergence of the terminal current: the step that ends the search relative to
// the current, after which one Newton step leaves about its square.
const (
	currentTolerance = 1e-11
	maxIterations    = 200
)

// solve finds the current through source resistance, channel and drain
// resistance, I = Id(VGS - I·RS, VDS - I·(RS+RD), VBS - I·RS), by Newton steps
// inside a bracket: the left side rises and the right side falls with I. The
// derivatives seen at the outer terminals follow by implicit differentiation.
func solve(c core, vgs, vds, vbs float64, rd, rs dual) (dual, channel) {
	r := rs.v + rd.v
	low, high := 0.0, vds/r
	i := 0.0
	var in channel
	var slope float64
	for range maxIterations {
		in = c.eval(vgs-i*rs.v, math.Max(vds-i*r, 0), vbs-i*rs.v)
		slope = 1 + (in.id.g+in.id.b)*rs.v + in.id.d*r
		excess := in.id.v - i
		if excess > 0 {
			low = i
		} else {
			high = i
		}
		next := i + excess/slope
		if !(next > low && next < high) {
			if math.Abs(next-i) <= currentTolerance*math.Abs(i) || high-low <= 1e-15*high {
				break
			}
			next = low + (high-low)/2
		}
		done := math.Abs(next-i) <= currentTolerance*math.Abs(next)
		i = next
		if done {
			break
		}
	}
	// dI = Id_g·dVGS' + Id_d·dVDS' + Id_b·dVBS' with V' = V - I·R on each, both
	// I and R moving.
	gs, ds, bs := bias(vgs, vds, vbs)
	lost := in.id.g + in.id.b
	out := gs.times(in.id.g).add(ds.times(in.id.d)).add(bs.times(in.id.b))
	out = out.sub(rs.times(i * lost)).sub(rs.add(rd).times(i * in.id.d))
	out = out.times(1 / slope)
	out.v = i
	return out, in
}
