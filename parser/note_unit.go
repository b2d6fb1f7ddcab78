package parser

import "strings"

// unitSpellings are how a unit may be written behind a number.
var unitSpellings = map[string][]string{
	"V": {"v", "volt", "volts"}, "A": {"a", "amp", "amps"}, "S": {"s"}, "W": {"w", "watt", "watts"},
	"ohm": {"ohm", "ohms", "\u03a9", "\u2126"}, "s": {"s", "sec"}, "C": {"c", "\u00b0c", "degc"}, "bit": {"bit", "bits"},
}

// unit is the finding about a number with another unit than the quantity has.
func (n *noteReader) unit(e Expr, want string) *Error {
	lit, ok := e.(*NumberLit)
	if !ok {
		if u, signed := e.(*Unary); signed {
			return n.unit(u.X, want)
		}
		return nil
	}
	num, _ := ParseNumber(lit.Text)
	if foldEqual(num.Suffix, "a") && num.Unit == "" {
		return &Error{Span: lit.Span(), Message: quoted(lit.Text) + ` is in atto, 1e-18, and hardly meant so: amperes are written "A" behind another suffix or not at all`}
	}
	if num.Unit == "" {
		return nil
	}
	for _, s := range unitSpellings[want] {
		if foldEqual(num.Unit, s) {
			return nil
		}
	}
	if want == "" {
		return &Error{Span: lit.Span(), Message: quoted(lit.Text) + " has a unit, but the quantity has none"}
	}
	name := map[string]string{"V": "volts", "A": "amperes", "S": "siemens", "W": "watts", "ohm": "ohms", "s": "seconds", "C": "°C", "bit": "bits"}[want]
	return &Error{Span: lit.Span(), Message: quoted(lit.Text) + " has the unit " + quoted(num.Unit) + "; the quantity is in " + name}
}

func quoted(s string) string { return `"` + strings.ReplaceAll(s, "\n", " ") + `"` }
