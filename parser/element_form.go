package parser

import (
	"fmt"
	"strings"

	"triodeck/parser/source"
)

// form is what an element is called and the fields that it cannot do without.
type form struct {
	noun   string
	fields []string
}

var forms = map[byte]form{
	'm': {"MOSFET", []string{"drain", "gate", "source", "bulk", "model"}},
	'r': {"resistor", []string{"two nodes", "", "a value or model"}},
	'c': {"capacitor", []string{"two nodes", "", "a value or model"}},
	'l': {"inductor", []string{"two nodes", "", "a value or model"}},
	'd': {"diode", []string{"anode", "cathode", "model"}},
	'q': {"bipolar transistor", []string{"collector", "base", "emitter", "model"}},
	'j': {"JFET", []string{"drain", "gate", "source", "model"}},
	'z': {"MESFET", []string{"drain", "gate", "source", "model"}},
	'x': {"instance", []string{"the name of a subckt"}},
	'n': {"device", []string{"nodes", "model"}},
	'v': {"voltage source", []string{"a positive node", "a negative node"}},
	'i': {"current source", []string{"a positive node", "a negative node"}},
	'e': {"voltage-controlled voltage source", []string{"a positive node", "a negative node", "a control"}},
	'g': {"voltage-controlled current source", []string{"a positive node", "a negative node", "a control"}},
	'f': {"current-controlled current source", []string{"a positive node", "a negative node", "a controlling source"}},
	'h': {"current-controlled voltage source", []string{"a positive node", "a negative node", "a controlling source"}},
	'k': {"coupling", []string{"two inductors"}},
	'b': {"behavioural source", []string{"a positive node", "a negative node"}},
	's': {"switch", []string{"two nodes"}},
	'w': {"current-controlled switch", []string{"two nodes"}},
	't': {"transmission line", []string{"two nodes"}},
	'o': {"lossy line", []string{"two nodes"}},
}

// form gives the fields of r.parts their meaning by the element's letter.
func (r *reader) form(letter byte) (*Element, *Error) {
	p := &r.parts
	e := &Element{Letter: letter, Name: p.name}
	r.formParams(e)
	var err *Error
	switch letter {
	case 'm':
		err = r.mosfet(e)
	case 'x', 'n':
		err = r.instance(e)
	case 'r', 'c', 'l':
		err = r.passive(e)
	case 'd':
		err = r.junction(e, 2)
	case 'q', 'j', 'z':
		err = r.junction(e, 3)
	case 'v', 'i':
		err = r.source(e)
	case 'e', 'g', 'f', 'h':
		err = r.controlled(e)
	case 'k':
		err = r.coupling(e)
	default:
		err = r.other(e)
	}
	if err != nil {
		return nil, err
	}
	for _, f := range p.rest {
		e.Values = append(e.Values, f.value())
	}
	return e, nil
}

func (r *reader) formParams(e *Element) {
	p := &r.parts
	n := len(p.params)
	if p.pins >= 0 {
		n = p.pins
		e.Pins = append(e.Pins, p.params[n:]...)
	}
	e.Params = r.slabs.params(p.params[:n])
}

// need is the finding that the element lacks fields, or nil.
func (r *reader) need(letter byte, n int) *Error {
	p := &r.parts
	for i, f := range p.lead {
		if i < n && f.kind != wordToken {
			return &Error{Span: f.Span(), Message: fmt.Sprintf("%q cannot be a node of %s %q", f.Text, forms[letter].noun, p.name.Text)}
		}
	}
	if len(p.lead) >= n {
		return nil
	}
	at := p.name.Span().End
	if k := len(p.lead); k > 0 {
		at = p.lead[k-1].Span().End
	}
	f := forms[letter]
	return &Error{
		Span:    source.Span{Start: at, End: at},
		Message: fmt.Sprintf("%s %q needs %s; %s", f.noun, p.name.Text, list(f.fields), found(len(p.lead), len(p.params))),
	}
}

func found(lead, params int) string {
	where := "on the card"
	if params > 0 {
		where = "before its parameters"
	}
	switch lead {
	case 0:
		return "nothing stands " + where
	case 1:
		return "one field stands " + where
	}
	return fmt.Sprintf("%d fields stand %s", lead, where)
}

func list(words []string) string {
	var kept []string
	for _, w := range words {
		if w != "" {
			kept = append(kept, w)
		}
	}
	if len(kept) < 2 {
		return strings.Join(kept, "")
	}
	return strings.Join(kept[:len(kept)-1], ", ") + " and " + kept[len(kept)-1]
}

// modelField takes `$[model]` out of the fields.
func (r *reader) modelField(e *Element) {
	for _, fields := range []*[]field{&r.parts.lead, &r.parts.rest} {
		for i, f := range *fields {
			if f.kind == fieldToken && e.Model.IsZero() {
				e.Model = fieldName(f.Word)
				*fields = append((*fields)[:i], (*fields)[i+1:]...)
				break
			}
		}
	}
}

