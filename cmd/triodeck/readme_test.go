package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

const readme = "../../README.md"

var (
	deckBlock   = regexp.MustCompile("(?s)<!-- deck: (\\S+) -->\n```spice\n(.*?)```\n")
	outputBlock = regexp.MustCompile("(?s)(<!-- output: triodeck ([^\n]+) -->\n```\n)(.*?)(```\n)")
)

// TestReadmeOutputs runs the commands whose output the README shows, in a folder
// that holds the README's own decks.
func TestReadmeOutputs(t *testing.T) {
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	root, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	if err := os.CopyFS(filepath.Join(dir, "testdata/demo"), os.DirFS(filepath.Join(root, "testdata/demo"))); err != nil {
		t.Fatal(err)
	}
	for _, m := range deckBlock.FindAllSubmatch(text, -1) {
		writeDeck(t, filepath.Join(dir, string(m[1])), m[2])
		if string(m[1]) == "switch.sp" { // the README then tells to narrow it
			narrow := bytes.Replace(m[2], []byte("W=20u"), []byte("W=10u"), 1)
			if bytes.Equal(narrow, m[2]) {
				t.Error("switch.sp has no W=20u to narrow")
			}
			writeDeck(t, filepath.Join(dir, "narrow.sp"), narrow)
		}
	}
	t.Chdir(dir)
	shown := 0
	renewed := outputBlock.ReplaceAllFunc(text, func(block []byte) []byte {
		shown++
		m := outputBlock.FindSubmatch(block)
		var out, errs bytes.Buffer
		if code := run(context.Background(), strings.Fields(string(m[2])), streams{strings.NewReader(""), &out, &errs}); code == exitUnable {
			t.Errorf("%s: %s", m[2], errs.String())
		}
		want := out.String()
		if !*update && want != string(m[3]) {
			t.Errorf("the README shows for %q\n%s\nand it prints\n%s", m[2], m[3], want)
		}
		return []byte(string(m[1]) + want + string(m[4]))
	})
	if shown == 0 {
		t.Error("the README shows no output")
	}
	if *update && !bytes.Equal(renewed, text) {
		writeDeck(t, filepath.Join(root, "README.md"), renewed)
	}
}

// TestReadmeDeckIsClean holds the README to its word that its deck is sound.
func TestReadmeDeckIsClean(t *testing.T) {
	text, err := os.ReadFile(readme)
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	for _, m := range deckBlock.FindAllSubmatch(text, -1) {
		path := filepath.Join(dir, string(m[1]))
		writeDeck(t, path, m[2])
		var out, errs bytes.Buffer
		if code := run(context.Background(), []string{"lint", "--fail-on", "note", path}, streams{strings.NewReader(""), &out, &errs}); code != exitClean {
			t.Errorf("%s: exit status %d\n%s%s", m[1], code, out.String(), errs.String())
		}
	}
}

func writeDeck(t *testing.T, path string, data []byte) {
	t.Helper()
	if err := os.WriteFile(path, data, 0o644); err != nil {
		t.Fatal(err)
	}
}
