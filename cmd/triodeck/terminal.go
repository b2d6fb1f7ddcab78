package main

import (
	"io"
	"os"
	"time"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"

	"triodeck/analysis"
	"triodeck/analysis/report"
)

func isTerminal(w any) bool {
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// colours are for terminals: the severity stands out, the rule's name steps back.
var colours = report.Style{
	Severity: func(s analysis.Severity, text string) string {
		code := map[analysis.Severity]string{analysis.Error: "1;31", analysis.Warning: "1;33", analysis.Note: "1;36"}[s]
		return "\x1b[" + code + "m" + text + "\x1b[0m"
	},
	Dim: func(text string) string { return "\x1b[2m" + text + "\x1b[0m" },
}

// patience is how long a run may take before it shows how far it is.
const patience = 400 * time.Millisecond

// progress shows a bar on a terminal, once a run has lasted a while.
type progress struct {
	to    io.Writer
	start time.Time
	bar   *progressbar.ProgressBar
}

func newProgress(to io.Writer) *progress { return &progress{to: to, start: time.Now()} }

func (p *progress) update(done, total int) {
	if p.bar == nil {
		if !isTerminal(p.to) || time.Since(p.start) < patience {
			return
		}
		p.bar = progressbar.NewOptions(total, progressbar.OptionSetWriter(p.to), progressbar.OptionSetDescription("decks"),
			progressbar.OptionShowCount(), progressbar.OptionClearOnFinish(), progressbar.OptionThrottle(50*time.Millisecond))
	}
	_ = p.bar.Set(done)
}

func (p *progress) done() {
	if p.bar != nil {
		_ = p.bar.Clear()
	}
}
