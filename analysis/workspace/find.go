package workspace

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// extensions are those of decks, in lower case.
var extensions = []string{".sp", ".spi", ".spice", ".cir", ".ckt", ".net", ".cdl", ".lib", ".mod"}

// IsDeck says whether a path has the extension of a deck.
func IsDeck(path string) bool {
	return slices.Contains(extensions, strings.ToLower(filepath.Ext(path)))
}

// Find lists the decks among the paths: a file as it is, whatever its extension;
// a folder by all decks below it, hidden folders left out. The list is sorted
// and names each file once. The error joins one for each path that does not
// exist or has no deck; the list holds the others all the same.
func Find(paths []string) (decks []string, err error) {
	var errs []error
	for _, path := range paths {
		info, err := os.Stat(path)
		switch {
		case errors.Is(err, fs.ErrNotExist):
			errs = append(errs, fmt.Errorf("%s: no such file or folder", path))
		case err != nil:
			errs = append(errs, fmt.Errorf("%s cannot be read: %w", path, reason(err)))
		case !info.IsDir():
			decks = append(decks, filepath.Clean(path))
		default:
			below, err := walk(path)
			decks = append(decks, below...)
			if err != nil {
				errs = append(errs, err)
			} else if len(below) == 0 {
				errs = append(errs, fmt.Errorf("%s holds no deck: no file ends in %s", path, strings.Join(extensions, " ")))
			}
		}
	}
	slices.Sort(decks)
	return slices.Compact(decks), errors.Join(errs...)
}

func walk(folder string) (decks []string, err error) {
	var errs []error
	_ = filepath.WalkDir(folder, func(path string, e fs.DirEntry, err error) error {
		switch {
		case err != nil:
			errs = append(errs, fmt.Errorf("%s cannot be read: %w", path, reason(err)))
			if e != nil && e.IsDir() {
				return fs.SkipDir
			}
		case e.IsDir():
			if name := e.Name(); path != folder && strings.HasPrefix(name, ".") {
				return fs.SkipDir
			}
		case IsDeck(path) && regular(path, e):
			decks = append(decks, path)
		}
		return nil
	})
	return decks, errors.Join(errs...)
}

// regular says whether an entry is a file, through a link or not.
func regular(path string, e fs.DirEntry) bool {
	if e.Type()&fs.ModeSymlink == 0 {
		return e.Type().IsRegular()
	}
	info, err := os.Stat(path)
	return err == nil && info.Mode().IsRegular()
}

// reason is the cause alone, without the operation and the path.
func reason(err error) error {
	var p *fs.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}
