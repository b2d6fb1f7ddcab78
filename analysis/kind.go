package analysis

import (
	"fmt"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// A file most of whose statements cannot be read is written in some other
// language; below this number of bad ones it is a deck with mistakes.
const foreignErrors = 20

func foreign(f *parser.File) string {
	if f.Foreign != "" {
		return "this text is " + f.Foreign
	}
	if at := strings.IndexByte(f.Src, 0); at >= 0 {
		return fmt.Sprintf("this is a binary file, not a deck: byte %d is zero", at+1)
	}
	bad, all := 0, 0
	for i := range f.Len() {
		switch c := f.Card(i); c.Kind {
		case parser.ErrorCard:
			bad++
			all++
		case parser.ElementCard, parser.DirectiveCard:
			all++
		}
	}
	if bad >= foreignErrors && 2*bad > all {
		return fmt.Sprintf("this does not read as a deck: %d of %d statements are in no form that is known here", bad, all)
	}
	return ""
}

// whole says that the root file is a deck of its own: it drives, analyses or ends.
func whole(d *circuit.Design) bool {
	if d.Top == nil || len(d.Top.Elements) == 0 {
		return false
	}
	for _, e := range d.Top.Elements {
		if e.Letter == 'v' || e.Letter == 'i' {
			return true
		}
	}
	for i := range d.Root.File.Len() {
		switch s := d.Root.File.Card(i).Stmt.(type) {
		case *parser.End:
			return true
		case *parser.Other:
			if circuit.IsAnalysis(s.Name.Text) {
				return true
			}
		}
	}
	return false
}

func closed(d *circuit.Design) bool {
	for _, p := range d.Problems {
		switch p.Kind {
		case circuit.IncludeMissing, circuit.SectionMissing, circuit.IncludeCircular:
			return false
		}
	}
	return d.Top == nil || !d.Top.Open
}

// supplied: without a single model, devices that name one and instances that are
// sized like a device are left to somebody else.
func supplied(scopes []*circuit.Scope, cells []*circuit.Cell) bool {
	for _, s := range scopes {
		if len(s.Models) > 0 {
			return true
		}
	}
	for _, c := range cells {
		for _, d := range c.Devices {
			if d.Kind == circuit.MOSFET && d.Model == nil {
				return false
			}
		}
		for _, x := range c.Instances {
			if x.Def == nil && sized(x.Elem) {
				return false
			}
		}
	}
	return true
}

// sized says whether a card gives a length, width or number of fins.
func sized(e *parser.Element) bool {
	for _, q := range e.Params {
		switch parser.Fold(q.Name.Text) {
		case "l", "w", "nfin", "lr", "wr":
			return true
		}
	}
	return false
}
