package circuit

import (
	"slices"
	"strings"

	"triodeck/parser"
)

// builder fills one cell.
type builder struct {
	*elaborator
	cell *Cell

	// Extracted decks repeat the same parameter text thousands of times; equal
	// texts of one cell have equal values.
	values map[string]map[string]Value // of devices, by text
	passed map[string]map[string]Value // of instances, likewise
	calls  map[call]*Cell
	models map[*Model]bool // those looked at for errors
	sizes  map[sizeKey]sized
	facts  map[string]*Fact // by the name of a model or subckt; see stated

	// Devices, instances and node lists are cut from blocks: a deck has millions.
	devices   []Device
	instances []Instance
	ids       []NetID
}

// call is an instance's line, as far as it decides the cell.
type call struct {
	def  *Scope
	text string
}

const blockSize = 256

// start makes the nets of ground and of the ports.
func (b *builder) start() {
	b.cell.nets = map[string]NetID{}
	b.values = map[string]map[string]Value{}
	b.passed = map[string]map[string]Value{}
	b.models = map[*Model]bool{}
	b.sizes = map[sizeKey]sized{}
	b.calls = map[call]*Cell{}
	c := b.cell
	c.Nets = append(c.Nets, Net{Name: "0", Spelt: "0", Port: -1, Global: true, Place: c.Scope.Place})
	for _, name := range []string{"0", "gnd", "gnd!"} {
		c.nets[name] = Ground
	}
	for i, p := range c.Scope.Ports {
		at := place(c.Scope.Place.Doc, c.Scope.Place.Card, p.Span())
		id, known := c.nets[parser.Fold(p.Text)]
		if !known {
			id = b.newNet(p, at)
			c.Nets[id].Global = false // a port hides the global net of its name
		}
		if c.Nets[id].Port < 0 {
			c.Nets[id].Port = i
		}
		c.Ports = append(c.Ports, id)
	}
}

func (b *builder) newNet(w parser.Word, at Place) NetID {
	c := b.cell
	name := parser.Fold(w.Text)
	id := NetID(len(c.Nets))
	c.Nets = append(c.Nets, Net{
		Name: name, Spelt: w.Text, Port: -1, Place: at,
		Global: b.design.Top.Globals[name] || len(name) > 1 && strings.HasSuffix(name, "!"),
	})
	c.nets[name] = id
	return id
}

// nodes gives the nets of an element's terminals.
func (b *builder) nodes(e *ElementAt) []NetID { return b.netsOf(e, e.Nodes) }

func (b *builder) netsOf(e *ElementAt, nodes []parser.Word) []NetID {
	n := len(nodes)
	if cap(b.ids)-len(b.ids) < n {
		b.ids = make([]NetID, 0, max(n, 4*blockSize))
	}
	from := len(b.ids)
	for _, w := range nodes {
		b.ids = append(b.ids, b.net(w, e.Place.Doc, e.Place.Card))
	}
	return b.ids[from:len(b.ids):len(b.ids)]
}

func (b *builder) net(w parser.Word, doc *Document, card int) NetID {
	if id, ok := b.cell.nets[w.Text]; ok {
		return id
	}
	if id, ok := b.cell.nets[parser.Fold(w.Text)]; ok {
		return id
	}
	return b.newNet(w, place(doc, card, w.Span()))
}

// connections gives the nets of an instance in the order of its subckt's ports:
// as listed, or by name, with the defaults of optional ports left out.
func (b *builder) connections(e *ElementAt, def *Scope) []NetID {
	nodes := e.Nodes
	if len(e.Pins) > 0 {
		nodes = named(e, def)
	}
	nets := b.netsOf(e, nodes)
	if def == nil || def.Optional == 0 {
		return nets
	}
	required := len(def.Ports) - def.Optional
	for k := len(nets); k >= required && k < len(def.Ports); k++ {
		w := def.Subckt.Optional[k-required].Value.Word
		nets = append(nets, b.net(w, def.Place.Doc, def.Place.Card))
	}
	return nets
}

