package main

import (
	"fmt"
	"strings"
	"text/tabwriter"

	"triodeck/analysis/rules"
)

type rulesCmd struct {
	Rule string `arg:"" optional:"" help:"The rule to explain."`
}

func (c *rulesCmd) Run(s streams) error {
	if c.Rule != "" {
		r := rules.ByName(c.Rule)
		if r == nil {
			return fmt.Errorf("there is no rule %q; 'triodeck rules' lists them", c.Rule)
		}
		_, err := fmt.Fprintf(s.out, "%s (%s)\n\n%s\n\nTo allow it at one place, beside the line it speaks of:\n  *@ allow %s on NAME \"the reason\"\n",
			r.Name, r.Severity, strings.TrimSpace(r.Text), r.Name)
		return err
	}
	t := tabwriter.NewWriter(s.out, 0, 0, 2, ' ', 0)
	for _, r := range rules.All {
		fmt.Fprintf(t, "%s\t%s\t%s\n", r.Name, r.Severity, r.Summary())
	}
	return t.Flush()
}
