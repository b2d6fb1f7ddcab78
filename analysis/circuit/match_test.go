package circuit

import "testing"

func TestMatch(t *testing.T) {
	for _, c := range []struct {
		pattern, name string
		want          bool
	}{
		{"m1", "m1", true}, {"m1", "m12", false}, {"m*", "m12", true}, {"*", "", true},
		{"m_sw*", "m_sw1", true}, {"m?", "m1", true}, {"m?", "m", false}, {"*n*h", "nch", true},
		{"a*b*c", "axxbyyc", true}, {"a*b*c", "axxbyy", false}, {"??", "ab", true}, {"", "", true}, {"", "a", false},
	} {
		if got := Match(c.pattern, c.name); got != c.want {
			t.Errorf("Match(%q, %q) = %v", c.pattern, c.name, got)
		}
	}
}
