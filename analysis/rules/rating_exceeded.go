package rules

import (
	_ "embed"
	"fmt"
	"math"
	"strings"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/analysis/quantity"
	"triodeck/parser"
)

//go:embed rating-exceeded.md
var ratingExceededText string

// RatingExceeded holds each device against the ratings that the deck states for
// its model.
var RatingExceeded = &analysis.Rule{
	Name: "rating-exceeded", Severity: analysis.Error, Scope: analysis.PerResult, Text: ratingExceededText, Run: ratingExceeded,
}

func ratingExceeded(p *analysis.Pass) {
	worst := map[ratedKey]*excess{}
	var order []ratedKey
	keep := func(x *excess) {
		key := ratedKey{keyOf(x.m.Card), bias.Canonical(x.cond.Name)}
		if was := worst[key]; was == nil {
			order = append(order, key)
			worst[key] = x
		} else if x.by > was.by {
			*was = *x
		}
	}
	ratings := map[*circuit.Scope][]circuit.NoteAt{}
	for m := range parts(p.Bias) {
		if m.Points == nil {
			continue
		}
		scope := m.Context.Cell.Scope
		if _, ok := ratings[scope]; !ok {
			ratings[scope] = ratingsIn(scope, p.Design)
		}
		for _, n := range ratings[scope] {
			r := n.Note.(*parser.Rating)
			if !rated(r, m) {
				continue
			}
			for _, cond := range r.Conds {
				if x, ok := exceeds(m, n, cond); ok {
					keep(x)
				}
			}
		}
		for _, x := range statedExcesses(m, p.Design) {
			keep(x)
		}
	}
	for _, key := range order {
		x := worst[key]
		f := analysis.Finding{Severity: p.Rule.Severity, Place: x.m.Name(), Subject: x.m.subject(), Message: x.message()}
		if x.source == "" {
			f.Related = []analysis.Related{{Place: x.at, Message: "the rating stands here"}}
		} else {
			f.Message += " (" + x.source + ")"
		}
		p.Report(f)
	}
}

type ratedKey struct {
	card     cardKey
	quantity string
}

// excess is one limit passed at a device's worst sample.
type excess struct {
	m      part
	at     circuit.Place // of the rating
	source string        // who states it, where it stands in the settings
	cond   parser.Compare
	value  float64 // SI, magnitude
	limit  float64
	by     float64 // value over limit
	sample int
}

func (x *excess) message() string {
	unit := bias.Unit(x.cond.Name)
	show := func(v float64) string {
		if unit == "V" {
			return quantity.Volts(v)
		}
		return quantity.Format(v, unit)
	}
	return fmt.Sprintf("%s of %s reaches %s, beyond its rating of %s for %q%s", bias.ShownPair(x.m.Polarity, x.cond.Name), x.m.Path,
		show(x.value), show(x.limit), x.m.Model, conditionAt(x.m, x.sample))
}

// exceeds compares magnitudes: a limit holds in both directions.
func exceeds(m part, n circuit.NoteAt, cond parser.Compare) (*excess, bool) {
	if !strings.HasPrefix(cond.Op, "<") || cond.Lo == nil {
		return nil, false
	}
	limit, err := m.Context.Cell.Env.Eval(cond.Lo)
	if err != nil {
		return nil, false
	}
	x := &excess{m: m, at: analysis.Within(n.Place, cond.Span), cond: cond}
	return x, x.reaches(limit)
}

// reaches holds the device's worst sample against a limit.
func (x *excess) reaches(limit float64) bool {
	e, ok := x.m.Range(x.cond.Name)
	if !ok || limit <= 0 {
		return false
	}
	x.limit, x.value, x.sample = limit, math.Abs(e.Max), e.AtMax
	if v := math.Abs(e.Min); v > x.value {
		x.value, x.sample = v, e.AtMin
	}
	x.by = x.value / limit
	return x.by > 1 && !math.IsInf(x.value, 0)
}

// ratingsIn gives the ratings that hold in a scope: its own, those around it in
// the text, and the deck's.
func ratingsIn(scope *circuit.Scope, d *circuit.Design) []circuit.NoteAt {
	var list []circuit.NoteAt
	add := func(s *circuit.Scope) {
		for _, n := range s.Notes {
			if _, ok := n.Note.(*parser.Rating); ok && n.Err == nil {
				list = append(list, n)
			}
		}
	}
	top := false
	for s := scope; s != nil; s = s.Parent {
		add(s)
		top = top || s == d.Top
	}
	if !top {
		add(d.Top)
	}
	return list
}

// rated says whether a rating's model name, wildcards allowed, is the part's: of
// its model, without the number of its bin, or of the subckt that wraps it.
func rated(r *parser.Rating, m part) bool {
	pattern := parser.Fold(r.Model.Text)
	return circuit.Match(pattern, circuit.BaseName(parser.Fold(m.Model))) || m.Wrapper != "" && circuit.Match(pattern, m.Wrapper)
}
