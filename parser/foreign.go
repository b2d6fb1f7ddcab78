package parser

import (
	"regexp"
	"strings"

	"triodeck/parser/source"
)

// marks are the signs of texts that are no decks, each beyond doubt where it
// stands at the start of a line; those behind an element's letter would be read
// as elements otherwise.
var marks = []struct {
	at   *regexp.Regexp
	what string
}{
	{regexp.MustCompile(`(?im)^[ \t]*<(?:!doctype|html|\?xml|head|body|svg)\b`), "HTML or XML"},
	{regexp.MustCompile(`(?m)\{%.*?%\}`), "a template"},
	{regexp.MustCompile(`(?m)^[^*;$\n]*\{\{.*?\}\}`), "a template"},
	{regexp.MustCompile(`(?m)^[ \t]*#[ \t]*(?:ifdef|ifndef|endif|define|include)\b`), "a preprocessor's source"},
	{regexp.MustCompile(`(?m)^[ \t]*(?:inline[ \t]+)?subckt[ \t]+[^=\n]*$`), otherNetlist},
	{regexp.MustCompile(`(?m)^[ \t]*(?:simulatorOptions|modelParameter|designParamVals|ahdl_include)\b`), otherNetlist},
	{regexp.MustCompile(`(?m)^[ \t]*[A-Za-z]\w*[ \t]+\([^()\n]*\)[ \t]+[A-Za-z_]\w*[ \t]*(?:\w+=|\\?\r?$)`), otherNetlist},
}

// declared is a file's own word that it is in another language.
var declared = regexp.MustCompile(`(?m)^[ \t]*simulator[ \t]+lang[ \t]*=[ \t]*(?:[a-rt-z]|s[a-oq-z]|sp[a-hj-z])`)

const otherNetlist = "a netlist in another language"

// Below this number of statements, or with fewer bad ones, a text with errors is a
// deck with mistakes; with more than the part it is something else.
const (
	foreignLeast = 8
	foreignPart  = 0.3
)

// judge decides whether the text is a deck at all. A directive of the SPICE family
// in plain sight makes it one, with whatever else it holds; so does any file whose
// statements mostly read.
func (f *File) judge() {
	bad, all, dotted := 0, 0, 0
	first := -1
	for i, c := range f.cards {
		switch c.Kind {
		case ErrorCard:
			bad++
			all++
			if first < 0 {
				first = i
			}
		case ElementCard:
			all++
		case DirectiveCard:
			all++
			dotted++
		}
	}
	if bad == 0 {
		return
	}
	if at := declared.FindStringIndex(f.Src); at != nil {
		f.Foreign, f.foreign = otherNetlist, firstLine(f.Src, at[0])
		return
	}
	if dotted > bad {
		return
	}
	for _, m := range marks {
		if at := m.at.FindStringIndex(f.Src); at != nil {
			f.Foreign, f.foreign = m.what, firstLine(f.Src, at[0])
			return
		}
	}
	if all >= foreignLeast && dotted == 0 && float64(bad) > foreignPart*float64(all) {
		f.Foreign, f.foreign = "prose or another language", firstLine(f.Src, int(f.starts[first]))
	}
}

// firstLine is the span from an offset to the end of its line, without blanks
// before it.
func firstLine(src string, at int) source.Span {
	for at < len(src) && (blank(src[at]) || lineBreak(src[at])) {
		at++
	}
	end := at
	if i := strings.IndexAny(src[at:], "\r\n"); i >= 0 {
		end += i
	} else {
		end = len(src)
	}
	return source.Span{Start: int32(at), End: int32(end)}
}
