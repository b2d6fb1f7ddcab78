package lsp

import (
	"context"

	"go.lsp.dev/protocol"

	"triodeck/analysis/ide"
)

// Definition goes to where the name under the cursor is defined.
func (s *server) Definition(ctx context.Context, p *protocol.DefinitionParams) (protocol.DefinitionResult, error) {
	q, err := s.ask(ctx, p.TextDocument.URI)
	if err != nil {
		return nil, err
	}
	locations := protocol.LocationSlice{}
	for _, l := range ide.Definition(ctx, q.deck(ctx), q.path, s.enc.offset(q.file, p.Position)) {
		f, err := q.snapshot.File(l.Path)
		if err != nil {
			continue
		}
		locations = append(locations, protocol.Location{URI: q.uri(l.Path), Range: s.enc.rangeOf(f, l.Span)})
	}
	return locations, ctx.Err()
}
