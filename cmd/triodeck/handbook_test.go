package main

import (
	"context"
	"path/filepath"
	"testing"

	"triodeck/analysis/bias"
	"triodeck/analysis/workspace"
)

// TestHandbook holds every published answer under testdata/handbook: each deck
// states the answers of its source as expectations, and all of them are judged
// and met.
func TestHandbook(t *testing.T) {
	decks, err := filepath.Glob("../../testdata/handbook/*.sp")
	if err != nil || len(decks) == 0 {
		t.Fatalf("no decks: %v", err)
	}
	for _, path := range decks {
		t.Run(filepath.Base(path), func(t *testing.T) {
			result := workspace.New(workspace.OS()).Deck(path).Bias(context.Background())
			for _, p := range result.Problems {
				t.Errorf("annotation: %s", p.Message)
			}
			checks := result.Checks()
			if len(checks) == 0 {
				t.Error("no expectation")
			}
			for _, c := range checks {
				switch c.Status {
				case bias.Failed:
					t.Errorf("%s is %s, the source says %s", c.Subject, c.Found, c.Wanted)
				case bias.NotJudged:
					t.Errorf("%s %s is not judged: %s", c.Subject, c.Wanted, c.Reason)
				}
			}
		})
	}
}
