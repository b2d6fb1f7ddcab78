// Package workspace holds a tree of decks: files parsed once, designs and
// operating points built when asked for and kept as long as their files are.
// Its one invariant: a snapshot never changes, so whoever holds one sees one
// state of the files; a change makes the next snapshot.
package workspace

import (
	"errors"
	"maps"
	"path/filepath"
	"sync"

	"triodeck/analysis/settings"
	"triodeck/parser"
)

var (
	errFolder     = errors.New("is a folder")
	errNotRegular = errors.New("is not a regular file")
	errTooLarge   = errors.New("is larger than 1 GiB")
)

// Snapshot is one state of the files: open buffers over a file system.
type Snapshot struct {
	files FileSystem
	open  map[string]*parser.File // by cleaned path; never written after New or With
	disk  *cache                  // shared with the snapshots made from this one

	mu    sync.Mutex
	decks map[string]*Deck
	set   map[string]*settings.File // by path
}

// New is a snapshot with no open buffer.
func New(files FileSystem) *Snapshot {
	return &Snapshot{files: files, disk: &cache{}, decks: map[string]*Deck{}}
}

// With is the snapshot in which a path reads as f, an editor's buffer.
func (s *Snapshot) With(path string, f *parser.File) *Snapshot {
	path = filepath.Clean(path)
	open := maps.Clone(s.open)
	if open == nil {
		open = map[string]*parser.File{}
	}
	open[path] = f
	return s.next(path, open, s.disk)
}

// Without is the snapshot in which a path has no buffer and is read afresh.
func (s *Snapshot) Without(path string) *Snapshot {
	path = filepath.Clean(path)
	open := maps.Clone(s.open)
	delete(open, path)
	return s.next(path, open, s.disk.without(path))
}

// next is a snapshot that keeps every deck that did not ask for the path.
func (s *Snapshot) next(changed string, open map[string]*parser.File, disk *cache) *Snapshot {
	n := &Snapshot{files: s.files, open: open, disk: disk, decks: map[string]*Deck{}}
	s.mu.Lock()
	defer s.mu.Unlock()
	for root, d := range s.decks {
		if kept := d.carry(n, changed); kept != nil {
			n.decks[root] = kept
		}
	}
	return n
}

// Open says whether a path is an open buffer.
func (s *Snapshot) Open(path string) bool { return s.open[filepath.Clean(path)] != nil }

// File gives the syntax of a path; each file is parsed once in the lineage of
// snapshots that share its content. The error is the file system's.
func (s *Snapshot) File(path string) (*parser.File, error) {
	path = filepath.Clean(path)
	if f := s.open[path]; f != nil {
		return f, nil
	}
	return s.disk.get(path, s.files)
}

// Deck is the deck whose root is a path. It is built when asked for a result.
func (s *Snapshot) Deck(root string) *Deck {
	root = filepath.Clean(root)
	s.mu.Lock()
	defer s.mu.Unlock()
	d := s.decks[root]
	if d == nil {
		d = newDeck(root, s)
		s.decks[root] = d
	}
	return d
}

// cache holds files of the file system, each read and parsed once, however many
// ask at the same time.
type cache struct {
	mu      sync.Mutex
	entries map[string]*entry
}

type entry struct {
	once sync.Once
	file *parser.File
	err  error
}

func (c *cache) get(path string, files FileSystem) (*parser.File, error) {
	c.mu.Lock()
	e := c.entries[path]
	if e == nil {
		if c.entries == nil {
			c.entries = map[string]*entry{}
		}
		e = &entry{}
		c.entries[path] = e
	}
	c.mu.Unlock()
	e.once.Do(func() { e.read(path, files) })
	return e.file, e.err
}

func (e *entry) read(path string, files FileSystem) {
	src, err := files.ReadFile(path)
	if err != nil {
		e.err = err
		return
	}
	e.file = parser.Parse(src)
}

func (c *cache) without(path string) *cache {
	c.mu.Lock()
	defer c.mu.Unlock()
	n := &cache{entries: maps.Clone(c.entries)}
	delete(n.entries, path)
	return n
}
