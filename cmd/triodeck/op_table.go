package main

import (
	"encoding/csv"
	"fmt"
	"io"
	"slices"
	"strings"
	"text/tabwriter"

	"triodeck/analysis/quantity"
)

// table prints the devices, then the nodes, then what a reader must know.
func (r opReport) table(w io.Writer) error {
	if len(r.Devices) == 0 {
		_, err := fmt.Fprintf(w, "%s: no MOSFETs\n", r.Deck)
		return err
	}
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintln(t, "device\tmodel\tmode\tcorner\tregion\t|Vgs|\t|Vds|\tVov\tmargin\tId\tgds\tRon\tbias")
	for _, d := range r.Devices {
		cells := []string{d.Device, d.Model + " " + d.Polarity[:1], dash(d.Mode), dash(d.Corner), "not evaluated"}
		if d.Region != nil {
			cells[4] = *d.Region
		}
		for _, q := range []struct {
			a    amount
			unit string
		}{{d.Vgs, "V"}, {d.Vds, "V"}, {d.Vov, "V"}, {d.Margin, "V"}, {d.Id, "A"}, {d.Gds, "S"}, {d.Ron, "Ω"}} {
			cells = append(cells, q.a.show(q.unit))
		}
		fmt.Fprintln(t, strings.Join(append(cells, d.Source), "\t"))
	}
	if err := t.Flush(); err != nil {
		return err
	}
	if err := r.nodeTable(w); err != nil {
		return err
	}
	return r.footnotes(w)
}

// footnotes prints each note once, with the devices that it is about.
func (r opReport) footnotes(w io.Writer) error {
	var order []string
	about := map[string][]string{}
	for _, d := range r.Devices {
		for _, note := range d.Notes {
			if about[note] == nil {
				order = append(order, note)
			}
			if list := about[note]; !slices.Contains(list, d.Device) {
				about[note] = append(list, d.Device)
			}
		}
	}
	if len(order) > 0 {
		fmt.Fprintln(w)
	}
	for _, note := range order {
		list := about[note]
		if len(list) > 6 {
			list = append(list[:6:6], fmt.Sprintf("and %d more", len(list)-6))
		}
		if _, err := fmt.Fprintf(w, "%s: %s\n", strings.Join(list, ", "), note); err != nil {
			return err
		}
	}
	return nil
}

func dash(s string) string {
	if s == "" {
		return "–"
	}
	return s
}

// show writes an amount with its unit; bounds share the unit where they can.
func (a amount) show(unit string) string {
	format := func(v float64) string {
		if unit == "V" {
			return quantity.Volts(v)
		}
		return quantity.Format(v, unit)
	}
	switch {
	case !a.known:
		return "–"
	case a.flat():
		return format(a.min)
	}
	lo, hi := format(a.min), format(a.max)
	if lo == hi {
		return lo
	}
	return lo + " … " + hi
}

// csv prints the devices with the field names of the JSON; bounds as min..max.
func (r opReport) csv(w io.Writer) error {
	c := csv.NewWriter(w)
	_ = c.Write(strings.Fields("device model polarity region mode corner vgs vds vbs vth vov vdsat margin id gm gds gmb ron rds ic source notes"))
	for _, d := range r.Devices {
		row := []string{d.Device, d.Model, d.Polarity, "", d.Mode, d.Corner}
		if d.Region != nil {
			row[3] = *d.Region
		}
		for _, a := range []amount{d.Vgs, d.Vds, d.Vbs, d.Vth, d.Vov, d.Vdsat, d.Margin, d.Id, d.Gm, d.Gds, d.Gmb, d.Ron, d.Rds, d.Ic} {
			row = append(row, a.csv())
		}
		_ = c.Write(append(row, d.Source, strings.Join(d.Notes, "; ")))
	}
	c.Flush()
	return c.Error()
}

func (a amount) csv() string {
	switch {
	case !a.known:
		return ""
	case a.flat():
		return csvNumber(a.min)
	}
	return csvNumber(a.min) + ".." + csvNumber(a.max)
}
