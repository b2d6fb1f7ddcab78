package parser

import (
	"fmt"
	"runtime"
	"sync"

	"triodeck/parser/source"
)

// reader reads cards one after the other and reuses its buffers.
type reader struct {
	lexed
	note  lexed
	expr  lexed
	parts parts
	slabs slabs
	card  *Card
	piece piece
}

// parallelFrom is the number of bytes from which a second goroutine pays.
const parallelFrom = 64 << 10

// readAll reads every card; they do not depend on one another.
func readAll(src string, pieces []piece, cards []Card) {
	workers := min(runtime.GOMAXPROCS(0), len(src)/parallelFrom+1)
	var wait sync.WaitGroup
	for w := range workers {
		// Contiguous runs keep each worker in its own part of the text.
		from, to := w*len(pieces)/workers, (w+1)*len(pieces)/workers
		work := func() {
			var r reader
			r.slabs.large = true
			for i := from; i < to; i++ {
				p := pieces[i]
				r.read(src[p.start:p.end], p, &cards[i])
			}
		}
		if w == workers-1 {
			work()
			break
		}
		wait.Go(work)
	}
	wait.Wait()
}

// read reads one card.
func (r *reader) read(text string, p piece, c *Card) {
	*c = Card{Kind: p.kind, Text: text}
	r.card, r.piece = c, p
	switch p.kind {
	case BlankCard, OpaqueCard:
	case CommentCard:
		r.comment()
	case AnnotationCard:
		r.annotationCard()
	case TitleCard:
		r.title()
	case DirectiveCard:
		r.directive()
	default:
		r.element()
	}
	r.card = nil
}

func (r *reader) errorf(sp source.Span, format string, args ...any) {
	r.card.Errs = append(r.card.Errs, Error{Span: sp, Message: fmt.Sprintf(format, args...)})
}

// fail makes the card one that could not be read.
func (r *reader) fail(sp source.Span, format string, args ...any) {
	r.card.Kind = ErrorCard
	r.card.Stmt = nil
	r.card.Errs = r.card.Errs[:0]
	r.errorf(sp, format, args...)
}

// checkValues reports the expressions that cannot be read.
func (r *reader) checkValue(v Value) {
	if v.Form != ExprValue {
		return
	}
	lexExprWord(v.Word, &r.expr)
	if _, err := parseExpr(&r.expr); err != nil {
		r.card.Errs = append(r.card.Errs, *err)
	}
}

func (r *reader) checkParams(ps []Param) {
	for _, p := range ps {
		r.checkValue(p.Value)
	}
}
