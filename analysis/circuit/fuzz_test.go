package circuit_test

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"triodeck/analysis/circuit"
	"triodeck/analysis/settings"
)

// FuzzLoad builds a design out of any set of files, the first being the root:
// it ends, its parts fit together, and the same files give the same design.
func FuzzLoad(f *testing.F) {
	seeds, _ := filepath.Glob("../../testdata/circuit/*.txtar")
	for _, path := range seeds {
		text, err := os.ReadFile(path)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(text)
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		if bytes.Contains(text, []byte("-- --")) {
			t.Skip("the archive's own reader does not survive a nameless file")
		}
		files, root := deckFiles{}, "deck.sp"
		ar := txtar.Parse(text)
		for i, file := range ar.Files {
			if i == 0 {
				root = file.Name
			}
			files[file.Name] = string(file.Data)
		}
		if len(ar.Files) == 0 {
			files[root] = string(text)
		}
		set := settings.Parse(settings.Name, []byte(files[settings.Name]))
		options := circuit.Options{Section: "ss", Facts: set.Facts, Roots: set.Roots}
		d := circuit.Load(context.Background(), files, root, options)
		checkDesign(t, d)
		again := circuit.Load(context.Background(), files, root, options)
		if dump(d) != dump(again) {
			t.Error("the same files give two designs")
		}
	})
}

// checkDesign tests what holds of every design.
func checkDesign(t *testing.T, d *circuit.Design) {
	t.Helper()
	if d.Root == nil || d.Top == nil || d.Main == nil || len(d.Docs) == 0 || d.Docs[0] != d.Root {
		t.Fatal("a part of the design is missing")
	}
	for _, p := range d.Problems {
		if p.Place.Doc == nil || p.Message == "" || p.Place.Span.Start < 0 || int(p.Place.Span.End) > len(p.Place.Doc.File.Src) {
			t.Errorf("problem without a place: %+v", p)
		}
	}
	seen := map[*circuit.Cell]bool{}
	checkCell(t, d.Main, seen)
	for _, c := range d.Alone {
		checkCell(t, c, seen)
	}
}

func checkCell(t *testing.T, c *circuit.Cell, seen map[*circuit.Cell]bool) {
	t.Helper()
	if seen[c] {
		return
	}
	seen[c] = true
	if len(c.Ports) != len(c.Scope.Ports) {
		t.Errorf("cell %s has %d ports of %d", c.Scope.Name, len(c.Ports), len(c.Scope.Ports))
	}
	pins, terminals := 0, 0
	for i, n := range c.Nets {
		pins += len(n.Pins)
		for _, p := range n.Pins {
			nets := []circuit.NetID(nil)
			if p.Device != nil {
				nets = p.Device.Nets
			} else {
				nets = p.Instance.Nets
			}
			if nets[p.Terminal] != circuit.NetID(i) {
				t.Errorf("cell %s: net %s has a pin that is elsewhere", c.Scope.Name, n.Name)
			}
		}
		if id, ok := c.NetByName(n.Name); !ok || id != circuit.NetID(i) {
			t.Errorf("cell %s: net %s is not found by its name", c.Scope.Name, n.Name)
		}
	}
	for _, x := range c.Devices {
		terminals += len(x.Nets)
	}
	for _, x := range c.Instances {
		terminals += len(x.Nets)
		if x.Cell != nil {
			if x.Cell.Scope != x.Def {
				t.Errorf("instance %s has the cell of another subckt", x.Spelt)
			}
			checkCell(t, x.Cell, seen)
		}
	}
	if pins != terminals {
		t.Errorf("cell %s: %d pins, %d terminals", c.Scope.Name, pins, terminals)
	}
	c.Wrapper()
}
