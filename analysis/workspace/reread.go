package workspace

import "maps"

// Reread is the snapshot in which every file that changed on the file system
// since it was read, appeared or went away is read afresh. Open buffers stay.
func (s *Snapshot) Reread() *Snapshot {
	s.disk.mu.Lock()
	entries := maps.Clone(s.disk.entries)
	s.disk.mu.Unlock()
	for path, e := range entries {
		if _, open := s.open[path]; !open && e.stale(path, s.files) {
			s = s.Without(path)
		}
	}
	return s
}

// stale says whether reading a path now would give something else. It waits for
// a reading that is under way.
func (e *entry) stale(path string, files FileSystem) bool {
	e.once.Do(func() { e.read(path, files) })
	src, err := files.ReadFile(path)
	if err != nil || e.err != nil {
		return (err == nil) != (e.err == nil)
	}
	return string(src) != e.file.Src
}
