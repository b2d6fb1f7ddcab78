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
		Contents: &protocol.MarkupContent{Kind: protocol.MarkupKindMarkdown, Value: h.Markdown},
		Range:    &r,
	}, nil
}
