package circuit_test

import (
	"context"
	"flag"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/rogpeppe/go-internal/txtar"

	"triodeck/analysis/circuit"
	"triodeck/analysis/settings"
	"triodeck/parser"
)

var update = flag.Bool("update", false, "rewrite what the cases expect")

// deckFiles is a reader over texts in memory, by path.
type deckFiles map[string]string

func (m deckFiles) File(path string) (*parser.File, error) {
	text, ok := m[filepath.ToSlash(path)]
	if !ok {
		return nil, &fs.PathError{Op: "open", Path: path, Err: fs.ErrNotExist}
	}
	if text == "(unreadable)\n" {
		return nil, &fs.PathError{Op: "open", Path: path, Err: fs.ErrPermission}
	}
	return parser.Parse([]byte(text)), nil
}

// Names lists a folder, and folders in it, as a disk does.
func (m deckFiles) Names(folder string) []string {
	var names []string
	for path := range m {
		below, err := filepath.Rel(folder, filepath.FromSlash(path))
		if err == nil && !strings.HasPrefix(below, "..") {
			name, _, _ := strings.Cut(filepath.ToSlash(below), "/")
			names = append(names, name)
		}
	}
	return names
}

// TestDesigns loads the files of each case, the first being the root deck, and
// compares the design with what stands under `design`.
func TestDesigns(t *testing.T) {
	cases, err := filepath.Glob("../../testdata/circuit/*.txtar")
	if err != nil || len(cases) == 0 {
		t.Fatalf("no cases: %v", err)
	}
	for _, path := range cases {
		t.Run(strings.TrimSuffix(filepath.Base(path), ".txtar"), func(t *testing.T) {
			ar, err := txtar.ParseFile(path)
			if err != nil {
				t.Fatal(err)
			}
			c := readCase(t, ar)
			got := dump(circuit.Load(context.Background(), c.files, c.root, c.options))
			if *update {
				c.set("design", got)
				if err := os.WriteFile(path, txtar.Format(ar), 0o666); err != nil {
					t.Fatal(err)
				}
				return
			}
			if diff := cmp.Diff(c.want, got); diff != "" {
				t.Errorf("the design differs (-want +got):\n%s", diff)
			}
		})
	}
}

// testCase is a case's archive taken apart.
type testCase struct {
	archive *txtar.Archive
	files   deckFiles
	root    string
	options circuit.Options
	want    string
}

func readCase(t *testing.T, ar *txtar.Archive) *testCase {
	t.Helper()
	c := &testCase{archive: ar, files: deckFiles{}, options: circuit.Options{Params: map[string]string{}}}
	for _, f := range ar.Files {
		switch f.Name {
		case "design":
			c.want = string(f.Data)
		case settings.Name:
			set := settings.Parse(f.Name, f.Data)
			if len(set.Problems) > 0 {
				t.Fatalf("the case's settings: %+v", set.Problems)
			}
			c.options.Facts, c.options.Roots = set.Facts, set.Roots
		case "options":
			c.readOptions(t, string(f.Data))
		default:
			if c.root == "" {
				c.root = f.Name
			}
			c.files[f.Name] = string(f.Data)
		}
	}
	return c
}

func (c *testCase) readOptions(t *testing.T, text string) {
	t.Helper()
	for _, word := range strings.Fields(text) {
		key, value, _ := strings.Cut(word, "=")
		switch {
		case key == "root":
			c.root = value
		case key == "section":
			c.options.Section = value
		case key == "roots":
			c.options.Roots = append(c.options.Roots, value)
		case key == "temp":
			n, ok := parser.ParseNumber(value)
			if !ok {
				t.Fatalf("temperature %q", value)
			}
			c.options.TempC = &n.Value
		case strings.HasPrefix(key, "param:"):
			c.options.Params[strings.TrimPrefix(key, "param:")] = value
		default:
			t.Fatalf("unknown option %q", word)
		}
	}
}

// set replaces a file of the archive, or adds it at the end.
func (c *testCase) set(name, data string) {
	for i := range c.archive.Files {
		if c.archive.Files[i].Name == name {
			c.archive.Files[i].Data = []byte(data)
			return
		}
	}
	c.archive.Files = append(c.archive.Files, txtar.File{Name: name, Data: []byte(data)})
}
