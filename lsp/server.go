package lsp

import (
	"context"
	"log/slog"
	"maps"
	"slices"
	"sync/atomic"

	"go.lsp.dev/jsonrpc2"
	"go.lsp.dev/protocol"
	"go.lsp.dev/uri"

	"triodeck/analysis/circuit"
	"triodeck/analysis/workspace"
	"triodeck/parser"
)

// server answers one client. What it does not implement is refused politely by
// the embedded server.
type server struct {
	protocol.UnimplementedServer
	opts        Options
	log         *slog.Logger
	phase       atomic.Int32
	enc         encoding // set by initialize, before anything reads it
	plain       bool     // likewise: hovers go without markdown
	state       atomic.Pointer[state]
	diagnostics *diagnostics
	hangUp      func()
}

// state is everything known at one moment. It is immutable: the handlers of
// notifications, which run one after the other, replace it; a query reads it
// once and works on that.
type state struct {
	snapshot *workspace.Snapshot
	open     map[string]buffer // by path
}

// buffer is a document that the client has open.
type buffer struct {
	uri     uri.URI // as the client spells it
	version int32
	file    *parser.File
}

func newServer(ctx context.Context, client protocol.Client, opts Options) *server {
	s := &server{opts: opts, log: opts.Log}
	s.state.Store(&state{snapshot: workspace.New(opts.Files), open: map[string]buffer{}})
	s.diagnostics = newDiagnostics(ctx, s, client)
	return s
}

// with is the state in which a buffer is open.
func (st *state) with(path string, b buffer) *state {
	open := maps.Clone(st.open)
	open[path] = b
	return &state{snapshot: st.snapshot.With(path, b.file), open: open}
}

// without is the state in which a path is not open: its file counts again.
func (st *state) without(path string) *state {
	open := maps.Clone(st.open)
	delete(open, path)
	return &state{snapshot: st.snapshot.Without(path), open: open}
}

// reread is the state in which files that are not open are as they now lie on
// disk.
func (st *state) reread() *state {
	return &state{snapshot: st.snapshot.Reread(), open: st.open}
}

// replace makes a state the present one and has it analysed.
func (s *server) replace(st *state) {
	s.state.Store(st)
	s.diagnostics.request(st)
}

// question is a query about a place in an open or readable document.
type question struct {
	*state
	path string
	file *parser.File
}

// ask takes the state for a query and lets the next messages in.
func (s *server) ask(ctx context.Context, u uri.URI) (question, error) {
	q := question{state: s.state.Load(), path: pathOf(u)}
	jsonrpc2.Async(ctx)
	f, err := q.snapshot.File(q.path)
	if err != nil {
		return q, jsonrpc2.Errorf(jsonrpc2.InvalidParams, "%s could not be read: %v", q.path, err)
	}
	q.file = f
	return q, nil
}

// deck is the deck to ask: an open one that includes the document, else the
// document as a deck itself.
func (q question) deck(ctx context.Context) *workspace.Deck {
	for _, root := range q.roots(ctx) {
		if root == q.path {
			break
		}
		d := q.snapshot.Deck(root)
		design := d.Design(ctx)
		if design != nil && slices.ContainsFunc(design.Docs, func(doc *circuit.Document) bool { return doc.Path == q.path }) {
			return d
		}
	}
	return q.snapshot.Deck(q.path)
}

// uri is the URI of a path, spelt as the client spells it if it has it open.
func (st *state) uri(path string) uri.URI {
	if b, ok := st.open[path]; ok {
		return b.uri
	}
	return uriOf(path)
}
