package circuit

// binTolerance widens a bin's limits by a fraction, so that a length written in
// micrometres and scaled still meets a limit written in metres.
const binTolerance = 1e-6

// Bin evaluates the bin of a model for a channel of length l and width w (one
// finger), in metres: LMIN <= l < LMAX and WMIN <= w < WMAX, as in the binning
// of the BSIM4 manual. The upper limits count as inside where no bin begins
// there. It is nil if no bin covers the size, or if the model has no bins.
func (e *Env) Bin(m *Model, l, w float64) *Model {
	var edge *ModelDef
	for _, def := range m.Bins {
		inL, edgeL := e.covers(def, "lmin", "lmax", l)
		inW, edgeW := e.covers(def, "wmin", "wmax", w)
		if inL && inW {
			return e.Model(def)
		}
		if edge == nil && (inL || edgeL) && (inW || edgeW) {
			edge = def
		}
	}
	if edge == nil {
		return nil
	}
	return e.Model(edge)
}

// covers says whether a size lies in [lo, hi), or at hi.
func (e *Env) covers(def *ModelDef, lo, hi string, size float64) (inside, edge bool) {
	from, to := e.ModelParam(def, lo), e.ModelParam(def, hi)
	if from.Err != nil || to.Err != nil {
		return false, false
	}
	if from.Set && size < from.V*(1-binTolerance) {
		return false, false
	}
	if !to.Set || size < to.V*(1-binTolerance) {
		return true, false
	}
	return false, size <= to.V*(1+binTolerance)
}
