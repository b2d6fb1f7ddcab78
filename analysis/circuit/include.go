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
// What a variable or `~` at the start stands for is not known here, so the rest of
// such a path is looked for in the roots. The near path differs in case alone.
func (r *reading) locate(from *Document, written string) (doc *Document, near string, failure error) {
	path := strings.ReplaceAll(written, `\`, "/")
	type candidate struct{ folder, path string }
	candidates := []candidate{{filepath.Dir(from.Path), path}}
	if filepath.IsAbs(filepath.FromSlash(path)) {
		candidates[0].folder = ""
	} else {
		rest, variable := behindVariable(path)
		if !variable {
			rest = path
		}
		for _, root := range r.options.Roots {
			candidates = append(candidates, candidate{root, rest})
		}
	}
	failure = fs.ErrNotExist
	for _, c := range candidates {
		full := filepath.Join(c.folder, filepath.FromSlash(c.path))
		real, other := r.spelling(c.folder, c.path)
		o := r.open(full)
		switch {
		case other && near == "":
			near = real
		case other:
		case o.err == nil:
			return r.document(full, o.file), "", nil
		case errors.Is(failure, fs.ErrNotExist):
			failure = o.err
		}
	}
	return nil, near, failure
}

// inSection says that a section of a library is being read: what it calls in turn
// is the library's own affair.
func (r *reading) inSection() bool {
	for _, w := range r.stack {
		if w.section != "" {
			return true
		}
	}
	return false
}

// behindVariable gives a path without the variable or `~` that it starts with.
func behindVariable(path string) (rest string, ok bool) {
	if !strings.HasPrefix(path, "$") && !strings.HasPrefix(path, "~") {
		return "", false
	}
	_, rest, ok = strings.Cut(path, "/")
	return rest, ok && rest != "" && !strings.Contains(rest, "$")
}

// include reads another file, or one section of it, in place of the card.
func (r *reading) include(w *walk, card int, path parser.Word, wanted parser.Word) {
	if path.Text == "" {
		return
	}
	at := place(w.doc, card, path.Span())
	doc, near, err := r.locate(w.doc, path.Text)
	if err != nil || doc == nil {
		r.scope.Open = true
		r.missing(w, at, path.Text, near, err)
		return
	}
	name := parser.Fold(wanted.Text)
	if swap := parser.Fold(r.options.Section); swap != "" && name != "" && !r.inSection() {
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
			if r.said(doc.Path + "\x00" + name) {
				return
			}
			r.problems.add(SectionMissing, place(w.doc, card, wanted.Span()), wanted.Text, "file %q has no section %q%s",
				path.Text, wanted.Text, offered(r.sectionsOf(doc.File)))
			return
		}
		r.checkClosed(doc, sec)
		in.from, in.to = sec.from+1, sec.to
	}
	r.walk(in)
}

// missing says that a file is not there, once however many lines ask for it.
func (r *reading) missing(w *walk, at Place, written, near string, err error) {
	wanted := filepath.ToSlash(strings.ReplaceAll(written, `\`, "/"))
	if _, variable := behindVariable(wanted); !variable && !filepath.IsAbs(filepath.FromSlash(wanted)) {
		wanted = filepath.Join(filepath.Dir(w.doc.Path), filepath.FromSlash(wanted))
	}
	if r.said(wanted) {
		return
	}
	message := unreadable(written, err)
	if near != "" {
		message = `file "` + written + `" is not found: "` + near + `" differs from it in case`
	}
	r.problems.add(IncludeMissing, at, written, "%s", message)
}

// said notes a file or section that is missing, and says whether it was noted before.
func (r *reading) said(what string) bool {
	if r.absent[what] {
		return true
	}
	if r.absent == nil {
		r.absent = map[string]bool{}
	}
	r.absent[what] = true
	return false
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
		return quoted + " is not found: what a variable stands for is not known here, and no include folder of the settings holds the rest of the path"
	case strings.HasPrefix(name, "~"):
		return quoted + ` is not found: what "~" stands for is not known here, and no include folder of the settings holds the rest of the path`
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
