package circuit

import (
	"fmt"
	"strings"

	"triodeck/analysis/quantity"
	"triodeck/parser"
)

// Size is the channel of a MOSFET as the deck states it.
type Size struct {
	L, W   float64  // metres; W of all fingers together; 0 if nothing states it
	NF     float64  // fingers, 1 if the line states none
	Unit   float64  // metres that a 1 on the line stands for
	Notes  []string // what is assumed, or known from elsewhere than the deck
	Reason string   // why the size or the bin is not known; "" if both are

	Binless bool // no bin covers the size: a problem of the design says it with what the bins cover

	covered string // what they cover
}

// The spellings of a channel's size; the first that a line states counts.
var (
	widthNames  = []string{"w", "wr"}
	lengthNames = []string{"l", "lr"}
	fingerNames = []string{"nf", "ng", "nfin", "nr"}
)

// longest is the length, in metres, from which on a number is taken to be in
// micrometres where bare numbers are known to mean those: no channel is that
// long, and 1 mm written in micrometres is 1000. Common practice.
const longest = 1e-3

// sizeKey tells sizes of a cell apart.
type sizeKey struct {
	params string
	model  *Model
	name   string
}

// sized is a size with the model or the bin that goes with it.
type sized struct {
	size  *Size
	model *Model
}

// size works out the channel of a MOSFET, and picks its bin.
func (b *builder) size(e *ElementAt, d *Device) {
	key := sizeKey{paramText(e.Place, e.Element), d.Model, d.Elem.Model.Text}
	got, ok := b.sizes[key]
	if !ok {
		s := &Size{NF: 1, Unit: d.Scale}
		got = sized{s, b.fit(s, e, d)}
		b.sizes[key] = got
	}
	d.Size, d.Model = got.size, got.model
}

// fit reads a size and gives the model to use with it.
func (b *builder) fit(s *Size, e *ElementAt, d *Device) *Model {
	m := d.Model
	facts, names := b.options.Facts, b.cell.FactNames(d)
	for _, q := range []struct {
		to    *float64
		names []string
	}{{&s.W, widthNames}, {&s.L, lengthNames}, {&s.NF, fingerNames}} {
		for _, name := range q.names {
			v, stated := d.Params[name]
			if !stated {
				continue
			}
			if v.Err != nil && s.Reason == "" {
				s.Reason = fmt.Sprintf("%s: %v", name, v.Err)
			}
			if v.Err == nil {
				*q.to = v.V
			}
			break
		}
	}
	if s.NF <= 0 {
		s.NF = 1
	}
	if m == nil && e.Letter == 'x' && b.pins(e) == nil {
		s.Notes = append(s.Notes, "the nodes are assumed to be drain, gate, source and bulk in this order")
	}
	b.unit(s, facts, names, m)
	s.W, s.L = s.W*s.Unit, s.L*s.Unit
	b.ownSize(s, m)
	if s.Reason == "" && (m == nil || m.Type() != "vdmos") { // whose card is the whole device
		s.Reason = missingSize(s)
	}
	if fact := facts.Find(names, func(f *Fact) bool { return f.Width != WidthUnstated }); fact != nil {
		if fact.Width == WidthFinger && s.NF != 1 {
			s.W *= s.NF
			s.Notes = append(s.Notes, "W is that of one finger: "+fact.Source)
		}
	} else if s.NF != 1 {
		b.fingers(s, m)
	}
	if m == nil || len(m.Bins) == 0 || s.Reason != "" {
		return m
	}
	choice := b.cell.Env.ChooseBin(m, s.L, s.W/s.NF)
	for _, err := range choice.Failed {
		b.report(b.cell.Scope, err)
	}
	if choice.Model == nil {
		s.Binless = len(choice.Failed) == 0
		b.outside(s, m)
		b.binless = b.binless || s.Binless
		return m
	}
	b.overlap(choice)
	picked := *choice.Model
	picked.Bins, picked.table = m.Bins, m.table
	return &picked
}

