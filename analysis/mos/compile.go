package mos

import "math"

// Unstated is the geometry of an instance line that says nothing: zero, with
// NaN where absence differs from zero.
func Unstated() Geometry {
	nan := math.NaN()
	return Geometry{NRD: nan, NRS: nan, SA: nan, SB: nan, SD: nan}
}

// channel is what a model says of one bias: NMOS polarity, vds >= 0, inside the
// access resistances, for an instance of M = 1.
type channel struct {
	id       dual    // A
	vth      float64 // V
	vdsat    float64 // V
	n        float64 // slope factor of weak inversion
	k        float64 // A/V², µ·Cox·W/L
	velocity float64 // overdrive / (Esat·Leff), NaN where unknown
	ic       float64 // inversion coefficient, NaN where only vth and n tell it

	// Internals of EKV, for comparison with its published tables.
	vp, ir float64
	// Internals of the BSIM family, for comparison with its published tables.
	vgsteff, abulk, ueff, rds, coxeff float64
}

// core is one compiled model.
type core interface {
	eval(vgs, vds, vbs float64) channel
}

// family is one published model: how cards select it and how it is compiled.
type family struct {
	label   string // what Device.Level reports
	levels  []int
	names   func() vocabulary // every parameter of its `.model` card
	compile func(p *params, g Geometry, at climate) build
}

// climate is the polarity and the temperatures of one compilation, in kelvin.
type climate struct {
	s        float64 // +1 NMOS, -1 PMOS
	t, tnom  float64
	vt       float64 // kT/q at t
	polarity Polarity
}

// build is what a family makes of a card.
type build struct {
	core     core
	label    string // overrides the family's, where levels share a family
	rd, rs   access // the card's own access resistances
	junction junction
	beside   *beside
	assumed  bool // core has no weak inversion of its own
}

// Device is a card compiled for one geometry and one temperature. It is
// immutable and safe for concurrent use.
type Device struct {
	core     core
	level    string
	s        float64
	vt       float64
	m        float64
	rd, rs   access
	resists  bool
	junction junction
	beside   *beside
	assumed  bool
}

// Level names the model: "level 1", "EKV 2.6", "BSIM4".
func (d *Device) Level() string { return d.level }

// Compile reduces a card to what evaluation needs. The Device is nil when a
// note is Fatal.
func Compile(c Card, g Geometry, tempC float64) (*Device, []Note) {
	p := &params{card: c.Params}
	f := familyOf(c, p)
	if f == nil {
		return nil, p.notes
	}
	at := climateOf(c, p, tempC)
	if c.Vertical {
		// The card describes the whole device; an instance states no size.
		g.W, g.L = orOne(g.W), orOne(g.L)
	}
	checkGeometry(p, &g)
	if p.failed() {
		return nil, p.notes
	}
	p.notes = append(p.notes, unknown(c.Params, f)...)
	b := f.compile(p, g, at)
	if p.failed() {
		return nil, p.notes
	}
	d := &Device{
		core: b.core, level: f.label, s: at.s, vt: at.vt, m: g.M,
		rd: b.rd.plus(g.RD), rs: b.rs.plus(g.RS),
		junction: b.junction, beside: b.beside, assumed: b.assumed,
	}
	if b.label != "" {
		d.level = b.label
	}
	d.resists = d.rd.present() || d.rs.present()
	return d, p.notes
}

func climateOf(c Card, p *params, tempC float64) climate {
	at := climate{s: 1, polarity: c.Polarity}
	if c.Vertical {
		at.polarity = NMOS
		if p.get("pchan", 0) != 0 {
			at.polarity = PMOS
		}
	}
	if at.polarity == PMOS {
		at.s = -1
	}
	at.t = tempC + zeroCelsius
	at.tnom = p.get("tnom", p.get("tref", DefaultTNOM)) + zeroCelsius
	at.vt = thermal(at.t)
	if !(at.t > 0) || math.IsInf(at.t, 0) {
		p.fatal("", "the temperature is %g °C, which is not above absolute zero", tempC)
	} else if at.t < 200 || at.t > 500 {
		p.warn("", "%g °C is outside the -73 to 227 °C that the models are made for", tempC)
	}
	if !(at.tnom > 0) {
		p.fatal("tnom", "tnom is %g °C, which is not above absolute zero", at.tnom-zeroCelsius)
	}
	return at
}

// checkGeometry puts the defaults into an instance's numbers and rejects what
// no model can use.
func checkGeometry(p *params, g *Geometry) {
	if g.M == 0 {
		g.M = 1
	}
	if g.NF == 0 {
		g.NF = 1
	}
	if g.MulU0 == 0 {
		g.MulU0 = 1
	}
	for _, q := range []struct {
		name  string
		value float64
		unit  string
	}{{"w", g.W, "m"}, {"l", g.L, "m"}, {"m", g.M, ""}, {"nf", g.NF, ""}, {"mulu0", g.MulU0, ""}} {
		if !(q.value > 0) || math.IsInf(q.value, 0) {
			p.fatal(q.name, "%s is %s, but it must be above zero", q.name, engineering(q.value, q.unit))
		}
	}
	if g.W > 1 || g.L > 1 {
		p.warn("w", "w is %s and l is %s: a unit suffix is likely missing", engineering(g.W, "m"), engineering(g.L, "m"))
	}
	if !(math.Abs(g.DelVTO) < 1e3) {
		p.fatal("delvto", "delvto is %g V, which is no threshold shift", g.DelVTO)
	}
	for _, r := range []*float64{&g.RD, &g.RS} {
		if !(*r >= 0) || math.IsInf(*r, 0) {
			p.warn("", "an access resistance of %g Ω is not possible: 0 Ω is used", *r)
			*r = 0
		}
	}
	for _, a := range []*float64{&g.AD, &g.AS, &g.PD, &g.PS} {
		if !(*a >= 0) || math.IsInf(*a, 0) {
			*a = 0
		}
	}
}

// familyOf picks the model by type word and level, and says so when there is
// none: another model is never put in its place.
func familyOf(c Card, p *params) *family {
	if c.Vertical {
		return &vdmosFamily
	}
	level := p.get("level", 1)
	for i := range families {
		for _, l := range families[i].levels {
			if float64(l) == level {
				return &families[i]
			}
		}
	}
	p.fatal("level", "level %g is not modelled", level)
	return nil
}
