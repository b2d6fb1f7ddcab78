package spelling

import "testing"

func TestNearest(t *testing.T) {
	known := []string{"vth0", "voff", "vsat", "nfactor"}
	for name, want := range map[string]string{
		"vtho": "vth0", "vht0": "vth0", "nfacotr": "nfactor", "vsta": "vsat", "xyz": "", "lambda": "",
	} {
		if got := Nearest(name, known); got != want {
			t.Errorf("%s: %q, want %q", name, got, want)
		}
	}
}