// unit settles what a 1 on the line means, in metres.
func (b *builder) unit(s *Size, facts Facts, names []string, m *Model) {
	if s.Unit == 0 {
		s.Unit = 1
	}
	if s.Unit != 1 || s.L < longest || s.W < longest && s.W != 0 {
		return
	}
	if fact := facts.Find(names, func(f *Fact) bool { return f.Bare != 0 }); fact != nil {
		if fact.Bare != 1 {
			s.Unit = fact.Bare
			s.Notes = append(s.Notes, "bare geometry is in micrometres: "+fact.Source)
		}
		return
	}
	if b.bare != 0 {
		if b.bare != 1 {
			s.Unit = b.bare
			s.Notes = append(s.Notes, "bare geometry is in micrometres: the deck's `*.SCALE` says so")
		}
		return
	}
	const micro = 1e-6
	env := b.cell.Env
	if m != nil && len(m.Bins) > 0 && !env.fits(m, s.L, s.W/s.NF) && (env.fits(m, s.L*micro, s.W*micro/s.NF) || env.fits(m, s.L*micro, s.W*micro)) {
		s.Unit = micro
		s.Notes = append(s.Notes, "bare geometry is taken in micrometres: the limits of the model's bins leave no other reading")
	}
}

// ownSize takes from the card what the line does not state.
func (b *builder) ownSize(s *Size, m *Model) {
	if m == nil {
		return
	}
	if v, ok := m.Params["w"]; ok && v.Err == nil && s.W == 0 {
		s.W = v.V
	}
	if v, ok := m.Params["l"]; ok && v.Err == nil && s.L == 0 {
		s.L = v.V
	}
}

// fingers settles what W means where nobody states it: by the bins if only one
// meaning has one, else it is assumed to be the whole width.
func (b *builder) fingers(s *Size, m *Model) {
	if s.Reason != "" {
		return
	}
	if m != nil && len(m.Bins) > 0 {
		total, finger := b.cell.Env.fits(m, s.L, s.W/s.NF), b.cell.Env.fits(m, s.L, s.W)
		switch {
		case total && !finger:
			return
		case finger && !total:
			s.W *= s.NF
			s.Notes = append(s.Notes, "W is taken as that of one finger: no bin of the model covers it otherwise")
			return
		}
	}
	s.Notes = append(s.Notes, fmt.Sprintf("W is assumed to be that of all %g fingers together", s.NF))
}

func missingSize(s *Size) string {
	switch {
	case s.W == 0 && s.L == 0:
		return "neither the line nor the model states W and L"
	case s.W == 0:
		return "neither the line nor the model states W"
	case s.L == 0:
		return "neither the line nor the model states L"
	}
	return ""
}

// outside says that no bin covers a size, and what the bins cover.
func (b *builder) outside(s *Size, m *Model) {
	finger := ""
	if s.NF != 1 {
		finger = " a finger"
	}
	env := b.cell.Env
	s.Reason = fmt.Sprintf("no bin of model %q covers L = %s and W = %s%s", BaseName(m.Bins[0].Name), metres(s.L), metres(s.W/s.NF), finger)
	if s.Unit != 1 && env.fits(m, s.L/s.Unit, s.W/s.Unit/s.NF) {
		s.Reason += fmt.Sprintf(", which `.option scale=%g` has multiplied: W and L are to be written without a suffix here", s.Unit)
	}
	s.covered = "its bins cover " + env.covered(m)
}

// metres shows a length to as many digits as tell bins apart, without idle zeros.
func metres(x float64) string {
	number, unit, ok := strings.Cut(quantity.Digits(x, "m", 5), " ")
	if strings.Contains(number, ".") {
		number = strings.TrimRight(strings.TrimRight(number, "0"), ".")
	}
	if !ok {
		return number
	}
	return number + " " + unit
}

// overlap reports a size that more than one bin covers, once a pair of bins.
func (b *builder) overlap(c BinChoice) {
	if len(c.Also) == 0 {
		return
	}
	first, second := c.Model.Def, c.Also[0]
	b.problems.add(BinOverlap, second.Place, second.Place.Text(), "bin %q covers sizes that bin %q covers too: the first is used",
		second.Model.Name.Text, first.Model.Name.Text)
}

// reportBinless says where a size is out of every bin: at the line that its
// writer sees, which for a wrapped MOSFET is the instance's.
func (b *builder) reportBinless() {
	c := b.cell
	if c.Wrapper() != nil {
		return // the instances' lines will say it
	}
	say := func(at Place, model parser.Word, s *Size) {
		if s != nil && s.Binless {
			b.problems.add(BinMissing, at, model.Text, "%s: %s", s.Reason, s.covered)
		}
	}
	for _, d := range c.Devices {
		say(place(d.Place.Doc, d.Place.Card, d.Elem.Name.Span()), d.Elem.Model, d.Size)
	}
	for _, x := range c.Instances {
		if x.Cell == nil {
			continue
		}
		if d, ok := x.Cell.Wrapped(); ok {
			say(place(x.Place.Doc, x.Place.Card, x.Elem.Name.Span()), x.Elem.Model, d.Size)
		}
	}
}
