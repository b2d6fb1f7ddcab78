package rules

import (
	_ "embed"
	"fmt"

	"triodeck/analysis"
	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
	"triodeck/analysis/mos"
	"triodeck/analysis/quantity"
)

//go:embed bulk-bias.md
var bulkBiasText string

// BulkBias looks for bulk junctions that conduct, and for bulks that hang on the
// wrong rail.
var BulkBias = &analysis.Rule{
	Name: "bulk-bias", Severity: analysis.Warning, Scope: analysis.PerResult, Text: bulkBiasText, Run: bulkBias,
}

// Limits of a junction's forward voltage, in volts. Up to the first it is noise,
// to the second a note: it carries little at room temperature and may be meant as
// forward body bias. Beyond the third it conducts whatever was meant. Common practice.
const (
	junctionNoise   = 0.02
	junctionForward = 0.3
	junctionOn      = 0.5
)

const (
	sourceTerminal = 2
	drainTerminal  = 0
	bulkTerminal   = 3
)

func bulkBias(p *analysis.Pass) {
	worst := map[cardKey]*junction{}
	var order []cardKey
	for m := range parts(p.Bias) {
		j := forward(m)
		if j == nil {
			continue
		}
		key := keyOf(m.Card)
		if was := worst[key]; was == nil {
			worst[key] = j
			order = append(order, key)
		} else if j.volts > was.volts {
			*was = *j
		}
	}
	for _, key := range order {
		j := worst[key]
		p.Report(analysis.Finding{Severity: j.severity(), Place: j.m.Name(), Subject: j.m.subject(), Message: j.message()})
	}
}

// junction is the most forward junction of a device.
type junction struct {
	m      part
	end    string  // "source", "drain"; "" where neither is known
	volts  float64 // V, forward
	bulk   float64 // V, the bulk's own
	sample int
}

func (j *junction) severity() analysis.Severity {
	switch {
	case j.volts > junctionOn && j.end != "":
		return analysis.Error
	case j.volts > junctionForward:
		return analysis.Warning
	}
	return analysis.Note
}

func (j *junction) message() string {
	kind, side, rail := "NMOS", "above", "highest"
	if j.m.Polarity == mos.PMOS {
		kind, side, rail = "PMOS", "below", "lowest"
	}
	bulk := j.m.Context.Cell.Nets[j.m.Device.Device.Nets[bulkTerminal]].Spelt
	when := conditionAt(j.m, j.sample)
	if j.end == "" {
		return fmt.Sprintf("the bulk of %s %s is on %q at %s, the %s voltage known here: its junctions conduct wherever source or drain stand apart from it%s",
			kind, j.m.Path, bulk, quantity.Volts(j.bulk), rail, when)
	}
	return fmt.Sprintf("the bulk of %s %s, %q at %s, is %s %s its %s: the junction is forward biased%s",
		kind, j.m.Path, bulk, quantity.Volts(j.bulk), quantity.Volts(j.volts), side, j.end, when)
}

// forward is the most forward junction of a part, nil if none is. A junction
// whose two ends are one net cannot be.
func forward(m part) *junction {
	d := m.Device.Device
	if len(d.Nets) <= bulkTerminal || !polarityKnown(m.Device) {
		return nil
	}
	nodes, sign := m.Context.Nodes, float64(m.Polarity)
	bulk := nodes[d.Nets[bulkTerminal]].V
	if bulk == nil {
		return nil
	}
	var worst *junction
	ends := 0
	for _, end := range []struct {
		terminal int
		name     string
	}{{sourceTerminal, "source"}, {drainTerminal, "drain"}} {
		net := d.Nets[end.terminal]
		if net == d.Nets[bulkTerminal] {
			ends++
			continue
		}
		v := nodes[net].V
		if v == nil {
			continue
		}
		ends++
		for s := range v {
			if f := sign * (bulk[s] - v[s]); f > junctionNoise && (worst == nil || f > worst.volts) {
				worst = &junction{m, end.name, f, bulk[s], s}
			}
		}
	}
	if worst == nil && ends == 0 {
		return wrongRail(m, bulk[0])
	}
	return worst
}

// wrongRail speaks where the voltages of neither end are known: an NMOS bulk on
// the highest voltage that is, a PMOS bulk on the lowest.
func wrongRail(m part, bulk float64) *junction {
	sign := float64(m.Polarity)
	spread := 0.0
	for _, n := range m.Context.Nodes {
		if len(n.V) == 0 {
			continue
		}
		f := sign * (bulk - n.V[0])
		if f < 0 {
			return nil
		}
		spread = max(spread, f)
	}
	if spread <= junctionForward {
		return nil
	}
	return &junction{m: m, volts: spread, bulk: bulk}
}

// polarityKnown says whether the channel type is more than an assumption.
func polarityKnown(d *bias.Device) bool {
	if d.Points != nil {
		return true
	}
	m := d.Device.Model
	return m != nil && (typeIs(m.Def) || len(m.Bins) > 0 && typeIs(m.Bins[0]))
}

func typeIs(def *circuit.ModelDef) bool {
	return def != nil && (def.Type == "nmos" || def.Type == "pmos")
}
