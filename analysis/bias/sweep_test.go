package bias

import "testing"

func TestGridHasEveryCornerAndStaysBounded(t *testing.T) {
	for k := 0; k <= 10; k++ {
		g := grid(k, 1)
		if len(g) > sampleBudget {
			t.Errorf("%d ranges: %d samples, more than %d", k, len(g), sampleBudget)
		}
		corners := 0
		for _, s := range g {
			ends := 0
			for _, v := range s {
				if v == 0 || v == 1 {
					ends++
				}
			}
			if ends == k {
				corners++
			}
		}
		if want := 1 << k; corners != want {
			t.Errorf("%d ranges: %d samples with every range at an end, want %d", k, corners, want)
		}
	}
}

func TestGridOfManyRangesTakesEachToItsEnds(t *testing.T) {
	const k = 40
	g := grid(k, 1)
	if len(g) != 2*k+3 {
		t.Fatalf("%d samples, want %d", len(g), 2*k+3)
	}
	for a := range k {
		low, high := false, false
		for _, s := range g {
			low = low || s[a] == 0
			high = high || s[a] == 1
		}
		if !low || !high {
			t.Errorf("range %d is not taken to both ends", a)
		}
	}
}

func TestGridNarrowsUnderAnOuterSweep(t *testing.T) {
	if n := len(grid(1, 65)); n*65 > sampleBudget+65 {
		t.Errorf("%d samples over 65 outer ones", n*65)
	}
}
