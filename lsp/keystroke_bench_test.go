package lsp

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"triodeck/analysis/rules"
)

// BenchmarkKeystroke types a digit into the middle of a deck and waits until the
// findings about that version have arrived, without the rest that the program
// grants an edit.
func BenchmarkKeystroke(b *testing.B) {
	for _, lines := range []int{1000, 10000} {
		b.Run(fmt.Sprintf("%d lines", lines), func(b *testing.B) {
			c := dial(b, rules.All)
			c.initialize("utf-8")
			path := home("large.sp")
			c.open(path, largeDeck(lines))
			c.idle()
			at := map[string]any{"line": lines / 2, "character": 0}
			version := 1
			for b.Loop() {
				version++
				c.notify("textDocument/didChange", map[string]any{
					"textDocument":   map[string]any{"uri": uriOf(path), "version": version},
					"contentChanges": []any{map[string]any{"text": edits[version%2], "range": map[string]any{"start": at, "end": map[string]any{"line": lines / 2, "character": version % 2 * 2}}}},
				})
				c.idle()
			}
		})
	}
}

// edits put a comment mark before a line and take it away again.
var edits = [2]string{"* ", ""}

// largeDeck has cells of a few MOSFETs, each with nets of its own, and the bias of
// every net, in about as many lines as asked for.
func largeDeck(lines int) string {
	var b strings.Builder
	b.WriteString("a large flat deck\n.model nch nmos vto=0.45 kp=280u gamma=0.45 phi=0.8 lambda=0.08\n.model pch pmos vto=-0.45 kp=70u lambda=0.1\nVdd vdd 0 1.8\n")
	for i := 0; 5*i < lines-4; i++ {
		fmt.Fprintf(&b, "Mn%d out%d in%d 0 0 nch W=%du L=0.18u\n", i, i, i, 1+i%9)
		fmt.Fprintf(&b, "Mp%d out%d in%d vdd vdd pch W=%du L=0.18u\n", i, i, i, 2+i%9)
		fmt.Fprintf(&b, "Ms%d samp%d vdd out%d 0 nch W=4u L=0.18u ;@ expect not saturation\n", i, i, i)
		fmt.Fprintf(&b, "C%d samp%d 0 50f\n", i, i)
		fmt.Fprintf(&b, "*@ bias v(in%d)=0.9 v(out%d)=0.8 v(samp%d)=0.79\n", i, i, i)
	}
	return b.String()
}

// TestLargeDeck answers about a large deck, with generous patience: a deck of this
// size must not take the editor's breath.
func TestLargeDeck(t *testing.T) {
	c := dial(t, rules.All)
	c.initialize("utf-8")
	path := home("large.sp")
	began := time.Now()
	c.open(path, largeDeck(5000))
	c.idle()
	m := c.call("textDocument/inlayHint", map[string]any{
		"textDocument": map[string]any{"uri": uriOf(path)},
		"range":        map[string]any{"start": map[string]any{"line": 2500, "character": 0}, "end": map[string]any{"line": 2600, "character": 0}},
	})
	if n := strings.Count(string(m.Result), `"label"`); m.Error != nil || n < 60 {
		t.Errorf("%d hints for 100 lines: %+v", n, m.Error)
	}
	if d := time.Since(began); d > patience {
		t.Errorf("it took %v", d)
	}
}

// BenchmarkHints asks for the hints of a whole large deck at once, and of what a
// window shows.
func BenchmarkHints(b *testing.B) {
	c := dial(b, rules.All)
	c.initialize("utf-8")
	path := home("large.sp")
	c.open(path, largeDeck(10000))
	c.idle()
	for _, n := range []int{60, 10000} {
		b.Run(fmt.Sprintf("%d of 10000 lines", n), func(b *testing.B) {
			for b.Loop() {
				m := c.call("textDocument/inlayHint", map[string]any{
					"textDocument": map[string]any{"uri": uriOf(path)},
					"range":        map[string]any{"start": map[string]any{"line": 0, "character": 0}, "end": map[string]any{"line": n, "character": 0}},
				})
				if m.Error != nil {
					b.Fatal(m.Error)
				}
			}
		})
	}
}
