package bias

import (
	"fmt"
	"math"
	"strings"

	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
	"triodeck/analysis/quantity"
	"triodeck/parser"
)

// equalWithin is the relative tolerance of `=` without a range.
const equalWithin = 0.01

// judge collects the outcome of every condition over runs and instances.
type judge struct {
	result *Result
	a      *analyser
	run    *Run // that is being judged
	order  []checkKey
	worst  map[checkKey]*verdict
}

// checkKey is a condition: its annotation and its number there, regions being 0.
type checkKey struct {
	note *parser.Annotation
	cond int
}

// verdict is the worst outcome so far; score is how far beyond the limit, in
// parts of it, negative if met.
type verdict struct {
	Check
	score float64
	run   *Run // the last that failed, and how many instances failed in it
	inRun int
}

// Checks judges every expectation, each condition once, and gives the worst case
// over modes, corners, ranges and instances.
func (r *Result) Checks() []Check {
	j := &judge{result: r, a: &analyser{result: r, stmts: map[*circuit.Scope]*statements{}}, worst: map[checkKey]*verdict{}}
	for _, run := range r.Runs {
		j.run = run
		counts := run.counts()
		for path, c := range r.Contexts(run) {
			for _, n := range j.a.statements(c.Cell.Scope).expects {
				e := n.Note.(*parser.Expect)
				if applies(e.Modes, run.Mode) && applies(e.Corners, run.Corner) {
					j.expect(run, path, c, n, e, counts[c])
				}
			}
		}
	}
	out := make([]Check, len(j.order))
	for i, k := range j.order {
		out[i] = j.worst[k].Check
	}
	return out
}

// applies says whether a list of names speaks of this one; an empty list does.
func applies(list []parser.Word, name string) bool {
	for _, w := range list {
		if fold(w) == name {
			return true
		}
	}
	return len(list) == 0
}

func (j *judge) expect(run *Run, path string, c *Context, n circuit.NoteAt, e *parser.Expect, count int) {
	switch e.Kind {
	case parser.NodeTarget:
		j.node(run, path, c, n, e, count)
	case parser.DeviceTarget:
		for _, t := range targets(path, c, n, e) {
			j.device(run, t, n, e, count)
		}
	default:
		word := map[parser.TargetKind]string{parser.PathTarget: "path", parser.SettleTarget: "settle"}[e.Kind]
		j.record(0, count, 0, Check{Note: n, Place: placeOf(n, n.Span.Start, n.Span.End), Status: NotJudged,
			Subject: e.Target.Text, Wanted: word, Mode: run.Mode, Corner: run.Corner, Reason: word + " is not computed"})
	}
}

// device judges the regions and the conditions of one device.
func (j *judge) device(run *Run, t target, n circuit.NoteAt, e *parser.Expect, count int) {
	base := Check{Note: n, Subject: t.path, Mode: run.Mode, Corner: run.Corner}
	if len(e.Regions) > 0 {
		first, last := e.Regions[0], e.Regions[len(e.Regions)-1]
		base.Place = placeOf(n, first.Start, last.Span().End)
		base.Wanted = wantedRegions(e.Regions)
		j.regions(t, e.Regions, base, count)
	}
	for i, cond := range e.Conds {
		base.Place = placeOf(n, cond.Span.Start, cond.Span.End)
		j.compare(t.context, cond, base, i+1, count, t.reason(), func(s int) (float64, bool) {
			return Quantity(t.device, s, cond.Name)
		}, Unit(cond.Name), t.nets())
	}
}

// regions judges the region names: any of the plain ones, none of the `not` ones.
func (j *judge) regions(t target, wishes []parser.RegionWish, base Check, count int) {
	if why := t.reason(); why != "" {
		base.Status, base.Reason = NotJudged, why
		j.record(0, count, 0, base)
		return
	}
	base.Status = Met
	score := -1.0
	for s, v := range t.device.Verdicts {
		ok := regionMeets(v.Region, wishes)
		if ok && s > 0 {
			continue
		}
		base.Found, base.Sample, base.At = v.String(), s, t.context.AtDevice(t.device, s)
		if !ok {
			base.Status = Failed
			score = math.Abs(t.device.Points[s].Margin())
			break
		}
	}
	j.record(0, count, score, base)
}

// regionMeets: deep triode is triode, so a wish for triode takes both.
func regionMeets(r mos.Region, wishes []parser.RegionWish) bool {
	is := func(name string) bool {
		return r.String() == name || (name == mos.Triode.String() && r == mos.DeepTriode)
	}
	plain, hit := false, false
	for _, w := range wishes {
		if w.Not {
			if is(w.Region) {
				return false
			}
			continue
		}
		plain = true
		hit = hit || is(w.Region)
	}
	return hit || !plain
}

