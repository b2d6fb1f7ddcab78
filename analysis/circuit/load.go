package circuit

import (
	"context"
	"path/filepath"
	"slices"
	"strings"

	"triodeck/parser"
	"triodeck/parser/source"
)

// loader is what stays between the rounds of one load.
type loader struct {
	ctx     context.Context
	reader  Reader
	options Options
	files   map[string]opened
	folders map[string]folder
	index   map[*parser.File]*sections
	chosen  map[condKey]int // top-level conditionals decided: the arm, -1 for none
	refused []refusal       // tests of theirs that did not evaluate
}

// reading is one pass over the text, root deck first.
type reading struct {
	*loader
	design    *Design
	docs      map[string]*Document
	problems  problems
	scope     *Scope  // where names are being defined
	branch    *Branch // the conditional arm being read, inside a subckt
	stack     []*walk // the files open, outermost first
	pending   []*pendingCond
	settings  []setting
	undefined map[string]bool // names reported
	absent    map[string]bool // files and sections reported
	cards     int
	reads     int
	scale     float64
	bare      float64 // metres that a bare 1 stands for, 0 if no comment says
	full      bool    // a cap was met
}

// walk is a file, or a section of one, being read.
type walk struct {
	doc      *Document
	section  string // folded, "" for the whole file
	from, to int
	blocks   []*block
	ended    bool // `.end` or its like was met
	cut      bool // a cap was met
	sealed   bool // behind `.protect`
}

// Load builds the design of a root deck. It does not fail: what is missing or
// wrong is among the design's problems. A cancelled context gives a design that
// is incomplete and to be thrown away.
func Load(ctx context.Context, reader Reader, root string, options Options) *Design {
	l := &loader{
		ctx: ctx, reader: reader, options: options,
		files:   map[string]opened{},
		folders: map[string]folder{},
		index:   map[*parser.File]*sections{},
		chosen:  map[condKey]int{},
	}
	var r *reading
	for round := 1; ; round++ {
		r = l.read(root)
		if len(r.pending) == 0 || ctx.Err() != nil {
			break
		}
		r.decide(round == maxRounds)
	}
	r.design.Top.Walk((*Scope).finish)
	r.applySettings()
	r.elaborate()
	r.design.Problems = append(slices.Clip(options.Problems), r.problems.list...)
	return r.design
}

// read makes one pass over the text. The arms of top-level conditionals that are
// not decided yet are left out and noted as pending; since a choice may add files
// and names anywhere, each round reads again from the start, which costs little,
// every file being parsed once.
func (l *loader) read(root string) *reading {
	top := newScope(nil)
	top.Globals = map[string]bool{}
	r := &reading{
		loader: l,
		design: &Design{Top: top, TempC: 27, TnomC: 27, Options: l.options},
		docs:   map[string]*Document{},
		scope:  top,
	}
	o := l.open(root)
	if o.err != nil {
		o.file = parser.Parse(nil)
	}
	doc := r.document(root, o.file)
	r.design.Root = doc
	top.Place = Place{Doc: doc}
	if o.err != nil {
		top.Open = true
		r.problems.add(IncludeMissing, Place{Doc: doc}, root, "%s", unreadable(filepath.ToSlash(root), o.err))
	}
	r.walk(&walk{doc: doc, to: doc.File.Len()})
	for _, no := range l.refused {
		if doc := r.docs[no.key.path]; doc != nil {
			no.at.Doc = doc
			r.problems.add(no.kind, no.at, no.name, "%s", no.message)
		}
	}
	return r
}

// walk reads the cards of a file or a section into the scope.
func (r *reading) walk(w *walk) {
	r.stack = append(r.stack, w)
	scope, branch := r.scope, r.branch
	sections := r.sectionsOf(w.doc.File)
	for i := w.from; i < w.to && !w.ended && !r.full; i++ {
		if k, ok := sections.starts[i]; ok && (w.section == "" || i >= w.from) {
			sec := sections.list[k]
			r.checkClosed(w.doc, sec)
			i = sec.to
			if !sec.closed {
				i-- // the card there is no `.endl` of ours
			}
			continue
		}
		r.card(w, i)
	}
	r.closeBlocks(w, 0)
	r.scope, r.branch = scope, branch
	r.stack = r.stack[:len(r.stack)-1]
}

