package mos

import (
	"fmt"
	"testing"
)

// Agreement with the tables: relative, and absolute where a table prints zero
// (A, S and V alike).
const (
	tableRel = 1e-9
	tableAbs = 1e-12
)

// zeroBulkRel is for gmbs of the BSIM3 table at Vbs = 0, where its own derivative
// carries an error of about 1e-5: the current, the threshold and every other row
// agree to tableRel on both sides, and TestDerivatives holds the slope there.
const zeroBulkRel = 2e-5

func TestTables(t *testing.T) {
	for _, file := range []string{"level1.csv", "level2.csv", "level3.csv", "ekv26.csv", "bsim3.csv", "bsim4.csv", "swap.csv"} {
		t.Run(file, func(t *testing.T) { checkTable(t, file) })
	}
}

// checkTable holds every row and every column of a table.
func checkTable(t *testing.T, file string) {
	rows := readTable(t, file)
	if len(rows) == 0 {
		t.Fatal("the table is empty")
	}
	for i, r := range rows {
		c := card(t, r["card"])
		g := sized(r.num(t, "W"), r.num(t, "L"))
		if _, ok := r["NF"]; ok {
			g.NF = r.num(t, "NF")
		}
		d := compile(t, c, g, r.num(t, "T"))
		p := d.Eval(r.num(t, "vgs"), r.num(t, "vds"), r.num(t, "vbs"))
		row := fmt.Sprintf("line %d, %s: ", i+2, r["card"])
		for name, got := range columns(d, p) {
			if _, ok := r[name]; ok {
				want := r.num(t, name)
				abs := 0.0
				if want == 0 {
					abs = tableAbs
				}
				rel := tableRel
				if file == "bsim3.csv" && name == "gmbs" && r["vbs"] == "0" {
					rel = zeroBulkRel
				}
				within(t, row+name, got, want, rel, abs)
			}
		}
		if t.Failed() {
			t.FailNow()
		}
	}
}

// columns gives a point by the names of the tables.
func columns(d *Device, p Point) map[string]float64 {
	c := d.core.eval(p.VGS, p.VDS, p.VBS)
	return map[string]float64{
		"id": p.Id, "gm": p.Gm, "gds": p.Gds, "gmbs": p.Gmb,
		"vth": d.s * p.Vth, "vdsat": p.Vdsat,
		"vgsteff": c.vgsteff, "n": c.n, "abulk": c.abulk,
		"vp": c.vp, "if": c.ic, "ir": c.ir, "ueff": c.ueff, "rds": c.rds, "coxeff": c.coxeff,
	}
}
