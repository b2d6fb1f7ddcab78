package workspace_test

import (
	"context"
	"path/filepath"
	"sync"
	"testing"

	"triodeck/analysis/workspace"
)

// counting counts how often each path is read.
type counting struct {
	workspace.Map
	mu    sync.Mutex
	reads map[string]int
}

func (c *counting) ReadFile(path string) ([]byte, error) {
	c.mu.Lock()
	c.reads[filepath.ToSlash(path)]++
	c.mu.Unlock()
	return c.Map.ReadFile(path)
}

// A library is read once, however many decks use it at the same time and in
// whatever sections.
func TestLibraryIsReadOnce(t *testing.T) {
	files := &counting{Map: workspace.Map{}, reads: map[string]int{}}
	for path, text := range map[string]string{
		"process.lib": ".lib tt\n.include cards.inc\n.endl\n.lib ss\n.include cards.inc\n.endl\n",
		"cards.inc":   ".model nch nmos vto=0.4\n",
		"a.sp":        "a\n.lib process.lib tt\nM1 d g 0 0 nch W=1u L=1u\n*@ corner slow lib=ss\n",
		"b.sp":        "b\n.lib process.lib ss\nM1 d g 0 0 nch W=1u L=1u\n",
		"c.sp":        "c\n.lib process.lib tt\n.include ./cards.inc\n",
	} {
		files.Map[path] = text
	}
	snap := workspace.New(files)
	var wait sync.WaitGroup
	for _, root := range []string{"a.sp", "b.sp", "c.sp"} {
		wait.Go(func() { snap.Deck(root).Bias(context.Background()) })
	}
	wait.Wait()
	for path, n := range files.reads {
		if n != 1 {
			t.Errorf("%s was read %d times", path, n)
		}
	}
	if files.reads["cards.inc"] != 1 {
		t.Errorf("reads: %v", files.reads)
	}
}
