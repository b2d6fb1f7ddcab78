package bias

import (
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// statements are the annotations of one scope, sorted by what they do.
type statements struct {
	bias    []assignment
	modes   []string // folded, in order of appearance
	inMode  map[string][]assignment
	corners []cornerAt
	expects []circuit.NoteAt
	fits    []fitAt
	access  []accessAt
	unbuilt []circuit.NoteAt // read, and not acted on
}

// assignment is one `v(node)=…` with the place of its text.
type assignment struct {
	parser.Assign
	note  circuit.NoteAt
	place circuit.Place
}

type cornerAt struct {
	*parser.Corner
	name    string // folded
	note    circuit.NoteAt
	assigns []assignment
}

type fitAt struct {
	*parser.Fit
	note circuit.NoteAt
}

type accessAt struct {
	*parser.Access
	note circuit.NoteAt
}

// collect sorts the annotations of a scope.
func collect(s *circuit.Scope) *statements {
	st := &statements{inMode: map[string][]assignment{}}
	for _, n := range s.Notes {
		switch note := n.Note.(type) {
		case *parser.Bias:
			st.bias = append(st.bias, assignments(n, note.Assigns)...)
		case *parser.Mode:
			name := parser.Fold(note.Name.Text)
			if _, seen := st.inMode[name]; !seen {
				st.modes = append(st.modes, name)
			}
			st.inMode[name] = append(st.inMode[name], assignments(n, note.Assigns)...)
		case *parser.Corner:
			st.corners = append(st.corners, cornerAt{
				Corner: note, name: parser.Fold(note.Name.Text), note: n, assigns: assignments(n, note.Assigns),
			})
		case *parser.Expect:
			st.expects = append(st.expects, n)
			if note.Kind == parser.PathTarget || note.Kind == parser.SettleTarget {
				st.unbuilt = append(st.unbuilt, n)
			}
		case *parser.Fit:
			st.fits = append(st.fits, fitAt{note, n})
		case *parser.Access:
			st.access = append(st.access, accessAt{note, n})
		case *parser.BiasFrom:
			st.unbuilt = append(st.unbuilt, n)
		}
	}
	return st
}

func assignments(n circuit.NoteAt, list []parser.Assign) []assignment {
	out := make([]assignment, len(list))
	for i, a := range list {
		out[i] = assignment{a, n, placeOf(n, a.Span.Start, a.Span.End)}
	}
	return out
}

// inEffect lists the assignments that hold in a mode at a corner, the later
// overriding the earlier: bias lines, then the mode's, then the corner's.
func (st *statements) inEffect(mode, corner string) (list []assignment, layers []layer) {
	add := func(as []assignment, l layer) {
		for _, a := range as {
			list = append(list, a)
			layers = append(layers, l)
		}
	}
	add(st.bias, biasLayer)
	add(st.inMode[mode], modeLayer)
	for _, c := range st.corners {
		if c.name == corner {
			add(c.assigns, cornerLayer)
		}
	}
	return list, layers
}

// layer tells which kind of annotation an assignment comes from.
type layer uint8

const (
	biasLayer layer = iota
	modeLayer
	cornerLayer
)
