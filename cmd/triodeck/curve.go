package main

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"triodeck/analysis/curve"
	"triodeck/analysis/workspace"
)

type curveCmd struct {
	Deck   string `arg:"" help:"The deck to evaluate."`
	Device string `arg:"" help:"A MOSFET's name as 'triodeck op' shows it, with * and ? if you like; or an instance, for every MOSFET in it."`
	Of     string `help:"The quantity, as annotations name it." default:"ron" placeholder:"QUANTITY"`
	Along  string `help:"The ranged node to draw along (default: the first that moves the device)." placeholder:"NODE"`
	Mode   string `help:"The mode (default: the first)." placeholder:"NAME"`
	Corner string `help:"The corner (default: the first)." placeholder:"NAME"`
	Out    string `help:"Write a picture or a table to this file instead: .svg, .png or .csv." placeholder:"FILE"`
}

func (c *curveCmd) Run(ctx context.Context, s streams) error {
	write, err := c.writer()
	if err != nil {
		return err
	}
	snap := workspace.New(workspace.OS())
	if _, err := snap.File(c.Deck); err != nil {
		return err
	}
	result := snap.Deck(c.Deck).Bias(ctx)
	if err := knownRuns(c.Deck, result, nonEmpty(c.Mode), nonEmpty(c.Corner)); err != nil {
		return err
	}
	drawn, err := curve.Of(result, curve.Request{Device: c.Device, Quantity: c.Of, Along: c.Along, Mode: c.Mode, Corner: c.Corner})
	if err != nil {
		return fmt.Errorf("%s: %w", c.Deck, err)
	}
	if c.Out == "" {
		return plotTerminal(s.out, drawn)
	}
	return writeFile(c.Out, 0o644, func(f *os.File) error { return write(f, drawn) })
}

// writer picks what writes the file by its ending.
func (c *curveCmd) writer() (func(*os.File, *curve.Curve) error, error) {
	switch ext := strings.ToLower(filepath.Ext(c.Out)); {
	case c.Out == "":
		return nil, nil
	case ext == ".svg", ext == ".png":
		return func(f *os.File, drawn *curve.Curve) error { return plotPicture(f, drawn, ext[1:]) }, nil
	case ext == ".csv":
		return func(f *os.File, drawn *curve.Curve) error { return curveCSV(f, drawn) }, nil
	}
	return nil, fmt.Errorf("--out %s: the name must end in .svg, .png or .csv", c.Out)
}

func nonEmpty(s string) []string {
	if s == "" {
		return nil
	}
	return []string{s}
}