// card reads card i of a file.
func (r *reading) card(w *walk, i int) {
	if r.cards++; r.cards > maxCards {
		r.full = true
		r.scope.Open = true
		r.problems.add(TooDeep, place(w.doc, i, spanOf(w.doc, i)), "", "the design is larger than %d cards: the rest is left out", maxCards)
		return
	}
	if r.cards%4096 == 0 && r.ctx.Err() != nil {
		r.full = true
		return
	}
	c := w.doc.File.Card(i)
	if c.Stmt == nil && len(c.Notes) == 0 {
		if w.sealed && c.Kind == parser.OpaqueCard && !w.skipping() {
			r.seal(w, i)
		}
		return
	}
	if c.Kind == parser.TitleCard && w.doc == r.design.Root && len(r.stack) == 1 && !fragment(w.doc.File) {
		return // the title of a deck is text, whatever it looks like
	}
	if cond, ok := c.Stmt.(*parser.Cond); ok {
		r.cond(w, i, cond)
		return
	}
	if w.skipping() {
		return
	}
	r.statement(w, i, c)
}

// statement files what a card says under its scope.
func (r *reading) statement(w *walk, i int, c *parser.Card) {
	s := r.scope
	for _, n := range c.Notes {
		note := NoteAt{Annotation: n, Place: place(w.doc, i, n.Span), Branch: r.branch}
		if e, ok := c.Stmt.(*parser.Element); ok && n.Trailing {
			note.Subject = e
		}
		s.Notes = append(s.Notes, note)
	}
	switch st := c.Stmt.(type) {
	case *parser.Element:
		s.Elements = append(s.Elements, ElementAt{Element: st, Place: Place{w.doc, i, w.doc.File.Span(i)}, Branch: r.branch})
	case *parser.Model:
		s.addModel(&ModelDef{
			Model: st, Name: parser.Fold(st.Name.Text), Type: parser.Fold(st.Type.Text),
			Place: place(w.doc, i, st.Name.Span()), Scope: s, Branch: r.branch,
		})
	case *parser.ParamDefs:
		r.addParams(w, i, st.Params)
		for _, f := range st.Funcs {
			r.addFunc(w, i, f)
		}
	case *parser.FuncDef:
		r.addFunc(w, i, st)
	case *parser.Subckt:
		r.openSubckt(w, i, st)
	case *parser.Ends:
		r.closeSubckt(w, i, st)
	case *parser.Include:
		r.include(w, i, st.Path, parser.Word{})
	case *parser.Lib:
		r.include(w, i, st.Path, st.Section)
	case *parser.LibSection:
		r.include(w, i, st.Name, parser.Word{}) // no section starts here: see indexSections
	case *parser.EndLib:
		r.problems.add(BlockStray, place(w.doc, i, spanOf(w.doc, i)), st.Name.Text, ".endl without the .lib section that it closes")
	case *parser.Global:
		for _, n := range st.Nodes {
			r.design.Top.Globals[parser.Fold(n.Text)] = true
		}
	case *parser.Initial:
		s.Initials = append(s.Initials, InitialAt{Initial: st, Place: Place{w.doc, i, w.doc.File.Span(i)}, Branch: r.branch})
	case *parser.Temp, *parser.Options:
		r.addSettings(w, i, c.Stmt)
	case *parser.Other:
		r.other(w, st)
	case *parser.End:
		w.ended = true
	}
}

func (r *reading) other(w *walk, st *parser.Other) {
	switch strings.TrimPrefix(parser.Fold(st.Name.Text), "*") {
	case ".scale": // a layout tool's comment; of several the last counts
		if len(st.Fields) > 0 {
			r.bare = bareUnits[parser.Fold(st.Fields[0].Text)]
		}
	case ".alter": // what follows changes the deck for a second run
		w.ended = true
	case ".protect", ".prot":
		w.sealed = true
	case ".unprotect", ".unprot":
		w.sealed = false
	}
}

// bareUnits are the words of `*.SCALE`, in metres.
var bareUnits = map[string]float64{"micron": 1e-6, "microns": 1e-6, "um": 1e-6, "meter": 1, "meters": 1, "metre": 1, "m": 1}

// seal notes an encrypted block, once: names that are found nowhere may be defined
// in it.
func (r *reading) seal(w *walk, i int) {
	w.sealed = false
	r.scope.Open = true
	r.design.Sealed = append(r.design.Sealed, place(w.doc, i, source.Span{}))
}

func (r *reading) addParams(w *walk, i int, params []parser.Param) {
	for k := range params {
		p := &params[k]
		if p.Name.IsZero() {
			continue // behind the comma of a list
		}
		r.scope.addParam(&ParamDef{
			Name: parser.Fold(p.Name.Text), Value: p.Value,
			Place: place(w.doc, i, p.Name.Span()), Branch: r.branch,
		})
	}
}

func (r *reading) addFunc(w *walk, i int, f *parser.FuncDef) {
	r.scope.addParam(&ParamDef{
		Name: parser.Fold(f.Name.Text), Value: f.Body, Func: f,
		Place: place(w.doc, i, f.Name.Span()), Branch: r.branch,
	})
}
