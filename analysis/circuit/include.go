package circuit

import (
	"errors"
	"io/fs"
	"path/filepath"
	"strings"

	"triodeck/parser"
)

// opened is the outcome of asking the reader for one path.
type opened struct {
	file *parser.File
	err  error
}

// open reads a file once a load.
func (l *loader) open(path string) opened {
	if o, ok := l.files[path]; ok {
		return o
	}
	f, err := l.reader.File(path)
	if err == nil && f == nil {
		err = fs.ErrNotExist
	}
	o := opened{f, err}
	l.files[path] = o
	return o
}

// document gives the design's document of an opened path, adding it at first use.
func (r *reading) document(path string, f *parser.File) *Document {
	key := filepath.Clean(path)
	if doc, ok := r.docs[key]; ok {
		return doc
	}
	doc := &Document{Path: path, File: f}
	r.docs[key] = doc
	r.design.Docs = append(r.design.Docs, doc)
	return doc
}

// locate finds the file of an include: beside the including file, then in the
// roots. Either kind of slash separates folders, since decks travel between systems.
func (r *reading) locate(from *Document, written string) (*Document, error) {
	native := filepath.FromSlash(strings.ReplaceAll(written, `\`, "/"))
	candidates := []string{native}
	if !filepath.IsAbs(native) {
		candidates[0] = filepath.Join(filepath.Dir(from.Path), native)
		for _, root := range r.options.Roots {
			candidates = append(candidates, filepath.Join(root, native))
		}
	}
	var failure error
	for _, path := range candidates {
		o := r.open(path)
		if o.err == nil {
			return r.document(path, o.file), nil
		}
		if failure == nil || errors.Is(failure, fs.ErrNotExist) {
			failure = o.err
		}
	}
	return nil, failure
}

// include reads another file, or one section of it, in place of the card.
func (r *reading) include(w *walk, card int, path parser.Word, wanted parser.Word) {
	if path.Text == "" {
		return
	}
	at := place(w.doc, card, path.Span())
	doc, err := r.locate(w.doc, path.Text)
	if err != nil {
		r.scope.Open = true
		r.problems.add(IncludeMissing, at, path.Text, "%s", unreadable(path.Text, err))
		return
	}
	name := parser.Fold(wanted.Text)
	if swap := parser.Fold(r.options.Section); swap != "" && name != "" && w.doc == r.design.Root {
		if _, ok := r.sectionsOf(doc.File).find(swap); ok {
			name = swap
		}
	}
	for _, open := range r.stack {
		if open.doc == doc && open.section == name {
			r.problems.add(IncludeCircular, at, path.Text, "file %q includes itself%s", path.Text, through(r.stack, open))
			return
		}
	}
	if len(r.stack) >= maxIncludes {
		r.scope.Open = true
		r.problems.add(TooDeep, at, path.Text, "file %q is not read: more than %d files include each other in a row", path.Text, maxIncludes)
		return
	}
	if r.reads++; r.reads > maxReads {
		if !r.full {
			r.problems.add(TooDeep, at, path.Text, "the design includes more than %d files: the rest is left out", maxReads)
		}
		r.full, r.scope.Open = true, true
		return
	}
	in := &walk{doc: doc, section: name, from: 0, to: doc.File.Len()}
	if name != "" {
		sec, ok := r.sectionsOf(doc.File).find(name)
		if !ok {
			r.scope.Open = true
			r.problems.add(SectionMissing, place(w.doc, card, wanted.Span()), wanted.Text, "file %q has no section %q%s",
				path.Text, wanted.Text, offered(r.sectionsOf(doc.File)))
			return
		}
		r.checkClosed(doc, sec)
		in.from, in.to = sec.from+1, sec.to
	}
	r.walk(in)
}

func unreadable(name string, err error) string {
	quoted := `file "` + name + `"`
	switch {
	case !errors.Is(err, fs.ErrNotExist):
		var path *fs.PathError
		if errors.As(err, &path) {
			err = path.Err
		}
		return quoted + " cannot be read: " + err.Error()
	case strings.Contains(name, "$"):
		return quoted + " is not found: variables in a path are not expanded"
	case strings.HasPrefix(name, "~"):
		return quoted + ` is not found: "~" in a path is not expanded`
	}
	return quoted + " is not found"
}

// through names the files between the two ends of a circle of includes.
func through(stack []*walk, start *walk) string {
	var names []string
	for i := len(stack) - 1; i >= 0 && stack[i] != start; i-- {
		names = append([]string{`"` + filepath.Base(stack[i].doc.Path) + `"`}, names...)
	}
	if len(names) == 0 {
		return ""
	}
	return " through " + strings.Join(names, ", ")
}

// offered lists the sections that a file does have, a few of them.
func offered(s *sections) string {
	var names []string
	for _, sec := range s.list {
		if len(names) == 8 {
			names = append(names, "…")
			break
		}
		names = append(names, sec.name)
	}
	if len(names) == 0 {
		return ": it has none"
	}
	return ": it has " + strings.Join(names, ", ")
}

func (l *loader) sectionsOf(f *parser.File) *sections {
	s, ok := l.index[f]
	if !ok {
		s = indexSections(f)
		l.index[f] = s
	}
	return s
}

func (r *reading) checkClosed(doc *Document, sec section) {
	if !sec.closed {
		name := doc.File.Card(sec.from).Stmt.(*parser.LibSection).Name
		r.problems.add(BlockUnclosed, place(doc, sec.from, name.Span()), name.Text, "section %q has no .endl", name.Text)
	}
}
