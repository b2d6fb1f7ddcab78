package ide

import (
	"context"
	"flag"
	"fmt"
	"io/fs"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"golang.org/x/tools/txtar"

	"triodeck/analysis/workspace"
	"triodeck/parser"
	"triodeck/parser/source"
)

var update = flag.Bool("update", false, "rewrite the wanted output of the cases")

// cursor marks a place that a case asks about; it is no part of the deck.
const cursor = "<|>"

// features are the folders of testdata/ide and how they ask.
var features = map[string]func(c *testCase) string{
	"hover":      hovers,
	"definition": definitions,
	"inlay":      hints,
	"symbols":    symbols,
}

// TestFeatures runs the cases of testdata/ide. A case is an archive of files, the
// first of which is the deck, with cursors where it asks, and a file "want" with
// the answers.
func TestFeatures(t *testing.T) {
	for feature, ask := range features {
		paths, err := filepath.Glob("../../testdata/ide/" + feature + "/*.txtar")
		if err != nil || len(paths) == 0 {
			t.Errorf("%s has no cases: %v", feature, err)
		}
		for _, path := range paths {
			t.Run(feature+"/"+strings.TrimSuffix(filepath.Base(path), ".txtar"), func(t *testing.T) {
				t.Parallel()
				src, err := os.ReadFile(path)
				if err != nil {
					t.Fatal(err)
				}
				archive := txtar.Parse([]byte(strings.ReplaceAll(string(src), "\r\n", "\n")))
				i := slices.IndexFunc(archive.Files, func(f txtar.File) bool { return f.Name == "want" })
				if i < 0 {
					i = len(archive.Files)
					archive.Files = append(archive.Files, txtar.File{Name: "want"})
				}
				got := ask(newCase(archive.Files[:i]))
				if *update {
					archive.Files[i].Data = []byte(got)
					if err := os.WriteFile(path, txtar.Format(archive), 0o666); err != nil {
						t.Fatal(err)
					}
					return
				}
				if diff := cmp.Diff(strings.Split(string(archive.Files[i].Data), "\n"), strings.Split(got, "\n")); diff != "" {
					t.Errorf("the answers differ (-want +got):\n%s", diff)
				}
			})
		}
	}
}

// testCase is a case with its cursors taken out.
type testCase struct {
	deck    *workspace.Deck
	root    string
	files   memory
	cursors []spot
}

// spot is where a cursor stood.
type spot struct {
	path   string
	offset int32
}

func newCase(files []txtar.File) *testCase {
	c := &testCase{root: filepath.Clean(files[0].Name), files: memory{}}
	for _, f := range files {
		name, text := filepath.Clean(f.Name), ""
		for i, part := range strings.Split(string(f.Data), cursor) {
			if i > 0 {
				c.cursors = append(c.cursors, spot{name, int32(len(text))})
			}
			text += part
		}
		c.files[name] = text
	}
	c.deck = workspace.New(c.files).Deck(c.root)
	return c
}

// memory is a file system of texts.
type memory map[string]string

func (m memory) ReadFile(path string) ([]byte, error) {
	if s, ok := m[path]; ok {
		return []byte(s), nil
	}
	return nil, &fs.PathError{Op: "open", Path: path, Err: fs.ErrNotExist}
}

// marked is a span of a file as "file:line:column «text»".
func (c *testCase) marked(path string, sp source.Span) string {
	f := parser.Parse([]byte(c.files[path]))
	line, col := f.Lines().Position(sp.Start, source.Bytes)
	text, rest, more := strings.Cut(f.Src[sp.Start:sp.End], "\n")
	if more && rest != "" {
		text += " …"
	}
	return fmt.Sprintf("%s:%d:%d «%s»", filepath.ToSlash(path), line+1, col+1, strings.TrimRight(text, "\r"))
}

func hovers(c *testCase) string {
	var b strings.Builder
	for _, at := range c.cursors {
		h := Hover(context.Background(), c.deck, at.path, at.offset)
		if h == nil {
			fmt.Fprintf(&b, "> %s\nnothing\n", c.marked(at.path, source.Span{Start: at.offset, End: at.offset}))
			continue
		}
		fmt.Fprintf(&b, "> %s\n%s\n", c.marked(at.path, h.Span), strings.TrimRight(h.Markdown, "\n"))
	}
	return b.String()
}

func definitions(c *testCase) string {
	var b strings.Builder
	for _, at := range c.cursors {
		fmt.Fprintf(&b, "> %s\n", c.marked(at.path, wordAround(c.files[at.path], at.offset)))
		found := Definition(context.Background(), c.deck, at.path, at.offset)
		if len(found) == 0 {
			b.WriteString("nothing\n")
		}
		for _, l := range found {
			b.WriteString(c.marked(l.Path, l.Span) + "\n")
		}
	}
	return b.String()
}

// wordAround is the word of a text that touches an offset.
func wordAround(text string, at int32) source.Span {
	const ends = " \t\r\n()='\"{}*+-/"
	sp := source.Span{Start: int32(strings.LastIndexAny(text[:at], ends) + 1), End: int32(len(text))}
	if i := strings.IndexAny(text[at:], ends); i >= 0 {
		sp.End = at + int32(i)
	}
	return sp
}

// hints prints every line of the deck's files with the hints that stand in it.
func hints(c *testCase) string {
	var b strings.Builder
	for _, path := range slices.Sorted(maps.Keys(c.files)) {
		text := c.files[path]
		for _, h := range InlayHints(context.Background(), c.deck, path, source.Span{End: int32(len(text))}) {
			line, _ := parser.Parse([]byte(text)).Lines().Position(h.Offset, source.Bytes)
			start := strings.LastIndexByte(text[:h.Offset], '\n') + 1
			fmt.Fprintf(&b, "%s:%d %s «%s»\n", path, line+1, text[start:h.Offset], h.Text)
		}
	}
	if b.Len() == 0 {
		return "nothing\n"
	}
	return b.String()
}

func symbols(c *testCase) string {
	var b strings.Builder
	names := [...]string{"subckt", "model", "device", "instance", "parameter", "section"}
	var list func(indent string, ys []Symbol)
	list = func(indent string, ys []Symbol) {
		for _, y := range ys {
			fmt.Fprintf(&b, "%s%s %s", indent, names[y.Kind], y.Name)
			if y.Detail != "" {
				fmt.Fprintf(&b, " (%s)", y.Detail)
			}
			fmt.Fprintf(&b, " %s\n", c.marked(c.root, y.Span))
			list(indent+"  ", y.Children)
		}
	}
	list("", Symbols(parser.Parse([]byte(c.files[c.root]))))
	return b.String()
}
