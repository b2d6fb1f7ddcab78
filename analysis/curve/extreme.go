package curve

import "math"

// Extreme is the least or greatest value of a series and where it stands.
type Extreme struct{ X, Y float64 }

// Extremes are the bounds of a series over its finite values; ok is false if it
// has none. Unlimited says whether it has values without limit.
func (s Series) Extremes(x []float64) (least, most Extreme, unlimited, ok bool) {
	for i := range x {
		unlimited = unlimited || math.IsInf(s.Hi[i], 1)
		if lo := s.Lo[i]; !math.IsInf(lo, 0) && !math.IsNaN(lo) && (!ok || lo < least.Y) {
			least = Extreme{x[i], lo}
			if !ok {
				most = least
			}
			ok = true
		}
		if hi := s.Hi[i]; ok && !math.IsInf(hi, 0) && !math.IsNaN(hi) && hi > most.Y {
			most = Extreme{x[i], hi}
		}
	}
	return least, most, unlimited, ok
}
