package circuit

import (
	"path/filepath"
	"strings"
)

// Lister is a Reader that can also name what lies in a folder. With one, a path
// counts only in the case in which it is written, on every system, and a path that
// differs in nothing else is named.
type Lister interface {
	Names(folder string) []string
}

// folder is what lies in one, by exact and by folded name.
type folder struct {
	exact  map[string]bool
	folded map[string]string
}

func (l *loader) folder(path string) folder {
	if f, ok := l.folders[path]; ok {
		return f
	}
	f := folder{map[string]bool{}, map[string]string{}}
	if lister, ok := l.reader.(Lister); ok {
		for _, name := range lister.Names(path) {
			f.exact[name] = true
			// Of several that fold alike the first in the alphabet is named.
			key := strings.ToLower(name)
			if was, ok := f.folded[key]; !ok || name < was {
				f.folded[key] = name
			}
		}
	}
	l.folders[path] = f
	return f
}

// spelling gives the written path in the case in which it lies below a folder.
// Where the two differ in case alone, other is true.
func (l *loader) spelling(below, written string) (path string, other bool) {
	parts := strings.Split(filepath.ToSlash(written), "/")
	at := below
	for i, part := range parts {
		if part == "" || part == "." || part == ".." {
			at = filepath.Join(at, part)
			if part == "" && i == 0 {
				at = string(filepath.Separator)
			}
			continue
		}
		f := l.folder(at)
		if !f.exact[part] {
			real, ok := f.folded[strings.ToLower(part)]
			if !ok {
				return written, false // it is not there, or only in an editor
			}
			parts[i], other = real, true
		}
		at = filepath.Join(at, parts[i])
	}
	return strings.Join(parts, "/"), other
}
