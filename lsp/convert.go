package lsp

import (
	"math"
	"path/filepath"
	"runtime"

	"go.lsp.dev/protocol"
	"go.lsp.dev/uri"

	"triodeck/parser"
	"triodeck/parser/source"
)

// encoding is the unit of the columns that go over the wire, as agreed with the
// client. This file is the only place that knows lines and columns.
type encoding struct{ unit source.Encoding }

// agree picks the encoding: UTF-8, in which a column is a byte, where the client
// offers it, else UTF-16, which every client must understand.
func agree(offers []protocol.PositionEncodingKind) (encoding, protocol.PositionEncodingKind) {
	for _, offer := range offers {
		if offer == protocol.PositionEncodingKindUTF8 {
			return encoding{source.Bytes}, protocol.PositionEncodingKindUTF8
		}
	}
	return encoding{source.UTF16}, protocol.PositionEncodingKindUTF16
}

// position is the place of a byte.
func (e encoding) position(f *parser.File, offset int32) protocol.Position {
	line, col := f.Lines().Position(offset, e.unit)
	return protocol.Position{Line: uint32(line), Character: uint32(col)}
}

// rangeOf is the range of a span of bytes.
func (e encoding) rangeOf(f *parser.File, sp source.Span) protocol.Range {
	return protocol.Range{Start: e.position(f, sp.Start), End: e.position(f, sp.End)}
}

// offset is the byte at a place; a place outside the text is clamped to it.
func (e encoding) offset(f *parser.File, p protocol.Position) int32 {
	line := int(min(p.Line, math.MaxInt32))
	col := int(min(p.Character, math.MaxInt32))
	return f.Lines().Offset(line, col, e.unit)
}

// spanOf is the span of a range; one written backwards is turned round.
func (e encoding) spanOf(f *parser.File, r protocol.Range) source.Span {
	a, b := e.offset(f, r.Start), e.offset(f, r.End)
	return source.Span{Start: min(a, b), End: max(a, b)}
}

// pathOf is the path of a file URI. A buffer that has no file, such as one not
// yet saved, goes by its URI.
func pathOf(u uri.URI) string { return filepath.Clean(pathOn(host(), u)) }

func pathOn(p uri.Platform, u uri.URI) string {
	if u.Scheme() == "file" {
		return uri.FsPathFor(u, p, false)
	}
	return string(u)
}

// uriOf is the URI of a path.
func uriOf(path string) uri.URI { return uri.FileFor(host(), path) }

func host() uri.Platform {
	if runtime.GOOS == "windows" {
		return uri.PlatformWindows
	}
	return uri.PlatformPOSIX
}