// named lists the nodes of an instance that connects ports by name. It stops
// before a port that has none, as a list that is too short does.
func named(e *ElementAt, def *Scope) []parser.Word {
	given := map[string]parser.Word{}
	var nodes []parser.Word
	for _, p := range e.Pins {
		given[parser.Fold(p.Name.Text)] = p.Value.Word
		nodes = append(nodes, p.Value.Word)
	}
	if def == nil {
		return nodes
	}
	nodes = nodes[:0]
	for _, port := range def.Ports {
		w, ok := given[parser.Fold(port.Text)]
		if !ok {
			break
		}
		nodes = append(nodes, w)
	}
	return nodes
}

// element adds a device or an instance.
func (b *builder) element(e *ElementAt) {
	model, def := b.resolve(e)
	if model == nil && (def == nil || def.opaque()) && b.stated(e) != nil {
		b.device(e, nil)
		return
	}
	if def != nil || e.Letter == 'x' && model == nil {
		b.instance(e, def)
		return
	}
	b.device(e, model)
}

// resolve finds what an element's model name means. An X that names a model is a
// device, and any other letter that names a subckt is an instance of it: what
// counts is what exists.
func (b *builder) resolve(e *ElementAt) (*Model, *Scope) {
	env := b.cell.Env
	name := parser.Fold(e.Model.Text)
	if e.Model.IsZero() {
		// `R1 a b rx` may name a parameter or a model: the former goes first.
		if len(e.Values) != 1 || e.Values[0].Form != parser.NameValue {
			return nil, nil
		}
		name = parser.Fold(e.Values[0].Text)
		if env.has(name) {
			return nil, nil
		}
	}
	if e.Letter == 'x' {
		if def := env.subckt(name); def != nil {
			return nil, def
		}
		return env.model(name), nil
	}
	if m := env.model(name); m != nil {
		return m, nil
	}
	def := env.subckt(name)
	if slices.Contains(b.open, def) {
		return nil, nil // a resistor in the subckt of its own name: the model is elsewhere
	}
	return nil, def
}

func (b *builder) instance(e *ElementAt, def *Scope) {
	if len(b.instances) == cap(b.instances) {
		b.instances = make([]Instance, 0, blockSize)
	}
	b.instances = b.instances[:len(b.instances)+1]
	x := &b.instances[len(b.instances)-1]
	*x = Instance{
		Name: parser.Fold(e.Name.Text), Spelt: e.Name.Text, Elem: e.Element, Place: e.Place,
		Nets: b.connections(e, def), Def: def, Params: b.params(e, b.passed), M: Value{V: 1},
	}
	b.cell.Instances = append(b.cell.Instances, x)
	if m, ok := x.Params["m"]; ok && (def == nil || !def.declares("m")) {
		x.M = m
		b.report(b.cell.Scope, m.Err)
	}
	if def != nil {
		x.Cell = b.call(x, def)
	}
}

// call gives the cell that an instance calls.
func (b *builder) call(x *Instance, def *Scope) *Cell {
	key := call{def, paramText(x.Place, x.Elem)}
	if c, ok := b.calls[key]; ok {
		return c
	}
	at := place(x.Place.Doc, x.Place.Card, x.Elem.Model.Span())
	nested := 0
	for _, s := range b.open {
		if s == def {
			nested++
		}
	}
	// A subckt with conditionals may call itself and come to an end.
	if nested > 0 && len(def.conds) == 0 {
		b.problems.add(Recursion, at, x.Elem.Model.Text, "subckt %q contains itself%s", x.Elem.Model.Text, b.between(def))
		return nil
	}
	if len(b.open) > maxHierarchy {
		b.problems.add(TooDeep, at, x.Elem.Model.Text, "subckt %q is not read here: more than %d instances stand inside each other", x.Elem.Model.Text, maxHierarchy)
		return nil
	}
	args := map[string]Value{}
	for name, v := range x.Params {
		if def.declares(name) || name != "m" && def.mentions(name) {
			args[name] = v // one without a value is reported where it is used
		}
	}
	c := b.instantiate(def, b.cell.Env.of(def.Parent), args)
	b.calls[key] = c
	return c
}

