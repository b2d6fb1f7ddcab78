package circuit

import (
	"strings"

	"triodeck/parser"
)

// section is a `.lib name` … `.endl` block of a file, as card indices: the cards
// inside are [from+1, to); to is the `.endl`, or the first card after an unclosed one.
type section struct {
	name     string // folded
	from, to int
	closed   bool
}

// sections is the index of a file's section definitions.
type sections struct {
	list    []section
	starts  map[int]int // card index to position in list
	include map[int]bool
}

// find gives the first section of a folded name.
func (s *sections) find(name string) (section, bool) {
	for _, sec := range s.list {
		if sec.name == name {
			return sec, true
		}
	}
	return section{}, false
}

// indexSections finds the definitions. `.lib x` with one word starts a section,
// or, where x looks like a file's name and no `.endl` closes it, includes that file.
func indexSections(f *parser.File) *sections {
	type mark struct {
		card  int
		name  string
		start bool
	}
	var marks []mark
	for i := range f.Len() {
		switch s := f.Card(i).Stmt.(type) {
		case *parser.LibSection:
			marks = append(marks, mark{i, parser.Fold(s.Name.Text), true})
		case *parser.EndLib:
			marks = append(marks, mark{i, parser.Fold(s.Name.Text), false})
		}
	}
	index := &sections{starts: map[int]int{}, include: map[int]bool{}}
	for k, m := range marks {
		if m.start && looksLikePath(m.name) &&
			!(k+1 < len(marks) && !marks[k+1].start && marks[k+1].name == m.name) {
			index.include[m.card] = true
		}
	}
	for k := 0; k < len(marks); k++ {
		m := marks[k]
		if !m.start || index.include[m.card] {
			continue
		}
		sec := section{name: m.name, from: m.card, to: f.Len()}
		for _, next := range marks[k+1:] {
			if !index.include[next.card] {
				sec.to, sec.closed = next.card, !next.start
				break
			}
		}
		index.starts[m.card] = len(index.list)
		index.list = append(index.list, sec)
	}
	return index
}

func looksLikePath(name string) bool { return strings.ContainsAny(name, `./\`) }
