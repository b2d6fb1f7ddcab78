package circuit

import (
	"strings"

	"triodeck/parser"
)

// kinds gives the physics of an element by its letter.
var kinds = map[byte]Kind{
	'm': MOSFET, 'r': Resistor, 'c': Capacitor, 'l': Inductor, 'd': Diode, 'q': Bipolar,
	'v': VSource, 'i': ISource, 'e': VCVS, 'g': VCCS, 'f': CCCS, 'h': CCVS, 'k': Coupling,
}

// modelKinds gives the physics by a model's type, for elements of other letters.
var modelKinds = map[string]Kind{
	"nmos": MOSFET, "pmos": MOSFET, "r": Resistor, "res": Resistor, "c": Capacitor, "cap": Capacitor,
	"l": Inductor, "ind": Inductor, "d": Diode, "npn": Bipolar, "pnp": Bipolar,
}

// String is the kind's word: "mosfet", "resistor", …
func (k Kind) String() string {
	return [...]string{"other", "mosfet", "resistor", "capacitor", "inductor", "diode", "bipolar",
		"vsource", "isource", "vcvs", "vccs", "cccs", "ccvs", "coupling"}[k]
}

func (b *builder) device(e *ElementAt, model *Model) {
	if len(b.devices) == cap(b.devices) {
		b.devices = make([]Device, 0, blockSize)
	}
	b.devices = b.devices[:len(b.devices)+1]
	d := &b.devices[len(b.devices)-1]
	seen := len(b.values)
	*d = Device{
		Name: parser.Fold(e.Name.Text), Spelt: e.Name.Text, Kind: kinds[e.Letter], Elem: e.Element, Place: e.Place,
		Nets: b.nodes(e), Model: model, Params: b.params(e, b.values), Scale: b.scale,
	}
	if d.Kind == OtherKind && model != nil {
		d.Kind = modelKinds[model.Type()]
	}
	if model == nil {
		if fact := b.stated(e); fact != nil {
			d.Kind = classKinds[fact.Class]
			d.Nets = rolesFirst(d.Nets, b.pins(e))
		}
	}
	if d.Kind == MOSFET {
		b.size(e, d)
		model = d.Model
	}
	d.Value = b.mainValue(e, d)
	b.report(b.cell.Scope, d.Value.Err)
	if len(b.values) > seen {
		b.reportParams(e, d.Params)
	}
	if model != nil && !b.models[model] {
		b.models[model] = true
		for _, err := range modelErrors(model) {
			b.report(b.cell.Scope, err)
		}
	}
	b.cell.Devices = append(b.cell.Devices, d)
}

// reportParams notes the parameters of a device that do not evaluate. Those with
// a `$` are remarks of a layout tool.
func (b *builder) reportParams(e *ElementAt, params map[string]Value) {
	for k := range e.Params {
		name := e.Params[k].Name.Text
		if v := params[parser.Fold(name)]; v.Err != nil && !strings.HasPrefix(name, "$") {
			b.report(b.cell.Scope, v.Err)
		}
	}
}

// numeric are the parameters of elements that mean a number, so that a bare name
// behind them must be a parameter's. Decks add others of all kinds: `style=normal`.
var numeric = map[string]bool{
	"w": true, "l": true, "m": true, "nf": true, "ng": true, "nfin": true, "mult": true, "multi": true, "par": true,
	"ad": true, "as": true, "pd": true, "ps": true, "nrd": true, "nrs": true, "sa": true, "sb": true, "sd": true,
	"delvto": true, "dtemp": true, "temp": true, "area": true, "pj": true, "perim": true,
	"r": true, "res": true, "c": true, "cap": true, "value": true, "dc": true, "gain": true, "gm": true, "tc": true, "tc1": true, "tc2": true,
}

// valueNames are the parameters that give an element's value by name.
var valueNames = map[Kind][]string{
	Resistor:  {"r", "res", "value"},
	Capacitor: {"c", "cap", "value"},
	Inductor:  {"l", "ind", "value"},
	VSource:   {"dc"},
	ISource:   {"dc"},
	VCVS:      {"gain"},
	VCCS:      {"gm", "gain"},
	CCCS:      {"gain"},
	CCVS:      {"gain"},
	Coupling:  {"k"},
	Diode:     {"area"},
	Bipolar:   {"area"},
}

// mainValue is the resistance, capacitance, DC value, gain or area that the card states.
func (b *builder) mainValue(e *ElementAt, d *Device) Value {
	names, ok := valueNames[d.Kind]
	if !ok {
		return Value{}
	}
	if (d.Kind == VSource || d.Kind == ISource) && e.Source != nil {
		if v := b.sourceValue(e); v.Set {
			return v
		}
	}
	if e.Source == nil && len(e.Values) > 0 && b.isValue(e, d) {
		return b.value(e.Values[0], e.Place)
	}
	for _, name := range names {
		if v, ok := d.Params[name]; ok {
			return v
		}
	}
	if d.Kind == VSource || d.Kind == ISource {
		return Value{Set: true} // a source that states nothing is 0
	}
	// `R1 a b rload`: one cannot tell a model from a parameter by its looks.
	if d.Model == nil && !e.Model.IsZero() {
		if v := b.cell.Env.Param(e.Model.Text); v.Set {
			return v
		}
	}
	return Value{}
}

// isValue says whether the first positional value of a card is its main value.
func (b *builder) isValue(e *ElementAt, d *Device) bool {
	v := e.Values[0]
	switch d.Kind {
	case Resistor, Capacitor, Inductor: // further values: temperature coefficients, polynomials
		return v.Form != parser.NameValue || d.Model == nil
	case Diode, Bipolar: // `off` may stand there too
		return v.Form != parser.NameValue || b.cell.Env.has(parser.Fold(v.Text))
	}
	return len(e.Values) == 1
}

// sourceValue is the DC value of a source, or what its waveform begins with:
// that is what an operating point sees.
func (b *builder) sourceValue(e *ElementAt) Value {
	s := e.Source
	if s.DC.Form != parser.NoValue {
		return b.value(s.DC, e.Place)
	}
	at := 0
	switch parser.Fold(s.Func.Text) {
	case "pulse", "sin", "sine", "exp", "sffm":
	case "pwl":
		at = 1
	default:
		return Value{}
	}
	if at < len(s.Args) {
		return b.value(s.Args[at], e.Place)
	}
	return Value{}
}
