// Package curve takes a quantity of one or several MOSFETs along a ranged node
// out of a bias result. Its one invariant: it evaluates nothing; every value is
// one that the bias engine found.
package curve

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

// maxSeries is how many devices one picture can hold and be read.
const maxSeries = 8

// Request says which curve is wanted.
type Request struct {
	Device   string // hierarchical name, wildcards allowed; an instance means every MOSFET in it
	Quantity string // as annotations name it: ron, gds, margin, …
	Along    string // the ranged node; "" for the first that moves the devices
	Mode     string // "" for the first
	Corner   string // "" for the first
}

// Curve is a quantity along a ranged node, in one mode at one corner.
type Curve struct {
	Quantity string
	Unit     string // SI, "" for a ratio
	Along    string // the node
	Mode     string
	Corner   string
	Others   []string  // nodes that are ranged as well: the curves are bands over them
	X        []float64 // V, ascending
	Series   []Series
}

// Series is one device's curve, or that of several in parallel. Where other
// nodes are ranged too, Lo and Hi are the bounds over them; else they are equal.
// An unlimited value is +Inf, one that was not evaluated NaN.
type Series struct {
	Name    string
	Lo, Hi  []float64
	Regions []string // at each X: the region, "" if it differs over the other ranges
}

// Of finds a curve; the error says in a sentence what stands in the way.
func Of(r *bias.Result, q Request) (*Curve, error) {
	if !bias.Known(q.Quantity) {
		return nil, fmt.Errorf("there is no quantity %q; there are: %s", q.Quantity, strings.Join(bias.Quantities(), " "))
	}
	run, err := runOf(r, q)
	if err != nil {
		return nil, err
	}
	rows, err := rowsOf(r, run, q.Device)
	if err != nil {
		return nil, err
	}
	along, err := axisOf(rows, q.Along)
	if err != nil {
		return nil, err
	}
	c := &Curve{Quantity: bias.Canonical(q.Quantity), Unit: bias.Unit(q.Quantity), Along: along, Mode: run.Mode, Corner: run.Corner}
	for _, row := range rows {
		x, s, others := series(row, along, c.Quantity)
		switch {
		case c.X == nil:
			c.X, c.Others = x, others
		case !slices.Equal(x, c.X):
			return nil, fmt.Errorf("%s and %s are evaluated at different values of v(%s): ask for one at a time", rows[0].Path, row.Path, along)
		}
		c.Series = append(c.Series, s)
	}
	if p, ok := parallel(c, rows); ok {
		c.Series = append(c.Series, p)
	}
	return c, nil
}

func runOf(r *bias.Result, q Request) (*bias.Run, error) {
	for _, run := range r.Runs {
		if (q.Mode == "" || strings.EqualFold(q.Mode, run.Mode)) && (q.Corner == "" || strings.EqualFold(q.Corner, run.Corner)) {
			return run, nil
		}
	}
	return nil, fmt.Errorf("there is no mode %q at corner %q", q.Mode, q.Corner)
}

func rowsOf(r *bias.Result, run *bias.Run, name string) ([]bias.Row, error) {
	pattern := strings.ToLower(name)
	var out []bias.Row
	all := 0
	for row := range r.Rows(run) {
		all++
		path := strings.ToLower(row.Path)
		if circuit.Match(pattern, path) || strings.HasPrefix(path, pattern+".") {
			out = append(out, row)
		}
	}
	switch {
	case all == 0:
		return nil, fmt.Errorf("the deck has no MOSFETs")
	case len(out) == 0:
		return nil, fmt.Errorf("there is no MOSFET %q; 'triodeck op' lists them", name)
	case len(out) > maxSeries:
		return nil, fmt.Errorf("%q names %d MOSFETs; a curve can hold %d", name, len(out), maxSeries)
	}
	for _, row := range out {
		switch {
		case row.Reason != "":
			return nil, fmt.Errorf("%s is not evaluated: %s", row.Path, row.Reason)
		case row.Points == nil:
			return nil, fmt.Errorf("%s is not evaluated: annotate v(%s)", row.Path, strings.Join(row.Missing, "), v("))
		}
	}
	return out, nil
}

// axisOf finds the ranged node to draw along.
func axisOf(rows []bias.Row, wanted string) (string, error) {
	var names []string
	for _, row := range rows {
		for i, a := range row.Context.Axes {
			if !slices.Contains(names, a.Node) && (wanted != "" || row.Context.Moves(i, row.Device.Device.Nets)) {
				names = append(names, a.Node)
			}
		}
	}
	for _, n := range names {
		if wanted == "" || strings.EqualFold(n, wanted) || strings.EqualFold("v("+n+")", wanted) {
			return n, nil
		}
	}
	switch {
	case len(names) > 0:
		return "", fmt.Errorf("v(%s) is not ranged; ranged are: v(%s)", wanted, strings.Join(names, "), v("))
	case wanted != "":
		return "", fmt.Errorf("v(%s) is not ranged: give it a range, as in '*@ bias v(%s)=0.2..1.6'", wanted, wanted)
	}
	return "", fmt.Errorf("no ranged node moves %s: give one a range, as in '*@ bias v(in)=0.2..1.6'", rows[0].Path)
}

// series collects one device's samples by the value of the axis.
func series(row bias.Row, along, quantity string) (x []float64, s Series, others []string) {
	var axis []float64
	for _, a := range row.Context.Axes {
		if a.Node == along {
			axis = a.Values
		} else {
			others = append(others, a.Node)
		}
	}
	x = slices.Clone(axis)
	slices.Sort(x)
	x = slices.Compact(x)
	s = Series{Name: row.Path, Lo: make([]float64, len(x)), Hi: make([]float64, len(x)), Regions: make([]string, len(x))}
	filled := make([]bool, len(x))
	for sample, at := range axis {
		i, _ := slices.BinarySearch(x, at)
		v, ok := bias.Quantity(row.Device, sample, quantity)
		if !ok {
			v = math.NaN()
		}
		region := row.Verdicts[sample].Region.String()
		if !filled[i] {
			filled[i], s.Lo[i], s.Hi[i], s.Regions[i] = true, v, v, region
			continue
		}
		s.Lo[i], s.Hi[i] = min(s.Lo[i], v), max(s.Hi[i], v)
		if s.Regions[i] != region {
			s.Regions[i] = ""
		}
	}
	return x, s, others
}
