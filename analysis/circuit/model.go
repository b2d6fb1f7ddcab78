package circuit

import (
	"sort"

	"triodeck/parser"
)

// Type is the folded type of a model or of its bins: nmos, pmos, …
func (m *Model) Type() string {
	switch {
	case m.Def != nil:
		return m.Def.Type
	case len(m.Bins) > 0:
		return m.Bins[0].Type
	}
	return ""
}

// model finds a model by its folded name: the nearest scope that has it or bins
// of it decides. The first of several definitions counts.
func (e *Env) model(name string) *Model {
	for at := e; at != nil; at = at.parent {
		for _, def := range at.scope.Models[name] {
			if at.active(def.Branch) {
				return at.evaluated(def)
			}
		}
		if m := at.binned(name); m != nil {
			return m
		}
	}
	return nil
}

// binned gives the bins of a name in this environment's scope, nil if there are
// none; asked again it gives the same.
func (e *Env) binned(name string) *Model {
	var bins []*ModelDef
	for _, def := range e.scope.bins[name] {
		if e.active(def.Branch) {
			bins = append(bins, def)
		}
	}
	if len(bins) == 0 {
		return nil
	}
	return e.keep(bins[0], true, &Model{Bins: bins, table: &binTable{}})
}

// hasModel says whether model would find something, without evaluating it.
func (e *Env) hasModel(name string) bool {
	for ; e != nil; e = e.parent {
		for _, defs := range [][]*ModelDef{e.scope.Models[name], e.scope.bins[name]} {
			for _, def := range defs {
				if e.active(def.Branch) {
					return true
				}
			}
		}
	}
	return false
}

// subckt finds a subckt by its folded name; the first of several counts.
func (e *Env) subckt(name string) *Scope {
	for ; e != nil; e = e.parent {
		for _, def := range e.scope.Subckts[name] {
			if e.active(def.Branch) {
				return def
			}
		}
	}
	return nil
}

// Model evaluates a model card for the devices of this cell; nil if the card is
// not visible here. The model is shared and not to be changed.
func (e *Env) Model(def *ModelDef) *Model {
	at := e.of(def.Scope)
	if at == nil {
		return nil
	}
	return at.evaluated(def)
}

// ModelParam evaluates one parameter of a card, by its folded name, without the
// rest: a bin's limits, before one is chosen among sixty.
func (e *Env) ModelParam(def *ModelDef, name string) Value {
	at := e.of(def.Scope)
	if at == nil {
		return Value{}
	}
	for _, card := range at.cards(def) {
		params := card.def.Params
		for k := len(params) - 1; k >= 0; k-- {
			if p := &params[k]; !p.Name.IsZero() && parser.Fold(p.Name.Text) == name {
				return card.env.modelValue(card.def, p)
			}
		}
	}
	return Value{}
}

// modelCard is a card with the environment in which it stands.
type modelCard struct {
	env *Env
	def *ModelDef
}

// cards lists a card and, if it says `ako:`, those that it builds on in turn.
func (e *Env) cards(def *ModelDef) []modelCard {
	list := []modelCard{{e, def}}
	for len(list) < maxBases {
		base := def.base()
		if base == nil {
			break
		}
		at := e.of(base.Scope)
		if at == nil {
			break
		}
		e, def = at, base
		list = append(list, modelCard{e, def})
	}
	return list
}

// base is the model that a card builds on: the first of that name that is not
// the card itself; nil if it says none or there is none.
func (m *ModelDef) base() *ModelDef {
	if m.Base.IsZero() {
		return nil
	}
	name := parser.Fold(m.Base.Text)
	for s := m.Scope; s != nil; s = s.Parent {
		for _, def := range s.Models[name] {
			if def != m {
				return def
			}
		}
	}
	return nil
}

func (e *Env) modelValue(def *ModelDef, p *parser.Param) Value {
	v := e.valueAt(p.Value, def.Place.Doc, def.Place.Card)
	if p.Value.Form == parser.NoValue {
		return Value{V: 1, Set: true}
	}
	if v.Err != nil && p.Value.Form == parser.NameValue {
		v.Err = asWord(v.Err, p.Value.Text) // `mfg=acme`
	}
	return v
}

// evaluated gives the model of a definition of this environment's scope.
func (e *Env) evaluated(def *ModelDef) *Model {
	e.mu.Lock()
	m := e.models[modelKey{def, false}]
	e.mu.Unlock()
	if m != nil {
		return m
	}
	m = &Model{Def: def, Params: make(map[string]Value, len(def.Params))}
	cards := e.cards(def)
	for c := len(cards) - 1; c >= 0; c-- { // what the card itself states comes last
		card := cards[c]
		for k := range card.def.Params {
			if p := &card.def.Params[k]; !p.Name.IsZero() {
				m.Params[parser.Fold(p.Name.Text)] = card.env.modelValue(card.def, p)
			}
		}
	}
	return e.keep(def, false, m)
}

// modelKey tells a card from the set of bins that begins with it.
type modelKey struct {
	def  *ModelDef
	bins bool
}

// keep stores a model unless another goroutine came first, and gives the one stored.
func (e *Env) keep(def *ModelDef, bins bool, m *Model) *Model {
	key := modelKey{def, bins}
	e.mu.Lock()
	defer e.mu.Unlock()
	if first := e.models[key]; first != nil {
		return first
	}
	if e.models == nil {
		e.models = map[modelKey]*Model{}
	}
	e.models[key] = m
	return m
}

// modelErrors lists why parameters of a model did not evaluate, by name.
func modelErrors(m *Model) []error {
	var names []string
	for name, v := range m.Params {
		if v.Err != nil {
			names = append(names, name)
		}
	}
	sort.Strings(names)
	var errs []error
	for _, name := range names {
		errs = append(errs, m.Params[name].Err)
	}
	return errs
}
