package workspace

import (
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
)

// FileSystem reads whole files.
type FileSystem interface {
	ReadFile(path string) ([]byte, error)
}

// MaxFile is the largest file that is read, in bytes: offsets inside a file are
// 32 bits wide, and a netlist of this size is no longer read by a person.
const MaxFile = 1 << 30

type osFiles struct{}

// OS reads the disk.
func OS() FileSystem { return osFiles{} }

func (osFiles) ReadFile(path string) ([]byte, error) {
	info, err := os.Stat(path)
	switch {
	case err != nil:
		return nil, err
	case info.IsDir():
		return nil, &fs.PathError{Op: "read", Path: path, Err: errFolder}
	case !info.Mode().IsRegular():
		// A pipe or device would block or never end.
		return nil, &fs.PathError{Op: "read", Path: path, Err: errNotRegular}
	case info.Size() > MaxFile:
		return nil, &fs.PathError{Op: "read", Path: path, Err: errTooLarge}
	}
	return os.ReadFile(path)
}

// Map is a file system in memory: content by cleaned path.
type Map map[string]string

// ReadFile gives the content of a path.
func (m Map) ReadFile(path string) ([]byte, error) {
	if s, ok := m[filepath.Clean(path)]; ok {
		return []byte(s), nil
	}
	return nil, &fs.PathError{Op: "open", Path: path, Err: fs.ErrNotExist}
}

// Names lists what lies in a folder of the disk, nothing if it cannot be read.
func (osFiles) Names(folder string) []string {
	if folder == "" {
		folder = "."
	}
	entries, err := os.ReadDir(folder)
	if err != nil {
		return nil
	}
	names := make([]string, len(entries))
	for i, e := range entries {
		names[i] = e.Name()
	}
	return names
}

// Names lists what lies in a folder of the memory.
func (m Map) Names(folder string) []string {
	seen := map[string]bool{}
	for path := range m {
		below, err := filepath.Rel(folder, path)
		if err != nil || below == "." || strings.HasPrefix(below, "..") {
			continue
		}
		name, _, _ := strings.Cut(filepath.ToSlash(below), "/")
		seen[name] = true
	}
	return slices.Sorted(maps.Keys(seen))
}
