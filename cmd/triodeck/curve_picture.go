package main

import (
	"image/color"
	"io"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"

	"triodeck/analysis/curve"
	"triodeck/analysis/quantity"
)

const pictureWidth, pictureHeight = 16 * vg.Centimeter, 10 * vg.Centimeter

// inks tell the series apart by colour and, for a print in grey, by their dashes.
var inks = []struct {
	colour color.RGBA
	dashes []vg.Length
}{
	{color.RGBA{0x8f, 0x3b, 0x1b, 0xff}, nil},
	{color.RGBA{0x1f, 0x4e, 0x79, 0xff}, []vg.Length{vg.Points(6), vg.Points(3)}},
	{color.RGBA{0x2e, 0x6b, 0x3a, 0xff}, []vg.Length{vg.Points(2), vg.Points(2)}},
	{color.RGBA{0x5b, 0x3a, 0x73, 0xff}, []vg.Length{vg.Points(8), vg.Points(2), vg.Points(2), vg.Points(2)}},
}

// plotPicture draws the curve as SVG or PNG.
func plotPicture(w io.Writer, c *curve.Curve, format string) error {
	p := plot.New()
	p.Title.Text = title(c)
	p.Title.Padding = vg.Points(8)
	p.X.Label.Text = "v(" + c.Along + ") / V"
	p.Y.Label.Text = c.Quantity
	p.Y.Tick.Marker = engineering{plot.DefaultTicks{}, c.Unit}
	p.BackgroundColor = color.White
	if logarithmic(c) {
		p.Y.Scale = plot.LogScale{}
		p.Y.Tick.Marker = engineering{plot.LogTicks{Prec: -1}, c.Unit}
	}
	p.Legend.Top = true
	p.Legend.Padding = vg.Points(2)
	grid := plotter.NewGrid()
	grid.Vertical.Color, grid.Horizontal.Color = color.Gray{0xe0}, color.Gray{0xe0}
	p.Add(grid)
	for i, t := range tracesOf(c) {
		ink := inks[i%len(inks)]
		named := false
		for _, run := range unbroken(c.X, t.y) {
			line, err := plotter.NewLine(run)
			if err != nil {
				return err
			}
			line.Color, line.Dashes, line.Width = ink.colour, ink.dashes, vg.Points(1.6)
			p.Add(line)
			if !named && len(c.Series) > 1 {
				p.Legend.Add(t.name, line)
				named = true
			}
		}
	}
	to, err := p.WriterTo(pictureWidth, pictureHeight, format)
	if err != nil {
		return err
	}
	_, err = to.WriteTo(w)
	return err
}

// unbroken cuts a curve at the values that cannot be drawn.
func unbroken(x, y []float64) []plotter.XYs {
	var out []plotter.XYs
	var run plotter.XYs
	for i := range x {
		if math.IsInf(y[i], 0) || math.IsNaN(y[i]) {
			if len(run) > 0 {
				out, run = append(out, run), nil
			}
			continue
		}
		run = append(run, plotter.XY{X: x[i], Y: y[i]})
	}
	if len(run) > 0 {
		out = append(out, run)
	}
	return out
}

// engineering labels the ticks with prefixes and units.
type engineering struct {
	plot.Ticker
	unit string
}

func (e engineering) Ticks(lo, hi float64) []plot.Tick {
	ticks := e.Ticker.Ticks(lo, hi)
	for i, t := range ticks {
		if t.Label != "" {
			ticks[i].Label = quantity.Format(t.Value, e.unit)
		}
	}
	return ticks
}
