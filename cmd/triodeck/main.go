// Command triodeck checks annotated SPICE netlists: operating regions,
// on-resistances and margins of MOSFETs from the bias written beside the
// circuit. This package holds flags and printing, one file a subcommand, and no
// knowledge of circuits.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"

	"github.com/alecthomas/kong"
)

// Exit statuses, part of the interface.
const (
	exitClean    = 0 // nothing at or above the threshold
	exitFindings = 1 // findings at or above it
	exitUnable   = 2 // could not run: bad usage, unreadable path
)

type commands struct {
	Lint  lintCmd  `cmd:"" help:"Check decks and folders of decks; print findings."`
	Op    opCmd    `cmd:"" help:"Show every MOSFET of a deck: region, bias, margins, on-resistance."`
	Curve curveCmd `cmd:"" help:"Draw a quantity of a MOSFET along a ranged node, in the terminal or as a picture."`
	Rules rulesCmd `cmd:"" help:"List the rules, or explain one with its examples."`
	Lsp   lspCmd   `cmd:"" help:"Run the language server on standard input and output."`

	Version kong.VersionFlag `help:"Print the version and exit."`
}

const about = `Checks SPICE decks that carry their intended bias in comments.

What it prints is an estimate from the typed bias and the model in the deck.
Confirm it with the foundry's own model and on the bench; take ratings from the
current data sheet. High-voltage, battery, mains, medical and vehicle circuits
need review by a qualified person and follow local codes.`

// streams are where a command reads and writes, so that tests can hold them.
type streams struct {
	in       io.Reader
	out, err io.Writer
}

// status is an exit status on its way up as an error.
type status int

func (s status) Error() string { return fmt.Sprintf("exit status %d", int(s)) }

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	os.Exit(run(ctx, os.Args[1:], streams{os.Stdin, os.Stdout, os.Stderr}))
}

// run is the whole program but for the process around it.
func run(ctx context.Context, args []string, s streams) (code int) {
	var cmds commands
	exited := -1
	parser, err := kong.New(&cmds, kong.Name("triodeck"), kong.Description(about), kong.Vars{"version": version()},
		kong.Writers(s.out, s.err), kong.Exit(func(c int) { exited = c }),
		kong.ConfigureHelp(kong.HelpOptions{Compact: true}))
	if err != nil {
		fmt.Fprintln(s.err, "triodeck:", err)
		return exitUnable
	}
	if len(args) == 0 {
		args = []string{"--help"}
	}
	k, err := parser.Parse(args)
	if exited == 0 {
		return exitClean // help was asked for and given
	}
	if err != nil {
		fmt.Fprintf(s.err, "triodeck: %v\n", err)
		fmt.Fprintln(s.err, "run 'triodeck --help' for the commands")
		return exitUnable
	}
	k.BindTo(ctx, (*context.Context)(nil))
	err = k.Run(s)
	var st status
	switch {
	case errors.As(err, &st):
		return int(st)
	case err != nil:
		fmt.Fprintln(s.err, "triodeck:", err)
		return exitUnable
	}
	return exitClean
}
