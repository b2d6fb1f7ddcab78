package circuit

import (
	"sort"
	"strconv"
	"strings"

	"triodeck/parser"
)

func newScope(parent *Scope) *Scope {
	return &Scope{
		Parent:  parent,
		Models:  map[string][]*ModelDef{},
		Subckts: map[string][]*Scope{},
		Params:  map[string][]*ParamDef{},
	}
}

// FindModel gives the models of a folded name in the nearest scope that has one.
func (s *Scope) FindModel(name string) []*ModelDef {
	for ; s != nil; s = s.Parent {
		if defs := s.Models[name]; len(defs) > 0 {
			return defs
		}
	}
	return nil
}

// FindBins gives the models `name.0`, `name.1`, … in the nearest scope that has
// any, by their number.
func (s *Scope) FindBins(name string) []*ModelDef {
	for ; s != nil; s = s.Parent {
		if defs := s.bins[name]; len(defs) > 0 {
			return defs
		}
	}
	return nil
}

// FindSubckt gives the subckts of a folded name in the nearest scope that has one.
func (s *Scope) FindSubckt(name string) []*Scope {
	for ; s != nil; s = s.Parent {
		if defs := s.Subckts[name]; len(defs) > 0 {
			return defs
		}
	}
	return nil
}

// FindParam gives the definitions of a folded name, parameters and functions, in
// the nearest scope that has one.
func (s *Scope) FindParam(name string) []*ParamDef {
	for ; s != nil; s = s.Parent {
		if defs := s.Params[name]; len(defs) > 0 {
			return defs
		}
	}
	return nil
}

// IsOpen says that names may exist in this scope or around it which could not be
// read, so that a name not found is not known to be wrong.
func (s *Scope) IsOpen() bool {
	for ; s != nil; s = s.Parent {
		if s.Open {
			return true
		}
	}
	return false
}

// ModelList is every model of the scope, in the order of the text.
func (s *Scope) ModelList() []*ModelDef { return s.models }

// ParamList is every parameter and function of the scope, in the order of the text.
func (s *Scope) ParamList() []*ParamDef { return s.params }

// Walk visits the scope and those inside it, outer first, in the order of the text.
func (s *Scope) Walk(visit func(*Scope)) {
	visit(s)
	for _, c := range s.Children {
		c.Walk(visit)
	}
}

// Scopes is every scope of the design, the top level first.
func (d *Design) Scopes() []*Scope {
	var all []*Scope
	d.Top.Walk(func(s *Scope) { all = append(all, s) })
	return all
}

// Unresolved says that a part of the design could not be read: an include or a
// section is missing somewhere.
func (d *Design) Unresolved() bool {
	open := false
	d.Top.Walk(func(s *Scope) { open = open || s.Open })
	return open
}

func (s *Scope) addModel(m *ModelDef) {
	s.Models[m.Name] = append(s.Models[m.Name], m)
	s.models = append(s.models, m)
	if base, _, ok := binName(m.Name); ok {
		if s.bins == nil {
			s.bins = map[string][]*ModelDef{}
		}
		s.bins[base] = append(s.bins[base], m)
	}
}

func (s *Scope) addParam(p *ParamDef) {
	s.Params[p.Name] = append(s.Params[p.Name], p)
	s.params = append(s.params, p)
}

func (s *Scope) addSubckt(c *Scope) {
	s.Subckts[c.Name] = append(s.Subckts[c.Name], c)
	s.Children = append(s.Children, c)
}

// finish completes what takes the whole text: bins go in the order of their
// numbers, whatever that of the files, and a model that builds on another takes
// its type.
func (s *Scope) finish() {
	s.sole = s.holdsOne()
	for _, m := range s.models {
		for at, steps := m, 0; m.Type == "" && at != nil && steps < maxBases; steps++ {
			if at = at.base(); at != nil {
				m.Type = at.Type
			}
		}
	}
	for _, defs := range s.bins {
		sort.SliceStable(defs, func(a, b int) bool {
			_, na, _ := binName(defs[a].Name)
			_, nb, _ := binName(defs[b].Name)
			return na < nb
		})
	}
}

// binName splits `nch.12` into `nch` and 12.
func binName(name string) (base string, number int, ok bool) {
	dot := strings.LastIndexByte(name, '.')
	if dot <= 0 || dot == len(name)-1 || len(name)-dot > 7 {
		return "", 0, false
	}
	for _, c := range []byte(name[dot+1:]) {
		if c < '0' || c > '9' {
			return "", 0, false
		}
	}
	number, err := strconv.Atoi(name[dot+1:])
	return name[:dot], number, err == nil
}

// declares says whether the subckt has a parameter of the folded name, in its
// header or its body.
func (s *Scope) declares(name string) bool {
	for _, p := range s.Params[name] {
		if p.Func == nil {
			return true
		}
	}
	return false
}

// mentions says whether a value in the subckt names the folded name. Decks pass
// parameters that no header declares, and coordinates and other remarks that
// nobody reads; only the former tell cells apart. The words are gathered when
// first asked for, while the design is being built and so by one goroutine.
func (s *Scope) mentions(name string) bool {
	if s.words == nil {
		s.words = map[string]bool{}
		s.Walk(func(in *Scope) { in.gatherWords(s.words) })
	}
	return s.words[name]
}

// factNames are the folded names under which facts speak of the device of a model:
// the model's, and the subckt's where it holds one transistor.
func (s *Scope) factNames(model string) []string {
	names := []string{BaseName(parser.Fold(model))}
	if s.sole {
		names = append(names, s.Name)
	}
	return names
}

// holdsOne says whether a subckt has one element that may be the transistor that
// it stands for; instances beside a transistor are taken for its parasitics.
func (s *Scope) holdsOne() bool {
	transistors, instances := 0, 0
	for i := range s.Elements {
		switch s.Elements[i].Letter {
		case 'm', 'n':
			transistors++
		case 'x':
			instances++
		}
	}
	return s.Subckt != nil && (transistors == 1 || transistors == 0 && instances == 1)
}

func (s *Scope) gatherWords(into map[string]bool) {
	for _, e := range s.Elements {
		valueWords(into, e.Values...)
		paramWords(into, e.Params)
		if e.Source != nil {
			valueWords(into, e.Source.DC)
			valueWords(into, e.Source.AC...)
			valueWords(into, e.Source.Args...)
		}
		if e.Letter != 'x' && !e.Model.IsZero() {
			into[parser.Fold(e.Model.Text)] = true // `R1 a b rload` reads as a model
		}
	}
	for _, m := range s.models {
		paramWords(into, m.Params)
	}
	for _, p := range s.params {
		valueWords(into, p.Value)
	}
	for _, c := range s.conds {
		for _, b := range c.Arms {
			valueWords(into, b.Test)
		}
	}
}

func paramWords(into map[string]bool, params []parser.Param) {
	for _, p := range params {
		valueWords(into, p.Value)
	}
}

func valueWords(into map[string]bool, values ...parser.Value) {
	for _, v := range values {
		if v.Form != parser.NameValue && v.Form != parser.ExprValue && v.Form != parser.StringValue {
			continue
		}
		text := parser.Fold(v.Text)
		for i := 0; i < len(text); {
			if !wordByte(text[i]) {
				i++
				continue
			}
			from := i
			for i < len(text) && wordByte(text[i]) {
				i++
			}
			into[text[from:i]] = true
		}
	}
}

func wordByte(c byte) bool {
	return c == '_' || 'a' <= c && c <= 'z' || '0' <= c && c <= '9' || c >= 0x80
}
