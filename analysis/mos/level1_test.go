package mos

import (
	"math"
	"testing"
)

// square is a level-1 card with the given parameters.
func square(pairs map[string]float64) Card {
	c := Card{Name: "sq", Polarity: NMOS, Params: map[string]float64{"level": 1}}
	for k, v := range pairs {
		c.Params[k] = v
	}
	return c
}

// Neamen, Microelectronics, example 3.1 (title from memory): kW/L = 0.4 mA/V²,
// VT = 1 V.
func TestSquareLawRegions(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": 1, "kp": 0.4e-3}), sized(1e-6, 1e-6), 27)
	for _, c := range []struct {
		vgs, vds, id float64
		region       Region
	}{
		{2, 4.5, 0.2e-3, Saturation},
		{3, 1, 0.6e-3, Triode},
		{3, 4.5, 0.8e-3, Saturation},
	} {
		p := d.Eval(c.vgs, c.vds, 0)
		within(t, "Id", p.Id, c.id, 0.005, 0)
		if v := Decide(p, 0); v.Region != c.region || v.Edge != "" {
			t.Errorf("VGS=%g VDS=%g: %s, want %s", c.vgs, c.vds, v, c.region)
		}
	}
	within(t, "Vdsat", d.Eval(3, 4.5, 0).Vdsat, 2, 0.005, 0)
}

// A switch of 80 µA/V², W/L = 10/1.2, VT = 0.8 V at VDS = 0.1 V (textbook
// problem 3.1, from memory): current, chord resistance and the small-VDS law.
func TestSwitchResistance(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": 0.8, "kp": 80e-6}), sized(10e-6, 1.2e-6), 27)
	for _, c := range []struct{ vgs, id, ron, ron0 float64 }{
		{1, 10.0e-6, 10.0e3, 7500},
		{2, 76.7e-6, 1304, 1250},
		{3, 143e-6, 698, 682},
	} {
		p := d.Eval(c.vgs, 0.1, 0)
		within(t, "Id", p.Id, c.id, 0.005, 0)
		within(t, "Ron", p.Ron, c.ron, 0.005, 0)
		within(t, "Ron0", p.Ron0, c.ron0, 0.005, 0)
		// Shichman & Hodges 1968: the chord over its limit is 1/(1 - VDS/2Vov).
		within(t, "Ron/Ron0", p.Ron/p.Ron0, 1/(1-0.1/(2*p.Vov)), 1e-12, 0)
	}
}

// Rabaey, Digital Integrated Circuits, example 2.8 (from memory).
func TestBodyEffect(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": 0.75, "gamma": 0.54, "phi": 0.6}), sized(1e-6, 1e-6), 27)
	within(t, "Vth", d.Eval(2, 1, -5).Vth, 1.610, 0.005, 0)
}

func TestAccessResistanceSolved(t *testing.T) {
	card := square(map[string]float64{"vto": 0.5, "kp": 2e-4, "lambda": 0.05, "gamma": 0.4, "rd": 300, "rs": 200})
	bare := square(map[string]float64{"vto": 0.5, "kp": 2e-4, "lambda": 0.05, "gamma": 0.4})
	g := sized(20e-6, 1e-6)
	g.M, g.RD, g.RS = 3, 20, 10
	d := compile(t, card, g, 27)
	inner := compile(t, bare, sized(20e-6, 1e-6), 27)
	for _, v := range [][3]float64{{1.8, 0.05, 0}, {1.8, 1.8, -0.5}, {0.9, -0.7, -1}, {0.51, 1, 0}, {1.2, 0, 0}} {
		p := d.Eval(v[0], v[1], v[2])
		// One instance of three: the channel between its ends carries the current.
		i := p.Id / 3
		q := inner.Eval(v[0]-210*i, v[1]-530*i, v[2]-210*i)
		within(t, "Id", i, q.Id, 1e-12, 1e-18)
		slopesAgree(t, d, v)
	}
	// Both resistors in series at VDS = 0.
	p := d.Eval(1.2, 0, 0)
	within(t, "Ron", p.Ron*3, inner.Eval(1.2, 0, 0).Ron+530, 1e-12, 0)
}

// slopesAgree compares the conductances with central differences.
func slopesAgree(t testing.TB, d *Device, v [3]float64) {
	t.Helper()
	p := d.Eval(v[0], v[1], v[2])
	const h = 1e-5
	for i, got := range []float64{p.Gm, p.Gds, p.Gmb} {
		up, down := v, v
		up[i] += h
		down[i] -= h
		want := (d.Eval(up[0], up[1], up[2]).Id - d.Eval(down[0], down[1], down[2]).Id) / (2 * h)
		within(t, []string{"gm", "gds", "gmb"}[i], got, want, 1e-5, 1e-9)
	}
}

func TestSheetResistance(t *testing.T) {
	c := square(map[string]float64{"vto": 0.5, "rsh": 20})
	g := sized(1e-6, 1e-6)
	g.NRD, g.NRS = 3, 0.5
	d := compile(t, c, g, 27)
	if d.rd.fixed != 60 || d.rs.fixed != 10 {
		t.Errorf("rd %g rs %g, want 60 and 10", d.rd.fixed, d.rs.fixed)
	}
	d, notes := Compile(c, sized(1e-6, 1e-6), 27)
	if d.rd.fixed != 20 || len(notes) != 2 {
		t.Errorf("unstated squares: rd %g, notes %v", d.rd.fixed, notes)
	}
}

func TestDelVTOAndMobilityFactor(t *testing.T) {
	c := square(map[string]float64{"vto": -0.5, "kp": 1e-4})
	c.Polarity = PMOS
	g := sized(1e-6, 1e-6)
	g.DelVTO, g.MulU0 = 0.1, 2
	d := compile(t, c, g, 27)
	p := d.Eval(-1.5, -3, 0)
	// The shift has the sign of the card's VTO: here it makes the device stronger.
	within(t, "Vth", p.Vth, 0.4, 1e-12, 0)
	within(t, "Id", p.Id, -1e-4*1.1*1.1, 1e-12, 0)
}

func TestShortChannelIsRejected(t *testing.T) {
	d, notes := Compile(square(map[string]float64{"ld": 0.6e-6}), sized(1e-6, 1e-6), 27)
	if d != nil || len(notes) == 0 || !notes[len(notes)-1].Fatal {
		t.Fatalf("device %v, notes %v", d, notes)
	}
	if got, want := notes[0].Text, "the effective channel length is -200 nm, not above zero"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestNoChannelBelowThreshold(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": 0.5}), sized(1e-6, 1e-6), 27)
	p := d.Eval(0.4, 1, 0)
	if p.Id != 0 || !math.IsInf(p.Ron, 1) || !math.IsInf(p.Ron0, 1) || !math.IsNaN(p.Slope) {
		t.Errorf("%+v", p)
	}
}
