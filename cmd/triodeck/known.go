package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"

	"triodeck/analysis"
	"triodeck/analysis/known"
	"triodeck/analysis/report"
)

// passKnown drops the findings that the --known file records, and says on
// standard error how many, and which entries are no longer needed. With --record
// the file is written anew first.
func (c *lintCmd) passKnown(s streams, findings []analysis.Finding, sum *report.Summary) ([]analysis.Finding, error) {
	if c.Known == "" {
		return findings, nil
	}
	folder, err := os.Getwd()
	if err != nil {
		return nil, err
	}
	shown := report.Relative(folder)
	if c.Record {
		err := writeFile(c.Known, 0o644, func(f *os.File) error { return known.Write(f, known.Of(findings, shown)) })
		if err != nil {
			return nil, err
		}
	}
	f, err := os.Open(c.Known)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("%s does not exist: --record writes it", c.Known)
	}
	if err != nil {
		return nil, err
	}
	defer f.Close()
	entries, err := known.Read(f)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", c.Known, err)
	}
	fresh, passed, gone := known.Split(findings, entries, shown)
	if passed > 0 {
		fmt.Fprintf(s.err, "%s passed over: %s knows them\n", plural(passed, "finding"), c.Known)
	}
	for _, e := range gone {
		fmt.Fprintf(s.err, "%s: %s in %s is gone; --record forgets it\n", c.Known, e.Rule, e.File)
	}
	sum.Errors, sum.Warnings, sum.Notes = 0, 0, 0
	sum.Tally(fresh)
	return fresh, nil
}
