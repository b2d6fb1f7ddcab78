package lsp

import (
	"testing"
	"unicode/utf16"

	"go.lsp.dev/protocol"
	"go.lsp.dev/uri"
	"pgregory.net/rapid"

	"triodeck/parser"
	"triodeck/parser/source"
)

func TestAgree(t *testing.T) {
	for _, c := range []struct {
		offers []protocol.PositionEncodingKind
		want   protocol.PositionEncodingKind
	}{
		{nil, "utf-16"},
		{[]protocol.PositionEncodingKind{"utf-16"}, "utf-16"},
		{[]protocol.PositionEncodingKind{"utf-32"}, "utf-16"},
		{[]protocol.PositionEncodingKind{"utf-16", "utf-8"}, "utf-8"},
	} {
		if _, got := agree(c.offers); got != c.want {
			t.Errorf("agree(%q) = %q, want %q", c.offers, got, c.want)
		}
	}
}

func TestPaths(t *testing.T) {
	for _, c := range []struct {
		platform uri.Platform
		uri      uri.URI
		path     string
	}{
		{uri.PlatformPOSIX, "file:///home/anna/d%20k/%C2%B5.sp", "/home/anna/d k/µ.sp"},
		{uri.PlatformWindows, "file:///c%3A/decks/a%20b.sp", `c:\decks\a b.sp`},
		{uri.PlatformWindows, "file:///C:/decks/a.sp", `c:\decks\a.sp`},
		{uri.PlatformWindows, "file://server/share/a.sp", `\\server\share\a.sp`},
		{uri.PlatformPOSIX, "untitled:Untitled-1", "untitled:Untitled-1"},
	} {
		got := pathOn(c.platform, c.uri)
		if got != c.path {
			t.Errorf("path of %s is %q, want %q", c.uri, got, c.path)
		}
		if c.uri.Scheme() != "file" {
			continue
		}
		if back := pathOn(c.platform, uri.FileFor(c.platform, got)); back != got {
			t.Errorf("%q does not come back: %q", got, back)
		}
	}
}

// decks draws texts with everything that makes columns hard: bytes that are no
// UTF-8, characters of two UTF-16 units, every line end.
var decks = rapid.Custom(func(t *rapid.T) string {
	text := ""
	for range rapid.IntRange(0, 12).Draw(t, "pieces") {
		text += rapid.SampledFrom([]string{"M1 d g s b n", "µ", "Ω", "𝛀", "\n", "\r\n", "\r", "\xb5", "*@ bias v(a)=1", " ", "", "\t"}).Draw(t, "piece")
	}
	return text
})

// TestPositionsComeBack: every offset at the edge of a character, outside of a
// line break, survives the way to a position and back.
func TestPositionsComeBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := parser.Parse([]byte(decks.Draw(t, "deck")))
		enc := encoding{rapid.SampledFrom([]source.Encoding{source.Bytes, source.UTF16}).Draw(t, "unit")}
		for i := range f.Src {
			at := int32(i)
			line, _ := f.Lines().Position(at, source.Bytes)
			if at > f.Lines().LineSpan(line).End {
				continue
			}
			if back := enc.offset(f, enc.position(f, at)); back != at {
				t.Fatalf("offset %d of %q comes back as %d", at, f.Src, back)
			}
		}
	})
}

// TestEditsByPosition holds edits that come as UTF-16 ranges equal to the same
// edits made on UTF-16 text.
func TestEditsByPosition(t *testing.T) {
	enc := encoding{source.UTF16}
	rapid.Check(t, func(t *rapid.T) {
		f := parser.Parse([]byte(rapid.StringMatching(`([a-cµ𝛀 ]|\n){0,30}`).Draw(t, "deck")))
		model := utf16.Encode([]rune(f.Src))
		for range rapid.IntRange(1, 6).Draw(t, "edits") {
			a, b := boundary(t, model), boundary(t, model)
			a, b = min(a, b), max(a, b)
			text := rapid.StringMatching(`([xyΩ𝛀]|\n){0,4}`).Draw(t, "text")
			f = f.Edit(enc.spanOf(f, protocol.Range{Start: position16(model, a), End: position16(model, b)}), text)
			model = append(append(append([]uint16{}, model[:a]...), utf16.Encode([]rune(text))...), model[b:]...)
			if want := string(utf16.Decode(model)); f.Src != want {
				t.Fatalf("the text is %q, want %q", f.Src, want)
			}
		}
	})
}

// boundary draws an index of UTF-16 text that is not inside a character.
func boundary(t *rapid.T, text []uint16) int {
	i := rapid.IntRange(0, len(text)).Draw(t, "at")
	if i < len(text) && i > 0 && utf16.IsSurrogate(rune(text[i])) && utf16.IsSurrogate(rune(text[i-1])) && text[i] >= 0xDC00 {
		i--
	}
	return i
}

func position16(text []uint16, at int) protocol.Position {
	var p protocol.Position
	for _, u := range text[:at] {
		p.Character++
		if u == '\n' {
			p = protocol.Position{Line: p.Line + 1}
		}
	}
	return p
}
