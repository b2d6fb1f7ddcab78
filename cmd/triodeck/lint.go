package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"slices"
	"time"

	"triodeck/analysis"
	"triodeck/analysis/report"
	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
)

type lintCmd struct {
	Paths  []string `arg:"" optional:"" help:"Decks, and folders to look for decks in (default: the working folder)."`
	Format string   `help:"text, json or sarif." enum:"text,json,sarif" default:"text"`
	FailOn []string `help:"Exit with 1 at this severity or above: error, warning or note; rules' names may be added: error,not-evaluated." default:"error" placeholder:"error|warning|note"`
	Apply  bool     `help:"Write the edits that are certain, then report what is left."`
	Also   []string `help:"With --apply: write this rule's edits too where they are not certain." placeholder:"RULE"`
	Known  string   `help:"Pass over the findings that this file records." placeholder:"FILE"`
	Record bool     `help:"With --known: write the file anew with what is found now."`
}

// rounds bounds how often --apply looks again: an edit may uncover another.
const rounds = 8

func (c *lintCmd) Run(ctx context.Context, s streams) error {
	if err := c.check(); err != nil {
		return err
	}
	start := time.Now()
	findings, sum, err := c.lint(ctx, s)
	for round := 0; c.Apply && round < rounds; round++ {
		done, applyErr := writeMends(mends(findings, c.Also))
		for _, m := range done {
			fmt.Fprintf(s.err, "%s:%d: written: %s [%s]\n", m.doc.Path, m.at, m.edit.Title, m.rule)
		}
		if applyErr != nil {
			return applyErr
		}
		if len(done) == 0 {
			break
		}
		findings, sum, err = c.lint(ctx, s)
	}
	if err != nil {
		fmt.Fprintf(s.err, "triodeck: %v\n", err)
	}
	findings, knownErr := c.passKnown(s, findings, &sum)
	if knownErr != nil {
		return knownErr
	}
	if printErr := c.print(s, findings, sum, time.Since(start)); printErr != nil {
		return printErr
	}
	switch {
	case err != nil:
		return status(exitUnable)
	case c.fails(findings):
		return status(exitFindings)
	}
	return nil
}

func (c *lintCmd) check() error {
	for _, on := range c.FailOn {
		if _, ok := severity(on); !ok && rules.ByName(on) == nil {
			return fmt.Errorf("--fail-on must be error, warning, note or a rule's name but got %q", on)
		}
	}
	if len(c.Also) > 0 && !c.Apply {
		return errors.New("--also goes with --apply")
	}
	if c.Record && c.Known == "" {
		return errors.New("--record goes with --known")
	}
	for _, name := range c.Also {
		if rules.ByName(name) == nil {
			return fmt.Errorf("--also: there is no rule %q; 'triodeck rules' lists them", name)
		}
	}
	return nil
}

func (c *lintCmd) lint(ctx context.Context, s streams) ([]analysis.Finding, report.Summary, error) {
	paths := c.Paths
	if len(paths) == 0 {
		paths = []string{"."}
	}
	bar := newProgress(s.err)
	defer bar.done()
	return workspace.New(workspace.OS()).Lint(ctx, paths, rules.All, bar.update)
}

func (c *lintCmd) print(s streams, findings []analysis.Finding, sum report.Summary, took time.Duration) error {
	folder, err := os.Getwd()
	if err != nil {
		folder = ""
	}
	shown := report.Relative(folder)
	switch c.Format {
	case "json":
		return report.JSON(s.out, findings, sum, shown)
	case "sarif":
		return report.SARIF(s.out, findings, report.SARIFOptions{Path: shown, Version: version(), Rules: rules.All})
	}
	terminal := isTerminal(s.out)
	opt := report.TextOptions{Path: shown, Source: terminal}
	if terminal && os.Getenv("NO_COLOR") == "" {
		opt.Style = colours
	}
	if err := report.Text(s.out, findings, opt); err != nil {
		return err
	}
	_, err = fmt.Fprintln(s.err, summary(sum, took))
	return err
}

// summary tells what the run covered, in one line.
func summary(s report.Summary, took time.Duration) string {
	text := fmt.Sprintf("%s in %s: %s evaluated", plural(s.Files, "deck"), took.Round(time.Millisecond), plural(s.Evaluated, "MOSFET"))
	if s.NotEvaluated > 0 {
		text += fmt.Sprintf(", %d not", s.NotEvaluated)
	}
	return text + fmt.Sprintf("; %s, %s, %s", plural(s.Errors, "error"), plural(s.Warnings, "warning"), plural(s.Notes, "note"))
}

func plural(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// fails says whether the findings are such that the run ends with status 1.
func (c *lintCmd) fails(findings []analysis.Finding) bool {
	return slices.ContainsFunc(findings, func(f analysis.Finding) bool {
		return slices.ContainsFunc(c.FailOn, func(on string) bool {
			if level, ok := severity(on); ok {
				return f.Severity >= level
			}
			return f.Rule == on
		})
	})
}

func severity(name string) (analysis.Severity, bool) {
	for s := analysis.Note; s <= analysis.Error; s++ {
		if s.String() == name {
			return s, true
		}
	}
	return 0, false
}
