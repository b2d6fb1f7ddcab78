package parser

import (
	"strings"
	"testing"
)

// TestForeign tells decks with mistakes from texts in other languages, which are
// one error each and nothing else.
func TestForeign(t *testing.T) {
	for name, c := range map[string]struct{ text, what string }{
		"deck":                                   {"title\nR1 a 0 1k\n.end\n", ""},
		"deck with mistakes":                     {"title\nR1 a\nC1\n.op\n.param a=1\n.tran 1n 1u\n.end\n", ""},
		"one line of another language in a deck": {"title\ninclude \"x.inc\"\n.param a=1\n.model n nmos\n.end\n", ""},
		"declares the SPICE language":            {"simulator lang=spice\nR1 a 0 1k\nR2 a\n.param a=1\n.op\n.end\n", ""},
		"HTML":                                   {"<html>\n<body>gone</body>\n</html>\n", "HTML or XML"},
		"template":                               {"{% for m in devices %}\nM{{ m.n }} {{ m.d }} g 0 0 nch\n{% endfor %}\n", "a template"},
		"preprocessor":                           {"#ifdef FAST\nM1 d\n#endif\n", "a preprocessor's source"},
		"declares another language":              {"simulator lang=other\nglobal vdd\n.param a=1\n.param b=2\nR1 a\n", otherNetlist},
		"nodes in parentheses":                   {"subckt inv a y\nM0 (y a 0 0) nmos4 w=1u\nends inv\n", otherNetlist},
		"prose":                                  {strings.Repeat("This is a report about the circuit, not the circuit.\n(See below.)\n", 8), "prose or another language"},
	} {
		f := Parse([]byte(c.text))
		if f.Foreign != c.what {
			t.Errorf("%s: foreign is %q, want %q", name, f.Foreign, c.what)
		}
		if c.what != "" && len(f.Errors()) != 1 {
			t.Errorf("%s: %d errors, want 1", name, len(f.Errors()))
		}
	}
}
