// Package analysis says what a rule is and runs rules over a deck. Its one
// invariant: a run ends with findings in the same order whatever happened in
// it; no rule, however wrong, takes down another. It holds no rule itself and
// reads no file.
package analysis

import (
	"fmt"

	"triodeck/analysis/bias"
	"triodeck/analysis/circuit"
)

// Scope says what a rule looks at, and so how often it runs.
type Scope uint8

// The scopes, in the order in which they run.
const (
	PerFile   Scope = iota // once a file: Pass.Doc
	PerDesign              // once a deck: Pass.Design
	PerResult              // once a deck: Pass.Bias as well
	Last                   // once a deck, when all others have run: Pass.Unused
)

// Rule is one thing to look for.
type Rule struct {
	Name     string // kebab-case words
	Severity Severity
	Scope    Scope
	Text     string // the rule's page, markdown; its first line is a summary
	Run      func(*Pass)
}

// Summary is the first line of the rule's text.
func (r *Rule) Summary() string {
	for i := range len(r.Text) {
		if r.Text[i] == '\n' {
			return r.Text[:i]
		}
	}
	return r.Text
}

// Pass is what a rule sees and where it reports.
type Pass struct {
	*Facts
	Rule  *Rule
	Doc   *circuit.Document // PerFile only
	Rules []*Rule           // every rule of this run

	report func(Finding)
	unused func() []*Allowance
}

// Report adds a finding; the rule's name is filled in.
func (p *Pass) Report(f Finding) {
	f.Rule = p.Rule.Name
	p.report(f)
}

// Reportf adds a finding of the rule's own severity.
func (p *Pass) Reportf(at circuit.Place, format string, args ...any) {
	p.Report(Finding{Severity: p.Rule.Severity, Place: at, Message: fmt.Sprintf(format, args...)})
}

// Unused lists the allowances that silenced nothing although their rule ran.
func (p *Pass) Unused() []*Allowance { return p.unused() }

// Input is what a run works on. Without a Bias only the first two scopes run,
// without a Design only the first.
type Input struct {
	Docs   []*circuit.Document // the files for PerFile rules
	Design *circuit.Design
	Bias   *bias.Result
}
