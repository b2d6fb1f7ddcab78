package mos

import (
	"math"
	"testing"
)

func TestRegionNames(t *testing.T) {
	for r, want := range map[Region]string{
		Cutoff: "cutoff", WeakInversion: "weak inversion", Triode: "triode",
		DeepTriode: "deep triode", Saturation: "saturation",
	} {
		if r.String() != want {
			t.Errorf("%d is %q, want %q", r, r, want)
		}
	}
}

// The limits of moderate inversion, by the closed form of the charge equation
// (Enz, Krummenacher & Vittoz 1995): v = -2.21 at 0.1, 0.76 at 1, 6.40 at 10.
func TestInversionCoefficient(t *testing.T) {
	for _, c := range []struct{ ic, v float64 }{{0.01, -4.60}, {0.1, -2.21}, {1, 0.76}, {10, 6.40}, {100, 21.3}} {
		within(t, "v", pinchOff(c.ic), c.v, 0, 0.05)
		within(t, "ic", Inversion(pinchOff(c.ic)), c.ic, 1e-13, 0)
	}
	for i := range 4000 {
		v := -600 + 0.37*float64(i)
		q := inversionCharge(v)
		within(t, "2q + ln q", 2*q+math.Log(q), v, 1e-14, 1e-14)
		slope := (Inversion(v+1e-4) - Inversion(v-1e-4)) / 2e-4
		within(t, "di/dv", inversion(dual{v: v, g: 1}).g, slope, 1e-6, 1e-300)
	}
}

// Level 1, threshold 0.5 V: the label at each bias.
func TestLevel1Labels(t *testing.T) {
	c := square(map[string]float64{"vto": 0.5, "kp": 2e-4})
	d := compile(t, c, sized(10e-6, 1e-6), 27)
	for _, x := range []struct {
		vgs, vds float64
		want     string
	}{
		{0, 1, "cutoff"},
		{0, 0, "cutoff"},
		{0.20, 1, "cutoff"},         // under the leakage floor
		{0.40, 1, "weak inversion"}, // IC 0.06 by the assumed slope factor
		{0.40, 0, "weak inversion"},
		{0.47, 1, "weak inversion"}, // the model carries nothing here
		{0.495, 1, "weak inversion, at the edge of saturation"},
		{0.56, 1, "saturation"},
		{1.5, 2, "saturation"},
		{1.5, 1.005, "saturation, at the edge of triode"},
		{1.5, 0.995, "triode, at the edge of saturation"},
		{1.5, 0.5, "triode"},
		{1.5, 0.155, "triode, at the edge of deep triode"},
		{1.5, 0.145, "deep triode, at the edge of triode"},
		{1.5, 0.05, "deep triode"},
		{1.5, 0, "deep triode"},
		{1.5, -0.05, "deep triode"}, // swapped
	} {
		v := Decide(d.Eval(x.vgs, x.vds, 0), 0)
		if v.String() != x.want {
			t.Errorf("VGS=%g VDS=%g: %q, want %q", x.vgs, x.vds, v, x.want)
		}
		if v.Assumed != (v.Region == WeakInversion) {
			t.Errorf("VGS=%g: assumed %v", x.vgs, v.Assumed)
		}
	}
}

func TestLeakFloor(t *testing.T) {
	if LeakFloor(10e-6) != 1e-9 || LeakFloor(10e-3) != 1e-8 {
		t.Error("floor is 1 nA, and 1 pA/µm for wide devices")
	}
	d := compile(t, square(map[string]float64{"vto": 0.5, "kp": 2e-4}), sized(10e-6, 1e-6), 27)
	p := d.Eval(0.4, 1, 0)
	if r := Decide(p, 1e-6).Region; r != Cutoff {
		t.Errorf("under a floor of 1 µA: %s, want cutoff", r)
	}
}

// Access resistance takes its share of VDS: at 3 V the channel sees less than
// the 2 V that it needs.
func TestRegionBehindAccessResistance(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": 1, "kp": 1e-3, "rd": 2000}), sized(1e-6, 1e-6), 27)
	p := d.Eval(3, 3, 0)
	if v := Decide(p, 0); v.Region != Triode || p.Margin() >= 0 || p.VDS < p.Vdsat {
		t.Errorf("%s, margin %g, VDS %g, Vdsat %g", v, p.Margin(), p.VDS, p.Vdsat)
	}
}

func TestJunctionJudgement(t *testing.T) {
	d := compile(t, square(map[string]float64{"vto": -0.5}), sized(10e-6, 1e-6), 27)
	for _, c := range []struct {
		vbs, vds   float64
		src, drain JunctionState
	}{
		{0, 1, JunctionReverse, JunctionReverse},
		{0.2, 1, JunctionNear, JunctionReverse},
		{0.5, 1, JunctionForward, JunctionReverse},
		{0, -0.6, JunctionReverse, JunctionForward},
	} {
		s, dr := d.Junctions(d.Eval(1, c.vds, c.vbs))
		if s.State != c.src || dr.State != c.drain {
			t.Errorf("VBS=%g VDS=%g: %+v %+v", c.vbs, c.vds, s, dr)
		}
	}
	within(t, "Ij", JunctionCurrent(0.6, 1e-14, 0.02585), 1e-14*math.Expm1(0.6/0.02585), 1e-15, 0)
	if j := JunctionCurrent(1e6, 1, 1e-3); math.IsInf(j, 0) {
		t.Error("the current overflows")
	}
}
