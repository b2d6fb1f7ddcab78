package parser

import "strings"

// valueOf tells what a token stands for as a value.
func valueOf(k tokenKind, w Word) Value {
	v := Value{Word: w}
	switch k {
	case quoteToken, braceToken, parenToken, bareToken:
		v.Form = ExprValue
		return v
	case stringToken:
		v.Form = StringValue
		return v
	case fieldToken:
		v.Form = NameValue
		return v
	}
	return bareValue(w)
}

// bareValue reads a word without quotes: a number, a name, or an expression that
// was written without quotes because it holds no blank.
func bareValue(w Word) Value {
	v := Value{Word: w, Form: NameValue}
	if w.Text == "" {
		v.Form = NoValue
		return v
	}
	if c := w.Text[0]; digit(c) || c == '.' || c == '-' || c == '+' {
		if n, ok := ParseNumber(w.Text); ok {
			v.Form, v.Num = NumberValue, n.Value
			return v
		}
	}
	if strings.ContainsAny(w.Text, "+-*/^%<>&|?!~") && readsAsExpr(w) {
		v.Form = ExprValue
	}
	return v
}

func readsAsExpr(w Word) bool {
	_, err := ParseExpr(w)
	return err == nil
}

// unquote is a path or reason without the quotes around it.
func unquote(w Word) Word {
	if n := len(w.Text); n >= 2 && (w.Text[0] == '"' || w.Text[0] == '\'') && w.Text[n-1] == w.Text[0] {
		return Word{Text: w.Text[1 : n-1], Start: w.Start + 1}
	}
	return w
}

// fieldName is the name in `$[name]`.
func fieldName(w Word) Word {
	if strings.HasPrefix(w.Text, "$[") && strings.HasSuffix(w.Text, "]") {
		return Word{Text: w.Text[2 : len(w.Text)-1], Start: w.Start + 2}
	}
	return w
}
