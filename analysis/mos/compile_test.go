package mos

import (
	"strings"
	"testing"
)

func noteOn(notes []Note, param string) string {
	for _, n := range notes {
		if n.Param == param {
			return n.Text
		}
	}
	return ""
}

func TestLevelNotModelled(t *testing.T) {
	d, notes := Compile(square(map[string]float64{"level": 70}), sized(1e-6, 1e-6), 27)
	if d != nil || len(notes) != 1 || !notes[0].Fatal || notes[0].Text != "level 70 is not modelled" {
		t.Errorf("device %v, notes %v", d, notes)
	}
}

func TestUnknownParameter(t *testing.T) {
	d, notes := Compile(square(map[string]float64{"gama": 0.5}), sized(1e-6, 1e-6), 27)
	if d == nil {
		t.Fatal(notes)
	}
	want := `"gama" is not a parameter of level 1: did you mean "gamma"?`
	if got := noteOn(notes, "gama"); got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestGeometryIsChecked(t *testing.T) {
	for _, g := range []Geometry{sized(0, 1e-6), sized(1e-6, -1e-6), {W: 1e-6, L: 1e-6, M: -1}} {
		if d, notes := Compile(square(nil), g, 27); d != nil || !strings.Contains(notes[0].Text, "must be above zero") {
			t.Errorf("%+v: %v", g, notes)
		}
	}
	if _, notes := Compile(square(nil), sized(10, 1), 27); noteOn(notes, "w") == "" {
		t.Error("a width of 10 m goes unnoticed")
	}
	if d, _ := Compile(square(nil), sized(1e-6, 1e-6), -300); d != nil {
		t.Error("evaluates below absolute zero")
	}
}
