package workspace_test

import (
	"context"
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"triodeck/analysis/workspace"
)

// The tolerances of the tables themselves, see analysis/mos: relative, and
// absolute where a table prints zero.
const (
	pathRel = 1e-9
	pathAbs = 1e-12
	// gmbs of the BSIM3 table at Vbs = 0 carries an error of about 1e-5.
	zeroBulkRel = 2e-5
)

// process is a library as foundries lay them out: a corner's section that
// includes the cards, in bins and not, and transistors wrapped in subckts whose
// size is in micrometres.
const process = `* process
.lib tt
.option scale=1u
.include "cards.spice"
.include "sky130_bins.spice"
.subckt nfet g d b s
.param w=1 l=0.15 nf=1
Mn d g s b sky130_nfet_01v8_bin W={w} L={l} nf={nf}
.ends
.subckt pfet s g b d w=1 l=0.15
Mp d g s b sky130_pfet_01v8_bin W='w' L='l'
.ends
.endl
`

// TestFromFileToNumber runs every row of the device tables through decks that
// call the library's section: what is held is the path, not the formula alone.
func TestFromFileToNumber(t *testing.T) {
	for _, table := range []string{"level1", "level2", "level3", "ekv26", "bsim3", "bsim4", "swap"} {
		t.Run(table, func(t *testing.T) {
			rows := tableRows(t, table)
			byTemperature := map[string][]map[string]string{}
			for _, r := range rows {
				byTemperature[r["T"]] = append(byTemperature[r["T"]], r)
			}
			for temperature, rows := range byTemperature {
				checkDeck(t, table, temperature, rows)
			}
		})
	}
}

func checkDeck(t *testing.T, table, temperature string, rows []map[string]string) {
	t.Helper()
	files := workspace.Map{"top/deck.sp": deckOf(temperature, rows), "pdk/process.lib": process}
	for _, name := range []string{"cards.spice", "sky130_bins.spice"} {
		text, err := os.ReadFile(filepath.Join("../../testdata/mos", name))
		if err != nil {
			t.Fatal(err)
		}
		files["pdk/"+name] = string(text)
	}
	for path, text := range files {
		if clean := filepath.FromSlash(path); clean != path {
			files[clean] = text
		}
	}
	result := workspace.New(files).Deck(filepath.FromSlash("top/deck.sp")).Bias(context.Background())
	seen := 0
	for row := range result.Rows(result.Runs[0]) {
		name, _, _ := strings.Cut(row.Path, ".")
		i, err := strconv.Atoi(name[1:])
		if err != nil {
			t.Fatalf("row %q", row.Path)
		}
		r := rows[i]
		if row.Points == nil {
			t.Fatalf("%s at %s: %s is not evaluated: %s %v", r["card"], temperature, row.Path, row.Reason, row.Missing)
		}
		seen++
		p := row.Points[0]
		sign := float64(row.Polarity)
		for column, got := range map[string]float64{
			"id": p.Id, "gm": p.Gm, "gds": p.Gds, "gmbs": p.Gmb, "vth": sign * p.Vth, "vdsat": p.Vdsat,
		} {
			text, ok := r[column]
			if !ok {
				continue
			}
			want := number(t, text)
			rel, abs := pathRel, 0.0
			if want == 0 {
				abs = pathAbs
			}
			if table == "bsim3" && column == "gmbs" && r["vbs"] == "0" {
				rel = zeroBulkRel
			}
			if diff := math.Abs(got - want); !(diff <= rel*math.Abs(want)+abs) {
				t.Fatalf("%s, W %s, L %s, T %s, vgs %s, vds %s, vbs %s: %s is %.14g, want %.14g", r["card"], r["W"], r["L"], temperature, r["vgs"], r["vds"], r["vbs"], column, got, want)
			}
		}
	}
	if seen != len(rows) {
		t.Fatalf("%d of %d rows have a device", seen, len(rows))
	}
}

// deckOf writes one device a row. Those of the binned cards go through the
// wrappers, whose ports are in another order; the others name their card.
func deckOf(temperature string, rows []map[string]string) string {
	var b strings.Builder
	b.WriteString("path from file to number\n.lib '../pdk/process.lib' TT\n.temp " + temperature + "\n")
	for i, r := range rows {
		w, l := micrometres(r["W"]), micrometres(r["L"])
		nf := ""
		if r["NF"] != "" && r["NF"] != "1" {
			nf = " nf=" + r["NF"]
		}
		fmt.Fprintf(&b, "*@ bias v(d%d)=%s v(g%d)=%s v(b%d)=%s\n", i, r["vds"], i, r["vgs"], i, r["vbs"])
		switch {
		case strings.HasPrefix(r["card"], "sky130_nfet"):
			fmt.Fprintf(&b, "X%d g%d d%d b%d 0 nfet w=%s l=%s%s\n", i, i, i, i, w, l, nf)
		case strings.HasPrefix(r["card"], "sky130_pfet"):
			fmt.Fprintf(&b, "X%d 0 g%d b%d d%d pfet w=%s l=%s%s\n", i, i, i, i, w, l, nf)
		default:
			fmt.Fprintf(&b, "M%d d%d g%d 0 b%d %s W=%s L=%s%s\n", i, i, i, i, r["card"], w, l, nf)
		}
	}
	return b.String()
}

func micrometres(metres string) string {
	x, err := strconv.ParseFloat(metres, 64)
	if err != nil {
		return metres
	}
	return strconv.FormatFloat(x*1e6, 'g', 15, 64)
}

func tableRows(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open(filepath.Join("../../testdata/mos", name+".csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil || len(records) < 2 {
		t.Fatalf("%d records: %v", len(records), err)
	}
	var rows []map[string]string
	for _, rec := range records[1:] {
		row := map[string]string{}
		for i, column := range records[0] {
			row[column] = rec[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}
