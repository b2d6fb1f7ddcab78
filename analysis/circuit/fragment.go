package circuit

import "triodeck/parser"

// fragment says that a file is a part for others to include: it drives nothing,
// analyses nothing and does not end. Such a one has no title, so that a first
// line which reads as an element is one.
func fragment(f *parser.File) bool {
	depth := 0
	for i := range f.Len() {
		switch s := f.Card(i).Stmt.(type) {
		case *parser.Subckt:
			depth++
		case *parser.Ends:
			depth--
		case *parser.End:
			return false
		case *parser.Element:
			if depth == 0 && (s.Letter == 'v' || s.Letter == 'i') {
				return false
			}
		case *parser.Other:
			if IsAnalysis(s.Name.Text) {
				return false
			}
		}
	}
	return true
}

// analyses are the directives that ask a simulator for results.
var analyses = map[string]bool{
	".op": true, ".dc": true, ".ac": true, ".tran": true, ".noise": true, ".tf": true,
	".sens": true, ".four": true, ".disto": true, ".pz": true, ".hb": true, ".pss": true,
}

// IsAnalysis says whether a directive asks for results: a file that has one is
// meant to run.
func IsAnalysis(directive string) bool { return analyses[parser.Fold(directive)] }