// between names the subckts on the way from a subckt back to itself.
func (b *builder) between(def *Scope) string {
	var names []string
	for i := len(b.open) - 1; i >= 0 && b.open[i] != def; i-- {
		names = append([]string{`"` + b.open[i].Subckt.Name.Text + `"`}, names...)
	}
	if len(names) == 0 {
		return ""
	}
	return " through " + strings.Join(names, ", ")
}

// params evaluates an element's `name=value` pairs, or finds them among those of
// equal text.
func (b *builder) params(e *ElementAt, known map[string]map[string]Value) map[string]Value {
	if len(e.Params) == 0 {
		return nil
	}
	text := paramText(e.Place, e.Element)
	if got, ok := known[text]; ok {
		return got
	}
	got := make(map[string]Value, len(e.Params))
	for k := range e.Params {
		p := &e.Params[k]
		if p.Name.IsZero() {
			continue
		}
		name := parser.Fold(p.Name.Text)
		v := b.value(p.Value, e.Place)
		if e.Letter != 'x' && p.Value.Form == parser.NameValue && !numeric[name] {
			v.Err = asWord(v.Err, p.Value.Text)
		}
		got[name] = v
	}
	known[text] = got
	return got
}

// value evaluates a value of a card. A name that is no parameter but a model or
// a subckt is a word, not a mistake.
func (b *builder) value(v parser.Value, at Place) Value {
	got := b.cell.Env.valueAt(v, at.Doc, at.Card)
	if v.Form == parser.NoValue {
		return Value{V: 1, Set: true} // a flag: off
	}
	if got.Err != nil && v.Form == parser.NameValue {
		name := parser.Fold(v.Text)
		if b.cell.Env.hasModel(name) || b.cell.Env.subckt(name) != nil {
			got.Err = asWord(got.Err, v.Text)
		}
	}
	return got
}

// paramText is the part of a card from its first parameter to its last.
func paramText(at Place, e *parser.Element) string {
	if len(e.Params) == 0 {
		return ""
	}
	text := at.Doc.File.Card(at.Card).Text
	from, to := int32(len(text)), int32(0)
	for k := range e.Params {
		p := &e.Params[k]
		if p.Name.IsZero() { // behind the comma of a list
			from = min(from, p.Value.Start)
		} else {
			from = min(from, p.Name.Start)
		}
		to = max(to, p.Name.Span().End, p.Value.Span().End)
	}
	if from < 0 || from > to || int(to) > len(text) {
		return text
	}
	return text[from:to]
}

// finish connects the terminals.
func (b *builder) finish() {
	c := b.cell
	counts := make([]int32, len(c.Nets))
	total := 0
	for _, d := range c.Devices {
		total += len(d.Nets)
		for _, n := range d.Nets {
			counts[n]++
		}
	}
	for _, x := range c.Instances {
		total += len(x.Nets)
		for _, n := range x.Nets {
			counts[n]++
		}
	}
	pins := make([]Pin, total)
	for i := range c.Nets {
		n := counts[i]
		c.Nets[i].Pins, pins = pins[:0:n], pins[n:]
	}
	for _, d := range c.Devices {
		for t, n := range d.Nets {
			c.Nets[n].Pins = append(c.Nets[n].Pins, Pin{Device: d, Terminal: t})
		}
	}
	for _, x := range c.Instances {
		for t, n := range x.Nets {
			c.Nets[n].Pins = append(c.Nets[n].Pins, Pin{Instance: x, Terminal: t})
		}
	}
}
