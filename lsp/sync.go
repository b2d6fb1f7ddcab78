package lsp

import (
	"context"
	"fmt"

	"go.lsp.dev/protocol"

	"triodeck/parser"
)

// DidOpen takes a buffer in.
func (s *server) DidOpen(_ context.Context, p *protocol.DidOpenTextDocumentParams) error {
	d := p.TextDocument
	s.replace(s.state.Load().with(pathOf(d.URI), buffer{uri: d.URI, version: d.Version, file: parser.Parse([]byte(d.Text))}))
	return nil
}

// DidChange applies edits one after the other; each range speaks of the text
// that the edit before it left.
func (s *server) DidChange(_ context.Context, p *protocol.DidChangeTextDocumentParams) error {
	st, path := s.state.Load(), pathOf(p.TextDocument.URI)
	b, ok := st.open[path]
	if !ok {
		return fmt.Errorf("%s changed, but it is not open", path)
	}
	b.version = p.TextDocument.Version
	for _, change := range p.ContentChanges {
		switch c := change.(type) {
		case *protocol.TextDocumentContentChangePartial:
			b.file = b.file.Edit(s.enc.spanOf(b.file, c.Range), c.Text)
		case *protocol.TextDocumentContentChangeWholeDocument:
			b.file = parser.Parse([]byte(c.Text))
		}
	}
	s.replace(st.with(path, b))
	return nil
}

// DidSave has the files that are not open looked at again: a save is often the
// moment at which something beside the editor wrote, too.
func (s *server) DidSave(context.Context, *protocol.DidSaveTextDocumentParams) error {
	s.replace(s.state.Load().reread())
	return nil
}

// DidChangeWatchedFiles likewise.
func (s *server) DidChangeWatchedFiles(context.Context, *protocol.DidChangeWatchedFilesParams) error {
	s.replace(s.state.Load().reread())
	return nil
}

// DidClose forgets a buffer.
func (s *server) DidClose(_ context.Context, p *protocol.DidCloseTextDocumentParams) error {
	st, path := s.state.Load(), pathOf(p.TextDocument.URI)
	if _, ok := st.open[path]; !ok {
		return fmt.Errorf("%s was closed, but it is not open", path)
	}
	s.replace(st.without(path))
	return nil
}