// mosfet is four terminals and a model; devices on insulator have more terminals,
// old decks write length and width without names.
func (r *reader) mosfet(e *Element) *Error {
	r.modelField(e)
	lead := r.parts.lead
	if e.Model.IsZero() {
		if err := r.need('m', 5); err != nil {
			return err
		}
		n := len(lead)
		for n > 5 && !lead[n-1].isName() {
			n--
		}
		e.Model = lead[n-1].Word
		e.Nodes = r.slabs.nodes(lead[:n-1])
		e.Values = values(lead[n:])
		return nil
	}
	if err := r.need('m', 4); err != nil {
		return err
	}
	e.Nodes = r.slabs.nodes(lead[:4])
	e.Values = values(lead[4:])
	return nil
}

// isName says that a field can be the name of a model.
func (f field) isName() bool {
	if f.kind != wordToken || foldEqual(f.Text, "off") || foldEqual(f.Text, "on") {
		return false
	}
	if c := f.Text[0]; !digit(c) && c != '.' && c != '-' && c != '+' {
		return true
	}
	_, inset, n := scanNumber(f.Text, true)
	return n < len(f.Text) || inset // 2N2222 is a name, though 2n2 is a number too
}

func values(fs []field) []Value {
	if len(fs) == 0 {
		return nil
	}
	vs := make([]Value, len(fs))
	for i, f := range fs {
		vs[i] = f.value()
	}
	return vs
}

// instance is `X1 nodes name` or `X1 nodes / name`.
func (r *reader) instance(e *Element) *Error {
	r.modelField(e)
	lead := r.parts.lead
	for i, f := range lead {
		if foldEqual(f.Text, "params:") {
			r.parts.rest = append(r.parts.rest, lead[i+1:]...)
			lead = lead[:i]
			break
		}
	}
	r.parts.lead = lead
	if !e.Model.IsZero() {
		if err := r.need('x', len(lead)); err != nil {
			return err
		}
		e.Nodes = r.slabs.nodes(lead)
		return nil
	}
	if err := r.need(e.Letter, max(len(lead), 1)); err != nil {
		return err
	}
	n := len(lead) - 1
	e.Model = lead[n].Word
	for n > 0 && lead[n-1].Text == "/" {
		n--
	}
	if e.Model.Text == "/" {
		return &Error{Span: e.Model.Span(), Message: fmt.Sprintf("instance %q has no name of a subckt behind \"/\"", e.Name.Text)}
	}
	e.Nodes = r.slabs.nodes(lead[:n])
	return nil
}

// passive is R, C or L: a value, a model, or both in either order.
func (r *reader) passive(e *Element) *Error {
	r.modelField(e)
	lead := r.parts.lead
	if err := r.need(e.Letter, 2); err != nil {
		return err
	}
	if len(lead) == 2 && len(e.Params) == 0 && e.Model.IsZero() {
		return r.need(e.Letter, 3)
	}
	e.Nodes = r.slabs.nodes(lead[:2])
	fields := lead[2:]
	if e.Model.IsZero() {
		switch {
		case len(fields) == 1 && fields[0].isName() && e.sized():
			e.Model, fields = fields[0].Word, nil
		case len(fields) == 2 && fields[0].isName() && !fields[1].isName():
			e.Model, fields = fields[0].Word, fields[1:]
		case len(fields) == 2 && !fields[0].isName() && fields[1].isName():
			e.Model, fields = fields[1].Word, fields[:1]
		}
	}
	e.Values = values(fields)
	return nil
}

// sized says that a passive has its value or its geometry as a parameter, so that
// a single name on the card is its model.
func (e *Element) sized() bool {
	for _, p := range e.Params {
		switch Fold(p.Name.Text) {
		case "w", "l", "r", "c", "res", "cap", "ind", "area":
			return true
		}
	}
	return false
}

// junction is a diode, bipolar, JFET or MESFET: terminals, perhaps a substrate,
// the model, perhaps an area.
func (r *reader) junction(e *Element, terminals int) *Error {
	r.modelField(e)
	lead := r.parts.lead
	if !e.Model.IsZero() {
		if err := r.need(e.Letter, terminals); err != nil {
			return err
		}
		n := terminals
		if len(lead) > n && lead[n].isName() && e.Letter == 'q' {
			n++
		}
		e.Nodes = r.slabs.nodes(lead[:n])
		e.Values = values(lead[n:])
		return nil
	}
	if err := r.need(e.Letter, terminals+1); err != nil {
		return err
	}
	n := terminals
	if len(lead) > n+1 && lead[n+1].isName() && e.Letter != 'd' {
		n++ // a substrate
	}
	e.Nodes = r.slabs.nodes(lead[:n])
	e.Model = lead[n].Word
	e.Values = values(lead[n+1:])
	return nil
}
