package lsp

import (
	"context"

	"go.lsp.dev/protocol"

	"triodeck/analysis/ide"
	"triodeck/parser"
)

// DocumentSymbol lists the subckts, models, devices and parameters of a file.
func (s *server) DocumentSymbol(ctx context.Context, p *protocol.DocumentSymbolParams) (protocol.DocumentSymbolResult, error) {
	q, err := s.ask(ctx, p.TextDocument.URI)
	if err != nil {
		return nil, err
	}
	return s.symbols(q.file, ide.Symbols(q.file)), ctx.Err()
}

func (s *server) symbols(f *parser.File, list []ide.Symbol) protocol.DocumentSymbolSlice {
	out := protocol.DocumentSymbolSlice{}
	for _, y := range list {
		d := protocol.DocumentSymbol{
			Name:           y.Name,
			Kind:           symbolKinds[y.Kind],
			Range:          s.enc.rangeOf(f, y.Span),
			SelectionRange: s.enc.rangeOf(f, y.NameSpan),
			Children:       s.symbols(f, y.Children),
		}
		if y.Detail != "" {
			d.Detail = &y.Detail
		}
		out = append(out, d)
	}
	return out
}

// symbolKinds picks the pictures that editors draw beside the names.
var symbolKinds = map[ide.SymbolKind]protocol.SymbolKind{
	ide.SubcktSymbol:    protocol.SymbolKindModule,
	ide.ModelSymbol:     protocol.SymbolKindClass,
	ide.DeviceSymbol:    protocol.SymbolKindField,
	ide.InstanceSymbol:  protocol.SymbolKindObject,
	ide.ParameterSymbol: protocol.SymbolKindConstant,
	ide.SectionSymbol:   protocol.SymbolKindNamespace,
}
