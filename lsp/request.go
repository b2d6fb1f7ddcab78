package lsp

import (
	"context"

	"go.lsp.dev/jsonrpc2"
)

// requestContext is the context of one request. The connection reuses its own
// context objects for later requests, while a context derived from one may ask
// it for its end a moment after the handler has returned; so contexts are derived
// from that of the session. What only the request's context knows, the token that
// lets the next message in, is still found.
type requestContext struct {
	context.Context // of the session
	request         context.Context
}

func (c requestContext) Value(key any) any {
	if v := c.Context.Value(key); v != nil {
		return v
	}
	return c.request.Value(key)
}

// lasting gives handlers a context that may be derived from.
func lasting(next jsonrpc2.Handler) jsonrpc2.Handler {
	return func(ctx context.Context, req *jsonrpc2.Request) (any, error) {
		return next(requestContext{jsonrpc2.DetachContext(ctx), ctx}, req)
	}
}
