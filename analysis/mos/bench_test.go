package mos

import "testing"

var sink Point

func benchmark(b *testing.B, d *Device, vgs, vds, vbs float64) {
	b.ReportAllocs()
	for b.Loop() {
		sink = d.Eval(vgs, vds, vbs)
	}
}

func BenchmarkLevel1(b *testing.B) {
	benchmark(b, compile(b, card(b, "l1a"), sized(1e-5, 1e-6), 27), 1.2, 0.3, -0.2)
}
