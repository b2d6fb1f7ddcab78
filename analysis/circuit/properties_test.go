package circuit_test

import (
	"context"
	"fmt"
	"strings"
	"sync"
	"testing"

	"pgregory.net/rapid"

	"triodeck/analysis/circuit"
)

func load(files deckFiles, options circuit.Options) *circuit.Design {
	return circuit.Load(context.Background(), files, "deck.sp", options)
}

// loadText loads one deck under a title line of its own.
func loadText(lines ...string) *circuit.Design {
	return load(deckFiles{"deck.sp": "title\n" + strings.Join(lines, "\n") + "\n"}, circuit.Options{})
}

// The order of top-level parameters changes no value.
func TestParameterOrderIsFree(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "parameters")
		lines := make([]string, n)
		for i := range lines {
			expr := fmt.Sprint(rapid.IntRange(1, 9).Draw(t, "constant"))
			if i > 0 {
				of := rapid.IntRange(0, i-1).Draw(t, "of")
				expr = fmt.Sprintf("p%d %s %s", of, rapid.SampledFrom([]string{"+", "-", "*"}).Draw(t, "operator"), expr)
			}
			lines[i] = fmt.Sprintf(".param p%d='%s'", i, expr)
		}
		want := loadText(lines...)
		got := loadText(rapid.Permutation(lines).Draw(t, "order")...)
		for i := range n {
			name := fmt.Sprintf("p%d", i)
			w, g := want.Main.Env.Param(name), got.Main.Env.Param(name)
			if !w.Set || w != g {
				t.Fatalf("%s is %v in one order and %v in another", name, w, g)
			}
		}
	})
}

// A circle of parameters is the same problem wherever it is entered and however
// its definitions are ordered, up to the order of the names.
func TestCircleIsOneProblem(t *testing.T) {
	lines := []string{".param a='b'", ".param b='c'", ".param c='a'", ".param d='a+b+c'"}
	rapid.Check(t, func(t *rapid.T) {
		d := loadText(rapid.Permutation(lines).Draw(t, "order")...)
		if len(d.Problems) != 1 || d.Problems[0].Kind != circuit.ParamCycle {
			t.Fatalf("want one circle, got %v", d.Problems)
		}
	})
}

// Instances share a cell exactly where their parameters have equal values.
func TestCellsFollowDistinctValues(t *testing.T) {
	spellings := map[int][]string{
		1: {"w=1u", "w='0.5u*2'", "W = 1e-6", "w={unit}"},
		2: {"w=2u", "w='2*unit'", "w=2e-06", ""},
		3: {"w=3u", "w='1u+2*unit'", "l=1u w=3u", "$X=4 w=3u"},
	}
	rapid.Check(t, func(t *rapid.T) {
		lines := []string{".param unit=1u", ".subckt cell a w=2u l=1u", "R1 a 0 'w/l'", ".ends"}
		values := rapid.SliceOfN(rapid.IntRange(1, 3), 1, 20).Draw(t, "widths")
		for i, v := range values {
			lines = append(lines, fmt.Sprintf("X%d n cell %s", i, rapid.SampledFrom(spellings[v]).Draw(t, "spelling")))
		}
		d := loadText(lines...)
		cells := map[int]*circuit.Cell{}
		for i, x := range d.Main.Instances {
			v := values[i]
			if x.Cell == nil {
				t.Fatalf("%s has no cell", x.Spelt)
			}
			if cells[v] != nil && cells[v] != x.Cell {
				t.Fatalf("%s has a cell of its own: %q", x.Spelt, x.Cell.Key)
			}
			for other, c := range cells {
				if other != v && c == x.Cell {
					t.Fatalf("width %d and %d share a cell", v, other)
				}
			}
			cells[v] = x.Cell
		}
	})
}

// Values are asked for by many goroutines at once and come out the same.
func TestEvaluationIsConcurrent(t *testing.T) {
	lines := []string{"X1 a cell", ".subckt cell p w=1u", "M1 p p 0 0 nch W=w L=1u", ".model nch.1 nmos vto='v50' lmin=0 lmax=1", ".ends", ".param v0=1"}
	for i := range 50 {
		lines = append(lines, fmt.Sprintf(".param v%d='v%d+1'", i+1, i))
	}
	d := loadText(lines...)
	cell := d.Main.Instances[0].Cell
	model := cell.Devices[0].Model
	var wait sync.WaitGroup
	for range 8 {
		wait.Go(func() {
			m := cell.Env.Bin(model, 1e-6, 1e-6)
			if m == nil || m.Params["vto"].V != 51 {
				t.Errorf("model %+v", m)
			}
			if v := cell.Env.Param("v50"); v.V != 51 || v.Err != nil {
				t.Errorf("v50 is %v", v)
			}
			if cell.DeviceByName("m1") != cell.Devices[0] {
				t.Error("m1 is not found")
			}
		})
	}
	wait.Wait()
}

// Loading stops when it is told to.
func TestCancelledLoadEnds(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	deck := "title\n" + strings.Repeat("R1 a b 1k\n", 100_000)
	d := circuit.Load(ctx, deckFiles{"deck.sp": deck}, "deck.sp", circuit.Options{})
	if len(d.Main.Devices) >= 100_000 {
		t.Error("the whole deck was built")
	}
}

// Decks made to explode end, with one problem that says so.
func TestExplosionsAreCut(t *testing.T) {
	files := deckFiles{}
	for i := range 40 { // each file includes the next twice
		files[fmt.Sprintf("f%d", i)] = fmt.Sprintf("* file\n.include f%d\n.include f%d\n", i+1, i+1)
	}
	files["f40"] = "* end\n"
	files["deck.sp"] = "title\n.include f0\n"

	var cells strings.Builder // each level has two calls with other values
	cells.WriteString("title\nX1 a s0 n=1\n")
	for i := range 40 {
		fmt.Fprintf(&cells, ".subckt s%d a n=1\nX1 a s%d n='2*n'\nX2 a s%d n='2*n+1'\n.ends\n", i, i+1, i+1)
	}
	cells.WriteString(".subckt s40 a n=1\nR1 a 0 'n'\n.ends\n")

	var functions strings.Builder
	functions.WriteString("title\n.func f0(x)='x'\nR1 a 0 'f60(1)'\n")
	for i := range 60 {
		fmt.Fprintf(&functions, ".func f%d(x)='f%d(x)+f%d(x)'\n", i+1, i, i)
	}
	for name, test := range map[string]struct {
		files deckFiles
		kind  circuit.ProblemKind
	}{
		"includes":  {files, circuit.TooDeep},
		"cells":     {deckFiles{"deck.sp": cells.String()}, circuit.TooDeep},
		"functions": {deckFiles{"deck.sp": functions.String()}, circuit.ParamInvalid},
	} {
		t.Run(name, func(t *testing.T) {
			d := load(test.files, circuit.Options{})
			if len(d.Problems) != 1 || d.Problems[0].Kind != test.kind {
				t.Errorf("want one problem of kind %d, got %d: %.200v", test.kind, len(d.Problems), d.Problems)
			}
		})
	}
}
