package main

import (
	"context"
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"triodeck/analysis/bias"
	"triodeck/analysis/workspace"
)

type opCmd struct {
	Deck   string   `arg:"" help:"The deck to evaluate."`
	Mode   []string `help:"Only these modes." placeholder:"NAME"`
	Corner []string `help:"Only these corners." placeholder:"NAME"`
	Format string   `help:"table, json or csv." enum:"table,json,csv" default:"table"`
}

func (c *opCmd) Run(ctx context.Context, s streams) error {
	snap := workspace.New(workspace.OS())
	if _, err := snap.File(c.Deck); err != nil {
		return err
	}
	result := snap.Deck(c.Deck).Bias(ctx)
	if err := knownRuns(c.Deck, result, c.Mode, c.Corner); err != nil {
		return err
	}
	report := newOpReport(c.Deck, result, func(run *bias.Run) bool {
		return wanted(c.Mode, run.Mode) && wanted(c.Corner, run.Corner)
	})
	switch c.Format {
	case "json":
		enc := json.NewEncoder(s.out)
		enc.SetEscapeHTML(false)
		enc.SetIndent("", "  ")
		return enc.Encode(report)
	case "csv":
		return report.csv(s.out)
	}
	return report.table(s.out)
}

func wanted(list []string, name string) bool {
	return len(list) == 0 || slices.ContainsFunc(list, func(w string) bool { return strings.EqualFold(w, name) })
}

// knownRuns refuses a mode or corner that the deck does not have.
func knownRuns(deck string, r *bias.Result, modes, corners []string) error {
	for _, part := range []struct {
		what       string
		asked, has []string
	}{{"mode", modes, r.Modes}, {"corner", corners, r.Corners}} {
		for _, name := range part.asked {
			if !wanted(part.has, name) {
				return fmt.Errorf("%s has no %s %q; it has: %s", deck, part.what, name, named(part.has))
			}
		}
	}
	return nil
}

// named lists the names that the deck gives; the plain corner and the state
// without modes have none.
func named(list []string) string {
	var out []string
	for _, n := range list {
		if n != "" {
			out = append(out, n)
		}
	}
	if len(out) == 0 {
		return "none"
	}
	return strings.Join(out, ", ")
}