func wantedRegions(wishes []parser.RegionWish) string {
	var parts []string
	for _, w := range wishes {
		name := w.Region
		if w.Not {
			name = "not " + name
		}
		parts = append(parts, name)
	}
	return strings.Join(parts, " or ")
}

// node judges conditions on a node's voltage.
func (j *judge) node(run *Run, path string, c *Context, n circuit.NoteAt, e *parser.Expect, count int) {
	subject := e.Target.Text
	if path != "" {
		subject = path + "." + subject
	}
	owner, id, ok := findNode(c, fold(e.Target))
	for i, cond := range e.Conds {
		base := Check{Note: n, Subject: "v(" + subject + ")", Mode: run.Mode, Corner: run.Corner, Place: placeOf(n, cond.Span.Start, cond.Span.End)}
		why := ""
		if !ok {
			why = fmt.Sprintf("there is no node %q", e.Target.Text)
		} else if owner.Nodes[id].V == nil {
			why = fmt.Sprintf("v(%s) is not known: annotate it", e.Target.Text)
		}
		if !ok {
			owner = c
		}
		j.compare(owner, cond, base, i+1, count, why, func(s int) (float64, bool) { return owner.Nodes[id].V[s], true }, "V", []circuit.NetID{id})
	}
}

// compare judges one comparison over the samples.
func (j *judge) compare(c *Context, cond parser.Compare, base Check, num, count int, why string, value func(int) (float64, bool), unit string, nets []circuit.NetID) {
	notJudged := func(why string) {
		base.Status, base.Reason = NotJudged, why
		j.record(num, count, 0, base)
	}
	lo, err := c.Cell.Env.Eval(cond.Lo)
	hi := lo
	if err == nil && cond.Hi != nil {
		hi, err = c.Cell.Env.Eval(cond.Hi)
	}
	if err != nil {
		notJudged(err.Error())
		return
	}
	base.Wanted = wanted(cond, lo, hi, unit)
	if why != "" {
		notJudged(why)
		return
	}
	worst := math.Inf(-1)
	for s := range c.Samples {
		v, ok := value(s)
		if !ok {
			notJudged(fmt.Sprintf("%s has no value there", cond.Quantity.Text))
			return
		}
		if score := excess(cond, v, lo, hi); s == 0 || score > worst {
			worst = score
			base.Found, base.Sample = show(v, unit), s
		}
	}
	base.At = c.atNets(base.Sample, nets)
	if worst > 0 {
		base.Status = Failed
	}
	j.record(num, count, worst, base)
}

// excess is how far a value lies beyond a limit, in parts of the limit.
func excess(cond parser.Compare, v, lo, hi float64) float64 {
	scale := max(math.Abs(lo), math.Abs(hi), 1e-30)
	switch {
	case cond.Hi != nil:
		return max(lo-v, v-hi) / scale
	case strings.HasPrefix(cond.Op, "<"):
		return strict(cond.Op, (v-lo)/scale)
	case strings.HasPrefix(cond.Op, ">"):
		return strict(cond.Op, (lo-v)/scale)
	}
	return math.Abs(v-lo)/scale - equalWithin
}

// strict makes a value that stands exactly on the limit of `<` or `>` too much.
func strict(op string, score float64) float64 {
	if score == 0 && len(op) == 1 {
		return math.SmallestNonzeroFloat64
	}
	return score
}

func wanted(cond parser.Compare, lo, hi float64, unit string) string {
	name := cond.Quantity.Text
	if cond.Hi != nil {
		return fmt.Sprintf("%s=%s..%s", name, show(lo, unit), show(hi, unit))
	}
	return name + cond.Op + show(lo, unit)
}

func show(v float64, unit string) string {
	if unit == "V" {
		return quantity.Volts(v)
	}
	return quantity.Format(v, unit)
}

// record keeps the worst outcome of a condition: failed before not judged before
// met, then the larger score; and the most instances that fail in one run.
func (j *judge) record(cond, count int, score float64, c Check) {
	key := checkKey{c.Note.Annotation, cond}
	was := j.worst[key]
	if was == nil {
		j.order = append(j.order, key)
		was = &verdict{Check: c, score: score}
		j.worst[key] = was
	} else if rank(c.Status) > rank(was.Status) || (c.Status == was.Status && score > was.score) {
		fails := was.Fails
		was.Check, was.score = c, score
		was.Fails = fails
	}
	if c.Status != Failed {
		return
	}
	if was.run != j.run {
		was.run, was.inRun = j.run, 0
	}
	was.inRun += count
	was.Fails = max(was.Fails, was.inRun)
}

func rank(s Status) int { return map[Status]int{Met: 0, NotJudged: 1, Failed: 2}[s] }
