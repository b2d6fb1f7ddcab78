package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"math"
	"os"
	"strconv"
	"strings"
	"text/tabwriter"

	"github.com/guptarohit/asciigraph"
	"golang.org/x/term"

	"triodeck/analysis/curve"
	"triodeck/analysis/quantity"
)

const (
	plotHeight = 14
	plotWidth  = 64
	// wideRatio is the span beyond which the axis is logarithmic.
	wideRatio = 20
)

// traces are the lines of a curve: one a series, two where it is a band.
type trace struct {
	name string
	y    []float64
}

func tracesOf(c *curve.Curve) []trace {
	var out []trace
	for _, s := range c.Series {
		lo, hi := trace{s.Name, s.Lo}, trace{s.Name, s.Hi}
		if len(c.Others) == 0 {
			out = append(out, lo)
			continue
		}
		lo.name, hi.name = s.Name+" least", s.Name+" most"
		out = append(out, lo, hi)
	}
	return out
}

// plotTerminal draws with characters, then says the extremes in words.
func plotTerminal(w io.Writer, c *curve.Curve) error {
	fmt.Fprintln(w, title(c))
	log := logarithmic(c)
	var data [][]float64
	var names []string
	for _, t := range tracesOf(c) {
		y := drawable(t.y, log)
		if y != nil {
			data, names = append(data, y), append(names, t.name)
		}
	}
	if len(data) > 0 {
		digits := 3
		if !log {
			digits = distinct(data)
		}
		opts := []asciigraph.Option{
			asciigraph.Height(plotHeight), asciigraph.Width(width(w)),
			asciigraph.XAxisRange(c.X[0], c.X[len(c.X)-1]), asciigraph.XAxisTickCount(5),
			asciigraph.XAxisValueFormatter(quantity.Volts),
			asciigraph.YAxisValueFormatter(func(v float64) string {
				if log {
					v = math.Pow(10, v)
				}
				return fmt.Sprintf("%10s", quantity.Digits(v, c.Unit, digits))
			}),
		}
		legend := ""
		if len(names) > 1 {
			var extra []asciigraph.Option
			extra, legend = marks(w, names)
			opts = append(opts, extra...)
		}
		fmt.Fprintln(w)
		fmt.Fprintln(w, asciigraph.PlotMany(data, opts...))
		if legend != "" {
			fmt.Fprintln(w, "\n"+legend)
		}
	}
	fmt.Fprintln(w)
	return words(w, c)
}

// marks tells the lines apart, by colour on a terminal, else by their signs, and
// says which is which.
func marks(w io.Writer, names []string) ([]asciigraph.Option, string) {
	legend := "          "
	if isTerminal(w) && os.Getenv("NO_COLOR") == "" {
		palette := []asciigraph.AnsiColor{asciigraph.Orange, asciigraph.SteelBlue, asciigraph.MediumSeaGreen, asciigraph.MediumOrchid}
		colours := make([]asciigraph.AnsiColor, len(names))
		for i, name := range names {
			colours[i] = palette[i%len(palette)]
			legend += fmt.Sprintf("  %s━━%s %s", colours[i], asciigraph.Default, name)
		}
		return []asciigraph.Option{asciigraph.SeriesColors(colours...)}, legend
	}
	signs := make([]asciigraph.CharSet, len(names))
	for i, name := range names {
		sign := string([]rune("•×o+#=~%")[i%8])
		signs[i] = asciigraph.CreateCharSet(sign)
		legend += "  " + sign + " " + name
	}
	return []asciigraph.Option{asciigraph.SeriesChars(signs...)}, legend
}

func title(c *curve.Curve) string {
	s := fmt.Sprintf("%s along v(%s)", c.Quantity, c.Along)
	if c.Mode != "" {
		s += ", mode " + c.Mode
	}
	if c.Corner != "" {
		s += ", corner " + c.Corner
	}
	if len(c.Others) > 0 {
		s += ", bounds over v(" + strings.Join(c.Others, "), v(") + ")"
	}
	return s
}

