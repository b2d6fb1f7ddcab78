package lsp

import (
	"context"

	"go.lsp.dev/protocol"

	"triodeck/analysis/ide"
)

// InlayHint gives the region and on-resistance behind each MOSFET of a range.
func (s *server) InlayHint(ctx context.Context, p *protocol.InlayHintParams) ([]protocol.InlayHint, error) {
	q, err := s.ask(ctx, p.TextDocument.URI)
	if err != nil {
		return nil, err
	}
	pad := true
	hints := []protocol.InlayHint{}
	for _, h := range ide.InlayHints(ctx, q.deck(ctx), q.path, s.enc.spanOf(q.file, p.Range)) {
		hint := protocol.InlayHint{
			Position:    s.enc.position(q.file, h.Offset),
			Label:       protocol.String(h.Text),
			PaddingLeft: &pad,
		}
		if h.Tooltip != "" {
			hint.Tooltip = protocol.String(h.Tooltip)
		}
		hints = append(hints, hint)
	}
	return hints, ctx.Err()
}
