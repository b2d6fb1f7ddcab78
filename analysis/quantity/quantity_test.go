package quantity

import (
	"math"
	"testing"
)

func TestFormat(t *testing.T) {
	for _, c := range []struct {
		v    float64
		unit string
		want string
	}{
		{112.3, "Ω", "112 Ω"},
		{0.0089, "S", "8.90 mS"},
		{999.96, "Ω", "1.00 kΩ"},
		{999.4, "Ω", "999 Ω"},
		{-0.045, "V", "-45.0 mV"},
		{0, "V", "0 V"},
		{1e-6, "m", "1.00 µm"},
		{2.5, "", "2.50"},
		{1.23e-21, "A", "1.23e-21 A"},
		{4.2e19, "Ω", "4.20e+19 Ω"},
		{1e12, "Ω", "1.00 TΩ"},
		{math.Inf(1), "Ω", "∞"},
		{math.NaN(), "Ω", "–"},
	} {
		if got := Format(c.v, c.unit); got != c.want {
			t.Errorf("Format(%g, %q) = %q, want %q", c.v, c.unit, got, c.want)
		}
	}
}

func TestVolts(t *testing.T) {
	for v, want := range map[float64]string{1.8: "1.800 V", -0.045: "-45.0 mV", 0: "0 V", 3300: "3.30 kV"} {
		if got := Volts(v); got != want {
			t.Errorf("Volts(%g) = %q, want %q", v, got, want)
		}
	}
}
