package circuit

import (
	"strings"

	"triodeck/parser"
)

// WidthMeaning says what the W of an instance line means where it has fingers.
type WidthMeaning uint8

// What W means.
const (
	WidthUnstated WidthMeaning = iota
	WidthTotal                 // of all fingers together
	WidthFinger                // of one finger
)

// Fact is what somebody states about models or subckts that no card tells.
type Fact struct {
	Pattern string       // folded name of a model, without its bin's number, or of a subckt; `*` and `?` allowed
	Width   WidthMeaning // what W means
	Bare    float64      // metres that a bare 1 stands for in W, L and the like: 1 or 1e-6; 0 if not stated
	Pins    []int        // the terminal (0 drain, 1 gate, 2 source, 3 bulk) of each node of the line; nil if not stated
	Class   string       // folded: what a device of that name is where no card can be read: nmos, pmos, r, c, d, ignore, …; "" if not stated
	Fit     *FitFact
	Access  map[string]float64 // rs, rd (Ω a side), rsw (Ω·µm a side)
	Rating  map[string]float64 // the largest magnitude of vgs, vds, …
	Source  string             // who says so
}

// FitFact is a stand-in for a model that cannot be read.
type FitFact struct {
	Type   string             // nmos or pmos
	Params map[string]float64 // of a level-1 card, or of the level that it names
}

// Facts are facts in the order of their weight: the first that states a thing counts.
type Facts []Fact

// Find gives the first fact about one of the folded names that states what is
// asked for; nil if there is none.
func (f Facts) Find(names []string, states func(*Fact) bool) *Fact {
	for i := range f {
		if !states(&f[i]) {
			continue
		}
		for _, name := range names {
			if name != "" && Match(f[i].Pattern, name) {
				return &f[i]
			}
		}
	}
	return nil
}

// BaseName is a model's name without the number of its bin: `nch.12` is `nch`.
func BaseName(folded string) string {
	if base, _, ok := binName(folded); ok {
		return base
	}
	return folded
}

// FactNames are the folded names under which facts and annotations speak of a
// device: its model's, and the subckt's where the device is the only one in it.
func (c *Cell) FactNames(d *Device) []string { return c.Scope.factNames(d.Elem.Model.Text) }

// classKinds gives the physics by the class that a fact states.
var classKinds = map[string]Kind{
	"nmos": MOSFET, "pmos": MOSFET, "resistor": Resistor, "capacitor": Capacitor, "inductor": Inductor,
	"diode": Diode, "npn": Bipolar, "pnp": Bipolar, "ignore": OtherKind,
}

// stated gives the fact that says what an element is whose model or subckt is
// nowhere to be read: an X, or another letter that has no physics of its own. An
// annotation that fits a transistor to the name says it too.
func (b *builder) stated(e *ElementAt) *Fact {
	if e.Model.IsZero() || kinds[e.Letter] != OtherKind {
		return nil
	}
	name := e.Model.Text
	fact, ok := b.facts[name]
	if !ok {
		if b.facts == nil {
			b.facts = map[string]*Fact{}
		}
		fact = b.findStated(factNames(e.Model))
		b.facts[name] = fact
	}
	return fact
}

func (b *builder) findStated(names []string) *Fact {
	for s := b.cell.Scope; s != nil; s = s.Parent {
		for _, n := range s.Notes {
			if fit, ok := n.Note.(*parser.Fit); ok && n.Err == nil && Match(parser.Fold(fit.Model.Text), names[0]) {
				return &Fact{Class: parser.Fold(fit.Type.Text)}
			}
		}
	}
	return b.options.Facts.Find(names, func(f *Fact) bool { return f.Class != "" })
}

// pins gives the roles of an element's nodes: as stated, else by the names of the
// ports where there is an empty subckt; nil if neither tells.
func (b *builder) pins(e *ElementAt) []int {
	if fact := b.options.Facts.Find(factNames(e.Model), func(f *Fact) bool { return f.Pins != nil }); fact != nil {
		return fact.Pins
	}
	def := b.cell.Env.subckt(parser.Fold(e.Model.Text))
	if def == nil || len(def.Ports) != 4 {
		return nil
	}
	var roles []int
	seen := map[int]bool{}
	for _, port := range def.Ports {
		name := parser.Fold(port.Text)
		role := strings.IndexByte("dgsb", name[0])
		if role < 0 || seen[role] {
			return nil
		}
		seen[role] = true
		roles = append(roles, role)
	}
	return roles
}

func factNames(model parser.Word) []string { return []string{BaseName(parser.Fold(model.Text))} }

// rolesFirst puts nets into the order drain, gate, source, bulk.
func rolesFirst(nets []NetID, roles []int) []NetID {
	if len(roles) == 0 || len(nets) < len(roles) {
		return nets
	}
	sorted := append([]NetID(nil), nets...)
	for at, role := range roles {
		sorted[role] = nets[at]
	}
	return sorted
}

// opaque says that a subckt has ports and no body: what stood in it is encrypted,
// or left to another program.
func (s *Scope) opaque() bool {
	return len(s.Elements) == 0 && len(s.Children) == 0 && len(s.models) == 0
}
