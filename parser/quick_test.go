package parser

import (
	"fmt"
	"reflect"
	"testing"
)

// checkQuick holds the hand-written paths equal to the grammars on one card. It
// says how often each read it, so that a test can tell that they were tried.
func checkQuick(text string, read map[string]int) error {
	r := reader{card: &Card{Text: text}}
	first := r.firstByte()
	switch {
	case isLetter(first):
		return checkQuickElement(&r, lower(first), read)
	case first == '.':
		return checkQuickDirective(&r, read)
	}
	return nil
}

func checkQuickElement(r *reader, letter byte, read map[string]int) error {
	r.lexElement(letter)
	var quick parts
	if !quickParts(letter, &r.lexed, &quick) {
		read["element by grammar"]++
		return nil
	}
	read["element by hand"]++
	var slow parts
	if at, ok := grammarParts(letter, &r.lexed, &slow); !ok {
		return fmt.Errorf("%q: read by hand, refused by the grammar at %d", r.card.Text, at)
	}
	if got, want := describe(&quick), describe(&slow); got != want {
		return fmt.Errorf("%q: by hand\n%s\nby grammar\n%s", r.card.Text, got, want)
	}
	return checkQuickExprs(quick.params, read)
}

func describe(p *parts) string {
	return fmt.Sprintf("%v %v %v %v %d", p.name, p.lead, p.rest, p.params, p.pins)
}

func checkQuickDirective(r *reader, read map[string]int) error {
	_, first := classify(r.card.Text, 0, len(r.card.Text))
	word := directiveWord(r.card.Text[first:])
	kind := directives[word]
	lexCard(r.card.Text, directiveManner(word, kind), &r.lexed)
	if len(r.tokens) == 0 {
		return nil
	}
	switch kind {
	case paramDirective:
		ps, ok := quickParams(&r.lexed, 1, &r.parts)
		ps = append([]Param(nil), ps...)
		if !ok {
			read["params by grammar"]++
			return nil
		}
		read["params by hand"]++
		s, err := r.grammarParamDefs()
		d, isDefs := s.(*ParamDefs)
		if err != nil || !isDefs || len(d.Funcs) > 0 || len(ps) != len(d.Params) || len(ps) > 0 && !reflect.DeepEqual(ps, d.Params) {
			return fmt.Errorf("%q: by hand %v, by grammar %v %v", r.card.Text, ps, s, err)
		}
		return checkQuickExprs(ps, read)
	case modelDirective:
		m, ok := quickModel(&r.lexed, &r.parts)
		if !ok {
			read["model by grammar"]++
			return nil
		}
		read["model by hand"]++
		m.Params = append([]Param(nil), r.parts.params...)
		m = r.modelBase(m)
		s, err := r.grammarModel()
		g, _ := s.(*Model)
		if err != nil || g == nil || fmt.Sprint(*m) != fmt.Sprint(*g) {
			return fmt.Errorf("%q: by hand %v, by grammar %v %v", r.card.Text, m, g, err)
		}
		return checkQuickExprs(m.Params, read)
	}
	return nil
}

func checkQuickExprs(ps []Param, read map[string]int) error {
	for _, p := range ps {
		if p.Value.Form == ExprValue {
			if err := checkQuickExpr(p.Value.Word, read); err != nil {
				return err
			}
		}
	}
	return nil
}

func checkQuickExpr(w Word, read map[string]int) error {
	var l lexed
	lexExprWord(w, &l)
	if boundExpr(&l) != nil {
		return nil
	}
	quick, n := quickExpr(&l, 0)
	if n != len(l.tokens) {
		quick = nil
	}
	slow, err := grammarExpr(&l)
	if (quick == nil) != (err != nil) {
		return fmt.Errorf("%q: by hand %v, by grammar %v", w.Text, quick, err)
	}
	if err != nil {
		read["expression refused"]++
		return nil
	}
	read["expression by hand"]++
	if !reflect.DeepEqual(quick, slow) {
		return fmt.Errorf("%q: by hand %s, by grammar %s", w.Text, exprText(quick), exprText(slow))
	}
	return nil
}

// TestQuickIsGrammar reads every card of the test data both ways.
func TestQuickIsGrammar(t *testing.T) {
	read := map[string]int{}
	for _, d := range decks(t) {
		f := Parse(d)
		for i := range f.Len() {
			if err := checkQuick(f.Card(i).Text, read); err != nil {
				t.Error(err)
			}
		}
	}
	for _, k := range []string{"element by hand", "element by grammar", "params by hand", "params by grammar", "model by hand", "model by grammar", "expression by hand", "expression refused"} {
		if read[k] == 0 {
			t.Errorf("no card was read as %q", k)
		}
	}
}

func FuzzQuickIsGrammar(f *testing.F) {
	for _, d := range decks(f) {
		file := Parse(d)
		for i := range file.Len() {
			f.Add(file.Card(i).Text)
		}
	}
	f.Fuzz(func(t *testing.T, text string) {
		s := splitter{src: text}
		p, ok := s.next()
		if !ok {
			return
		}
		if err := checkQuick(text[p.start:p.end], map[string]int{}); err != nil {
			t.Fatal(err)
		}
	})
}

func FuzzQuickExpr(f *testing.F) {
	for _, s := range []string{"1+2*3", "-x**2^-y", "a?b:c?d:e", "max(a,min(b,c))*v(a,b)", "!~-1", "'a'*(b)", "a<b==c", "1..2", "((("} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if err := checkQuickExpr(Word{Text: text, Start: 7}, map[string]int{}); err != nil {
			t.Fatal(err)
		}
	})
}
