package workspace

import (
	"context"
	"maps"
	"path/filepath"
	"sync"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// Deck is a root file with everything that it reaches, as one snapshot has it.
type Deck struct {
	Root string

	snap   *Snapshot
	asked  *asked
	design *lazy[*circuit.Design]
	bias   *lazy[*bias.Result]
}

func newDeck(root string, s *Snapshot) *Deck {
	return &Deck{Root: root, snap: s, asked: &asked{}, design: newLazy[*circuit.Design](), bias: newLazy[*bias.Result]()}
}

// carry is the deck for the next snapshot with what stays true after a change
// of one path, or nil if nothing does. Paths asked for in vain count too: a
// file that appears changes the deck that missed it.
func (d *Deck) carry(n *Snapshot, changed string) *Deck {
	design, ok := d.design.peek()
	if !ok {
		return nil
	}
	paths := d.asked.list()
	if paths[changed] || changed == d.Root {
		return nil
	}
	next := newDeck(d.Root, n)
	next.asked = &asked{paths: paths}
	next.design = kept(design)
	if b, ok := d.bias.peek(); ok {
		next.bias = kept(b)
	}
	return next
}

// Design is the deck's circuit. It is nil only if the context ended.
func (d *Deck) Design(ctx context.Context) *circuit.Design {
	return d.design.get(ctx, func(ctx context.Context) *circuit.Design { return d.load(ctx, circuit.Options{}) })
}

// Bias is the deck's operating points. It is nil only if the context ended.
func (d *Deck) Bias(ctx context.Context) *bias.Result {
	return d.bias.get(ctx, func(ctx context.Context) *bias.Result {
		design := d.Design(ctx)
		if design == nil {
			return nil
		}
		return bias.Analyse(ctx, func(o circuit.Options) *circuit.Design {
			if o.Section == "" && len(o.Params) == 0 && len(o.Roots) == 0 {
				return design
			}
			return d.load(ctx, o)
		})
	})
}

func (d *Deck) load(ctx context.Context, o circuit.Options) *circuit.Design {
	return circuit.Load(ctx, reader{d}, d.Root, d.apply(o))
}

// Findings is what the rules have to say about the deck and every file that it
// reaches.
func (d *Deck) Findings(ctx context.Context, rules []*analysis.Rule) []analysis.Finding {
	design := d.Design(ctx)
	if design == nil {
		return nil
	}
	return analysis.Limit(d.collect(ctx, rules, design.Docs))
}

func (d *Deck) input(ctx context.Context, docs []*circuit.Document) analysis.Input {
	return analysis.Input{Docs: docs, Design: d.Design(ctx), Bias: d.Bias(ctx)}
}

// reader reads for a deck and notes what it asked for.
type reader struct{ deck *Deck }

func (r reader) File(path string) (*parser.File, error) {
	r.deck.asked.add(filepath.Clean(path))
	return r.deck.snap.File(path)
}

// Names lists a folder, so that a path counts in its own case only.
func (r reader) Names(folder string) []string {
	if l, ok := r.deck.snap.files.(circuit.Lister); ok {
		return l.Names(folder)
	}
	return nil
}

// asked is the set of paths that a deck depends on.
type asked struct {
	mu    sync.Mutex
	paths map[string]bool
}

// add says whether the path is new.
func (a *asked) add(path string) bool {
	a.mu.Lock()
	defer a.mu.Unlock()
	if a.paths == nil {
		a.paths = map[string]bool{}
	}
	was := a.paths[path]
	a.paths[path] = true
	return !was
}

func (a *asked) list() map[string]bool {
	a.mu.Lock()
	defer a.mu.Unlock()
	return maps.Clone(a.paths)
}
