package parser

import (
	"fmt"
	"reflect"
	"strings"

	"triodeck/parser/source"
)

// sane walks a file and says what is wrong with its spans: cards must cover the
// text, a word must be the text at its place, errors must lie in the file.
func sane(f *File) error {
	var all strings.Builder
	at := int32(0)
	for i := range f.Len() {
		c := f.Card(i)
		if f.Start(i) != at || c.Text == "" {
			return fmt.Errorf("card %d begins at %d, the one before ends at %d", i, f.Start(i), at)
		}
		at += int32(len(c.Text))
		all.WriteString(c.Text)
		if err := saneValue(c.Text, reflect.ValueOf(c.Stmt)); err != nil {
			return fmt.Errorf("card %d: %w", i, err)
		}
		for _, n := range c.Notes {
			if (n.Note == nil) == (n.Err == nil) {
				return fmt.Errorf("card %d: an annotation has note %v and error %v", i, n.Note, n.Err)
			}
			if err := saneSpan(c.Text, n.Span); err != nil {
				return fmt.Errorf("card %d: annotation: %w", i, err)
			}
			if err := saneValue(c.Text, reflect.ValueOf(n.Note)); err != nil {
				return fmt.Errorf("card %d: %w", i, err)
			}
			if n.Err != nil {
				if err := saneSpan(c.Text, n.Err.Span); err != nil {
					return fmt.Errorf("card %d: annotation: %w", i, err)
				}
			}
		}
		for _, e := range c.Errs {
			if err := saneSpan(c.Text, e.Span); err != nil {
				return fmt.Errorf("card %d: error %q: %w", i, e.Message, err)
			}
		}
		if (c.Kind == ErrorCard) != (c.Stmt == nil && len(c.Errs) > 0) {
			return fmt.Errorf("card %d: kind %v with statement %v and %d errors", i, c.Kind, c.Stmt, len(c.Errs))
		}
		if c.Kind == ElementCard && c.Stmt == nil {
			return fmt.Errorf("card %d: an element without statement", i)
		}
	}
	if all.String() != f.Src {
		return fmt.Errorf("the cards' texts are not the file")
	}
	for _, e := range f.Errors() {
		if err := saneSpan(f.Src, e.Span); err != nil {
			return err
		}
		if e.Message == "" || strings.Contains(e.Message, "unexpected token") {
			return fmt.Errorf("bad message %q", e.Message)
		}
	}
	return nil
}

func saneSpan(text string, sp source.Span) error {
	if sp.Start < 0 || sp.End < sp.Start || int(sp.End) > len(text) {
		return fmt.Errorf("span %v outside a text of %d bytes", sp, len(text))
	}
	return nil
}

// saneValue visits every Word, Value and Expr under a statement.
func saneValue(text string, v reflect.Value) error {
	switch v.Kind() {
	case reflect.Pointer, reflect.Interface:
		if v.IsNil() {
			return nil
		}
		if v.Kind() == reflect.Pointer {
			if e, ok := v.Interface().(Expr); ok {
				if err := saneSpan(text, e.Span()); err != nil {
					return fmt.Errorf("expression %s: %w", exprText(e), err)
				}
			}
		}
		return saneValue(text, v.Elem())
	case reflect.Slice:
		for i := range v.Len() {
			if err := saneValue(text, v.Index(i)); err != nil {
				return err
			}
		}
	case reflect.Struct:
		if w, ok := v.Interface().(Word); ok {
			if w.Text == "" {
				return nil
			}
			sp := w.Span()
			if err := saneSpan(text, sp); err != nil {
				return err
			}
			if text[sp.Start:sp.End] != w.Text {
				return fmt.Errorf("word %q stands where the text has %q", w.Text, text[sp.Start:sp.End])
			}
			return nil
		}
		if sp, ok := v.Interface().(source.Span); ok {
			return saneSpan(text, sp)
		}
		for i := range v.NumField() {
			if err := saneValue(text, v.Field(i)); err != nil {
				return err
			}
		}
	}
	return nil
}