// logarithmic says whether the curve is drawn over decades.
func logarithmic(c *curve.Curve) bool {
	least, most := math.Inf(1), 0.0
	for _, s := range c.Series {
		lo, hi, _, ok := s.Extremes(c.X)
		if !ok {
			continue
		}
		least, most = min(least, lo.Y), max(most, hi.Y)
	}
	return least > 0 && most/least > wideRatio
}

// drawable replaces what cannot be drawn by gaps; nil if nothing is left.
func drawable(y []float64, log bool) []float64 {
	out := make([]float64, len(y))
	some := false
	for i, v := range y {
		if log {
			v = math.Log10(v)
		}
		if math.IsInf(v, 0) || math.IsNaN(v) {
			out[i] = math.NaN()
			continue
		}
		out[i], some = v, true
	}
	if !some {
		return nil
	}
	return out
}

// distinct is how many digits tell the rows of a linear plot apart, 3 to 6.
func distinct(data [][]float64) int {
	least, most := math.Inf(1), math.Inf(-1)
	for _, y := range data {
		for _, v := range y {
			if !math.IsNaN(v) {
				least, most = min(least, v), max(most, v)
			}
		}
	}
	if least == most {
		return 3
	}
	step := (most - least) / plotHeight
	n := math.Ceil(math.Log10(max(math.Abs(least), math.Abs(most)) / step))
	return int(max(3, min(6, n)))
}

// width is what the terminal leaves beside the axis.
func width(w io.Writer) int {
	if f, ok := w.(*os.File); ok {
		if cols, _, err := term.GetSize(int(f.Fd())); err == nil {
			return max(min(cols-16, 110), 24)
		}
	}
	return plotWidth
}

// words tells each series' extremes and where its region changes.
func words(w io.Writer, c *curve.Curve) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	for _, s := range c.Series {
		least, most, unlimited, ok := s.Extremes(c.X)
		text := "no current anywhere"
		if ok {
			text = fmt.Sprintf("least %s at %s\tmost %s at %s", quantity.Format(least.Y, c.Unit), quantity.Volts(least.X),
				quantity.Format(most.Y, c.Unit), quantity.Volts(most.X))
			if unlimited {
				text += ", unlimited where no current flows"
			}
		}
		fmt.Fprintf(t, "%s\t%s\n", s.Name, text)
	}
	if err := t.Flush(); err != nil {
		return err
	}
	for _, s := range c.Series {
		if turns := regionsAlong(c.X, s.Regions); turns != "" {
			fmt.Fprintf(w, "%s: %s\n", s.Name, turns)
		}
	}
	return nil
}

// regionsAlong reads "deep triode to 1.125 V, weak inversion to 1.350 V, cutoff".
func regionsAlong(x []float64, regions []string) string {
	var parts []string
	for i := 0; i < len(regions); {
		j := i
		for j+1 < len(regions) && regions[j+1] == regions[i] {
			j++
		}
		name := regions[i]
		if name == "" {
			name = "several regions"
		}
		if j+1 < len(regions) {
			name += " to " + quantity.Volts(x[j])
		}
		parts = append(parts, name)
		i = j + 1
	}
	if len(parts) == 1 && parts[0] == "several regions" {
		return ""
	}
	return strings.Join(parts, ", ")
}

// curveCSV writes the values as they are, in SI units.
func curveCSV(w io.Writer, c *curve.Curve) error {
	out := csv.NewWriter(w)
	head := []string{"v(" + c.Along + ")"}
	lines := tracesOf(c)
	for _, t := range lines {
		head = append(head, c.Quantity+" "+t.name)
	}
	_ = out.Write(head)
	for i, x := range c.X {
		row := []string{csvNumber(x)}
		for _, t := range lines {
			row = append(row, csvNumber(t.y[i]))
		}
		_ = out.Write(row)
	}
	out.Flush()
	return out.Error()
}

// csvNumber is a number for tables: empty if not evaluated, inf if unlimited.
func csvNumber(v float64) string {
	switch {
	case math.IsNaN(v):
		return ""
	case math.IsInf(v, 1):
		return "inf"
	}
	return strconv.FormatFloat(significant(v), 'g', -1, 64)
}
