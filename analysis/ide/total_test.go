package ide

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/tools/txtar"

	"triodeck/analysis/workspace"
	"triodeck/parser/source"
)

// askEverything asks every question at a place and holds the answers to lie in
// their files.
func askEverything(t *testing.T, files memory, deck *workspace.Deck, path string, offset int32) {
	t.Helper()
	ctx := context.Background()
	inside := func(what, path string, sp source.Span) {
		if sp.Start < 0 || sp.Start > sp.End || int(sp.End) > len(files[path]) {
			t.Errorf("%s at %s:%d gives the span %v of %q with %d bytes", what, path, offset, sp, path, len(files[path]))
		}
	}
	if h := Hover(ctx, deck, path, offset); h != nil {
		inside("hover", path, h.Span)
		if strings.TrimSpace(h.Markdown) == "" {
			t.Errorf("hover at %s:%d is empty", path, offset)
		}
	}
	for _, l := range Definition(ctx, deck, path, offset) {
		inside("definition", l.Path, l.Span)
	}
	for _, h := range InlayHints(ctx, deck, path, source.Span{Start: offset, End: int32(len(files[path]))}) {
		inside("hint", path, source.Span{Start: h.Offset, End: h.Offset})
	}
}

// TestEveryPlace asks at every byte of every case, with the cursors left in: most
// of the decks are broken in one more way then.
func TestEveryPlace(t *testing.T) {
	paths, err := filepath.Glob("../../testdata/ide/*/*.txtar")
	if err != nil || len(paths) == 0 {
		t.Fatalf("no cases: %v", err)
	}
	for _, path := range paths {
		archive, err := txtar.ParseFile(path)
		if err != nil {
			t.Fatal(err)
		}
		files := memory{}
		for _, f := range archive.Files {
			files[filepath.Clean(f.Name)] = string(f.Data)
		}
		delete(files, "want")
		deck := workspace.New(files).Deck(filepath.Clean(archive.Files[0].Name))
		for name, text := range files {
			for i := range len(text) + 1 {
				askEverything(t, files, deck, name, int32(i))
			}
		}
	}
}

// FuzzPlaces asks at any place of any text.
func FuzzPlaces(f *testing.F) {
	paths, err := filepath.Glob("../../testdata/demo/*.sp")
	if err != nil || len(paths) == 0 {
		f.Fatalf("no decks: %v", err)
	}
	for _, path := range paths {
		src, err := os.ReadFile(path)
		if err != nil {
			f.Fatal(err)
		}
		for i := 0; i < len(src); i += 97 {
			f.Add(string(src), int32(i))
		}
	}
	f.Add("", int32(0))
	f.Add("t\nB;@ expect ron=0", int32(3))
	f.Add("t\nM1 a b c d n\n*@ bias v(a)=1..2", int32(12))
	f.Add(".subckt x\n.subckt x\nx1 x\n.ends", int32(20))
	f.Fuzz(func(t *testing.T, text string, offset int32) {
		if len(text) > 4000 {
			t.Skip("longer texts only take longer")
		}
		files := memory{"a.sp": text}
		askEverything(t, files, workspace.New(files).Deck("a.sp"), "a.sp", max(0, min(offset, int32(len(text)))))
	})
}
