package settings

import (
	"strings"

	"triodeck/parser"
)

// path reads one `[[path]]`: rules for the decks that match.
func (r *reader) path(n *node) {
	pattern := ""
	if match := n.field("match"); match != nil {
		pattern, _ = r.text(match)
		pattern = strings.TrimPrefix(pattern, "./")
	}
	if pattern == "" {
		r.problem(n.span, "the path has no `match = \"legacy/*\"`: it says which decks the rules are for")
	}
	r.table(n, "path", fields{
		"match": func(*node) {},
		"rules": func(f *node) {
			if pattern != "" {
				r.rules(f, pattern)
			}
		},
	})
}

var levels = []string{"error", "warning", "note", "off"}

// rules reads levels and thresholds by a rule's name. Which names exist is not
// known here: see File.UnknownRules.
func (r *reader) rules(n *node, path string) {
	if n.kind != tableValue {
		r.problem(n.span, "\"rules\" is to be a table of rules")
		return
	}
	for _, f := range n.fields {
		rule := Rule{Path: path, Name: f.key, Span: f.at}
		switch f.kind {
		case stringValue:
			rule.Level, _ = r.word(f, levels...)
		case tableValue:
			rule.Thresholds = map[string]float64{}
			for _, q := range f.fields {
				if q.key == "level" {
					rule.Level, _ = r.word(q, levels...)
				} else if x, ok := r.number(q); ok {
					rule.Thresholds[parser.Fold(q.key)] = x
				}
			}
		default:
			r.problem(f.span, "%q is to be a level (%s) or a table of a level and thresholds", f.key, strings.Join(levels, ", "))
			continue
		}
		r.file.Rules = append(r.file.Rules, rule)
	}
}
