package mos

import (
	"bufio"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"testing"
)

const tables = "../../testdata/mos"

// readCards reads `.model` cards of one parameter a line, "+ name = value".
func readCards(file string) map[string]Card {
	f, err := os.Open(filepath.Join(tables, file))
	if err != nil {
		panic(err)
	}
	defer f.Close()
	cards := map[string]Card{}
	var last Card
	for in := bufio.NewScanner(f); in.Scan(); {
		w := strings.Fields(in.Text())
		switch {
		case len(w) == 3 && w[0] == ".model":
			last = Card{Name: w[1], Polarity: NMOS, Params: map[string]float64{}}
			if w[2] == "pmos" {
				last.Polarity = PMOS
			}
			cards[w[1]] = last
		case len(w) == 4 && w[0] == "+":
			v, err := strconv.ParseFloat(w[3], 64)
			if w[3] == "ekv26" {
				v, err = 44, nil
			}
			if err != nil {
				panic(err)
			}
			last.Params[w[1]] = v
		}
	}
	return cards
}

var allCards = sync.OnceValue(func() map[string]Card {
	all := readCards("cards.spice")
	for name, c := range readCards("sky130_bins.spice") {
		all[name] = c
	}
	return all
})

func card(t testing.TB, name string) Card {
	t.Helper()
	c, ok := allCards()[name]
	if !ok {
		t.Fatalf("no card %q", name)
	}
	return c
}

// row is one line of a table by column name.
type row map[string]string

func (r row) num(t testing.TB, name string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[name], 64)
	if err != nil {
		t.Fatalf("column %s: %v", name, err)
	}
	return v
}

func readTable(t testing.TB, file string) []row {
	t.Helper()
	f, err := os.Open(filepath.Join(tables, file))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []row
	for _, l := range lines[1:] {
		r := row{}
		for i, name := range lines[0] {
			r[name] = l[i]
		}
		rows = append(rows, r)
	}
	return rows
}

// compile is Compile for a card that must work without a note.
func compile(t testing.TB, c Card, g Geometry, tempC float64) *Device {
	t.Helper()
	d, notes := Compile(c, g, tempC)
	if d == nil {
		t.Fatalf("%s: %v", c.Name, notes)
	}
	return d
}

// sized is a geometry of width and length alone, in metres.
func sized(w, l float64) Geometry {
	g := Unstated()
	g.W, g.L = w, l
	return g
}

// within fails unless got is want to a relative tolerance, or to an absolute one.
func within(t testing.TB, what string, got, want, rel, abs float64) {
	t.Helper()
	if !(math.Abs(got-want) <= math.Max(rel*math.Abs(want), abs)) {
		t.Errorf("%s = %.14g, want %.14g (off by %.2g)", what, got, want, (got-want)/want)
	}
}
