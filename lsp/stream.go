package lsp

import (
	"context"
	"errors"
	"io"
	"sync/atomic"

	"go.lsp.dev/jsonrpc2"
)

// pipe is the two ends of a standard stream as one connection. The reading end
// may be one that cannot be closed, as standard input: after Close it reads as
// ended.
type pipe struct {
	in     io.Reader
	out    io.Writer
	closed atomic.Bool
}

func (p *pipe) Read(b []byte) (int, error) {
	if p.closed.Load() {
		return 0, io.EOF
	}
	return p.in.Read(b)
}

func (p *pipe) Write(b []byte) (int, error) { return p.out.Write(b) }

func (p *pipe) Close() error {
	p.closed.Store(true)
	return nil
}

// framed is a stream that gives the body of a message before it is decoded.
type framed interface {
	jsonrpc2.Stream
	ReadFrame(ctx context.Context) ([]byte, int64, error)
}

// tolerantStream answers a body that is no message with a parse error and reads
// on; the frame around it still says where the next one begins.
type tolerantStream struct{ framed }

func newStream(p *pipe) (jsonrpc2.Stream, error) {
	f, ok := jsonrpc2.NewHeaderStream(p).(framed)
	if !ok {
		return nil, errors.New("the message stream does not give its frames")
	}
	// Only the methods of Stream may show: the connection would otherwise take
	// the frames itself, and a bad one would end it.
	return struct{ jsonrpc2.Stream }{tolerantStream{f}}, nil
}

func (s tolerantStream) Read(ctx context.Context) (jsonrpc2.Message, int64, error) {
	for {
		body, n, err := s.ReadFrame(ctx)
		if err != nil {
			return nil, n, err
		}
		msg, err := jsonrpc2.DecodeMessage(body)
		if err == nil {
			return msg, n, nil
		}
		refusal := jsonrpc2.NewResponse(jsonrpc2.ID{}, nil, jsonrpc2.Errorf(jsonrpc2.ErrParse.Code, "the message could not be read: %v", err))
		if _, err := s.Write(ctx, refusal); err != nil {
			return nil, n, err
		}
	}
}
