package mos

import (
	"fmt"
	"math"
)

// params reads a card's numbers, with the defaults of the publication, and
// collects what has to be said about them.
type params struct {
	bins  bins
	card  map[string]float64
	notes []Note
}

func (p *params) has(name string) bool {
	v, ok := p.card[name]
	return ok && !math.IsNaN(v) && !math.IsInf(v, 0)
}

func (p *params) get(name string, def float64) float64 {
	if p.has(name) {
		return p.card[name]
	}
	return def
}

// positive is get for a quantity that cannot be zero or negative: anything else
// gets a note and the default.
func (p *params) positive(name string, def float64) float64 {
	v := p.get(name, def)
	if v > 0 {
		return v
	}
	p.warn(name, "%s is %g, but it must be above zero: %g is used", name, v, def)
	return def
}

// atLeast is get for a quantity with a lower physical limit, which replaces
// values below it.
func (p *params) atLeast(name string, def, low float64) float64 {
	v := p.get(name, def)
	if v >= low {
		return v
	}
	p.warn(name, "%s is %g, below its physical limit: %g is used", name, v, low)
	return low
}

// inside is get with a note, and no replacement, for values out of the range
// that the quantity is known to have.
func (p *params) inside(name string, def, low, high float64) float64 {
	v := p.get(name, def)
	if v < low || v > high {
		p.warn(name, "%s is %g, outside the physical range %g to %g", name, v, low, high)
	}
	return v
}

func (p *params) warn(name, format string, args ...any) {
	p.notes = append(p.notes, Note{Param: name, Text: fmt.Sprintf(format, args...)})
}

func (p *params) fatal(name, format string, args ...any) {
	p.notes = append(p.notes, Note{Param: name, Text: fmt.Sprintf(format, args...), Fatal: true})
}

// failed tells whether any note so far rules out an evaluation.
func (p *params) failed() bool {
	for _, n := range p.notes {
		if n.Fatal {
			return true
		}
	}
	return false
}
