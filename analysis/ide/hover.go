package ide

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/workspace"
	"triodeck/parser"
	"triodeck/parser/source"
)

// HoverText is what there is to say about a place, as markdown.
type HoverText struct {
	Span     source.Span // of the words that it is about
	Markdown string
}

// Hover tells about what stands at an offset of a file of a deck; nil if there
// is nothing to say.
func Hover(ctx context.Context, deck *workspace.Deck, path string, offset int32) *HoverText {
	q, ok := ask(ctx, deck, path)
	if !ok {
		return nil
	}
	p, ok := q.at(offset)
	if !ok {
		return nil
	}
	if p.some {
		if text := q.hoverWord(p); text != "" {
			return &HoverText{Span: p.span(p.word.span), Markdown: text}
		}
	}
	e, ok := p.Stmt.(*parser.Element)
	if !ok || !e.Name.IsZero() && offset < p.start+e.Name.Start {
		return nil
	}
	if text := q.hoverElement(p.card, e); text != "" {
		return &HoverText{Span: p.span(e.Name.Span()), Markdown: text}
	}
	return nil
}

// hoverWord tells about the word under the cursor; "" if it is better told about
// as part of its card.
func (q query) hoverWord(p place) string {
	m := p.word
	switch m.kind {
	case elementMark, targetMark:
		if e, card, ok := q.findElement(p, m.text); ok {
			return q.hoverElement(card, e)
		}
	case nodeMark:
		return q.hoverNode(p, m.text)
	case modelMark:
		return q.hoverModel(p, m.text)
	case subcktMark:
		return q.hoverSubckt(p, m.text)
	case paramMark, paramDefMark:
		return q.hoverParam(p, m)
	case keyMark:
		return q.hoverKey(p, m)
	case numberMark:
		return hoverNumber(m)
	case pathMark:
		return q.hoverPath(m)
	}
	if m.note != nil {
		return q.hoverNote(p, m)
	}
	return ""
}

// hoverElement tells about an element of a card of the file.
func (q query) hoverElement(card int, e *parser.Element) string {
	switch e.Letter {
	case 'm':
		return q.hoverDevice(card, e)
	case 'x':
		return q.hoverInstance(card, e)
	}
	return ""
}

// hoverPath tells where a file of an include lies.
func (q query) hoverPath(m mark) string {
	if d := q.included(m.text); d != nil {
		n := strings.Count(d.File.Src, "\n")
		if !strings.HasSuffix(d.File.Src, "\n") && d.File.Src != "" {
			n++
		}
		return fmt.Sprintf("%s: %d %s", code(d.Path), n, plural(n, "line"))
	}
	return code(m.text) + ": not found or not readable"
}

// included is the document that a path on a card of the file leads to.
func (q query) included(path string) *circuit.Document {
	path = filepath.FromSlash(path)
	tries := []string{path}
	if !filepath.IsAbs(path) {
		tries = []string{filepath.Join(filepath.Dir(q.doc.Path), path)}
		for _, root := range q.design.Options.Roots {
			tries = append(tries, filepath.Join(root, path))
		}
	}
	for _, try := range tries {
		for _, d := range q.design.Docs {
			if filepath.Clean(d.Path) == filepath.Clean(try) {
				return d
			}
		}
	}
	return nil
}

// where names a place shortly: the line, with the file's name without its folder
// if that is another than the one asked about.
func (q query) where(at circuit.Place) string {
	if at.Doc == nil {
		return ""
	}
	line := at.Doc.File.Lines().Line(at.Span.Start) + 1
	if at.Doc.Path == q.doc.Path {
		return fmt.Sprintf("line %d", line)
	}
	return name(fmt.Sprintf("%s:%d", filepath.Base(at.Doc.Path), line))
}

// code sets a text as code, whatever it holds.
func code(s string) string {
	s = strings.Map(func(r rune) rune {
		if r < ' ' {
			return ' '
		}
		return r
	}, s)
	if strings.Contains(s, "`") {
		return "`` " + s + " ``"
	}
	return "`" + s + "`"
}

// name sets a name as it is where markdown reads nothing into it, else as code.
// An underscore counts: some editors mark one inside a word as a mistake.
func name(s string) string {
	for i, r := range s {
		inside := i > 0 && i < len(s)-1
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', inside && strings.ContainsRune(".-:", r):
		default:
			return code(s)
		}
	}
	return s
}

// prose sets those words of a sentence as code that markdown would read
// something into.
func prose(s string) string {
	words := strings.Split(s, " ")
	for i, w := range words {
		if core := strings.TrimRight(w, ",;:."); strings.ContainsAny(core, "_*<[\\") && !strings.Contains(core, "`") {
			words[i] = code(core) + w[len(core):]
		}
	}
	return strings.Join(words, " ")
}
