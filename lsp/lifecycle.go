package lsp

import (
	"context"

	"go.lsp.dev/jsonrpc2"
	"go.lsp.dev/protocol"
)

// The phases of a session.
const (
	starting    int32 = iota // before the initialize request
	running                  //
	shutDown                 // after the shutdown request
	exited                   // after exit, in order
	exitedEarly              // after exit without shutdown
)

// admits refuses what the protocol does not allow in the present phase.
func (s *server) admits(method string) error {
	switch phase := s.phase.Load(); {
	case method == protocol.MethodExit:
		return nil
	case phase == starting && method != protocol.MethodInitialize:
		return jsonrpc2.Errorf(jsonrpc2.Code(protocol.ErrorCodesServerNotInitialized), "%s came before initialize", method)
	case phase == running && method == protocol.MethodInitialize:
		return jsonrpc2.Errorf(jsonrpc2.InvalidRequest, "initialize came twice")
	case phase >= shutDown:
		return jsonrpc2.Errorf(jsonrpc2.InvalidRequest, "%s came after shutdown", method)
	}
	return nil
}

// Initialize agrees on the unit of columns and says what the server can do.
func (s *server) Initialize(_ context.Context, p *protocol.InitializeParams) (*protocol.InitializeResult, error) {
	var offers []protocol.PositionEncodingKind
	if g := p.Capabilities.General; g != nil {
		offers = g.PositionEncodings
	}
	var kind protocol.PositionEncodingKind
	s.enc, kind = agree(offers)
	s.plain = prefersPlain(p.Capabilities)
	s.phase.Store(running)
	return &protocol.InitializeResult{
		Capabilities: capabilities(kind),
		ServerInfo:   protocol.ServerInfo{Name: "triodeck", Version: protocol.NewOptional(s.opts.Version)},
	}, nil
}

func capabilities(kind protocol.PositionEncodingKind) protocol.ServerCapabilities {
	yes, change := true, protocol.TextDocumentSyncKindIncremental
	return protocol.ServerCapabilities{
		PositionEncoding: kind,
		TextDocumentSync: &protocol.TextDocumentSyncOptions{
			OpenClose: &yes,
			Change:    &change,
			Save:      protocol.Boolean(true),
		},
		HoverProvider:          protocol.Boolean(true),
		InlayHintProvider:      protocol.Boolean(true),
		DefinitionProvider:     protocol.Boolean(true),
		DocumentSymbolProvider: protocol.Boolean(true),
	}
}

// Initialized needs no answer.
func (s *server) Initialized(context.Context, *protocol.InitializedParams) error { return nil }

// SetTrace is heard and has no effect: the server sends no trace.
func (s *server) SetTrace(context.Context, *protocol.SetTraceParams) error { return nil }

// Shutdown stops all work; only exit may follow.
func (s *server) Shutdown(context.Context) error {
	s.phase.Store(shutDown)
	s.diagnostics.stop()
	return nil
}

// Exit ends the session.
func (s *server) Exit(context.Context) error {
	if !s.phase.CompareAndSwap(shutDown, exited) {
		s.phase.Store(exitedEarly)
	}
	s.hangUp()
	return nil
}
