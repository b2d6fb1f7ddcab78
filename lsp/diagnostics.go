package lsp

import (
	"context"
	"maps"
	"reflect"
	"runtime/debug"
	"slices"
	"sync"
	"time"

	"go.lsp.dev/protocol"

	"triodeck/analysis"
	"triodeck/analysis/circuit"
	"triodeck/parser"
)

// diagnostics publishes findings in the background. One goroutine does all of
// it: what a file says for itself at once, everything else after a rest. A newer
// state ends the pass over an older one.
type diagnostics struct {
	server *server
	client protocol.Client
	ctx    context.Context
	stop   context.CancelFunc
	slot   chan *state // at most one: the newest state not yet taken up

	published map[string]publication // by path; the goroutine's own

	mu      sync.Mutex
	cancel  context.CancelFunc // of the pass that runs
	asked   int                // states requested
	done    int                // of them dealt with
	settled chan struct{}      // closed when asked equals done
}

// publication is what the client was last told about a file.
type publication struct {
	file     *parser.File // its text then
	findings []analysis.Finding
	sent     *protocol.PublishDiagnosticsParams
}

func newDiagnostics(ctx context.Context, s *server, client protocol.Client) *diagnostics {
	d := &diagnostics{server: s, client: client, slot: make(chan *state, 1), published: map[string]publication{}, settled: make(chan struct{})}
	d.ctx, d.stop = context.WithCancel(ctx)
	go d.loop()
	return d
}

// request has a state analysed. Only the handlers of notifications call it, one
// after the other.
func (d *diagnostics) request(st *state) {
	d.mu.Lock()
	defer d.mu.Unlock()
	if d.asked == d.done {
		d.settled = make(chan struct{})
	}
	d.asked++
	select {
	case <-d.slot:
		d.done++
	default:
	}
	d.slot <- st
	if d.cancel != nil {
		d.cancel()
	}
}

// idle waits until everything requested so far is published or superseded.
func (d *diagnostics) idle(ctx context.Context) error {
	d.mu.Lock()
	settled := d.settled
	quiet := d.asked == d.done
	d.mu.Unlock()
	if quiet {
		return nil
	}
	select {
	case <-settled:
		return nil
	case <-ctx.Done():
		return ctx.Err()
	}
}

func (d *diagnostics) loop() {
	for {
		select {
		case <-d.ctx.Done():
			return
		case st := <-d.slot:
			d.handle(st)
		}
	}
}

// handle deals with one state, up to its end or until there is a newer one.
func (d *diagnostics) handle(st *state) {
	ctx, cancel := context.WithCancel(d.ctx)
	defer cancel()
	d.mu.Lock()
	d.cancel = cancel
	if len(d.slot) > 0 {
		cancel()
	}
	d.mu.Unlock()
	defer d.finish()

	d.early(ctx, st)
	if d.server.opts.Delay > 0 {
		select {
		case <-time.After(d.server.opts.Delay):
		case <-ctx.Done():
		}
	}
	if found, ok := st.findings(ctx, d.server.opts.Rules); ok {
		d.publish(st, found)
	}
}

// finish counts a state as dealt with. A rule that panics is caught where it
// runs; anything else that does must not end the program that edits depend on.
func (d *diagnostics) finish() {
	if r := recover(); r != nil {
		d.server.log.Error("the analysis panicked", "panic", r, "stack", string(debug.Stack()))
	}
	d.mu.Lock()
	defer d.mu.Unlock()
	d.cancel = nil
	d.done++
	if d.asked == d.done {
		close(d.settled)
	}
}

// early tells at once what the edited files say for themselves. The other
// findings of the last pass are kept where their text still stands.
func (d *diagnostics) early(ctx context.Context, st *state) {
	var rules []*analysis.Rule
	for _, r := range d.server.opts.Rules {
		if r.Scope == analysis.PerFile {
			rules = append(rules, r)
		}
	}
	for _, path := range slices.Sorted(maps.Keys(st.open)) {
		b, last := st.open[path], d.published[path]
		if last.file == b.file {
			continue
		}
		doc := &circuit.Document{Path: path, File: b.file}
		found := analysis.Run(ctx, rules, analysis.Input{Docs: []*circuit.Document{doc}})
		if ctx.Err() != nil {
			return
		}
		if last.file != nil {
			found = append(found, carried(last, doc, rules)...)
		} else if len(found) == 0 {
			continue // "none" is for the whole pass to say
		}
		d.send(st, path, analysis.Sort(found))
	}
}

// publish tells the client every file's findings and clears those of files that
// have none any more.
func (d *diagnostics) publish(st *state, found map[string][]analysis.Finding) {
	for path := range d.published {
		if _, ok := found[path]; !ok {
			found[path] = nil
		}
	}
	for path := range st.open {
		if _, ok := found[path]; !ok {
			found[path] = nil
		}
	}
	for _, path := range slices.Sorted(maps.Keys(found)) {
		d.send(st, path, found[path])
	}
}

// send publishes one file's findings, unless the client knows them already.
func (d *diagnostics) send(st *state, path string, found []analysis.Finding) {
	p := &protocol.PublishDiagnosticsParams{URI: st.uri(path), Diagnostics: []protocol.Diagnostic{}}
	b, open := st.open[path]
	if open {
		p.Version = protocol.NewOptional(b.version)
	}
	for _, f := range found {
		p.Diagnostics = append(p.Diagnostics, st.diagnostic(d.server.enc, f))
	}
	last, known := d.published[path]
	if len(found) == 0 && !open {
		delete(d.published, path)
		if !known || len(last.sent.Diagnostics) == 0 {
			return
		}
	} else {
		d.published[path] = publication{file: b.file, findings: found, sent: p}
		if known && reflect.DeepEqual(last.sent, p) {
			return
		}
	}
	if err := d.client.PublishDiagnostics(d.ctx, p); err != nil {
		d.server.log.Warn("diagnostics were not published", "path", path, "error", err)
	}
}
