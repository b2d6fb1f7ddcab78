package parser

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"golang.org/x/tools/txtar"

	"triodeck/parser/source"
)

var update = flag.Bool("update", false, "rewrite the expected parts of the cases")

// TestSyntax reads the deck of each case and compares its syntax. A deck may be
// written with \r, \x1a and the like where its comment says "escaped".
func TestSyntax(t *testing.T) {
	paths, _ := filepath.Glob("../testdata/parse/*.txtar")
	if len(paths) == 0 {
		t.Fatal("no cases")
	}
	for _, path := range paths {
		t.Run(strings.TrimSuffix(filepath.Base(path), ".txtar"), func(t *testing.T) {
			a := readCase(t, path)
			f := Parse(deckOf(t, a))
			if err := sane(f); err != nil {
				t.Fatal(err)
			}
			compare(t, path, a, "syntax", dump(f))
		})
	}
}

func readCase(t *testing.T, path string) *txtar.Archive {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	a := txtar.Parse(data)
	if len(bytes.TrimSpace(a.Comment)) == 0 {
		t.Fatalf("%s does not say why it exists", path)
	}
	return a
}

func section(a *txtar.Archive, name string) *txtar.File {
	for i := range a.Files {
		if a.Files[i].Name == name {
			return &a.Files[i]
		}
	}
	return nil
}

func deckOf(t *testing.T, a *txtar.Archive) []byte {
	t.Helper()
	if f := section(a, "deck"); f != nil {
		return f.Data
	}
	f := section(a, "deck escaped")
	if f == nil {
		t.Fatal("the case has no deck")
	}
	return unescape(f.Data)
}

// unescape turns \r \n \f \t \\ and \xHH into bytes and drops the real line ends.
func unescape(data []byte) []byte {
	var out []byte
	for i := 0; i < len(data); i++ {
		c := data[i]
		if c == '\n' {
			continue
		}
		if c != '\\' || i+1 == len(data) {
			out = append(out, c)
			continue
		}
		i++
		switch data[i] {
		case 'n':
			out = append(out, '\n')
		case 'r':
			out = append(out, '\r')
		case 'f':
			out = append(out, '\f')
		case 't':
			out = append(out, '\t')
		case 'x':
			out = append(out, hex(data[i+1])<<4|hex(data[i+2]))
			i += 2
		default:
			out = append(out, data[i])
		}
	}
	return out
}

func hex(c byte) byte {
	return byte(strings.IndexByte("0123456789abcdef", lower(c)))
}

func compare(t *testing.T, path string, a *txtar.Archive, name, got string) {
	t.Helper()
	s := section(a, name)
	if *update {
		if s == nil {
			a.Files = append(a.Files, txtar.File{Name: name})
			s = &a.Files[len(a.Files)-1]
		}
		s.Data = []byte(got)
		if err := os.WriteFile(path, txtar.Format(a), 0o666); err != nil {
			t.Fatal(err)
		}
		return
	}
	if s == nil {
		t.Fatalf("%s has no part %q", path, name)
	}
	if want := string(s.Data); got != want {
		t.Errorf("%s: %s differs (-update rewrites)\n--- want\n%s--- got\n%s", path, name, want, got)
	}
}

// decks are the texts of every case in the repository's test data that has SPICE
// in it: seeds for the properties.
func decks(t testing.TB) [][]byte {
	var out [][]byte
	err := filepath.WalkDir("../testdata", func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		if filepath.Ext(path) != ".txtar" {
			out = append(out, data)
			return nil
		}
		for _, f := range txtar.Parse(data).Files {
			if f.Name == "deck escaped" {
				out = append(out, unescape(f.Data))
			} else {
				out = append(out, f.Data)
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// same says how two files that must be equal differ.
func same(t *testing.T, got, want *File) {
	t.Helper()
	if a, b := dump(got), dump(want); a != b {
		t.Fatalf("text %q: after the edit\n%s\nfresh\n%s", want.Src, a, b)
	}
	for i := range want.Len() {
		if got.states[i] != want.states[i] || got.Start(i) != want.Start(i) || got.Card(i).Text != want.Card(i).Text {
			t.Fatalf("card %d differs", i)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, d := range decks(f) {
		f.Add(d)
	}
	f.Fuzz(func(t *testing.T, src []byte) {
		file := Parse(src)
		if err := sane(file); err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(file.Bytes(), src) {
			t.Fatalf("%q came back as %q", src, file.Bytes())
		}
	})
}

func FuzzEdit(f *testing.F) {
	for i, d := range decks(f) {
		f.Add(d, int32(i*37), int32(i%50), "+ w=1u\n")
		f.Add(d, int32(i*53), int32(0), ".end\n")
	}
	f.Fuzz(func(t *testing.T, src []byte, start, length int32, text string) {
		if bytes.HasPrefix(src, []byte("\xff\xfe")) || bytes.HasPrefix(src, []byte("\xfe\xff")) {
			return // a decoded text is edited as text
		}
		old := Parse(src)
		n := int32(len(src))
		start = min(max(start, 0), n)
		end := min(start+max(min(length, n), 0), n)
		fresh := Parse([]byte(old.Src[:start] + text + old.Src[end:]))
		if fresh.Encoding != EightBit {
			return
		}
		got := old.Edit(source.Span{Start: start, End: end}, text)
		same(t, got, fresh)
		if err := sane(got); err != nil {
			t.Fatal(err)
		}
	})
}
