package workspace

import (
	"path/filepath"

	"triodeck/analysis/circuit"
	"triodeck/analysis/settings"
	"triodeck/parser"
)

// Settings gives the settings that hold for a deck: the nearest file of the
// deck's folder and those above it; nil if there is none.
func (s *Snapshot) Settings(root string) *settings.File {
	f, _ := s.settings(root, func(string) {})
	return f
}

// settings looks for the file and tells of each path where it looked.
func (s *Snapshot) settings(root string, asked func(path string)) (*settings.File, *circuit.Document) {
	for _, folder := range foldersAbove(root) {
		path := filepath.Join(folder, settings.Name)
		asked(path)
		syntax, err := s.File(path)
		if err != nil {
			continue
		}
		// The text is no deck: what stands here only serves to show places in it.
		return s.parsed(path, syntax.Src), &circuit.Document{Path: path, File: &parser.File{Src: syntax.Src}}
	}
	return nil, nil
}

// parsed reads a settings file once a snapshot, however many decks it holds for.
func (s *Snapshot) parsed(path, src string) *settings.File {
	s.mu.Lock()
	defer s.mu.Unlock()
	f := s.set[path]
	if f == nil {
		f = settings.Parse(path, []byte(src))
		if s.set == nil {
			s.set = map[string]*settings.File{}
		}
		s.set[path] = f
	}
	return f
}

// foldersAbove lists a deck's folder and those above it. A relative path is
// followed in its own words as far as it goes.
func foldersAbove(root string) []string {
	folder := filepath.Dir(filepath.Clean(root))
	var list []string
	if filepath.IsLocal(folder) {
		for folder != "." {
			list = append(list, folder)
			folder = filepath.Dir(folder)
		}
		list = append(list, ".")
		abs, err := filepath.Abs(".")
		if err != nil {
			return list
		}
		folder = filepath.Dir(abs)
	} else if abs, err := filepath.Abs(folder); err == nil {
		folder = abs
	}
	for {
		list = append(list, folder)
		above := filepath.Dir(folder)
		if above == folder {
			return list
		}
		folder = above
	}
}

// apply adds to options what the settings state.
func (d *Deck) apply(o circuit.Options) circuit.Options {
	set, doc := d.snap.settings(d.Root, func(path string) { d.asked.add(filepath.Clean(path)) })
	if set == nil {
		return o
	}
	o.Roots = append(o.Roots, set.Roots...)
	o.Facts = append(o.Facts, set.Facts...)
	for _, p := range set.Problems {
		o.Problems = append(o.Problems, circuit.Problem{
			Kind: circuit.SettingInvalid, Place: circuit.Place{Doc: doc, Span: p.Span}, Message: p.Message,
		})
	}
	return o
}
