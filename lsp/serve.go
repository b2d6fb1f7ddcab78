// Package lsp speaks the Language Server Protocol: it keeps the open buffers,
// passes questions on to package ide and turns its answers into messages. Its
// one invariant: messages act in the order in which they came, and none of them,
// whatever it holds, ends the connection. It knows no circuit and no device.
package lsp

import (
	"context"
	"errors"
	"fmt"
	"io"
	"log/slog"
	"runtime/debug"
	"time"

	"go.lsp.dev/jsonrpc2"
	"go.lsp.dev/protocol"

	"triodeck/analysis"
	"triodeck/analysis/workspace"
)

// Options are what the server is started with.
type Options struct {
	Version string               // of the program, told to the client
	Rules   []*analysis.Rule     // the rules behind the diagnostics
	Files   workspace.FileSystem // where files that are not open are read
	Delay   time.Duration        // of rest after an edit before everything is analysed
	Log     *slog.Logger         // nil: nothing is logged
	started func(*server)        // tests: called before the first message
}

// ErrNoShutdown says that the client asked the server to exit without having
// asked it to shut down, for which the protocol demands an exit status of 1.
var ErrNoShutdown = errors.New("the client ended the session without a shutdown request")

// Serve answers the messages of one client until it says exit or its stream
// ends. The error is one of reading or writing the streams, or ErrNoShutdown.
func Serve(ctx context.Context, in io.Reader, out io.Writer, opts Options) error {
	if opts.Log == nil {
		opts.Log = slog.New(slog.DiscardHandler)
	}
	p := &pipe{in: in, out: out}
	stream, err := newStream(p)
	if err != nil {
		return err
	}
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	conn := jsonrpc2.NewConn(stream, jsonrpc2.WithCodec(codec{}))
	s := newServer(ctx, protocol.ClientDispatcher(conn), opts)
	s.hangUp = func() { p.Close() }
	if opts.started != nil {
		opts.started(s)
	}
	// Not the package's own server constructor: it gives up the order of messages.
	handler := protocol.CancelHandler(protocol.ServerHandler(s, jsonrpc2.MethodNotFoundHandler))
	conn.Go(ctx, lasting(s.guard(handler)))
	<-conn.Done()
	s.diagnostics.stop()
	if s.phase.Load() == exitedEarly {
		return ErrNoShutdown
	}
	if err := conn.Err(); err != nil && !errors.Is(err, io.ErrUnexpectedEOF) {
		return fmt.Errorf("the connection to the client failed: %w", err)
	}
	return nil
}

// codec passes payloads to the protocol's own encoding, which knows its unions.
type codec struct{}

func (codec) Marshal(v any) ([]byte, error) {
	if raw, ok := v.(jsonrpc2.RawMessage); ok && raw != nil {
		return raw, nil
	}
	return protocol.Marshal(v)
}

func (codec) Unmarshal(data []byte, v any) error {
	if raw, ok := v.(*jsonrpc2.RawMessage); ok {
		*raw = append(jsonrpc2.RawMessage(nil), data...)
		return nil
	}
	return protocol.Unmarshal(data, v)
}

// guard keeps the connection alive: a panic becomes an error of its request, an
// error of a notification is logged, and what comes in the wrong phase of the
// session is refused.
func (s *server) guard(next jsonrpc2.Handler) jsonrpc2.Handler {
	return func(ctx context.Context, req *jsonrpc2.Request) (result any, err error) {
		call := req.IsCall()
		defer func() {
			// Asked for only now: a request that let the next one in has a name of
			// its own from then on; the one before that lies in a buffer.
			method := req.Method()
			if r := recover(); r != nil {
				s.log.Error("a handler panicked", "method", method, "panic", r, "stack", string(debug.Stack()))
				result, err = nil, jsonrpc2.Errorf(jsonrpc2.InternalError, "%s failed: %v", method, r)
			}
			if call && errors.Is(err, context.Canceled) {
				err = jsonrpc2.Errorf(jsonrpc2.Code(protocol.LSPErrorCodesRequestCancelled), "%s was cancelled", method)
			}
			if err != nil && !call {
				s.log.Warn("a notification was not handled", "method", method, "error", err)
				result, err = nil, nil
			}
		}()
		if err := s.admits(req.Method()); err != nil {
			return nil, err
		}
		return next(ctx, req)
	}
}
