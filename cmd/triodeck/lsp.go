package main

import (
	"context"
	"log/slog"
	"time"

	"triodeck/analysis/rules"
	"triodeck/analysis/workspace"
	"triodeck/lsp"
)

// rest is how long a text stays unchanged before the circuit is analysed again;
// syntax is reported at once.
const rest = 150 * time.Millisecond

type lspCmd struct {
	Stdio bool `help:"Talk on standard input and output: the only way there is; some editors pass this flag." hidden:""`
}

func (c *lspCmd) Run(ctx context.Context, s streams) error {
	return lsp.Serve(ctx, s.in, s.out, lsp.Options{
		Version: version(), Rules: rules.All, Files: workspace.OS(), Delay: rest,
		Log: slog.New(slog.NewTextHandler(s.err, &slog.HandlerOptions{Level: slog.LevelWarn})),
	})
}
