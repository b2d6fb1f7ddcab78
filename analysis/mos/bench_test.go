package mos

import "testing"

var sink Point

// evaluations has a card of every model, at a bias in triode.
var evaluations = []struct {
	card string
	w, l float64
}{
	{"l1a", 1e-5, 1e-6}, {"l2a", 3e-6, 1e-6}, {"l3a", 3e-6, 6e-7},
	{"ekv1", 1e-5, 1e-6}, {"b3a", 2e-6, 2.5e-7}, {"b4a", 4e-6, 1e-7}, {"b4d", 2e-6, 1.2e-7},
	{"sky130_nfet_01v8_bin.8", 7e-6, 1.5e-7},
}

func BenchmarkEval(b *testing.B) {
	for _, e := range evaluations {
		d := compile(b, card(b, e.card), sized(e.w, e.l), 27)
		b.Run(e.card, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				sink = d.Eval(1.2, 0.3, -0.2)
			}
		})
	}
}

func TestEvalDoesNotAllocate(t *testing.T) {
	for _, e := range evaluations {
		c := card(t, e.card)
		d := compile(t, c, sized(e.w, e.l), 27)
		g := sized(e.w, e.l)
		g.RS = 100
		r := compile(t, c, g, 27)
		n := testing.AllocsPerRun(100, func() {
			sink = d.Eval(1.2, 0.3, -0.2)
			sink = r.Eval(1.2, -0.3, 0.2)
		})
		if n != 0 {
			t.Errorf("%s: %g allocations an evaluation", e.card, n)
		}
	}
}
