package workspace

import "context"

// lazy is a value computed at most once at a time and kept when complete. A
// caller whose context ends gets what there is, and the next caller computes
// anew: one caller's cancellation is never cached.
type lazy[T any] struct {
	turn chan struct{} // holds one token: whoever has it may compute or read
	done bool
	v    T
}

func newLazy[T any]() *lazy[T] { return &lazy[T]{turn: make(chan struct{}, 1)} }

// kept is a lazy value that is there already.
func kept[T any](v T) *lazy[T] {
	l := newLazy[T]()
	l.done, l.v = true, v
	return l
}

func (l *lazy[T]) get(ctx context.Context, compute func(context.Context) T) T {
	select {
	case l.turn <- struct{}{}:
	case <-ctx.Done():
		var none T
		return none
	}
	defer func() { <-l.turn }()
	if l.done {
		return l.v
	}
	v := compute(ctx)
	if ctx.Err() == nil {
		l.done, l.v = true, v
	}
	return v
}

// peek gives the value if it is there and nobody is computing.
func (l *lazy[T]) peek() (v T, ok bool) {
	select {
	case l.turn <- struct{}{}:
		defer func() { <-l.turn }()
		return l.v, l.done
	default:
		return v, false
	}
}
