package bias

import (
	"context"
	"flag"
	"fmt"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser"
	"triodeck/parser/source"
)

var update = flag.Bool("update", false, "rewrite the expected output of the cases")

// files is a circuit.Reader over texts in memory.
type files map[string]string

func (f files) File(name string) (*parser.File, error) {
	text, ok := f[path.Clean(filepath.ToSlash(name))]
	if !ok {
		return nil, &fs.PathError{Op: "open", Path: name, Err: fs.ErrNotExist}
	}
	return parser.Parse([]byte(text)), nil
}

// cached gives each file's syntax once, as the contract of Reader asks.
type cached struct {
	from circuit.Reader
	have map[string]*parser.File
}

func (c cached) File(name string) (*parser.File, error) {
	if f := c.have[name]; f != nil {
		return f, nil
	}
	f, err := c.from.File(name)
	if err == nil {
		c.have[name] = f
	}
	return f, err
}

func analyse(from circuit.Reader, root string) *Result {
	reader := cached{from, map[string]*parser.File{}}
	ctx := context.Background()
	return Analyse(ctx, func(o circuit.Options) *circuit.Design { return circuit.Load(ctx, reader, root, o) })
}

// TestCases runs testdata/bias: a deck and what is found of it.
func TestCases(t *testing.T) {
	cases, err := filepath.Glob("../../testdata/bias/*.txtar")
	if err != nil || len(cases) == 0 {
		t.Fatalf("no cases: %v", err)
	}
	for _, name := range cases {
		t.Run(strings.TrimSuffix(filepath.Base(name), ".txtar"), func(t *testing.T) {
			archive, err := txtar.ParseFile(name)
			if err != nil {
				t.Fatal(err)
			}
			deck := files{}
			want := -1
			for i, f := range archive.Files {
				if f.Name == "want" {
					want = i
				} else {
					deck[f.Name] = string(f.Data)
				}
			}
			got := dump(analyse(deck, "deck.sp"))
			if *update {
				if want < 0 {
					archive.Files = append(archive.Files, txtar.File{Name: "want"})
					want = len(archive.Files) - 1
				}
				archive.Files[want].Data = []byte(got)
				if err := os.WriteFile(name, txtar.Format(archive), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			if want < 0 {
				t.Fatal("no want section")
			}
			if diff := cmp.Diff(string(archive.Files[want].Data), got); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// dump writes a result for a reader.
func dump(r *Result) string {
	var b strings.Builder
	for _, run := range r.Runs {
		fmt.Fprintf(&b, "mode %s, corner %s, %g C\n", orNone(run.Mode), orNone(run.Corner), run.TempC)
		for path, c := range r.Contexts(run) {
			fmt.Fprintf(&b, "  context %s, %d samples\n", orNone(path), c.Samples)
			for i, n := range c.Nodes {
				if circuit.NetID(i) == circuit.Ground {
					continue
				}
				fmt.Fprintf(&b, "    v(%s) %s %s, %s\n", c.Cell.Nets[i].Spelt, bounds(n.V), n.Source, n.Why)
			}
			for _, d := range c.Devices {
				b.WriteString("    " + dumpDevice(d) + "\n")
			}
		}
	}
	for _, p := range r.Problems {
		fmt.Fprintf(&b, "problem %s %s\n", at(p.Place), p.Message)
	}
	for _, c := range r.Checks() {
		status := [...]string{"met", "failed", "not judged"}[c.Status]
		fmt.Fprintf(&b, "check %s %s: %s, wanted %s, found %s", at(c.Place), status, c.Subject, c.Wanted, orNone(c.Found))
		if c.Reason != "" {
			fmt.Fprintf(&b, ", because %s", c.Reason)
		}
		fmt.Fprintf(&b, " (mode %s, corner %s, at %s, %d fail)\n", orNone(c.Mode), orNone(c.Corner), orNone(c.At), c.Fails)
	}
	return b.String()
}

func dumpDevice(d *Device) string {
	if d.Points == nil {
		return fmt.Sprintf("%s not evaluated: %s missing %v", d.Device.Spelt, orNone(d.Reason), d.Missing)
	}
	var parts []string
	for _, name := range []string{"vgs", "vds", "vbs", "vov", "margin", "id", "gds", "ron"} {
		e, ok := d.Range(name)
		text := "none"
		if ok {
			text = show(e.Min, Unit(name))
			if e.Min != e.Max {
				text += ".." + show(e.Max, Unit(name))
			}
		}
		parts = append(parts, ShownPair(d.Polarity, name)+" "+text)
	}
	var regions []string
	for _, s := range d.Regions() {
		regions = append(regions, s.Region.String())
	}
	return fmt.Sprintf("%s %s %s: %s (%s)", d.Device.Spelt, d.Polarity, strings.Join(regions, " to "), strings.Join(parts, ", "), d.Source)
}

func bounds(v []float64) string {
	if v == nil {
		return "?"
	}
	lo, hi := v[0], v[0]
	for _, x := range v {
		lo, hi = min(lo, x), max(hi, x)
	}
	if lo == hi {
		return quantity.Volts(lo)
	}
	return quantity.Volts(lo) + ".." + quantity.Volts(hi)
}

func orNone(s string) string {
	if s == "" {
		return "none"
	}
	return s
}

func at(p circuit.Place) string {
	if p.Doc == nil {
		return "nowhere"
	}
	line, col := p.Doc.File.Lines().Position(p.Span.Start, source.Bytes)
	return fmt.Sprintf("%s:%d:%d", p.Doc.Path, line+1, col+1)
}
