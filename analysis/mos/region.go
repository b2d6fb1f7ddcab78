package mos

import "math"

// Region is the operating region of a MOSFET. Moderate inversion is told by the
// inversion coefficient and is no region of its own.
type Region uint8

// The regions.
const (
	Cutoff Region = iota
	WeakInversion
	Triode
	DeepTriode
	Saturation
)

// String gives the name that annotations and reports use.
func (r Region) String() string {
	switch r {
	case WeakInversion:
		return "weak inversion"
	case Triode:
		return "triode"
	case DeepTriode:
		return "deep triode"
	case Saturation:
		return "saturation"
	}
	return "cutoff"
}

// Limits of the decision. The inversion coefficients are those of Enz & Vittoz;
// the rest is common practice.
const (
	OffIC         = 1e-4  // inversion coefficient below which the channel is off
	WeakIC        = 0.1   // ... below which inversion is weak
	StrongIC      = 10.0  // ... above which it is strong
	deepShare     = 0.15  // of Vdsat: deep triode
	edgeVolts     = 10e-3 // V, how near a boundary counts as its edge
	weakVdsatInVt = 4     // kT/q: e^-4 leaves 1.8 % to saturation in weak inversion
	partlyVelSat  = 0.2   // overdrive over Esat·Leff
	stronglySat   = 1.0
)

// LeakFloor is the current in amperes below which a device of a width in metres
// counts as off: 1 nA, and 1 pA/µm for wide ones.
func LeakFloor(w float64) float64 { return math.Max(1e-9, 1e-6*w) }

// Verdict is the region of a Point and what qualifies it.
type Verdict struct {
	Region Region
	Edge   string // "at the edge of saturation", ... within 10 mV of a boundary; or ""
	// VelocitySaturated is "", "partly" or "strongly".
	VelocitySaturated string
	Saturated         bool    // VDS is at or above Vdsat, whatever the inversion
	Vdsat             float64 // V, the saturation edge used for the label; at least 4 kT/q in weak inversion
	Margin            float64 // V, VDS - Vdsat of the label, inside the access resistances
	Assumed           bool    // the label is weak inversion by an assumed slope factor
}

// String is the region with its edge: "triode, at the edge of saturation".
func (v Verdict) String() string {
	if v.Edge == "" {
		return v.Region.String()
	}
	return v.Region.String() + ", " + v.Edge
}

// Decide labels a Point. leakFloor, in amperes, is the current below which the
// label is cutoff; zero or less takes 1 nA.
//
// The channel is told by the inversion coefficient, the drain end by VDS against
// Vdsat. What is held against the leakage floor is the current that the channel
// would carry to a drain far enough away, so that VDS = 0 over an inverted channel
// is deep triode and not cutoff.
//
// A model without weak inversion (NAssumed) carries nothing at and below
// threshold. There the label is cutoff or weak inversion, never triode or
// saturation: weak inversion when the coefficient by the assumed slope factor,
// and the current that goes with it, stand above their floors.
func Decide(p Point, leakFloor float64) Verdict {
	if leakFloor <= 0 {
		leakFloor = LeakFloor(0)
	}
	in := p.Internal
	v := Verdict{VelocitySaturated: velocityWord(p.VelSat)}
	silent := p.NAssumed && in.VGS <= in.Vth
	v.Vdsat = in.Vdsat
	if p.IC < WeakIC || silent {
		v.Vdsat = math.Max(v.Vdsat, weakVdsatInVt*p.Vt)
	}
	v.Margin = in.VDS - v.Vdsat
	v.Saturated = v.Margin >= 0

	nvt := p.N * p.Vt
	// Gate voltage above each of the two limits of the channel.
	toOff := math.Min((in.VGS-in.Vth)-nvt*offPinch, nvt*math.Log(carried(p, silent)/leakFloor))
	toWeak := (in.VGS - in.Vth) - nvt*weakPinch
	if p.IC < OffIC {
		toOff = math.Min(toOff, 0)
	}
	switch {
	case p.IC < OffIC || carried(p, silent) < leakFloor:
		v.Region = Cutoff
		v.Edge = edge(toOff, WeakInversion)
		v.VelocitySaturated = ""
	case p.IC < WeakIC || silent:
		v.Region, v.Assumed = WeakInversion, p.NAssumed
		v.VelocitySaturated = ""
		if v.Edge = edge(toOff, Cutoff); v.Edge == "" {
			v.Edge = edge(gap(silent, in.VGS-in.Vth, toWeak), drainRegion(v, in.VDS))
		}
	default:
		v.Region = drainRegion(v, in.VDS)
		v.Edge = drainEdge(v, in.VDS)
		if v.Edge == "" && !p.NAssumed {
			v.Edge = edge(toWeak, WeakInversion)
		} else if v.Edge == "" {
			v.Edge = edge(in.VGS-in.Vth, WeakInversion)
		}
	}
	return v
}

// Normalised overdrives of the two channel limits.
var (
	offPinch  = pinchOff(OffIC)
	weakPinch = pinchOff(WeakIC)
)

// gap is the distance to strong enough inversion: to the threshold itself where
// the model has no current below it.
func gap(silent bool, vov, toWeak float64) float64 {
	if silent {
		return vov
	}
	return toWeak
}

// carried is the current in amperes that the channel's source end supplies: the
// current divided by the share 1 - e^(-VDS/Vt) that the drain end lets through.
func carried(p Point, silent bool) float64 {
	if silent {
		// Ispec·IC, Ispec = 2n·k·Vt² (Enz, Krummenacher & Vittoz 1995).
		return 2 * p.N * p.K * p.Vt * p.Vt * p.IC
	}
	if p.VDS == 0 {
		return p.Vt / p.Rds
	}
	return p.ID / -math.Expm1(-p.VDS/p.Vt)
}

func drainRegion(v Verdict, vds float64) Region {
	switch {
	case v.Saturated:
		return Saturation
	case vds <= deepShare*v.Vdsat:
		return DeepTriode
	}
	return Triode
}

// drainEdge is the nearer of the two limits along VDS, when within reach.
func drainEdge(v Verdict, vds float64) string {
	toDeep := vds - deepShare*v.Vdsat
	switch v.Region {
	case Saturation:
		return edge(v.Margin, Triode)
	case DeepTriode:
		return edge(toDeep, Triode)
	}
	if e := edge(v.Margin, Saturation); e != "" && -v.Margin <= toDeep {
		return e
	}
	return edge(toDeep, DeepTriode)
}

func edge(distance float64, to Region) string {
	if math.Abs(distance) <= edgeVolts {
		return "at the edge of " + to.String()
	}
	return ""
}

func velocityWord(x float64) string {
	switch {
	case x > stronglySat:
		return "strongly"
	case x > partlyVelSat:
		return "partly"
	}
	return ""
}
