package lsp

import (
	"context"

	"go.lsp.dev/protocol"

	"triodeck/analysis/ide"
)

// Hover says what stands under the cursor.
func (s *server) Hover(ctx context.Context, p *protocol.HoverParams) (*protocol.Hover, error) {
	q, err := s.ask(ctx, p.TextDocument.URI)
	if err != nil {
		return nil, err
	}
	h := ide.Hover(ctx, q.deck(ctx), q.path, s.enc.offset(q.file, p.Position))
	if h == nil || ctx.Err() != nil {
		return nil, ctx.Err()
	}
	r := s.enc.rangeOf(q.file, h.Span)
	return &protocol.Hover{
		Contents: s.markup(h),
		Range:    &r,
	}, nil
}

// markup is a text in the form that the client likes best.
func (s *server) markup(h *ide.HoverText) *protocol.MarkupContent {
	if s.plain {
		return &protocol.MarkupContent{Kind: protocol.MarkupKindPlainText, Value: h.Plain()}
	}
	return &protocol.MarkupContent{Kind: protocol.MarkupKindMarkdown, Value: h.Markdown}
}

// prefersPlain says whether a client would rather have no markdown. One that says
// nothing gets it: its tables line up as plain text, too.
func prefersPlain(c protocol.ClientCapabilities) bool {
	if c.TextDocument == nil || c.TextDocument.Hover == nil || len(c.TextDocument.Hover.ContentFormat) == 0 {
		return false
	}
	return c.TextDocument.Hover.ContentFormat[0] == protocol.MarkupKindPlainText
}
