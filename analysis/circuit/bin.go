package circuit

import (
	"fmt"
	"math"
	"sort"
	"strings"
	"sync"

	"triodeck/parser"
)

// binTolerance widens a bin's limits by a fraction, so that a length written in
// micrometres and scaled still meets a limit written in metres.
const binTolerance = 1e-6

// BinChoice is what a size finds among the bins of a model.
type BinChoice struct {
	Model  *Model      // the bin, evaluated; nil if none covers the size
	Also   []*ModelDef // further bins that cover it
	Failed []error     // limits that did not evaluate
}

// binLimits are a bin's limits in metres; an end that the card leaves out is infinite.
type binLimits struct {
	def            *ModelDef
	l0, l1, w0, w1 float64
}

// binTable is the limits of all bins of a model, evaluated when first asked for.
type binTable struct {
	once   sync.Once
	bins   []binLimits
	failed []error
}

// Bin evaluates the bin of a model for a channel of length l and width w (one
// finger), in metres; nil if no bin covers the size, or if the model has no bins.
func (e *Env) Bin(m *Model, l, w float64) *Model { return e.ChooseBin(m, l, w).Model }

// ChooseBin picks the bin of a model for a channel of length l and width w (one
// finger), in metres: LMIN <= l < LMAX and WMIN <= w < WMAX, as in the binning
// of the BSIM4 manual. The upper limits count as inside where no bin begins there.
func (e *Env) ChooseBin(m *Model, l, w float64) BinChoice {
	t := e.table(m)
	c := BinChoice{Failed: t.failed}
	covering := t.covering(l, w)
	if len(covering) > 0 {
		c.Model, c.Also = e.Model(covering[0]), covering[1:]
	}
	return c
}

// fits says whether a bin of the model covers a size.
func (e *Env) fits(m *Model, l, w float64) bool { return len(e.table(m).covering(l, w)) > 0 }

func (t *binTable) covering(l, w float64) []*ModelDef {
	var inside []*ModelDef
	var edge *ModelDef
	for i := range t.bins {
		b := &t.bins[i]
		inL, edgeL := within(b.l0, b.l1, l)
		inW, edgeW := within(b.w0, b.w1, w)
		switch {
		case inL && inW:
			inside = append(inside, b.def)
		case edge == nil && (inL || edgeL) && (inW || edgeW):
			edge = b.def
		}
	}
	if inside == nil && edge != nil {
		return []*ModelDef{edge}
	}
	return inside
}

// within says whether a size lies in [lo, hi), or at hi.
func within(lo, hi, size float64) (inside, edge bool) {
	if size < lo*(1-binTolerance) {
		return false, false
	}
	if size < hi*(1-binTolerance) {
		return true, false
	}
	return false, size <= hi*(1+binTolerance)
}

func (e *Env) table(m *Model) *binTable {
	if m.table == nil {
		return &binTable{}
	}
	m.table.once.Do(func() {
		for _, def := range m.Bins {
			b, err := e.limitsOf(def)
			if err != nil {
				m.table.failed = append(m.table.failed, err)
				continue
			}
			m.table.bins = append(m.table.bins, b)
		}
	})
	return m.table
}

// limitsOf evaluates a bin's limits and nothing else of its card.
func (e *Env) limitsOf(def *ModelDef) (binLimits, error) {
	b := binLimits{def: def, l1: math.Inf(1), w1: math.Inf(1)}
	at := e.of(def.Scope)
	if at == nil {
		return b, nil
	}
	cards := at.cards(def)
	for c := len(cards) - 1; c >= 0; c-- { // what the card itself states comes last
		card := cards[c]
		for k := range card.def.Params {
			p := &card.def.Params[k]
			if len(p.Name.Text) != len("lmin") {
				continue
			}
			var to *float64
			switch parser.Fold(p.Name.Text) {
			case "lmin":
				to = &b.l0
			case "lmax":
				to = &b.l1
			case "wmin":
				to = &b.w0
			case "wmax":
				to = &b.w1
			default:
				continue
			}
			v := card.env.modelValue(card.def, p)
			if v.Err != nil {
				return b, v.Err
			}
			*to = v.V
		}
	}
	return b, nil
}

// maxRanges is how many ranges of bins a message lists.
const maxRanges = 24

// covered lists what the bins of a model cover: for each range of lengths the
// widths, bins that touch being one range.
func (e *Env) covered(m *Model) string {
	bins := append([]binLimits(nil), e.table(m).bins...)
	sort.SliceStable(bins, func(a, b int) bool {
		x, y := &bins[a], &bins[b]
		switch {
		case x.l0 != y.l0:
			return x.l0 < y.l0
		case x.l1 != y.l1:
			return x.l1 < y.l1
		}
		return x.w0 < y.w0
	})
	var joined []binLimits
	for _, b := range bins {
		if k := len(joined) - 1; k >= 0 && joined[k].l0 == b.l0 && joined[k].l1 == b.l1 && b.w0 <= joined[k].w1*(1+binTolerance) {
			joined[k].w1 = math.Max(joined[k].w1, b.w1)
			continue
		}
		joined = append(joined, b)
	}
	// Lengths with the same widths go together.
	var widths []string
	lengths := map[string][]string{}
	for _, b := range joined {
		w := span(b.w0, b.w1)
		if lengths[w] == nil {
			widths = append(widths, w)
		}
		lengths[w] = append(lengths[w], span(b.l0, b.l1))
	}
	var words []string
	left := maxRanges
	for _, w := range widths {
		l := lengths[w]
		if len(l) > left {
			words = append(words, fmt.Sprintf("and %d ranges more", len(joined)-maxRanges))
			break
		}
		left -= len(l)
		words = append(words, fmt.Sprintf("W %s at L %s", w, strings.Join(l, ", ")))
	}
	if len(words) == 0 {
		return "nothing that could be evaluated"
	}
	return strings.Join(words, "; ")
}

func span(lo, hi float64) string {
	switch {
	case math.IsInf(hi, 1) && lo <= 0:
		return "of any size"
	case math.IsInf(hi, 1):
		return "from " + metres(lo)
	}
	return metres(lo) + " to " + metres(hi)
}
