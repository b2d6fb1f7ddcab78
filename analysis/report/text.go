package report

import (
	"bufio"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
)

// TextOptions says how findings look in a terminal.
type TextOptions struct {
	Path   func(string) string // how a path is shown; nil for as it is
	Source bool                // the line and a caret below each finding
	Style  Style               // zero for plain text
}

// Style wraps parts of the text, for instance in a terminal's colours.
type Style struct {
	Severity func(analysis.Severity, string) string
	Dim      func(string) string
}

// sourceWidth is the widest part of a source line that is shown, in bytes.
const sourceWidth = 160

// Text prints each finding as `path:line:column: severity: message [rule]`.
func Text(w io.Writer, findings []analysis.Finding, o TextOptions) error {
	if o.Path == nil {
		o.Path = func(p string) string { return p }
	}
	if o.Style.Severity == nil {
		o.Style.Severity = func(_ analysis.Severity, s string) string { return s }
	}
	if o.Style.Dim == nil {
		o.Style.Dim = func(s string) string { return s }
	}
	out := bufio.NewWriter(w)
	for _, f := range findings {
		p := positionOf(f.Place)
		fmt.Fprintf(out, "%s:%d:%d: %s: %s %s\n", o.Path(f.Place.Doc.Path), p.line, p.column,
			o.Style.Severity(f.Severity, f.Severity.String()), f.Message, o.Style.Dim("["+f.Rule+"]"))
		if !o.Source {
			continue
		}
		out.WriteString(excerpt(f.Place, o.Style))
		for _, r := range f.Related {
			q := positionOf(r.Place)
			fmt.Fprintf(out, "  %s\n", o.Style.Dim(fmt.Sprintf("%s:%d:%d: %s", o.Path(r.Place.Doc.Path), q.line, q.column, r.Message)))
		}
	}
	return out.Flush()
}

// excerpt is the first line of a place with a caret below each of its
// characters, or nothing where there is no text to show.
func excerpt(p circuit.Place, style Style) string {
	x := p.Doc.File.Lines()
	sp := x.LineSpan(x.Line(p.Span.Start))
	text := p.Doc.File.Src
	start, end := min(p.Span.Start, sp.End), min(p.Span.End, sp.End)
	for end > start+1 && (text[end-1] == ' ' || text[end-1] == '\t') {
		end--
	}
	before, marked, after := text[sp.Start:start], text[start:end], text[end:sp.End]
	if strings.TrimSpace(before+marked+after) == "" {
		return ""
	}
	before, marked, after = window(before, marked, after)
	line := visible(before) + visible(marked) + visible(after)
	carets := strings.Repeat("^", max(1, utf8.RuneCountInString(visible(marked))))
	return "  " + strings.TrimRight(line, " \t") + "\n  " + blank(visible(before)) + style.Severity(analysis.Note, carets) + "\n"
}

// window cuts a long line down to the part around the mark.
func window(before, marked, after string) (b, m, a string) {
	if len(before)+len(marked)+len(after) <= sourceWidth {
		return before, marked, after
	}
	if len(marked) > sourceWidth {
		marked = cut(marked, 0, sourceWidth) + "…"
		after = ""
	}
	room := max(sourceWidth-len(marked), 0)
	if keep := room / 2; len(before) > keep {
		before = "…" + cut(before, len(before)-keep, len(before))
	}
	if keep := max(room-len(before), room/2); len(after) > keep {
		after = cut(after, 0, keep) + "…"
	}
	return before, marked, after
}

// cut is s[i:j] moved inward to whole characters.
func cut(s string, i, j int) string {
	for i < j && !utf8.RuneStart(s[i]) {
		i++
	}
	for j > i && j < len(s) && !utf8.RuneStart(s[j]) {
		j--
	}
	return s[i:j]
}

// visible keeps tabs and replaces what would move a terminal's cursor or is no
// UTF-8, one character for one.
func visible(s string) string {
	var b strings.Builder
	for _, c := range s {
		if c != '\t' && (c < ' ' || c == 0x7f || c >= 0x80 && c < 0xa0) {
			c = utf8.RuneError
		}
		b.WriteRune(c)
	}
	return b.String()
}

// blank is s with every character a space but tabs, so that what follows stands
// below what follows s.
func blank(s string) string {
	return strings.Map(func(c rune) rune {
		if c == '\t' {
			return c
		}
		return ' '
	}, s)
}
