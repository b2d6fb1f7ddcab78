package mos

import "math"

// Diode is a junction diode compiled for one size and one temperature:
// Shockley's law with emission coefficient, reverse breakdown and series
// resistance (UCB/ERL M80/7). It is immutable.
type Diode struct {
	is, nvt   float64 // A, V
	rs        float64 // Ω
	bv, ibv   float64 // V (zero: no breakdown), A
	breakdown float64 // V, e-fold of the breakdown current
	m         float64
}

// diodeNames is the parameter set of UCB/ERL M80/7 with what cards add.
var diodeNames = words(selectors, `is js jsw n rs cjo cj0 cj cjsw vj pb m mj mjsw php fc tt bv ibv nbv eg xti
 kf af area pj w l xw ik ikf ikr isr nr trs trs1 trs2 tbv tbv1 tbv2 tt1 tt2 tlev tlevc ron roff vfwd vrev
 vp mfg iave vpk type lm lp wm wp xm xp xoi xom dcap allow_noise fcs vjsw pbsw ns nsw isw gap1 gap2 cta ctp pta ptp`)

// CompileDiode reduces a `.model ... d` card to what evaluation needs; area and m
// are the instance's factors, zero means one. The Diode is nil when a note is
// Fatal.
func CompileDiode(c Card, area, m, tempC float64) (*Diode, []Note) {
	p := &params{card: c.Params}
	if level := p.get("level", 1); level != 1 {
		p.fatal("level", "diode level %g is not modelled", level)
		return nil, p.notes
	}
	at := climateOf(Card{}, p, tempC)
	if p.failed() {
		return nil, p.notes
	}
	p.notes = append(p.notes, unknown(c.Params, &family{label: "a diode", names: diodeNames})...)
	d := newDiode(p, at, "rs", orOne(area), orOne(m))
	return d, p.notes
}

// newDiode reads a diode's parameters; the series resistance goes by different
// names on diode and vdmos cards.
func newDiode(p *params, at climate, series string, area, m float64) *Diode {
	n := p.positive("n", 1)
	d := &Diode{nvt: n * at.vt, m: m}
	// IS(T), UCB/ERL M80/7.
	hot := at.t / at.tnom
	eg, xti := p.positive("eg", 1.11), p.get("xti", 3)
	d.is = p.atLeast("is", defaultIS, 0) * area * math.Pow(hot, xti/n) * math.Exp(math.Min(expMax, (hot-1)*eg/d.nvt))
	d.rs = p.atLeast(series, 0, 0) / area
	d.bv = p.atLeast("bv", 0, 0)
	d.ibv = p.atLeast("ibv", 1e-3, 0) * area
	d.breakdown = p.positive("nbv", 1) * at.vt
	return d
}

func orOne(v float64) float64 {
	if v > 0 && !math.IsInf(v, 0) {
		return v
	}
	return 1
}

// Eval gives the current in amperes and the conductance in siemens at a voltage
// from anode to cathode.
func (d *Diode) Eval(v float64) (i, g float64) {
	v = limited(v)
	vj := v
	if d.rs > 0 {
		vj = d.inner(v)
	}
	i, g = d.junction(vj)
	return d.m * i, d.m * g / (1 + d.rs*g)
}

// junction is current and conductance at the junction itself.
func (d *Diode) junction(v float64) (i, g float64) {
	e := d.is * math.Exp(math.Min(expMax, v/d.nvt))
	i, g = e-d.is, e/d.nvt
	if v > 0 || e > d.is/2 {
		i = d.is * math.Expm1(math.Min(expMax, v/d.nvt))
	}
	if d.bv > 0 {
		b := d.ibv * math.Exp(math.Min(expMax, -(v+d.bv)/d.breakdown))
		i -= b
		g += b / d.breakdown
	}
	return i, g
}

// inner is the junction voltage behind the series resistance: the root of
// v = vj + RS·I(vj), whose right side rises with vj.
func (d *Diode) inner(v float64) float64 {
	low, high := math.Min(v, 0), math.Max(v, 0)
	// Both exponentials alone bound the root and make a good start.
	if v > 0 && d.is > 0 {
		high = math.Min(high, d.nvt*math.Log1p(v/(d.rs*d.is)))
	}
	if v < 0 && d.bv > 0 && d.ibv > 0 {
		low = math.Max(low, math.Min(0, -d.bv-d.breakdown*math.Log1p(-v/(d.rs*d.ibv))))
	}
	vj := high
	if v < 0 {
		vj = low
	}
	for range maxIterations {
		i, g := d.junction(vj)
		excess := vj + d.rs*i - v
		if excess > 0 {
			high = vj
		} else {
			low = vj
		}
		next := vj - excess/(1+d.rs*g)
		if !(next >= low && next <= high) {
			next = low + (high-low)/2
		}
		if math.Abs(next-vj) <= 1e-15+1e-14*math.Abs(vj) {
			return next
		}
		vj = next
	}
	return vj
}
