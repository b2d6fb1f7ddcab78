package circuit_test

import "testing"

func TestHierarchicalNames(t *testing.T) {
	c := loadText(
		"X1 in out pair",
		"X.2 in mid pair",
		"R.a in mid 1k",
		"R1 in x1.mid 2k",
		".subckt pair a b",
		"XSW a Mid switch", "XSW2 Mid b switch",
		".ends",
		".subckt switch a b",
		"M3 a b 0 0 nch W=1u L=1u",
		".ends",
		".model nch nmos vto=0.5",
	).Main
	for name, depth := range map[string]int{
		"in": 0, "OUT": 0, "0": 0, "gnd": 0,
		"x1.mid": 0, // the net of that very name goes before the one inside x1
		"x1.a":   1, "X1.b": 1, "x.2.mid": 1, "x1.xsw.a": 2, "x.2.XSW2.b": 2,
	} {
		got, ok := c.ResolveNet(name)
		if !ok || len(got.Path) != depth {
			t.Errorf("net %s: found %v, depth %d, want %d", name, ok, len(got.Path), depth)
		}
	}
	for name, depth := range map[string]int{"r.a": 0, "R1": 0, "x1.xsw.m3": 2, "x.2.xsw2.M3": 2} {
		got, ok := c.ResolveDevice(name)
		if !ok || got.Device == nil || len(got.Path) != depth {
			t.Errorf("device %s: found %v, depth %d, want %d", name, ok, len(got.Path), depth)
		}
	}
	if got, ok := c.ResolveInstance("x1.xsw"); !ok || got.Instance.Spelt != "XSW" {
		t.Errorf("instance x1.xsw: %v", got.Instance)
	}
	for _, name := range []string{"", ".", "x1", "x1.", "x1.none", "none.mid", "x1.xsw.m3.d"} {
		if _, ok := c.ResolveNet(name); ok {
			t.Errorf("net %q exists", name)
		}
	}
}
