package bias

import "math"

// sampleBudget bounds the samples of one context; with one range it leaves
// maxPerAxis points, with several a coarser grid that still has the corners.
const (
	sampleBudget = 1025
	maxPerAxis   = 65
)

// grid gives, for k ranges over s samples that are there already, the position
// of each range in [0, 1] at each new sample; new sample i stands over old
// sample i / len(grid). Up to ten ranges every combination of ends is present;
// beyond that each range in turn goes to its ends while the others stand in the
// middle, and all stand at their ends together.
func grid(k, s int) [][]float64 {
	if k == 0 {
		return [][]float64{nil}
	}
	per := int(math.Pow(float64(sampleBudget)/float64(max(s, 1)), 1/float64(k)))
	per = min(per, maxPerAxis)
	if per < 2 {
		return star(k)
	}
	if per > 2 && per%2 == 0 {
		per-- // keep the middle
	}
	total := 1
	for range k {
		total *= per
	}
	out := make([][]float64, total)
	for i := range out {
		t := make([]float64, k)
		for a, rest := k-1, i; a >= 0; a-- {
			t[a] = float64(rest%per) / float64(per-1)
			rest /= per
		}
		out[i] = t
	}
	return out
}

// star is the bounded choice for many ranges: 2k+3 samples.
func star(k int) [][]float64 {
	at := func(fill float64, a int, v float64) []float64 {
		t := make([]float64, k)
		for i := range t {
			t[i] = fill
		}
		if a >= 0 {
			t[a] = v
		}
		return t
	}
	out := [][]float64{at(0, -1, 0), at(0.5, -1, 0), at(1, -1, 0)}
	for a := range k {
		out = append(out, at(0.5, a, 0), at(0.5, a, 1))
	}
	return out
}
