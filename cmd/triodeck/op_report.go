package main

import (
	"encoding/json"
	"math"
	"strconv"
	"strings"

	"triodeck/analysis/bias"
)

// opReport is what `op --format json` prints.
type opReport struct {
	Deck    string     `json:"deck"`
	Devices []opDevice `json:"devices"`
	Nodes   []opNode   `json:"nodes"`
}

// opDevice is a MOSFET in one mode at one corner; a quantity that was not
// evaluated, or has no finite value, is null.
type opDevice struct {
	Device   string   `json:"device"`
	Model    string   `json:"model"`
	Polarity string   `json:"polarity"`
	Region   *string  `json:"region"`
	Mode     string   `json:"mode"`
	Corner   string   `json:"corner"`
	Vgs      amount   `json:"vgs"`
	Vds      amount   `json:"vds"`
	Vbs      amount   `json:"vbs"`
	Vth      amount   `json:"vth"`
	Vov      amount   `json:"vov"`
	Vdsat    amount   `json:"vdsat"`
	Margin   amount   `json:"margin"`
	Id       amount   `json:"id"`
	Gm       amount   `json:"gm"`
	Gds      amount   `json:"gds"`
	Gmb      amount   `json:"gmb"`
	Ron      amount   `json:"ron"`
	Rds      amount   `json:"rds"`
	Ic       amount   `json:"ic"`
	Source   string   `json:"source"`
	Notes    []string `json:"notes"`
}

// amount is a quantity over the samples: one number, bounds, or nothing.
type amount struct {
	min, max float64
	known    bool
}

// flat says that the bounds are one number, to the precision that is shown.
func (a amount) flat() bool {
	return a.min == a.max || math.Abs(a.max-a.min) <= 1e-12*max(math.Abs(a.min), math.Abs(a.max))
}

// MarshalJSON writes a number, {"min","max"}, or null.
func (a amount) MarshalJSON() ([]byte, error) {
	switch {
	case !a.known:
		return []byte("null"), nil
	case a.flat():
		return json.Marshal(finite(a.min))
	}
	return json.Marshal(struct {
		Min *float64 `json:"min"`
		Max *float64 `json:"max"`
	}{finite(a.min), finite(a.max)})
}

// finite is nil for what JSON has no number for.
func finite(v float64) *float64 {
	if math.IsInf(v, 0) || math.IsNaN(v) {
		return nil
	}
	v = significant(v)
	return &v
}

// significant rounds to 12 digits: beyond them a number differs from one
// processor to the next. Zero has no sign.
func significant(v float64) float64 {
	if v == 0 {
		return 0
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 11, 64), 64)
	if err != nil {
		return v // infinite
	}
	return r
}

func amountOf(d *bias.Device, name string) amount {
	e, ok := d.Range(name)
	return amount{e.Min, e.Max, ok}
}

func newOpReport(deck string, r *bias.Result, take func(*bias.Run) bool) opReport {
	out := opReport{Deck: deck, Devices: []opDevice{}, Nodes: []opNode{}}
	for _, run := range r.Runs {
		if !take(run) {
			continue
		}
		for row := range r.Rows(run) {
			out.Devices = append(out.Devices, newOpDevice(run, row))
		}
		out.Nodes = append(out.Nodes, opNodes(run)...)
	}
	return out
}

func newOpDevice(run *bias.Run, row bias.Row) opDevice {
	of := func(name string) amount { return amountOf(row.Device, name) }
	d := opDevice{
		Device: row.Path, Model: row.Model, Polarity: row.Polarity.String(), Mode: run.Mode, Corner: run.Corner,
		Vgs: of("vgs"), Vds: of("vds"), Vbs: of("vbs"), Vth: of("vth"), Vov: of("vov"), Vdsat: of("vdsat"),
		Margin: of("margin"), Id: of("id"), Gm: of("gm"), Gds: of("gds"), Gmb: of("gmb"), Ron: of("ron"),
		Rds: of("rds"), Ic: of("ic"), Source: row.Source.String(), Notes: []string{},
	}
	if row.Wrapper != "" {
		d.Model = row.Shell
	}
	if region := regionText(row.Device); region != "" {
		d.Region = &region
	}
	d.Notes = append(d.Notes, notesOf(row)...)
	return d
}

// regionText names the region, or the regions in the order of the range.
func regionText(d *bias.Device) string {
	var names []string
	for i, span := range d.Regions() {
		name := span.Region.String()
		if i > 3 {
			names[len(names)-1] = "…"
			break
		}
		names = append(names, name)
	}
	return strings.Join(names, " to ")
}

// notesOf is what a reader of the row must know beside the numbers.
func notesOf(row bias.Row) []string {
	var notes []string
	switch {
	case row.Reason != "":
		notes = append(notes, "not evaluated: "+row.Reason)
	case len(row.Missing) > 0:
		notes = append(notes, "not evaluated: annotate v("+strings.Join(row.Missing, "), v(")+")")
	}
	if len(row.Verdicts) == 1 && row.Verdicts[0].Edge != "" {
		notes = append(notes, row.Verdicts[0].Edge)
	}
	if p := row.Points; len(p) == 1 && p[0].Swapped {
		notes = append(notes, "drain and source are exchanged as biased")
	}
	if e, ok := row.Range("ron"); ok && math.IsInf(e.Max, 1) {
		notes = append(notes, "ron is unlimited: no channel current")
	}
	return append(notes, row.Device.Notes...)
}
